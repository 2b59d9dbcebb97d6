"""What a reader must be told about a result: ranges left, steps met, balances not closed, a U without meaning."""

from __future__ import annotations

import numpy as np

from igu.laws.constants import CELSIUS
from igu.laws.convection import GAP_VALIDITY, gap_band, heated_tilt
from igu.model.conditions import Conditions
from igu.model.unit import Unit
from igu.ratings.iso15099 import LEAST_DIFFERENCE, too_near
from igu.solver.balance import spread
from igu.solver.outcome import Outcome
from igu.solver.problem import Problem
from igu.solver.solution import Breakdown, Solution

Remarks = dict[tuple[str, int], str]
"""Sentences by what they are about: its kind and the number of the pane or gap."""

LIT, DARK = 0, 1
"""Columns of a rated problem."""


def remarks(unit: Unit, conditions: Conditions, problem: Problem, solution: Solution, parts: Breakdown) -> list[str]:
    """Warnings of a unit solved as the conditions say and dark (columns `LIT` and `DARK`), each a sentence. What is
    said of the first is not said again of the second."""
    found = _outcome(solution)
    if found:
        return found
    lit = _of_state(LIT, unit, problem, solution, parts)
    found += lit.values()
    if problem.absorbed.any():
        dark = _of_state(DARK, unit, problem, solution, parts)
        found += [f"Dark state, to which U belongs: {text}" for about, text in dark.items() if about not in lit]
    found += _undefined(problem, parts)
    found += [VENTED_GAS] if loses_gas(unit) else []
    if conditions.set_name and conditions.overridden:
        keys = ", ".join(conditions.overridden)
        found.append(f"{keys} given beside the set {conditions.set_name}: not a result under that set.")
    return found


VENTED_GAS = (
    "A vented unit does not keep a gas other than air, how fast it is lost is not known: figures hold as filled."
)


def loses_gas(unit: Unit) -> bool:
    """Whether a gas other than air is in a gap that is open to the air."""
    fills = [gap.fill for gap in unit.gaps if not gap.evacuated]
    return unit.sealed.vented and any(name != "air" and share > 0.0 for fill in fills for name, share in fill)


def _outcome(solution: Solution) -> list[str]:
    worst = int(solution.outcome.argmax())
    outcome = Outcome(int(solution.outcome[worst]))
    if outcome is Outcome.SOLVED:
        return []
    return [f"Balance not closed, largest imbalance {solution.imbalance[worst]:.3g} W/m². {outcome.advice}"]


def _undefined(problem: Problem, parts: Breakdown) -> list[str]:
    if not too_near(problem, parts)[DARK]:
        return []
    if parts.environment_out[DARK] == parts.environment_in[DARK]:
        return ["U is not defined: the environmental temperatures are equal."]
    return [
        f"U is not defined: the environmental temperatures are less than {LEAST_DIFFERENCE:g} K apart and a film is "
        "computed from the state."
    ]


def _of_state(column: int, unit: Unit, problem: Problem, solution: Solution, parts: Breakdown) -> Remarks:
    """Remarks on one column."""
    found = _heat(column, unit, solution)
    for k, gap in enumerate(unit.gaps):
        if not gap.evacuated:
            found |= _law_range(k, column, unit, solution, parts)
            found |= _steps(k, column, solution, parts)
        found |= _gas_range(k, column, problem, parts)
    return found


SERVICE_RANGE = (-60.0, 100.0)
"""Temperatures beyond which glass, seals and interlayers are not meant to serve [C]; common practice, no source."""


def _heat(column: int, unit: Unit, solution: Solution) -> Remarks:
    """Panes hotter or colder than a unit is made for."""
    found = {}
    for k in range(len(unit.panes)):
        faces = solution.T[2 * k : 2 * k + 2, column] - CELSIUS
        worst = float(faces[np.abs(faces - 20.0).argmax()])
        if not SERVICE_RANGE[0] <= worst <= SERVICE_RANGE[1]:
            found["heat", k] = (
                f"Pane {k + 1}: {worst:.0f} °C is beyond what glass, seals and interlayers are meant for, -60 to "
                "100 °C (common practice, no source)."
            )
    return found


def _law_range(k: int, column: int, unit: Unit, solution: Solution, parts: Breakdown) -> Remarks:
    difference = solution.T[2 * k + 1, column] - solution.T[2 * k + 2, column]
    band, limits = list(GAP_VALIDITY.items())[int(gap_band(heated_tilt(unit.tilt, difference=difference)))]
    ra, aspect = float(parts.rayleigh[k, column]), unit.height / unit.gaps[k].width
    found = {}
    if ra > limits["rayleigh_max"]:
        found["Ra", k] = (
            f"Gap {k + 1}: Ra {ra:.3g} is above {limits['rayleigh_max']:.3g}, the range of its law at {band}."
        )
    if aspect < limits["aspect_min"]:
        found["aspect", k] = (
            f"Gap {k + 1}: height over width {aspect:.3g} is below {limits['aspect_min']:g}, the range of its law "
            f"at {band}."
        )
    return found


def _steps(k: int, column: int, solution: Solution, parts: Breakdown) -> Remarks:
    if solution.on_step[k, column]:
        text = (
            f"Gap {k + 1}: no exact state exists; the published gap law steps up at Ra = 5e4 and the result is the "
            "state on the step."
        )
        return {("on the step", k): text}
    if solution.two_states[k, column]:
        text = (
            f"Gap {k + 1}: two states exist beside the step of the published gap law at Ra = 1e4; the one of lower "
            f"Ra ({parts.rayleigh[k, column]:.0f}) is given."
        )
        return {("two states", k): text}
    return {}


def _gas_range(k: int, column: int, problem: Problem, parts: Breakdown) -> Remarks:
    b = spread(problem)
    low, high = float(b.T_min[k, 0]), float(b.T_max[k, 0])
    mean = float(parts.mean[k, column])
    if low <= mean <= high:
        return {}
    nearest = np.clip(mean, low, high) - CELSIUS
    text = (
        f"Gap {k + 1}: mean gas temperature {mean - CELSIUS:.1f} °C is outside the range of its properties, "
        f"{low - CELSIUS:.0f} to {high - CELSIUS:.0f} °C; those of {nearest:.0f} °C were used."
    )
    return {("gas", k): text}
