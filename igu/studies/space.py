"""All make-ups a search may choose from, numbered, and any block of them as arrays."""

from __future__ import annotations

import itertools
import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from igu.arrays import Array, IntArray
from igu.errors import require
from igu.model.catalogue import Library
from igu.model.makeups import MakeUps
from igu.model.study_tables import GapChoices, PaneChoices, Seek
from igu.model.unit import Gap, Pane, Unit

Pattern = tuple[str | None, ...]


@dataclass(frozen=True)
class Space:
    """Make-ups of one pane count. A make-up's number, written with the `radices`, gives the coating pattern first
    and then the choice at every layer. `pane_table[p]` (patterns, choices) and `gap_table[k]` (choices,) point into
    the parts."""

    panes: tuple[Pane, ...]
    gaps: tuple[Gap, ...]
    radices: tuple[int, ...]
    pane_table: tuple[IntArray, ...]
    gap_table: tuple[IntArray, ...]
    height: Array
    tilt: Array

    @property
    def size(self) -> int:
        """Number of make-ups."""
        return math.prod(self.radices)

    def block(self, start: int, stop: int) -> MakeUps:
        """The make-ups numbered from start to below stop."""
        pattern, *layers = np.unravel_index(np.arange(start, stop), self.radices)
        panes = [table[pattern, choice] for table, choice in zip(self.pane_table, layers[::2], strict=True)]
        gaps = [table[choice] for table, choice in zip(self.gap_table, layers[1::2], strict=True)]
        gap_index = np.array(gaps, np.intp).reshape(len(gaps), stop - start)
        return MakeUps(self.panes, self.gaps, np.array(panes), gap_index, self.height, self.tilt)


def spaces(spec: Seek, unit: Unit, library: Library) -> tuple[Space, ...]:
    """The spaces of a search, one for each pane count; size and tilt are the unit's.

    Raises
    ------
    ModelError    No make-up is allowed at all.
    """
    found = tuple(_space(spec, n, unit, library) for n in spec.panes)
    require(any(space.size for space in found), "the search allows no make-up at all")
    return found


def _space(spec: Seek, n: int, unit: Unit, library: Library) -> Space:
    layers = spec.layers[: 2 * n - 1]
    pane_choices = [c for c in layers if isinstance(c, PaneChoices)]
    gap_choices = [c for c in layers if isinstance(c, GapChoices)]
    patterns = _patterns(spec, n, library)
    panes: dict[Pane, int] = {}
    gaps: dict[Gap, int] = {}
    pane_table = tuple(_pane_table(c, p, patterns, library, panes) for p, c in enumerate(pane_choices))
    gap_table = tuple(_gap_table(c, gaps) for c in gap_choices)
    return Space(
        panes=tuple(panes),
        gaps=tuple(gaps),
        radices=(len(patterns), *_interleaved([t.shape[1] for t in pane_table], [len(t) for t in gap_table])),
        pane_table=pane_table,
        gap_table=gap_table,
        height=np.array([unit.height]),
        tilt=np.array([unit.tilt]),
    )


def _interleaved(panes: Sequence[int], gaps: Sequence[int]) -> list[int]:
    return [size for pair in itertools.zip_longest(panes, gaps) for size in pair if size is not None]


def _patterns(spec: Seek, n: int, library: Library) -> list[Pattern]:
    """Every way to put at most `coatings_max` coatings on the allowed faces; a pattern names each face's coating."""
    faces = [f for f in (spec.faces or range(1, 2 * n + 1)) if f <= 2 * n]
    found: list[Pattern] = []
    for count in range(min(spec.coatings_max, len(faces)) + 1):
        for places in itertools.combinations(faces, count):
            for coatings in itertools.product(spec.coatings, repeat=count):
                worn = dict(zip(places, coatings, strict=True))
                if all(library.may_carry(c, f, faces=2 * n) for f, c in worn.items()):
                    found.append(tuple(worn.get(f) for f in range(1, 2 * n + 1)))
    return found


def _pane_table(
    choices: PaneChoices, place: int, patterns: Sequence[Pattern], library: Library, panes: dict[Pane, int]
) -> IntArray:
    plies = [library.glass_ply(g, t) for g in choices.glasses for t in choices.thicknesses]
    worn = [pattern[2 * place : 2 * place + 2] for pattern in patterns]
    rows = {
        pair: [
            panes.setdefault(library.pane([ply], coating_out=pair[0], coating_in=pair[1]), len(panes)) for ply in plies
        ]
        for pair in dict.fromkeys(worn)
    }
    return np.array([rows[pair] for pair in worn], np.intp).reshape(len(worn), len(plies))


def _gap_table(choices: GapChoices, gaps: dict[Gap, int]) -> IntArray:
    made = [Gap(width, fill) for width in choices.widths for fill in choices.fills]
    return np.array([gaps.setdefault(gap, len(gaps)) for gap in made], np.intp)
