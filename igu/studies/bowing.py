"""The sealed unit: gas pressure, bowing and stress, coupled with the heat balance until both agree."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import partial
from itertools import pairwise
from typing import NamedTuple

import numpy as np

from igu.arrays import Array, BoolArray
from igu.errors import SolveError
from igu.laws.constants import GRAVITY
from igu.laws.plate import (
    DENSITY,
    SMALL_DEFLECTION,
    bending_stress,
    effective_thickness,
    flexural_rigidity,
    plate_coefficients,
)
from igu.laws.sealed import PRESSURE_PER_METRE, gap_pressures, isochoric_pressure, linear_gap_pressures
from igu.laws.strength import factored_load
from igu.model.conditions import Conditions
from igu.model.makeups import MakeUps
from igu.model.strength import permissible_stress
from igu.model.study_tables import AS_GIVEN, Factors
from igu.model.unit import Pane, Unit
from igu.ratings.iso15099 import dark, u_values
from igu.solver.newton import solve
from igu.solver.problem import Problem, problem_of

SETTLED = 1.0e-9
"""Gap widths are iterated with the heat balance until none moves by more [m]."""

ROUNDS = 60
"""Rounds of gas, plates and heat balance after which they are said not to agree."""

NARROWEST = 0.02
"""Share of its width a gap keeps in the heat balance when the panes touch."""


class StandardLoad(NamedTuple):
    """A climatic load of the standards: gap warmer than at sealing [K], meteorological pressure above [Pa] and site
    above [m] that at sealing, and the isochoric pressure of the three as printed [Pa]."""

    warming: float
    pressure_rise: float
    climb: float
    printed: float

    def isochoric(self, climb: float | None) -> float:
        """Isochoric pressure [Pa], as printed or with the site's own altitude above the sealing's [m]."""
        if climb is None:
            return self.printed
        return float(isochoric_pressure(warming=self.warming, pressure_rise=self.pressure_rise, climb=climb))


STANDARD_LOADS = {
    "summer": StandardLoad(20.0, -2.0e3, 600.0, 16.0e3),
    "winter": StandardLoad(-25.0, 4.0e3, -300.0, -16.0e3),
}
"""The standards' climatic loads. DIN 18008-1, EN 16612 [memory]."""


@dataclass(frozen=True)
class PaneLoad:
    """One pane in one state: load as given [Pa] and deflections under it [m], positive towards the room; greatest
    bending stress under the load with its partial factors [Pa] and the design strength [Pa] for the load's duration,
    both None beside an evacuated gap, where the atmosphere on the pillars and thermal bending stress the glass and are
    not worked out; `linear` says that the deflection, with the factors too, stays below half the thickness."""

    load: float
    centre: float
    mean: float
    stress: float | None
    strength: float | None
    linear: bool

    @property
    def use(self) -> float | None:
        """Stress over design strength [-], None where it is not worked out."""
        return None if self.stress is None or self.strength is None else self.stress / self.strength


@dataclass(frozen=True)
class GapState:
    """One gap in one state: overpressure against the site [Pa] (None in an evacuated gap), widths at the centre and on
    average [m], and whether the panes touch."""

    overpressure: float | None
    centre: float
    mean: float
    touching: bool


@dataclass(frozen=True)
class Bowed:
    """A unit in one state. `transfer` is the shear transfer assumed in laminated panes (0 layered, 1 monolithic); `U`
    with bowing and `U_flat` without [W/(m2 K)], both of the dark, None for the standards' load sets; where panes touch,
    which the heat balance does not know, `U` is None."""

    name: str
    duration: str
    transfer: float
    panes: tuple[PaneLoad, ...]
    gaps: tuple[GapState, ...]
    U: float | None
    U_flat: float | None

    @property
    def touching(self) -> bool:
        """Whether any panes touch."""
        return any(gap.touching for gap in self.gaps)

    @property
    def given_pressure(self) -> bool:
        """Whether a pressure bends the panes however they give: linear plates then read stress too high. Where gas that
        expands bends them, they leave out the stress in the plane of the glass and may read it too low."""
        return self.duration in ("wind", "snow") or not self.gaps


