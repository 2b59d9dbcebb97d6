"""What a solve hands back: the state of every stack, and the figures read off it."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from igu.arrays import Array, BoolArray, IntArray
from igu.solver.outcome import Outcome


@dataclass(frozen=True)
class Solution:
    """State of N stacks of n panes.

    T (2n, N) [K] face temperatures, outdoors first; `flux_to_room` (N,) [W/m2] convection and long wave from the
    room-side face, positive towards the room; `imbalance` (N,) [W/m2] the largest of any face; `iterations` (N,);
    `outcome` (N,) codes of `Outcome`; `piece` (n - 1, N) the piece of the gap law each gap was held to, -1 where
    the published choice stands; `on_step`, `two_states` (n - 1, N): the gap stands on the upward step, or a second
    state of higher Rayleigh number exists.
    """

    T: Array
    flux_to_room: Array
    imbalance: Array
    iterations: IntArray
    outcome: IntArray
    piece: IntArray
    on_step: BoolArray
    two_states: BoolArray

    @property
    def solved(self) -> BoolArray:
        """Which stacks closed their balance, (N,)."""
        return np.asarray(self.outcome == Outcome.SOLVED)

    def columns(self, chosen: slice | IntArray | BoolArray) -> Solution:
        """The solution of some of the stacks."""
        return Solution(**{name: array[..., chosen] for name, array in vars(self).items()})


@dataclass(frozen=True)
class Breakdown:
    """Where the heat goes in N solved stacks.

    Spaces, (n + 1, N), are the outdoor side, the gaps and the room side; fluxes are positive towards the room
    [W/m2]. `radiation` [W/m2] and `radiation_coefficient` [W/(m2 K)] of a space are None in stacks with an
    infrared-transparent sheet, where radiation passes by the neighbours. `rayleigh`, `nusselt` (n - 1, N) of an
    evacuated gap are 0 and 1.
    """

    flux: Array
    convection: Array
    radiation: Array | None
    convection_coefficient: Array
    radiation_coefficient: Array | None
    rayleigh: Array
    nusselt: Array
    mean: Array
    width: Array
    environment_out: Array
    environment_in: Array
