"""Writes igu/data/gas_reference.csv from CoolProp and, for krypton and xenon, handbook polynomials.

Run `python -m tests.regenerate.gas_curves`.
"""

from __future__ import annotations

import warnings
from collections.abc import Iterator
from pathlib import Path

FILE = Path(__file__).parents[2] / "igu" / "data" / "gas_reference.csv"

PRESSURE = 101325.0
STEP = 10
LAST = 480
# first temperature: -93 C, or later where the gas would condense or its equation of state begins later
GASES = {
    "air": ("Air", 180),
    "argon": ("Argon", 180),
    "krypton": ("Krypton", 180),
    "xenon": ("Xenon", 200),
    "nitrogen": ("Nitrogen", 180),
    "oxygen": ("Oxygen", 180),
    "carbon-dioxide": ("CarbonDioxide", 220),
    "sf6": ("SulfurHexafluoride", 230),
    "helium": ("Helium", 180),
}
HANDBOOK = {"krypton": "7439-90-9", "xenon": "7440-63-3"}

HEADER = """\
# Conductivity, viscosity and specific heat of fill gases at 101325 Pa, rows by gas and temperature.
# Written by `python -m tests.regenerate.gas_curves`; not edited by hand.
# Source: CoolProp 8.0 (I. H. Bell et al., Ind. Eng. Chem. Res. 53 (2014) 2498), reference equations of state
# and of transport of each fluid; transport of air, argon, nitrogen, oxygen: E. W. Lemmon, R. T Jacobsen,
# Int. J. Thermophys. 25 (2004) 21. Krypton and xenon, conductivity and viscosity: VDI Heat Atlas 2010
# polynomials, low-density gas, as shipped with the Python package chemicals; their specific heat: CoolProp.
# Mark: computed. The handbook conductivities are the least certain figures: against 15/4 R/M times viscosity
# krypton is 1-2 % high and xenon 2-4 %; the CRC Handbook has xenon 7 % lower at 200 K and 3 % at 300 K.
# First row of a gas: 180 K, or later where it would be close to condensing (xenon) or its equation of state
# starts at the triple point (carbon dioxide, SF6).
gas,T_K,conductivity_W_mK,viscosity_Pa_s,specific_heat_J_kgK
"""


def temperatures(gas: str) -> range:
    return range(GASES[gas][1], LAST + 1, STEP)


def properties(gas: str, T: float) -> tuple[float, float, float]:
    """Conductivity [W/(m K)], viscosity [Pa s] and specific heat [J/(kg K)] at one temperature [K]."""
    conductivity, viscosity = _handbook(gas, T) if gas in HANDBOOK else (_coolprop(gas, T, k) for k in "LV")
    return conductivity, viscosity, _coolprop(gas, T, "C")


def _coolprop(gas: str, T: float, key: str) -> float:
    from CoolProp.CoolProp import PropsSI

    return float(PropsSI(key, "T", float(T), "P", PRESSURE, GASES[gas][0]))


def _handbook(gas: str, T: float) -> tuple[float, float]:
    from chemicals import thermal_conductivity, viscosity

    with warnings.catch_warnings():
        # chemicals 1.5 reads its tables with an argument pandas 3 deprecates
        warnings.filterwarnings("ignore", message="The 'float_precision' argument")
        tables = (thermal_conductivity.k_data_VDI_PPDS_10, viscosity.mu_data_VDI_PPDS_8)
    a, b = ([float(table.loc[HANDBOOK[gas]][letter]) for letter in "ABCDE"] for table in tables)
    return _series(a, T), _series(b, T)


def _series(coefficients: list[float], T: float) -> float:
    return sum(c * T**power for power, c in enumerate(coefficients))


def rows() -> Iterator[str]:
    for gas in GASES:
        for T in temperatures(gas):
            conductivity, viscosity, specific_heat = properties(gas, T)
            yield f"{gas},{T},{conductivity:.7g},{viscosity:.7g},{specific_heat:.7g}\n"


def text() -> str:
    return HEADER + "".join(rows())


if __name__ == "__main__":
    FILE.write_text(text(), encoding="utf-8")