@dataclass(frozen=True)
class _Plates:
    """Panes as plates for several shear transfers, (n, V): mean deflection per load, centre over mean deflection, and
    greatest stress per load; thickness for the small-deflection check."""

    compliance: Array
    swell: float
    stress: Array
    thickness: Array
    transfers: tuple[float, ...]
    pillared: tuple[bool, ...]


def bow(
    unit: Unit,
    conditions: Conditions,
    absorptance: Sequence[float] | None,
    *,
    wind: float = 0.0,
    snow: float = 0.0,
    factors: Factors = AS_GIVEN,
) -> list[Bowed]:
    """A unit under conditions, in the sun of the conditions and in the dark; a laminated unit with its panes layered
    and monolithic.

    Parameters
    ----------
    absorptance : sequence or None    Share of the sun every pane absorbs; None: known from `conditions.absorbed`, or
                                      dark.
    wind : float                      Wind pressure [Pa], positive towards the room.
    snow : float                      Snow on the plan area [Pa], on the outdoor pane; under it the unit is dark.
    factors : Factors                 Partial factors of the stress; altitude and weight are the permanent part.

    The gas follows the exact gas law at the mean temperature of its two faces, plates are linear, U takes the mean gap.
    A vented gap breathes with all but a gust, which its tube is too narrow for.
    """
    plates = _plates(unit)
    heat = _heat(unit, conditions, absorptance)
    states = [("dark", np.zeros(len(unit.panes)))] + ([("in the sun", heat)] if heat.any() and not snow else [])
    found = []
    loaded = _wind_words(wind) if wind else " with snow" if snow else ""
    for words, absorbed in states:
        name = f"{conditions.name}, {words}{loaded}"
        found += _settled(unit, conditions, plates, absorbed, name, wind=wind, snow=snow, factors=factors)
    return found


def _wind_words(wind: float) -> str:
    return f" with {'wind' if wind > 0.0 else 'suction'} {abs(wind):g} Pa"


def snow_across(unit: Unit, snow: float) -> float:
    """Pressure across the outdoor pane [Pa] of snow on the plan area: on the slope lies cos tilt of it, and cos tilt of
    that acts across; nothing where the outdoor face is vertical or looks down. EN 1991-1-3, load on the plan area
    [memory]."""
    return snow * max(round(math.cos(unit.tilt), 9), 0.0) ** 2


def standard_loads(unit: Unit, *, climb: float | None = None, factors: Factors = AS_GIVEN) -> list[Bowed]:
    """A unit under the standards' climatic loads and its weight, in their linear form.

    Parameters
    ----------
    climb : float or None    Altitude of the site above that of sealing [m], in place of the standards' own; None: not
                             known.
    factors : Factors        Partial factors of the stress; altitude and weight are the permanent part.
    """
    plates = _plates(unit)
    site = "" if climb is None else f", site {abs(climb):.0f} m {'above' if climb >= 0.0 else 'below'} sealing"
    found = []
    for name, standard in STANDARD_LOADS.items():
        over, load = _linear_equilibrium(unit, plates, standard.isochoric(climb))
        altitude = PRESSURE_PER_METRE * (standard.climb if climb is None else climb)
        _, lasting = _linear_equilibrium(unit, plates, altitude)
        design = factored_load(load, lasting, variable=factors.variable, lasting=factors.permanent)
        found += _states(unit, plates, load, design, over, f"standard {name} load{site}", "climatic-season", None, None)
    return found


def _linear_equilibrium(unit: Unit, plates: _Plates, isochoric: float) -> tuple[Array, Array]:
    """Overpressures of the gaps (n - 1, V) and pane loads (n, V) [Pa] in the standards' linear form."""
    count, weight = len(plates.transfers), _weight(unit)[:, None]
    widths = np.repeat(_widths(unit)[:, None], count, axis=1)
    over = linear_gap_pressures(
        width=widths,
        compliance=plates.compliance,
        isochoric=np.full(widths.shape, isochoric),
        own_load=weight,
        fixed=np.repeat(_evacuated(unit)[:, None], count, axis=1),
    )
    ends = np.zeros((1, count))
    chain = np.concatenate([ends, over, ends])
    return over, chain[:-1] - chain[1:] + weight


