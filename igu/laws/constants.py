"""Physical constants, SI. The two standards round the Stefan-Boltzmann constant differently."""

STEFAN_BOLTZMANN = 5.670374419e-8
"""W/(m2 K4), CODATA 2018 (exact in the revised SI, printed digits)."""

STEFAN_BOLTZMANN_EN673 = 5.67e-8
"""W/(m2 K4), as EN 673:2011 prints it."""

GAS_CONSTANT = 8.31446261815324
"""J/(mol K), CODATA 2018, exact."""

PHOTON_ENERGY = 1.23984198e-6
"""eV m, energy of a photon times its wavelength, CODATA 2018."""

GRAVITY = 9.80665
"""m/s2, standard acceleration of gravity."""

GRAVITY_EN673 = 9.81
"""m/s2, as EN 673:2011 rounds it."""

CELSIUS = 273.15
"""K at 0 degrees Celsius."""

ATMOSPHERE = 101325.0
"""Pa, standard atmosphere at sea level."""
