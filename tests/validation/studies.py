"""Studies: the gap of least U, and a coating moved from face 2 to face 3."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from functools import lru_cache, partial

import numpy as np

from igu.model.catalogue import catalogue
from igu.model.makeups import MakeUps
from igu.model.unit import Gap, Unit
from igu.ratings import en673
from igu.ratings.figures import figures
from tests.validation.build import double, triple
from tests.validation.check import Row
from tests.validation.solar import HANDBOOK, SUMMER

OPTIMA = [("air", "15.5", "19.6"), ("argon", "14.7", "18.5"), ("krypton", "9.7", "12.2")]
"""Gas, pure; gap [mm] of least U of two and of three uncoated panes."""

POSITIONS = [("3", "0.65", "0.70"), ("6", "0.60", "0.65")]
"""Panes [mm]; SHGC of a double with a pyrolytic coat of emissivity 0.2 on face 2 and on face 3, normal incidence."""


def rows() -> Iterator[Row]:
    """All rows of studies."""
    for gas, *printed in OPTIMA:
        for make, figure in zip((double, triple), printed, strict=True):
            unit = make(10.0, ((gas, 1.0),))
            yield Row("Gap of least U at the EN 673 state", f"{make.__name__}, {gas} [mm]", "scan written apart from this package",
                      "computed", figure, partial(_best_gap, unit))  # fmt: skip
    yield from _positions()


def _best_gap(unit: Unit) -> float:
    """The least of a fine scan [mm]: the optimum is a kink, where convection sets in."""
    stacks = en673.reference_stacks(MakeUps.of([unit]))
    widths = np.linspace(5.0, 25.0, 4001)
    many = np.broadcast_to(1e-3 * widths, (len(unit.gaps), widths.size))
    return float(widths[en673.u_values(replace(stacks, width=many)).argmin()])


def _positions() -> Iterator[Row]:
    level = "the handbook's coat is not ours: emissivity 0.2 against 0.16, and its solar data are not stated"
    gain = "half the printed gain; what the move brings is more the heat balance's than the coat's"
    for thickness, outer, inner in POSITIONS:
        what = f"SHGC, double clear {thickness} mm, hard coat"
        both = partial(_gains, float(thickness) * 1e-3)
        for face, figure in ((2, outer), (3, inner)):
            yield Row("Coating moved across the gap", f"{what} on face {face}", HANDBOOK, "memory", figure,
                      lambda g=both, k=face - 2: g()[k], 0.05, level)  # type: ignore[misc]  # fmt: skip
        yield Row("Coating moved across the gap", f"{what}: gain from face 2 to 3", HANDBOOK, "memory", "0.05",
                  lambda g=both: g()[1] - g()[0], 0.025, gain)  # type: ignore[misc]  # fmt: skip


@lru_cache(maxsize=4)
def _gains(thickness: float) -> tuple[float, float]:
    library = catalogue()
    ply, gap = library.glass_ply("clear", thickness), (Gap(0.0127),)
    bare = library.pane([ply])
    units = [Unit((library.pane([ply], coating_in="hard"), bare), gap),
             Unit((bare, library.pane([ply], coating_out="hard")), gap)]  # fmt: skip
    g = figures(MakeUps.of(units), cold=None, sun=SUMMER).g
    return float(g[0]), float(g[1])
