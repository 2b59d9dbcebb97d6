"""Many units made of few parts: the distinct panes and gaps, and which stands where in which unit."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import TypeVar

import numpy as np

from igu.arrays import Array, BoolArray, IntArray
from igu.errors import require
from igu.model.unit import Gap, Pane, Unit

Part = TypeVar("Part", Pane, Gap)


@dataclass(frozen=True)
class MakeUps:
    """N units of n panes. `pane_index` (n, N) and `gap_index` (n - 1, N) point into the distinct `panes` and `gaps`;
    `height` [m] and `tilt` [rad] are (N,) or (1,). Width plays no part in the heat balance."""

    panes: tuple[Pane, ...]
    gaps: tuple[Gap, ...]
    pane_index: IntArray
    gap_index: IntArray
    height: Array
    tilt: Array

    @classmethod
    def of(cls, units: Sequence[Unit]) -> MakeUps:
        """Units with the same number of panes, equal parts kept once.

        Raises
        ------
        ModelError    Different pane counts.
        """
        require(len({len(u.panes) for u in units}) == 1, "the stacks of one batch have the same number of panes")
        panes, pane_index = _distinct([u.panes for u in units])
        gaps, gap_index = _distinct([u.gaps for u in units])
        heights, tilts = np.array([(u.height, u.tilt) for u in units], float).T
        return cls(panes, gaps, pane_index, gap_index, heights, tilts)

    @property
    def size(self) -> int:
        """Number of units."""
        return int(self.pane_index.shape[1])

    @property
    def pane_count(self) -> int:
        """Number of panes of every unit."""
        return int(self.pane_index.shape[0])

    def columns(self, chosen: slice | IntArray | BoolArray) -> MakeUps:
        """Some of the units, of the same parts."""
        cut = {name: getattr(self, name) for name in ("pane_index", "gap_index", "height", "tilt")}
        return replace(self, **{k: v if v.shape[-1] == 1 < self.size else v[..., chosen] for k, v in cut.items()})

    def parts(self, k: int) -> tuple[tuple[Pane, ...], tuple[Gap, ...]]:
        """Panes and gaps of one unit, outdoors first."""
        return (
            tuple(self.panes[i] for i in self.pane_index[:, k]),
            tuple(self.gaps[i] for i in self.gap_index[:, k]),
        )


def _distinct(stacks: Sequence[Sequence[Part]]) -> tuple[tuple[Part, ...], IntArray]:
    """Distinct parts, by value, and the index of each part of each stack, (rows, N)."""
    places: dict[Part, int] = {}
    index = [[places.setdefault(part, len(places)) for part in stack] for stack in stacks]
    return tuple(places), np.array(index, np.intp).reshape(len(stacks), -1).T
