"""All make-ups a search may choose from, numbered, and any block of them as arrays."""

from __future__ import annotations

import itertools
import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from igu.arrays import Array, IntArray
from igu.errors import ModelError, require
from igu.model.catalogue import Library
from igu.model.makeups import MakeUps, Part
from igu.model.study_tables import CaseLayer, GapChoices, PaneChoices, Seek
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
    """The spaces of a search, one for each pane count; size, tilt and the layers held are the unit's.

    Raises
    ------
    ModelError    No make-up is allowed at all, or a layer is held that the unit does not have in such a place.
    """
    found = tuple(_space(spec, n, unit, library) for n in spec.panes)
    require(any(space.size for space in found), "the search allows no make-up at all")
    return found


def _space(spec: Seek, n: int, unit: Unit, library: Library) -> Space:
    layers = spec.layers[: 2 * n - 1]
    bare = [_panes(choices, unit, library) for choices in layers[::2]]
    patterns = _patterns(spec, n, library, _free_faces(layers[::2], bare), not unit.sealed.vented)
    panes: dict[Pane, int] = {}
    gaps: dict[Gap, int] = {}
    pane_table = tuple(_pane_table(made, p, patterns, library, panes) for p, made in enumerate(bare))
    gap_table = tuple(_gap_table(_gaps(choices, unit), gaps) for choices in layers[1::2])
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


Choices = PaneChoices | GapChoices | CaseLayer


def _panes(choices: Choices, unit: Unit, library: Library) -> list[Pane]:
    """The panes that may stand in one place, before the search coats them."""
    if isinstance(choices, CaseLayer):
        return [_held(choices, unit.panes, choices.number % 2 == 1)]
    if isinstance(choices, GapChoices):
        raise ModelError("layers of a search: given a gap in the place of a pane")
    return [
        library.pane([library.glass_ply(g, t)], treatment=choices.treatment)
        for g in choices.glasses
        for t in choices.thicknesses
    ]


def _gaps(choices: Choices, unit: Unit) -> list[Gap]:
    """The gaps that may stand in one place."""
    if isinstance(choices, CaseLayer):
        return [_held(choices, unit.gaps, choices.number % 2 == 0)]
    if isinstance(choices, PaneChoices):
        raise ModelError("layers of a search: given a pane in the place of a gap")
    return [Gap(width, fill) for width in choices.widths for fill in choices.fills]


def _held(layer: CaseLayer, parts: Sequence[Part], right_kind: bool) -> Part:
    """The layer of the case; panes have odd numbers and gaps even ones."""
    place = (layer.number - 1) // 2
    require(right_kind and 0 <= place < len(parts), f"layer {layer.number} of the case cannot stand there")
    return parts[place]


def _free_faces(choices: Sequence[Choices], bare: Sequence[Sequence[Pane]]) -> list[int]:
    """Faces the search may coat: not those a layer of the case has coated, nor any of a pane known as a whole."""
    return [
        2 * p + side
        for p, (choice, made) in enumerate(zip(choices, bare, strict=True))
        for side in (1, 2)
        if not isinstance(choice, CaseLayer)
        or (made[0].name is None and (made[0].coating_out, made[0].coating_in)[side - 1] is None)
    ]


def _patterns(spec: Seek, n: int, library: Library, free: Sequence[int], sealed: bool) -> list[Pattern]:
    """Every way to put at most `coatings_max` coatings on the allowed faces; a pattern names each face's coating."""
    faces = [f for f in (spec.faces or range(1, 2 * n + 1)) if f in free]
    found: list[Pattern] = []
    for count in range(min(spec.coatings_max, len(faces)) + 1):
        for places in itertools.combinations(faces, count):
            for coatings in itertools.product(spec.coatings, repeat=count):
                worn = dict(zip(places, coatings, strict=True))
                if all(library.may_carry(c, f, faces=2 * n, sealed=sealed) for f, c in worn.items()):
                    found.append(tuple(worn.get(f) for f in range(1, 2 * n + 1)))
    return found


def _pane_table(
    bare: Sequence[Pane], place: int, patterns: Sequence[Pattern], library: Library, panes: dict[Pane, int]
) -> IntArray:
    worn = [(pattern[2 * place], pattern[2 * place + 1]) for pattern in patterns]
    rows = {
        (out, in_): [panes.setdefault(_coated(pane, out, in_, library), len(panes)) for pane in bare]
        for out, in_ in dict.fromkeys(worn)
    }
    return np.array([rows[pair] for pair in worn], np.intp).reshape(len(worn), len(bare))


def _coated(pane: Pane, out: str | None, in_: str | None, library: Library) -> Pane:
    """The pane with these coatings besides its own."""
    if out is None and in_ is None:
        return pane
    return library.recoated(pane, coating_out=out or pane.coating_out, coating_in=in_ or pane.coating_in)


def _gap_table(made: Sequence[Gap], gaps: dict[Gap, int]) -> IntArray:
    return np.array([gaps.setdefault(gap, len(gaps)) for gap in made], np.intp)
