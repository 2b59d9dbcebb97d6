"""The words of the case file: which keys stand in which table, and the range of every number. Public interface."""

from __future__ import annotations

import math
from typing import NamedTuple


class Limit(NamedTuple):
    """Allowed range of a number; `above` and `below` exclude the end itself."""

    low: float
    high: float
    unit: str = ""
    above: bool = False
    below: bool = False

    def allows(self, value: float) -> bool:
        """Whether the value is finite and inside."""
        low = value > self.low if self.above else value >= self.low
        high = value < self.high if self.below else value <= self.high
        return math.isfinite(value) and low and high

    @property
    def words(self) -> str:
        """The range as a sentence has it."""
        low = f"above {self.low:.10g}" if self.above else f"{self.low:.10g}"
        high = f"below {self.high:.10g}" if self.below else f"{self.high:.10g}"
        return f"{low} to {high} {self.unit}".rstrip()


TEMPERATURE = Limit(-100, 100, "°C")
FLUX = Limit(0, 1500, "W/m2")
SHARE = Limit(0, 1)
PERCENT = Limit(0, 100, "%")
EMISSIVITY = Limit(0.001, 1)
CONDUCTIVITY = Limit(0.001, 500, "W/(m K)")
PRESSURE = Limit(30_000, 120_000, "Pa")

LIMITS: dict[str, Limit] = {
    "width_m": Limit(0.01, 20, "m"),
    "height_m": Limit(0.01, 20, "m"),
    "tilt_deg": Limit(0, 180, "°"),
    "thickness_mm": Limit(0.01, 100, "mm"),
    "gap_mm": Limit(0.01, 500, "mm"),
    "gas": SHARE,
    "vacuum.pressure_Pa": Limit(0, 2000, "Pa"),
    "accommodation": Limit(0.001, 1),
    "pitch_mm": Limit(0.1, 1000, "mm"),
    "radius_mm": Limit(0.001, 10, "mm"),
    "conductivity_W_mK": CONDUCTIVITY,
    "density_kg_m3": Limit(100, 20_000, "kg/m3"),
    "emissivity": EMISSIVITY,
    "normal_emissivity": EMISSIVITY,
    "emissivity_coated_side": EMISSIVITY,
    "normal_emissivity_coated_side": EMISSIVITY,
    "emissivity_glass_side": EMISSIVITY,
    "normal_emissivity_glass_side": EMISSIVITY,
    "longwave_transmittance": Limit(0, 1, below=True),
    "solar_transmittance": SHARE,
    "solar_reflectance": SHARE,
    "solar_reflectance_coated_side": SHARE,
    "solar_reflectance_glass_side": SHARE,
    "light_transmittance": SHARE,
    "light_reflectance": SHARE,
    "light_reflectance_coated_side": SHARE,
    "light_reflectance_glass_side": SHARE,
    "temperature_C": Limit(-70, 120, "°C"),
    "pressure_Pa": PRESSURE,
    "altitude_m": Limit(-500, 9000, "m"),
    "fill_dew_point_C": Limit(-100, 30, "°C"),
    "leakage_pct_a": Limit(0, 100, "% a year"),
    "outdoor_C": TEMPERATURE,
    "indoor_C": TEMPERATURE,
    "outdoor_radiant_C": TEMPERATURE,
    "indoor_radiant_C": TEMPERATURE,
    "sky_C": TEMPERATURE,
    "ground_C": TEMPERATURE,
    "wind_m_s": Limit(0, 100, "m/s"),
    "outdoor_convection_W_m2K": Limit(0, 1000, "W/(m2 K)"),
    "indoor_convection_W_m2K": Limit(0, 1000, "W/(m2 K)"),
    "sun_W_m2": FLUX,
    "absorbed_W_m2": FLUX,
    "incidence_deg": Limit(0, 90, "°"),
    "diffuse_share": SHARE,
    "indoor_humidity_pct": PERCENT,
    "outdoor_humidity_pct": PERCENT,
    "conditions.tilt_deg": Limit(0, 90, "°"),
    "faces": Limit(1, 40),
    "from": Limit(-1e6, 1e6),
    "to": Limit(-1e6, 1e6),
    "step": Limit(0, 1e6, above=True),
    "count": Limit(2, 10_000),
    "panes": Limit(1, 20),
    "case_layer": Limit(1, 39),
    "coatings_max": Limit(0, 40),
    "keep": Limit(1, 10_000),
    "U_max_W_m2K": Limit(0, 20, "W/(m2 K)", above=True),
    "U_en673_max_W_m2K": Limit(0, 20, "W/(m2 K)", above=True),
    "g_min": SHARE,
    "g_max": SHARE,
    "light_transmittance_min": SHARE,
    "light_transmittance_max": SHARE,
    "selectivity_min": Limit(0, 10),
    "room_face_min_C": TEMPERATURE,
    "hottest_pane_max_C": Limit(-100, 300, "°C"),
    "thickness_max_mm": Limit(0, 2000, "mm", above=True),
    "mass_max_kg_m2": Limit(0, 2000, "kg/m2", above=True),
    "tolerance.thickness_mm": Limit(0, 10, "mm"),
    "tolerance.gap_mm": Limit(0, 50, "mm"),
    "fill_pct": Limit(-100, 100, "percentage points"),
    "tolerance.emissivity": Limit(0, 0.5),
    "conductivity_pct": PERCENT,
    "outdoor_film_pct": PERCENT,
    "indoor_film_pct": PERCENT,
    "samples": Limit(16, 1_000_000),
    "seed": Limit(0, 2**32 - 1),
    "edge_C": TEMPERATURE,
    "edge_loss_W_mK": Limit(0, 2, "W/(m K)"),
    "wind_Pa": Limit(-10_000, 10_000, "Pa"),
    "snow_Pa": Limit(0, 30_000, "Pa"),
    "partial_factor": Limit(1, 3),
    "partial_factor_permanent": Limit(1, 3),
}
"""Range of every numeric key, under `table.key` where a table gives the key another range than the rest."""