def permanent_load(unit: Unit, conditions: Conditions, *, factors: Factors = AS_GIVEN) -> list[Bowed]:
    """A unit at its sealing temperature on the site: altitude and weight, which last."""
    plates = _plates(unit)
    over, load = _lasting(unit, conditions, plates)
    design = factors.permanent * load
    name = f"{conditions.name}, altitude and weight"
    return _states(unit, plates, load, design, over, name, "permanent", None, None)


def _lasting(unit: Unit, conditions: Conditions, plates: _Plates) -> tuple[Array, Array]:
    """Overpressures of the gaps (n - 1, V) and pane loads (n, V) [Pa] of altitude and weight alone."""
    temperature = np.full((len(unit.gaps), len(plates.transfers)), unit.sealed.temperature)
    pressure, load = _equilibrium(unit, conditions, plates, temperature)
    return pressure - conditions.pressure, load


def _settled(
    unit: Unit,
    conditions: Conditions,
    plates: _Plates,
    absorbed: Array,
    name: str,
    *,
    wind: float,
    snow: float,
    factors: Factors,
) -> list[Bowed]:
    """Gas, plates and heat balance in agreement, for every shear transfer at once."""
    count = len(plates.transfers)
    problem = problem_of(MakeUps.of([unit] * count), conditions).with_absorbed(
        np.repeat(absorbed[:, None], count, axis=1)
    )
    flat = problem
    width = np.repeat(_widths(unit)[:, None], count, axis=1)
    nominal, load, pressure = width, np.zeros((len(unit.panes), count)), np.full(width.shape, conditions.pressure)
    for _ in range(ROUNDS):
        problem = flat.with_gaps(width=width, pressure=pressure) if unit.gaps else flat
        faces = solve(problem, throw=True).T
        temperature = 0.5 * (faces[1:-1:2] + faces[2::2])
        pressure, load = _equilibrium(unit, conditions, plates, temperature, wind=wind, snow=snow)
        bent = plates.compliance * load
        moved = np.maximum(nominal + bent[1:] - bent[:-1], NARROWEST * nominal)
        settled = np.abs(moved - width).max(initial=0.0) <= SETTLED
        width = moved
        if settled:
            break
    else:
        raise SolveError(f"{name}: gas pressure, bowing and heat balance did not come to agree")
    duration = "wind" if wind else "snow" if snow else "climatic-season"
    over = pressure - conditions.pressure
    _, lasting = _lasting(unit, conditions, plates)
    design = factored_load(load, lasting, variable=factors.variable, lasting=factors.permanent)
    return _states(unit, plates, load, design, over, name, duration, _u(problem), _u(flat))


def _u(problem: Problem) -> list[float | None]:
    """U of every state, None where it is not defined."""
    unlit = dark(problem)
    values = u_values(unlit, solve(unlit, throw=True))
    return [float(u) if np.isfinite(u) else None for u in values]


def _equilibrium(
    unit: Unit, conditions: Conditions, plates: _Plates, temperature: Array, *, wind: float = 0.0, snow: float = 0.0
) -> tuple[Array, Array]:
    """Gap pressures (n - 1, V) and pane loads (n, V) [Pa]."""
    width = np.repeat(_widths(unit)[:, None], len(plates.transfers), axis=1)
    own = _weight(unit)
    own[0] += snow_across(unit, snow)
    closed = partial(
        gap_pressures,
        width=width,
        compliance=plates.compliance,
        indoor=conditions.pressure,
        own_load=np.repeat(own[:, None], len(plates.transfers), axis=1),
        fixed=np.repeat(_evacuated(unit)[:, None], len(plates.transfers), axis=1),
    )
    amount = unit.sealed.pressure * temperature / unit.sealed.temperature
    if unit.sealed.vented:
        amount = np.full(temperature.shape, conditions.pressure)
        open_ = np.repeat(~_evacuated(unit)[:, None], len(plates.transfers), axis=1)
        found = closed(amount=amount, outdoor=conditions.pressure, vented=open_)
        if not wind:
            return found.pressure, found.load
        amount = found.pressure * (1.0 + np.diff(found.deflection, axis=0) / width)
    found = closed(amount=amount, outdoor=conditions.pressure + wind)
    return found.pressure, found.load


