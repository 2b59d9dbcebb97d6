"""Convection in gaps, by every band of tilt, and at a room-side face: the laws as published, evaluated; a printed Rayleigh
number, still air layers, another correlation."""

from __future__ import annotations

from collections.abc import Iterator
from functools import partial

import numpy as np

from igu.laws.convection import HIGH, LOW, MIDDLE, gap_nusselt, rayleigh_gap, room_face_nusselt
from igu.model.makeups import MakeUps
from igu.model.unit import Gap, Unit
from igu.ratings import en673
from tests.validation.build import pane
from tests.validation.check import Row

BREAKS = [("1e4", LOW, "low", "1.2750"), ("1e4", MIDDLE, "middle", "1.2681"), ("5e4", MIDDLE, "middle", "2.4666"),
          ("5e4", HIGH, "high", "2.4824")]  # fmt: skip

TILTED = [
    ("0", "2e3", 60.0, "1.2102"),
    ("0", "5e4", 60.0, "3.4377"),
    ("30", "5e3", 60.0, "1.6270"),
    ("45", "5e4", 60.0, "3.1291"),
    ("60", "2e3", 60.0, "1.0092"),
    ("60", "3160", 60.0, "1.0458"),
    ("60", "1e4", 60.0, "1.6205"),
    ("60", "1e5", 60.0, "3.4762"),
    ("60", "1e5", 5.0, "3.6142"),
]
"""Tilt [degrees], Ra, height over width, Nu; below 60 degrees

    1 + 1.44 (1 - 1708/c)+ (1 - 1708 sin^1.6(1.8 g)/c) + ((c/5830)^(1/3) - 1)+,   c = Ra cos g

and at 60 degrees the larger of (1 + (0.0936 Ra^0.314/(1 + G))^7)^(1/7), G = 0.5/(1 + (Ra/3160)^20.6)^0.1, and
(0.104 + 0.175/A) Ra^0.283 [memory]."""

ROOM_FACE = [
    ("14.9", "1e9", "130.0000"),
    ("15.1", "1e9", "127.9867"),
    ("20", "1e7", "25.7909"),
    ("60", "1e9", "96.0662"),
    ("60", "1e10", "238.2817"),
    ("90", "1e9", "99.5836"),
    ("178.9", "1e9", "37.0680"),
    ("179.1", "1e9", "36.5955"),
]
"""Tilt [degrees], Ra, Nu: 0.13 Ra^(1/3) below 15 degrees; to 179 degrees 0.56 (Ra sin g)^(1/4), to 90 degrees only up to
Ra_cv = 2.5e5 (e^(0.72 g)/sin g)^(1/5), g in degrees, and 0.13 (Ra^(1/3) - Ra_cv^(1/3)) + 0.56 (Ra_cv sin g)^(1/4) from there;
0.58 Ra^(1/5) beyond [memory]."""

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
    for tilt, ra, aspect, figure in TILTED:
        source = "ISO 15099:2003, eq. 44-47, evaluated" if tilt == "60" else "Hollands et al. 1976, evaluated"
        yield Row(topic, f"Nu, {tilt}°, height {aspect:g} times the width, Ra {ra}", source, "computed", figure,
                  partial(_published, float(ra), aspect, float(tilt)))  # fmt: skip
    for ra, figure in ELSHERBINY:
        yield Row(topic, f"Nu, vertical, height 40 times the width, Ra {ra}", "ElSherbiny, Raithby & Hollands 1982, their formula",
                  "computed", figure, partial(_published, float(ra)), 0.05 * float(figure),
                  "another correlation of like experiments: the two differ by up to 4 %")  # fmt: skip
    for width, figure in AIR_LAYERS:
        yield Row(topic, f"resistance of a still air layer, {width} mm, by EN 673 [m²K/W]", "ISO 6946:2007, table 2", "memory",
                  figure, partial(_air_layer, float(width)))  # fmt: skip

    for tilt, ra, figure in ROOM_FACE:
        yield Row("Natural convection at a room-side face", f"Nu, {tilt}°, Ra {ra}", "ISO 15099:2003, 5.4, evaluated",
                  "computed", figure, partial(_room, float(ra), float(tilt)))  # fmt: skip


def _vertical(ra: float, piece: int) -> float:
    return float(gap_nusselt(ra, aspect=1e9, tilt=np.pi / 2, piece=np.array(piece))[0])


def _published(ra: float, aspect: float = 40.0, degrees: float = 90.0) -> float:
    return float(gap_nusselt(ra, aspect=aspect, tilt=np.radians(degrees))[0])


def _room(ra: float, degrees: float) -> float:
    return float(room_face_nusselt(ra, tilt=np.radians(degrees))[0])


def _cengel() -> float:
    viscosity, k = 1.400e-5, 0.02416
    ra = rayleigh_gap(width=0.02, difference=10.0, mean=280.0, density=1.0, viscosity=viscosity, conductivity=k,
                      heat_capacity=0.7344 * k / viscosity)  # fmt: skip
    return float(ra) / 1e4


def _air_layer(width: float) -> float:
    unit = Unit((pane(inn=0.9), pane(out=0.9)), (Gap(width * 1e-3),))
    return 1.0 / float(en673.gap_conductances(en673.reference_stacks(MakeUps.of([unit])))[0, 0])
