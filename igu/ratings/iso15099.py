"""U-value and inward flow by ISO 15099: conventions over a dark and a sunny solve."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, BoolArray
from igu.solver.newton import solve
from igu.solver.problem import Problem
from igu.solver.readout import breakdown
from igu.solver.solution import Breakdown, Solution

LEAST_DIFFERENCE = 1.0
"""Environmental temperatures closer than this [K] leave U undefined where a film is computed from the state."""


def dark(problem: Problem) -> Problem:
    """The same stacks without any absorbed heat."""
    return problem.with_absorbed(np.zeros((problem.pane_count, 1)))


def u_values(problem: Problem, solution: Solution, parts: Breakdown | None = None) -> Array:
    """U of N dark solved stacks [W/(m2 K)]: flux over the difference of environmental temperatures (the secant).

    NaN where the balance did not close, where the environmental temperatures are equal, and where they are less than
    1 K apart and the room film is computed from the state.

    Source: ISO 15099:2003, 8.2; environmental temperature as in clause 4 (docs/equations.md, eq. 13).
    """
    parts = parts or breakdown(problem, solution)
    difference = parts.environment_out - parts.environment_in
    undefined = too_near(problem, parts) | ~solution.solved
    return np.where(undefined, np.nan, solution.flux_to_room / np.where(undefined, 1.0, difference))


def too_near(problem: Problem, parts: Breakdown) -> BoolArray:
    """Whether the environmental temperatures of N dark stacks are too near each other to define a U, (N,)."""
    natural = np.isnan(problem.surroundings.indoor_convection)
    difference = np.abs(parts.environment_out - parts.environment_in)
    return np.asarray(difference < np.where(natural, LEAST_DIFFERENCE, 1.0e-9))


def u_of(problem: Problem) -> Array:
    """U of N stacks [W/(m2 K)], by a dark solve."""
    unlit = dark(problem)
    return u_values(unlit, solve(unlit))


def gained(problem: Problem, absorbed: Array) -> tuple[Array, Solution, Solution]:
    """Flux to the room that heat absorbed in the panes (n, N) [W/m2] adds, lit less dark (the secant), (N,) [W/m2]; and
    the dark and the lit state."""
    before, after = solve(dark(problem)), solve(problem.with_absorbed(absorbed))
    return after.flux_to_room - before.flux_to_room, before, after