def _states(
    unit: Unit,
    plates: _Plates,
    load: Array,
    design: Array,
    over: Array,
    name: str,
    duration: str,
    U: list[float | None] | None,
    U_flat: list[float | None] | None,
) -> list[Bowed]:
    """What the panes and gaps do under loads as given, and the stress of their design values, (n, V) [Pa]."""
    mean = plates.compliance * load
    centre = plates.swell * mean
    bent = plates.swell * plates.compliance * np.abs(design)
    found = [
        Bowed(
            name=name,
            duration=duration,
            transfer=transfer,
            panes=tuple(
                PaneLoad(
                    load=float(load[k, v]),
                    centre=float(centre[k, v]),
                    mean=float(mean[k, v]),
                    stress=None if plates.pillared[k] else abs(float(design[k, v] * plates.stress[k, v])),
                    strength=None if plates.pillared[k] else permissible_stress(pane.treatment, duration),
                    linear=bool(bent[k, v] <= SMALL_DEFLECTION * plates.thickness[k, v]),
                )
                for k, pane in enumerate(unit.panes)
            ),
            gaps=tuple(
                _gap_state(unit, k, float(over[k, v]), centre[k + 1, v] - centre[k, v], mean[k + 1, v] - mean[k, v])
                for k in range(len(unit.gaps))
            ),
            U=U[v] if U else None,
            U_flat=U_flat[v] if U_flat else None,
        )
        for v, transfer in enumerate(plates.transfers)
    ]
    return [replace(b, U=None) if b.touching else b for b in found]


def _gap_state(unit: Unit, k: int, over: float, opens_centre: float, opens_mean: float) -> GapState:
    gap = unit.gaps[k]
    centre = gap.width + float(opens_centre)
    return GapState(
        overpressure=None if gap.evacuated else over,
        centre=centre,
        mean=gap.width + float(opens_mean),
        touching=centre <= 0.0,
    )


def _widths(unit: Unit) -> Array:
    return np.array([g.width for g in unit.gaps], float)


def _evacuated(unit: Unit) -> BoolArray:
    return np.array([g.evacuated for g in unit.gaps], bool)


def _weight(unit: Unit) -> Array:
    """Weight of every pane across it [Pa], positive towards the room; unknown density counts as glass."""
    masses = [sum(p.thickness * (p.density or DENSITY) for p in pane.plies) for pane in unit.panes]
    return np.array(masses) * GRAVITY * math.cos(unit.tilt)


def _heat(unit: Unit, conditions: Conditions, absorptance: Sequence[float] | None) -> Array:
    if conditions.absorbed is not None:
        return np.array(conditions.absorbed)
    if absorptance is None:
        return np.zeros(len(unit.panes))
    return conditions.sun * np.array(absorptance)


def _plates(unit: Unit) -> _Plates:
    short, long = sorted((unit.width, unit.height))
    shape = plate_coefficients(long / short)
    laminated = any(len(pane.plies) > 1 for pane in unit.panes)
    transfers = (0.0, 1.0) if laminated else (1.0,)
    thick, stress = np.empty((2, len(unit.panes), len(transfers)))
    for k, pane in enumerate(unit.panes):
        for v, transfer in enumerate(transfers):
            thick[k, v], ply = _effective(pane, transfer)
            stress[k, v] = bending_stress(float(shape.moment_short) * short**2, thickness=ply)
    compliance = float(shape.mean) * short**4 / flexural_rigidity(thick)
    return _Plates(compliance, float(shape.centre / shape.mean), stress, thick, transfers, pillared(unit))


def pillared(unit: Unit) -> tuple[bool, ...]:
    """Which panes stand beside an evacuated gap."""
    empty = [False, *(gap.evacuated for gap in unit.gaps), False]
    return tuple(a or b for a, b in pairwise(empty))


def _effective(pane: Pane, transfer: float) -> tuple[float, float]:
    """Effective thickness for deflection, and the least one for stress [m]."""
    glass = [p.thickness for p in pane.plies if p.kind != "interlayer"]
    between = [p.thickness for p in pane.plies if p.kind == "interlayer"]
    deflection, stress = effective_thickness(glass, between, transfer=transfer)
    return float(deflection), float(stress.min())