_FACES = ("coating_out", "coating_in", "treatment", "edge_work")
_SIDES = ("coated_side", "glass_side")
_CHOICES = ("glasses", "thickness_mm", "gases", "gap_mm")

KEYS: dict[str, tuple[str, ...]] = {
    "case": (
        "title", "use", "unit", "layer", "glass", "coating", "pane", "sheet", "sealed", "conditions",
        "compare", "sweep", "seek", "tolerance", "frame", "loads",
    ),
    "use": ("title", "glass", "coating", "pane", "sheet"),
    "unit": ("width_m", "height_m", "tilt_deg"),
    "layer.glass": ("glass", "thickness_mm", *_FACES),
    "layer.plies": ("plies", *_FACES),
    "layer.pane": ("pane", "coated_face", "treatment", "edge_work"),
    "layer.sheet": ("sheet",),
    "layer.gap_mm": ("gap_mm", "gas", "vacuum", "pillars"),
    "plies.glass": ("glass", "thickness_mm"),
    "plies.interlayer": ("interlayer", "thickness_mm"),
    "vacuum": ("pressure_Pa", "gas", "accommodation"),
    "pillars": ("pitch_mm", "radius_mm", "conductivity_W_mK"),
    "glass": ("conductivity_W_mK", "density_kg_m3", "emissivity", "normal_emissivity", "optics"),
    "coating": ("emissivity", "normal_emissivity", "inside_only", "optics"),
    "pane": (
        "thickness_mm", "conductivity_W_mK", "density_kg_m3",
        *(f"{key}_{side}" for key in ("emissivity", "normal_emissivity") for side in _SIDES),
        "solar_transmittance", *(f"solar_reflectance_{side}" for side in _SIDES),
        "light_transmittance", *(f"light_reflectance_{side}" for side in _SIDES),
        "spectrum", "inside_only",
    ),
    "sheet": (
        "thickness_mm", "conductivity_W_mK", "density_kg_m3", "emissivity", "longwave_transmittance",
        "solar_transmittance", "solar_reflectance", "light_transmittance", "light_reflectance",
    ),
    "sealed": ("temperature_C", "pressure_Pa", "altitude_m", "vented", "fill_dew_point_C", "leakage_pct_a"),
    "conditions": (
        "name", "set", "method", "outdoor_C", "indoor_C", "wind_m_s", "outdoor_convection_W_m2K",
        "indoor_convection_W_m2K", "outdoor_radiant_C", "sky_C", "ground_C", "indoor_radiant_C",
        "sun_W_m2", "incidence_deg", "diffuse_share", "absorbed_W_m2", "altitude_m", "pressure_Pa",
        "gas_properties", "indoor_humidity_pct", "outdoor_humidity_pct", "tilt_deg", "edge_C",
    ),
    "compare": ("faces", "coatings", "cold", "sun", "columns"),
    "sweep": ("vary", "of", "minimise", "cold", "sun"),
    "vary": ("key", "values", "from", "to", "step", "count"),
    "seek": (*_CHOICES, "treatment", "panes", "layers", "coatings", "faces", "coatings_max", "limits", "rank_by",
             "minimise", "keep", "cold", "sun"),
    "layers": (*_CHOICES, "treatment", "case_layer"),
    "limits": (
        "U_max_W_m2K", "U_en673_max_W_m2K", "g_min", "g_max", "light_transmittance_min", "light_transmittance_max",
        "selectivity_min", "room_face_min_C", "hottest_pane_max_C", "thickness_max_mm", "mass_max_kg_m2",
    ),
    "tolerance": ("thickness_mm", "gap_mm", "fill_pct", "emissivity", "conductivity_pct", "outdoor_film_pct",
                  "indoor_film_pct", "samples", "seed", "distribution"),
    "frame": ("edge_C", "edge_loss_W_mK"),
    "loads": ("wind_Pa", "snow_Pa", "partial_factor", "partial_factor_permanent"),
}  # fmt: skip
"""Keys of every table of the case file, by the kind of table."""

LAYER_KINDS = ("glass", "plies", "pane", "sheet", "gap_mm")
"""The key that says what a layer is."""

LAYER_SIGNS = {
    "gas": "gap_mm",
    "vacuum": "gap_mm",
    "pillars": "gap_mm",
    "coated_face": "pane",
    "thickness_mm": "glass",
    "coating_out": "glass",
    "coating_in": "glass",
}
"""Keys that tell what a layer was meant to be where that key is missing."""


def limit(kind: str, key: str) -> Limit:
    """Range of a numeric key in this kind of table."""
    return LIMITS.get(f"{kind}.{key}") or LIMITS[key]
