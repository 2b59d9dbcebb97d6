"""What a reader must be told about a result: ranges left, steps met, balances not closed."""

from __future__ import annotations

import math

import numpy as np

from igu.laws.convection import GAP_VALIDITY, heated_tilt
from igu.model.conditions import Conditions
from igu.model.unit import Unit
from igu.solver.balance import spread
from igu.solver.outcome import Outcome
from igu.solver.problem import Problem
from igu.solver.solution import Breakdown, Solution


def remarks(unit: Unit, conditions: Conditions, problem: Problem, solution: Solution, parts: Breakdown) -> list[str]:
    """Warnings of the first stack of a solved problem, each a sentence."""
    found = _outcome(solution)
    if found:
        return found
    found += _heat(unit, solution)
    for k, gap in enumerate(unit.gaps):
        if not gap.evacuated:
            found += _law_range(k, unit, solution, parts)
            found += _steps(k, solution, parts)
        found += _gas_range(k, problem, parts)
    if conditions.set_name and conditions.overridden:
        keys = ", ".join(conditions.overridden)
        found.append(f"{keys} given beside the set {conditions.set_name}: not a result under that set.")
    return found


def _outcome(solution: Solution) -> list[str]:
    outcome = Outcome(int(solution.outcome[0]))
    if outcome is Outcome.SOLVED:
        return []
    return [f"Balance not closed, largest imbalance {solution.imbalance[0]:.3g} W/m². {outcome.advice}"]


SERVICE_RANGE = (-60.0, 100.0)
"""Temperatures beyond which glass, seals and interlayers are not meant to serve [C]; common practice, no source."""


def _heat(unit: Unit, solution: Solution) -> list[str]:
    """Panes hotter or colder than a unit is made for."""
    found = []
    for k in range(len(unit.panes)):
        faces = solution.T[2 * k : 2 * k + 2, 0] - 273.15
        worst = float(faces[np.abs(faces - 20.0).argmax()])
        if not SERVICE_RANGE[0] <= worst <= SERVICE_RANGE[1]:
            found.append(
                f"Pane {k + 1}: {worst:.0f} °C is beyond what glass, seals and interlayers are meant for, -60 to "
                "100 °C (common practice, no source)."
            )
    return found


def _law_range(k: int, unit: Unit, solution: Solution, parts: Breakdown) -> list[str]:
    difference = solution.T[2 * k + 1, 0] - solution.T[2 * k + 2, 0]
    tilt = math.degrees(float(heated_tilt(unit.tilt, difference=difference)))
    band = "0 to 60 degrees" if tilt < 60.0 else "60 to 90 degrees" if tilt < 90.0 else "90 to 180 degrees"
    limits = GAP_VALIDITY[band]
    ra, aspect = float(parts.rayleigh[k, 0]), unit.height / unit.gaps[k].width
    found = []
    if ra > limits["rayleigh_max"]:
        found.append(f"Gap {k + 1}: Ra {ra:.3g} is above {limits['rayleigh_max']:.3g}, the range of its law at {band}.")
    if aspect < limits["aspect_min"]:
        found.append(
            f"Gap {k + 1}: height over width {aspect:.3g} is below {limits['aspect_min']:g}, the range of its law "
            f"at {band}."
        )
    return found


def _steps(k: int, solution: Solution, parts: Breakdown) -> list[str]:
    if solution.on_step[k, 0]:
        return [
            f"Gap {k + 1}: no exact state exists; the published gap law steps up at Ra = 5e4 and the result is the "
            "state on the step."
        ]
    if solution.two_states[k, 0]:
        return [
            f"Gap {k + 1}: two states exist beside the step of the published gap law at Ra = 1e4; the one of lower "
            f"Ra ({parts.rayleigh[k, 0]:.0f}) is given."
        ]
    return []


def _gas_range(k: int, problem: Problem, parts: Breakdown) -> list[str]:
    b = spread(problem)
    low, high = float(b.T_min[k, 0]), float(b.T_max[k, 0])
    mean = float(parts.mean[k, 0])
    if low <= mean <= high:
        return []
    nearest = np.clip(mean, low, high) - 273.15
    return [
        f"Gap {k + 1}: mean gas temperature {mean - 273.15:.1f} °C is outside the range of its properties, "
        f"{low - 273.15:.0f} to {high - 273.15:.0f} °C; those of {nearest:.0f} °C were used."
    ]
