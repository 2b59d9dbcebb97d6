"""U-values: a regulation's EN 673 table, EN ISO 10077-1, a handbook's table, EN 673 details, textbook examples."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import replace
from functools import partial

from igu.model.conditions import Conditions
from igu.model.gases import en673_properties
from igu.model.unit import Gap, Pane, Ply, Unit
from igu.ratings import en673
from igu.ratings.iso15099 import u_of
from igu.ratings.rounding import half_up
from igu.solver.problem import assemble
from tests.validation.check import Row

AIR, ARGON, KRYPTON = (("air", 1.0),), (("argon", 0.9), ("air", 0.1)), (("krypton", 0.9), ("air", 0.1))

FRENCH = "3CL-DPE 2021, annex 1, 3.3.1 (EN 673:2011)"
FRENCH_TABLE = """\
6,3.3,2.45,3.0,2.0,2.3,2.1
8,3.1,2.1,2.9,1.7,2.1,1.9
10,2.9,1.8,2.8,1.4,2.0,1.8
12,2.8,1.6,2.7,1.3,1.9,1.8
14,2.8,1.5,2.6,1.2,1.8,1.7
15,2.7,1.4,2.6,1.1,1.8,1.7
16,2.7,1.4,2.6,1.1,1.8,1.7
18,2.7,1.4,2.6,1.1,1.7,1.6
20,2.7,1.4,2.6,1.1,1.7,1.6"""
"""Gap [mm]; double air, air low-e, argon, argon low-e; triple air, argon [seen]. 4 mm panes, argon 90 %; the low-e columns
with one face of corrected emissivity 0.0366 [inferred by fit]."""

HANDBOOK = "ASHRAE Handbook Fundamentals (SI) 2009, ch. 15, table 4"
HANDBOOK_TABLE = """\
1,,,,5.91
2,0.84,6.35,air,3.12
2,0.84,12.7,air,2.73
2,0.84,6.35,argon,2.90
2,0.84,12.7,argon,2.56
2,0.60,6.35,air,2.95
2,0.60,12.7,air,2.50
2,0.60,6.35,argon,2.67
2,0.60,12.7,argon,2.33
2,0.40,6.35,air,2.78
2,0.40,12.7,air,2.27
2,0.40,6.35,argon,2.44
2,0.40,12.7,argon,2.04
2,0.20,6.35,air,2.56
2,0.20,12.7,air,1.99
2,0.20,6.35,argon,2.16
2,0.20,12.7,argon,1.70"""
"""Panes, emissivity of one face in the gap, gap [mm], gas, U [seen]; conditions [memory]."""

EN_ISO_10077 = "EN ISO 10077-1:2006, table C.2"
EN_ISO_TABLE = """\
0.89,6,3.3,3.0,2.8
0.89,8,3.1,2.9,2.7
0.89,12,2.8,2.7,2.6
0.89,16,2.7,2.6,2.6
0.89,20,2.7,2.6,2.6
0.2,6,2.7,2.3,1.9
0.2,8,2.4,2.1,1.7
0.2,12,2.0,1.8,1.6
0.2,16,1.8,1.6,1.6
0.2,20,1.8,1.7,1.6
0.1,6,2.6,2.2,1.7
0.1,8,2.2,1.9,1.4
0.1,12,1.8,1.5,1.3
0.1,16,1.6,1.4,1.3
0.1,20,1.6,1.4,1.4
0.05,6,2.5,2.1,1.5
0.05,8,2.1,1.7,1.3
0.05,12,1.7,1.3,1.1
0.05,16,1.4,1.2,1.2
0.05,20,1.5,1.2,1.2"""
"""Emissivity of one pane, gap [mm], U_g with air, argon 90 %, krypton 90 %, vertical [memory]."""


def pane(thickness: float = 0.004, out: float = 0.837, inn: float = 0.837) -> Pane:
    """A plain pane."""
    return Pane((Ply("clear", thickness, 1.0),), out, inn)


def standard(eps: float, width: float, fill: tuple[tuple[str, float], ...], gaps: int = 1) -> float:
    """U by EN 673 of 4 mm panes with one low-e face, unrounded."""
    panes = (pane(inn=eps), *(pane(),) * gaps)
    return en673.u_value(Unit(panes, (Gap(width * 1e-3, fill),) * gaps))


def declared(value: Callable[[], float], digits: int) -> Callable[[], float]:
    """The value rounded as the standard rounds."""
    return lambda: half_up(value(), digits)


def rows() -> Iterator[Row]:
    """All rows of U-values."""
    yield from _french()
    yield from _details()
    yield from _optima()
    yield from _en_iso()
    yield from _handbook()


def _french() -> Iterator[Row]:
    columns = [("air", 0.837, AIR, 1), ("air, low-e", 0.0366, AIR, 1), ("argon", 0.837, ARGON, 1),
               ("argon, low-e", 0.0366, ARGON, 1), ("air", 0.837, AIR, 2), ("argon", 0.837, ARGON, 2)]  # fmt: skip
    for line in FRENCH_TABLE.splitlines():
        width, *values = line.split(",")
        for (gas, eps, fill, gaps), printed in zip(columns, values, strict=True):
            what = f"U_g {'double' if gaps == 1 else 'triple'}, {width} mm {gas}"
            u = partial(standard, eps, float(width), fill, gaps)
            mark = "inferred" if "low-e" in gas else "seen"
            yield Row(
                "U-values: EN 673 table of a regulation", what, FRENCH, mark, printed, declared(u, len(printed) - 2)
            )


def _details() -> Iterator[Row]:
    topic = "U-values: EN 673 in detail"
    yield Row(topic, "U_g 12 mm air, uncoated, unrounded", "arithmetic of EN 673:2011", "computed", "2.8499",
              partial(standard, 0.837, 12.0, AIR))  # fmt: skip
    yield Row(topic, "the same declared", FRENCH, "seen", "2.8", declared(partial(standard, 0.837, 12.0, AIR), 1))
    yield Row(topic, "internal coefficient, uncoated", "EN 673:2011, 5.4.3", "memory", "7.7",
              lambda: float(en673.internal_coefficient(0.837)))  # type: ignore[arg-type]  # fmt: skip
    for gas, printed in (("air", "1.232"), ("argon", "1.699"), ("krypton", "3.560"), ("xenon", "5.689")):
        yield Row(topic, f"density of {gas}, +10 °C", "EN 673:2011, gas table", "memory", printed,
                  lambda gas=gas: en673_properties({gas: 1.0})[0])  # type: ignore[misc]  # fmt: skip


OPTIMA = [(1, AIR, "air", "15.5"), (1, (("argon", 1.0),), "argon", "14.7"), (1, (("krypton", 1.0),), "krypton", "9.7"),
          (2, AIR, "air", "19.6"), (2, (("argon", 1.0),), "argon", "18.5"), (2, (("krypton", 1.0),), "krypton", "12.2")]  # fmt: skip


def _optima() -> Iterator[Row]:
    for gaps, fill, gas, printed in OPTIMA:
        yield Row("Optimum gaps at the EN 673 state", f"gap of least U, {gaps + 1} panes, {gas} [mm]",
                  "computed outside this package", "computed", printed, partial(_best_gap, fill, gaps))  # fmt: skip


def _best_gap(fill: tuple[tuple[str, float], ...], gaps: int) -> float:
    """The least of a fine scan [mm]; the optimum is a kink."""
    widths = [5.0 + 0.01 * k for k in range(1700)]
    return min(widths, key=lambda width: standard(0.837, width, fill, gaps))


def _en_iso() -> Iterator[Row]:
    for line in EN_ISO_TABLE.splitlines():
        eps, width, *values = line.split(",")
        face = 0.837 if eps == "0.89" else float(eps)
        for gas, fill, printed in zip(("air", "argon", "krypton"), (AIR, ARGON, KRYPTON), values, strict=True):
            yield Row("U-values: EN ISO 10077-1", f"4-{width}-4, ε_n {eps}, {gas}", EN_ISO_10077, "memory", printed,
                      partial(standard, face, float(width), fill), 0.1,
                      "the 2006 table is by EN 673:1997 (films 23 and 8) and does not say how ε_n is corrected")  # fmt: skip


WINTER = Conditions("winter", outdoor_air=255.15, indoor_air=294.15, outdoor_convection=26.0)


def _handbook() -> Iterator[Row]:
    reason = "the gas share and the film model of the table are not stated; 26 W/(m²K) outdoors reproduces it"
    for line in HANDBOOK_TABLE.splitlines():
        panes, eps, width, gas, printed = line.split(",")
        what = "single 3 mm" if panes == "1" else f"double 3 mm, {width} mm {gas}, ε {eps}"
        yield Row("U-values: handbook, winter", what, HANDBOOK, "seen", printed,
                  partial(_handbook_u, eps, width, gas), 0.05, reason)  # fmt: skip


def _handbook_u(eps: str, width: str, gas: str) -> float:
    bare = pane(0.003, 0.84, 0.84)
    if not eps:
        unit = Unit((bare,))
    else:
        unit = Unit((replace(bare, emissivity_in=float(eps)), bare), (Gap(float(width) * 1e-3, ((gas, 1.0),)),))
    return float(u_of(assemble([unit], [WINTER]))[0])
