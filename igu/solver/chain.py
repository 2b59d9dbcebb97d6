"""Linear systems of N chains at once: each unknown is coupled to its two neighbours."""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from igu.arrays import Array


class Bands(NamedTuple):
    """Tridiagonal matrices of N chains of m unknowns: `below`, `diagonal`, `above`, each (m, N); row j couples to
    unknown j - 1 by below[j] and to unknown j + 1 by above[j]; below[0] and above[m - 1] are not read."""

    below: Array
    diagonal: Array
    above: Array

    def transposed(self) -> Bands:
        """The transposed matrices."""
        return Bands(np.roll(self.above, 1, axis=0), self.diagonal, np.roll(self.below, -1, axis=0))

    def dense(self) -> Array:
        """The matrices in full, (N, m, m)."""
        m, count = self.diagonal.shape
        full = np.zeros((count, m, m))
        rows = np.arange(m)
        full[:, rows, rows] = self.diagonal.T
        full[:, rows[1:], rows[:-1]] = self.below[1:].T
        full[:, rows[:-1], rows[1:]] = self.above[:-1].T
        return full


def solve_chain(bands: Bands, right: Array) -> Array:
    """Solution (m, N) of the tridiagonal systems with this right side (m, N).

    Elimination without pivoting (Thomas algorithm): the balance's matrices are diagonally dominant.
    """
    m = right.shape[0]
    above, solved = np.empty_like(right), np.empty_like(right)
    pivot = 1.0 / bands.diagonal[0]
    above[0] = bands.above[0] * pivot
    solved[0] = right[0] * pivot
    for j in range(1, m):
        pivot = 1.0 / (bands.diagonal[j] - bands.below[j] * above[j - 1])
        above[j] = bands.above[j] * pivot
        solved[j] = (right[j] - bands.below[j] * solved[j - 1]) * pivot
    for j in range(m - 2, -1, -1):
        solved[j] -= above[j] * solved[j + 1]
    return solved
