"""A measured pane for cases written by hand."""

SUN_A = """
[pane.sun-A]
thickness_mm = 6
emissivity_coated_side = 0.03
emissivity_glass_side = 0.837
solar_transmittance = 0.40
solar_reflectance_coated_side = 0.40
solar_reflectance_glass_side = 0.30
"""
