"""Gas properties, convection, rarefied gas and emissivity."""

from __future__ import annotations

from collections.abc import Iterator
from functools import partial
from typing import Any

import numpy as np

from igu.laws.convection import HIGH, LOW, MIDDLE, gap_nusselt, rayleigh_gap
from igu.laws.emissivity import hemispherical_emissivity
from igu.laws.rarefied import free_molecule_conductance
from igu.model.gases import fill_curve
from tests.validation.check import Row

HANDBOOKS = """\
air,CRC,300,26.2,18.5
argon,CRC,300,17.9,22.7
krypton,CRC,300,9.5,25.5
xenon,CRC,300,5.5,23.2
sf6,CRC,300,13.0,15.3
air,CRC,200,18.4,13.3
argon,CRC,200,12.4,15.9
air,LJ,283.15,25.12,17.72
argon,LJ,283.15,16.99,21.67
argon,VDI,283.15,16.99,21.69
krypton,VDI,283.15,9.15,24.30
xenon,VDI,283.15,5.36,22.06
krypton,VDI,303.15,9.72,25.80
xenon,VDI,303.15,5.72,23.55"""
"""Gas, source, T [K], conductivity [mW/(m K)], viscosity [μPa s]."""

SOURCES = {"CRC": "CRC Handbook of Chemistry and Physics", "LJ": "Lemmon & Jacobsen 2004", "VDI": "VDI Heat Atlas 2010"}
MARKS = {"CRC": "seen", "LJ": "computed", "VDI": "seen"}

EN_12898 = {"0.03": "1.22", "0.05": "1.18", "0.1": "1.14", "0.2": "1.10", "0.3": "1.06", "0.4": "1.03", "0.5": "1.00",
            "0.6": "0.98", "0.7": "0.96", "0.8": "0.95", "0.89": "0.94"}  # fmt: skip


def rows() -> Iterator[Row]:
    """All rows of gases, gaps and emissivity."""
    yield from _reference()
    yield from _iso()
    yield from _gap()
    yield Row("Rarefied gas", "free molecules, air 293 K, α 1, per pascal [W/(m²K Pa)]", "kinetic theory", "memory", "1.18",
              lambda: float(free_molecule_conductance(293.0, pressure=1.0, mole_mass=0.02897, gamma=1.4, accommodation=1.0)))  # fmt: skip
    for normal, ratio in EN_12898.items():
        yield Row("Emissivity", f"corrected over normal emissivity at {normal}", "EN 12898:2019", "memory", ratio,
                  lambda n=float(normal): float(hemispherical_emissivity(n)) / n)  # type: ignore[misc]  # fmt: skip


def _at(gas: str, T: float, row: int, properties: str) -> float:
    return float(fill_curve({gas: 1.0}, properties=properties).at(T)[row])


def _reference() -> Iterator[Row]:
    for line in HANDBOOKS.splitlines():
        gas, source, T, k, mu = line.split(",")
        for name, printed, row, factor in (("conductivity [mW/(m K)]", k, 0, 1e3), ("viscosity [μPa s]", mu, 1, 1e6)):
            loose = {"tolerance": 0.031 * float(printed), "reason": "the handbook's own uncertainty, 3 %"}
            fine = _fine(gas, source, float(printed))
            yield Row("Gas properties: reference curves", f"{name} of {gas} at {T} K", SOURCES[source], MARKS[source], printed,
                      lambda g=gas, t=float(T), r=row, f=factor: f * _at(g, t, r, "reference"),  # type: ignore[misc]
                      **(loose if source == "CRC" else fine))  # fmt: skip


def _fine(gas: str, source: str, printed: float) -> dict[str, Any]:
    """Tolerance against a reference equation: half a digit and the fit; argon's curve is not the Heat Atlas's."""
    if gas == "argon" and source == "VDI":
        return {
            "tolerance": 0.002 * printed,
            "reason": "our argon is Lemmon & Jacobsen's, which differs from the Atlas",
        }
    return {"tolerance": 0.005 + 1e-4 * printed, "reason": "half a digit and the rest of the fitted curve, 1e-4"}


def _iso() -> Iterator[Row]:
    for line in HANDBOOKS.splitlines():
        gas, source, T, k, mu = line.split(",")
        if source == "CRC" and T == "300" and gas != "sf6":
            for name, printed, row, factor in (
                ("conductivity [mW/(m K)]", k, 0, 1e3),
                ("viscosity [μPa s]", mu, 1, 1e6),
            ):
                yield Row("Gas properties: ISO 15099 coefficients", f"{name} of {gas} at {T} K", SOURCES[source], "seen",
                          printed, lambda g=gas, r=row, f=factor: f * _at(g, 300.0, r, "iso-15099"),  # type: ignore[misc]
                          0.05 * float(printed), "3 % of the handbook and 2 % of a straight line over temperature")  # fmt: skip


def _gap() -> Iterator[Row]:
    topic = "Gap convection"
    for ra, piece, printed in (
        (1e4, LOW, "1.2750"),
        (1e4, MIDDLE, "1.2681"),
        (5e4, MIDDLE, "2.4666"),
        (5e4, HIGH, "2.4824"),
    ):
        yield Row(topic, f"Nu vertical at Ra = {ra:.0e}, {('low', 'middle', 'high')[piece]} piece", "ISO 15099:2003, eq. 49-51", "computed", printed,
                  partial(_vertical, ra, piece))  # fmt: skip
    yield Row(topic, "Ra of an air gap, 20 mm, 12 and 2 °C [1e4]", "Çengel & Ghajar, 5th ed., example 9-4", "seen", "1.050",
              _cengel, 0.0006, "the inputs are printed to three and four digits")  # fmt: skip


def _vertical(ra: float, piece: int) -> float:
    return float(gap_nusselt(ra, aspect=1e9, tilt=np.pi / 2, piece=np.array(piece))[0])


def _cengel() -> float:
    viscosity, k = 1.400e-5, 0.02416
    ra = rayleigh_gap(width=0.02, difference=10.0, mean=280.0, density=1.0, viscosity=viscosity, conductivity=k,
                      heat_capacity=0.7344 * k / viscosity)  # fmt: skip
    return float(ra) / 1e4
