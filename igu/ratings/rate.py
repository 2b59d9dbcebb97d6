"""One unit under one set of conditions, rated by the method the conditions name."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np

from igu.errors import require, require_kind
from igu.model.conditions import Conditions
from igu.model.makeups import MakeUps
from igu.model.unit import Unit
from igu.ratings import en410, en673
from igu.ratings.fogging import fogging
from igu.ratings.iso15099 import u_values
from igu.ratings.remarks import remarks
from igu.ratings.result import Budget, Films, GapResult, PaneResult, Result, Solar
from igu.ratings.sunlight import unit_solar
from igu.solver.newton import solve
from igu.solver.outcome import Outcome
from igu.solver.problem import Problem, assemble
from igu.solver.readout import breakdown, inward_fractions
from igu.solver.solution import Breakdown, Solution

NO_FILMS = Films(None, None, None, None)


def rate(unit: Unit, conditions: Conditions) -> Result:
    """Rate a unit under conditions.

    Raises
    ------
    ModelError    The method of the conditions does not cover the unit.
    """
    require_kind("unit to rate", unit, Unit)
    require_kind("conditions to rate it under", conditions, Conditions)
    methods = {"iso-15099": _rate_iso15099, "en-673": _rate_en673, "en-410": _rate_en410}
    return methods[conditions.method](conditions.placed(unit), conditions)


def _rate_en673(unit: Unit, conditions: Conditions) -> Result:
    u = en673.u_value(unit)
    stack = en673.reference_stacks(MakeUps.of([unit]))
    gaps = en673.gap_conductances(stack)[:, 0]
    radiative = en673.radiative_conductances(stack)[:, 0]
    return replace(
        _blank(unit, conditions, en673.NOTES),
        U=u,
        U_declared=en673.declared(u) if en673.is_declared_case(unit) and not conditions.overridden else None,
        gaps=tuple(
            GapResult(g.width, en673.MEAN_TEMPERATURE, None, None, float(h - r), float(r), None, None, None)
            for g, h, r in zip(unit.gaps, gaps, radiative, strict=True)
        ),
        films=Films(None, None, None, None),
    )


def _rate_en410(unit: Unit, conditions: Conditions) -> Result:
    blank = _blank(unit, conditions, en410.NOTES)
    solar, missing = unit_solar(unit, incidence=0.0, diffuse_share=0.0)
    if solar is None:
        return replace(blank, warnings=missing)
    solar, inward = en410.with_secondary(unit, solar)
    panes = tuple(PaneResult(None, None, a, None, f) for a, f in zip(solar.absorptance, inward, strict=True))
    return replace(blank, solar=solar, panes=panes, warnings=missing)


def _blank(unit: Unit, conditions: Conditions, notes: tuple[str, ...]) -> Result:
    """A result whose method gives no state of the unit."""
    return Result(
        conditions=conditions,
        outcome=Outcome.SOLVED.word,
        warnings=(),
        notes=notes,
        tilt=unit.tilt,
        U=None,
        U_declared=None,
        flux_to_room=None,
        panes=tuple(PaneResult(None, None, None, None, None) for _ in unit.panes),
        gaps=tuple(GapResult(g.width, *(None,) * 8) for g in unit.gaps),
        films=NO_FILMS,
        solar=None,
        budget=None,
        fog=(),
        environment_out=None,
        environment_in=None,
        largest_imbalance=None,
        iterations=None,
    )


def dark_result(unit: Unit, conditions: Conditions) -> Result:
    """A unit under the same conditions without sun and without absorbed heat."""
    return rate(unit, replace(conditions, sun=0.0, absorbed=None))


def _rate_iso15099(unit: Unit, conditions: Conditions) -> Result:
    solar, missing = unit_solar(unit, incidence=conditions.incidence, diffuse_share=conditions.diffuse_share)
    absorbed = _absorbed(unit, conditions, solar)
    lit = assemble([unit, unit], [conditions, conditions])
    heat = np.zeros((len(unit.panes), 2))
    heat[:, 0] = absorbed or 0.0
    problem = lit.with_absorbed(heat)
    solution = solve(problem)
    parts = breakdown(problem, solution)
    state = _state_result(unit, conditions, problem, solution, parts)
    q_lit, q_dark = (float(q) for q in solution.flux_to_room)
    unknown_sun = absorbed is None
    result = replace(
        state,
        U=_finite(u_values(problem, solution, parts)[1]),
        solar=_with_gain(solar, conditions.sun, q_lit - q_dark),
        budget=_budget(conditions, solar, q_lit, q_dark),
        warnings=(*missing, *state.warnings) if conditions.sun else state.warnings,
        panes=_with_heat(state.panes, solar, absorbed),
    )
    return _without_state(_stated(result), unit) if unknown_sun else _stated(result)


def _stated(r: Result) -> Result:
    """The result; without its temperatures, fluxes and gains where the balance did not close: they are not known."""
    if r.outcome == "solved":
        return r
    return replace(
        r,
        flux_to_room=None,
        panes=tuple(replace(p, face_out=None, face_in=None, inward_fraction=None) for p in r.panes),
        gaps=tuple(GapResult(g.width, *(None,) * 8) for g in r.gaps),
        films=Films(None, None, None, None),
        solar=r.solar and replace(r.solar, g=None, q_i=None),
        budget=None,
        environment_out=None,
        environment_in=None,
        fog=(),
    )


def _absorbed(unit: Unit, conditions: Conditions, solar: Solar | None) -> tuple[float, ...] | None:
    """Heat absorbed in each pane [W/m2]; None where the sun shines on panes of unknown absorptance."""
    if conditions.absorbed is not None:
        count, panes = len(conditions.absorbed), len(unit.panes)
        require(count == panes, f"Conditions.absorbed: given {count}; allowed one for each of {panes} panes")
        return conditions.absorbed
    if conditions.sun == 0.0:
        return (0.0,) * len(unit.panes)
    return None if solar is None else tuple(conditions.sun * a for a in solar.absorptance)


def _state_result(unit: Unit, conditions: Conditions, problem: Problem, solution: Solution, parts: Breakdown) -> Result:
    inward = inward_fractions(problem, solution)[:, 0]
    faces = solution.T[:, 0]
    return replace(
        _blank(unit, conditions, ISO_NOTES),
        outcome=Outcome(int(solution.outcome.max())).word,
        warnings=tuple(remarks(unit, conditions, problem, solution, parts)),
        flux_to_room=float(solution.flux_to_room[0]),
        panes=tuple(
            PaneResult(float(faces[2 * i]), float(faces[2 * i + 1]), None, None, float(inward[i]))
            for i in range(len(unit.panes))
        ),
        gaps=tuple(_gap_result(unit, parts, k) for k in range(len(unit.gaps))),
        films=_films(parts),
        fog=fogging(unit, conditions, tuple(float(t) for t in faces)) if solution.solved.all() else (),
        environment_out=float(parts.environment_out[1]),
        environment_in=float(parts.environment_in[1]),
        largest_imbalance=float(solution.imbalance.max()),
        iterations=int(solution.iterations[0]),
    )


ISO_NOTES = (
    "Heat balance of every face by ISO 15099:2003; U from a dark solve (flux over the difference of environmental "
    "temperatures); half of the heat absorbed in a pane enters at each of its faces.",
)


def _gap_result(unit: Unit, parts: Breakdown, k: int) -> GapResult:
    empty, space = unit.gaps[k].evacuated, k + 1
    return GapResult(
        width=float(parts.width[k, 0]),
        mean=float(parts.mean[k, 0]),
        rayleigh=None if empty else float(parts.rayleigh[k, 0]),
        nusselt=None if empty else float(parts.nusselt[k, 0]),
        convection_coefficient=float(parts.convection_coefficient[space, 0]),
        radiation_coefficient=_entry(parts.radiation_coefficient, space),
        convection=float(parts.convection[space, 0]),
        radiation=_entry(parts.radiation, space),
        flux=float(parts.flux[space, 0]),
    )


def _films(parts: Breakdown) -> Films:
    return Films(
        float(parts.convection_coefficient[0, 0]),
        _entry(parts.radiation_coefficient, 0),
        float(parts.convection_coefficient[-1, 0]),
        _entry(parts.radiation_coefficient, -1),
    )


def _entry(rows: np.ndarray | None, k: int) -> float | None:
    return None if rows is None else float(rows[k, 0])


def _finite(value: float) -> float | None:
    return float(value) if math.isfinite(value) else None


def _with_gain(solar: Solar | None, sun: float, gained: float) -> Solar | None:
    """The solar figures with g and its secondary part, secants of the flux to the room (docs/equations.md, eq. 15)."""
    if solar is None or sun == 0.0:
        return solar
    q_i = gained / sun
    return replace(solar, q_i=q_i, g=solar.transmittance + q_i)


def _budget(conditions: Conditions, solar: Solar | None, q_lit: float, q_dark: float) -> Budget | None:
    if conditions.sun and solar is None:
        return None
    transmitted = conditions.sun * solar.transmittance if solar else 0.0
    return Budget(transmitted, q_lit - q_dark, q_dark, transmitted + q_lit)


def _with_heat(
    panes: tuple[PaneResult, ...], solar: Solar | None, absorbed: tuple[float, ...] | None
) -> tuple[PaneResult, ...]:
    shares = solar.absorptance if solar else (None,) * len(panes)
    heat = absorbed or (None,) * len(panes)
    return tuple(replace(p, solar_absorptance=a, absorbed=h) for p, a, h in zip(panes, shares, heat, strict=True))


def _without_state(result: Result, unit: Unit) -> Result:
    """The result with everything that needs the unknown sun left out; U stays, with the temperatures it refers to."""
    blank = _blank(unit, result.conditions, result.notes)
    return replace(blank, outcome=result.outcome, warnings=result.warnings, U=result.U, iterations=result.iterations,
                   environment_out=result.environment_out, environment_in=result.environment_in,
                   largest_imbalance=result.largest_imbalance)  # fmt: skip
