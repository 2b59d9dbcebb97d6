"""Convection in gaps: the vertical law at its breaks, a printed Rayleigh number, still air layers, another correlation."""

from __future__ import annotations

from collections.abc import Iterator
from functools import partial

import numpy as np

from igu.laws.convection import HIGH, LOW, MIDDLE, gap_nusselt, rayleigh_gap
from igu.model.makeups import MakeUps
from igu.model.unit import Gap, Unit
from igu.ratings import en673
from tests.validation.build import pane
from tests.validation.check import Row

BREAKS = [("1e4", LOW, "low", "1.2750"), ("1e4", MIDDLE, "middle", "1.2681"), ("5e4", MIDDLE, "middle", "2.4666"),
          ("5e4", HIGH, "high", "2.4824")]  # fmt: skip

AIR_LAYERS = [("5", "0.11"), ("7", "0.13"), ("10", "0.15"), ("15", "0.17")]
"""Thickness [mm] and resistance [m2 K/W] of a still air layer, horizontal heat flow, both faces of emissivity 0.9."""

ELSHERBINY = [
    ("2e3", "1.0016"),
    ("5e3", "1.0478"),
    ("1e4", "1.3034"),
    ("2e4", "1.6924"),
    ("5e4", "2.3960"),
    ("1e5", "3.0024"),
]
"""Rayleigh number and Nusselt number at height over width 40 by the 1982 correlation [seen], evaluated."""


def rows() -> Iterator[Row]:
    """All rows of convection."""
    topic = "Convection in gaps"
    for ra, piece, name, figure in BREAKS:
        yield Row(topic, f"Nu, vertical, Ra {ra}, {name} piece", "ISO 15099:2003, eq. 49-51", "computed", figure,
                  partial(_vertical, float(ra), piece))  # fmt: skip
    yield Row(
        topic,
        "Ra, vertical air gap 20 mm, 12 and 2 °C [1e4]",
        "Çengel & Ghajar, 5th ed., example 9-4",
        "seen",
        "1.050",
        _cengel,
    )
    yield Row(topic, "Nu, vertical, height twice the width, Ra 2e4", "ISO 15099:2003, eq. 52, evaluated", "computed", "2.9636",
              partial(_published, 2e4, 2.0))  # fmt: skip
    for ra, figure in ELSHERBINY:
        yield Row(topic, f"Nu, vertical, height 40 times the width, Ra {ra}", "ElSherbiny, Raithby & Hollands 1982, their formula",
                  "computed", figure, partial(_published, float(ra)), 0.05 * float(figure),
                  "another correlation of like experiments: the two differ by up to 4 %")  # fmt: skip
    for width, figure in AIR_LAYERS:
        yield Row(topic, f"resistance of a still air layer, {width} mm, by EN 673 [m²K/W]", "ISO 6946:2007, table 2", "memory",
                  figure, partial(_air_layer, float(width)))  # fmt: skip


def _vertical(ra: float, piece: int) -> float:
    return float(gap_nusselt(ra, aspect=1e9, tilt=np.pi / 2, piece=np.array(piece))[0])


def _published(ra: float, aspect: float = 40.0) -> float:
    return float(gap_nusselt(ra, aspect=aspect, tilt=np.pi / 2)[0])


def _cengel() -> float:
    viscosity, k = 1.400e-5, 0.02416
    ra = rayleigh_gap(width=0.02, difference=10.0, mean=280.0, density=1.0, viscosity=viscosity, conductivity=k,
                      heat_capacity=0.7344 * k / viscosity)  # fmt: skip
    return float(ra) / 1e4


def _air_layer(width: float) -> float:
    unit = Unit((pane(inn=0.9), pane(out=0.9)), (Gap(width * 1e-3),))
    return 1.0 / float(en673.gap_conductances(en673.reference_stacks(MakeUps.of([unit])))[0, 0])
