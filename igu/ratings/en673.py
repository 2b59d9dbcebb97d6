"""U-value by EN 673: one fixed reference state, its own gas table and gap law."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from igu.arrays import Array, BoolArray, IntArray
from igu.errors import ModelError, SolveError, require
from igu.laws.constants import GRAVITY_EN673, STEFAN_BOLTZMANN_EN673
from igu.laws.convection import EN673_TILTS, gap_nusselt_en673, rayleigh_gap
from igu.laws.longwave import exchange_factor
from igu.model.gases import en673_properties
from igu.model.makeups import MakeUps, Part
from igu.model.unit import Gap, Pane, Unit
from igu.ratings.rounding import half_up

MEAN_TEMPERATURE = 283.0
"""Mean temperature of every gap [K], the standard's own figure (not 283.15)."""

GAP_DIFFERENCE = 15.0
"""Temperature difference shared over the gaps [K]."""

EXTERNAL = 25.0
"""External heat transfer coefficient [W/(m2 K)]."""

STANDARD_EMISSIVITY = 0.837
"""Emissivity of uncoated soda-lime glass in the internal coefficient [-]."""

NOTES = (
    "U by EN 673:2011: mean gas temperature 283 K, gas table row +10 °C, 15 K shared over the gaps, external "
    "coefficient 25, inner 3.6 + 4.1 ε/0.837 W/(m²K) [memory, confirmed by a published regulation's table]; declared "
    "to one decimal, a five up, in the vertical position.",
)

SETTLED = 1.0e-10
"""The shares of the temperature difference are iterated until none moves by more [K]."""


@dataclass(frozen=True)
class ReferenceStacks:
    """N stacks as EN 673 sees them. `pane_resistance` (N,) [m2 K/W] of all panes together; per gap (n - 1, N): `width`
    [m], `density` [kg/m3], `viscosity` [Pa s], `conductivity` [W/(m K)], `heat_capacity` [J/(kg K)], `exchange` [-];
    `room_emissivity` (N,) [-]; `factor`, `exponent` (N,) or (1,) of the gap law."""

    pane_resistance: Array
    width: Array
    density: Array
    viscosity: Array
    conductivity: Array
    heat_capacity: Array
    exchange: Array
    room_emissivity: Array
    factor: Array
    exponent: Array


def internal_coefficient(emissivity: Array) -> Array:
    """Internal heat transfer coefficient, 3.6 + 4.1 eps/0.837 [W/(m2 K)]. EN 673:2011, 5.4.3 [memory]."""
    return 3.6 + 4.1 * emissivity / STANDARD_EMISSIVITY


def u_values(stacks: ReferenceStacks) -> Array:
    """U-value of N stacks [W/(m2 K)], unrounded.

    Source: EN 673:2011, clauses 4-7; the temperature difference of several gaps is shared by iteration (7.3).
    """
    films = 1.0 / EXTERNAL + 1.0 / internal_coefficient(stacks.room_emissivity)
    gaps = 1.0 / gap_conductances(stacks)
    return np.asarray(1.0 / (films + stacks.pane_resistance + gaps.sum(axis=0)))


def gap_conductances(stacks: ReferenceStacks) -> Array:
    """Conductance of every gap, gas and radiation, at the reference state, (n - 1, N) [W/(m2 K)]."""
    count = len(stacks.width)
    if count == 0:
        return np.empty((0, stacks.pane_resistance.size))
    radiative = radiative_conductances(stacks)
    shares = np.full(np.broadcast_shapes(stacks.width.shape, radiative.shape), GAP_DIFFERENCE / count)
    for _ in range(200):
        conductance = _gas_conductance(stacks, shares) + radiative
        moved = GAP_DIFFERENCE / conductance / (1.0 / conductance).sum(axis=0)
        settled = np.abs(moved - shares).max() <= SETTLED
        shares = moved
        if settled:
            return conductance
    raise SolveError("EN 673: the temperature difference did not settle over the gaps")


def radiative_conductances(stacks: ReferenceStacks) -> Array:
    """Radiative part of every gap, 4 sigma T_m^3 F, (n - 1, N) [W/(m2 K)]. EN 673:2011, 5.2."""
    return np.asarray(4.0 * STEFAN_BOLTZMANN_EN673 * MEAN_TEMPERATURE**3 * stacks.exchange)


def _gas_conductance(stacks: ReferenceStacks, difference: Array) -> Array:
    rayleigh = rayleigh_gap(
        width=stacks.width,
        difference=difference,
        mean=MEAN_TEMPERATURE,
        density=stacks.density,
        viscosity=stacks.viscosity,
        conductivity=stacks.conductivity,
        heat_capacity=stacks.heat_capacity,
        gravity=GRAVITY_EN673,
    )
    nusselt = gap_nusselt_en673(rayleigh, factor=stacks.factor, exponent=stacks.exponent)
    return nusselt * stacks.conductivity / stacks.width


def excluded(unit: Unit) -> str | None:
    """Why EN 673 does not cover this unit, or None where it does."""
    try:
        _require_covered(MakeUps.of([unit]))
    except ModelError as error:
        return str(error)
    return None


def upright_u_values(makeups: MakeUps) -> Array:
    """U-value of make-ups in the vertical position, which declared values belong to [W/(m2 K)], unrounded, (N,); NaN
    where the standard does not cover one."""
    panes = np.array([not pane.is_sheet for pane in makeups.panes], bool)
    gaps = np.array([_is_covered(gap) for gap in makeups.gaps], bool)
    covered = np.asarray(panes[makeups.pane_index].all(axis=0) & gaps[makeups.gap_index].all(axis=0))
    chosen = makeups.columns(covered)
    chosen_panes, pane_index = _only(chosen.panes, panes, chosen.pane_index)
    chosen_gaps, gap_index = _only(chosen.gaps, gaps, chosen.gap_index)
    upright = MakeUps(chosen_panes, chosen_gaps, pane_index, gap_index, chosen.height, np.array([math.pi / 2.0]))
    found = np.full(makeups.size, np.nan)
    if covered.any():
        found[covered] = u_values(reference_stacks(upright))
    return found


def _is_covered(gap: Gap) -> bool:
    try:
        en673_properties(dict(gap.fill))
    except ModelError:
        return False
    return not gap.evacuated


def _only(parts: Sequence[Part], good: BoolArray, index: IntArray) -> tuple[tuple[Part, ...], IntArray]:
    """The good ones of these parts, and an index of good parts alone into them."""
    return tuple(part for part, kept in zip(parts, good, strict=True) if kept), (np.cumsum(good) - 1)[index]


def _require_covered(makeups: MakeUps) -> None:
    require(not any(g.evacuated for g in makeups.gaps), "EN 673 does not cover evacuated gaps")
    require(
        not any(p.is_sheet for p in makeups.panes),
        "EN 673 does not cover layers that let long-wave radiation pass",
    )
    for tilt in {_degrees(t) for t in makeups.tilt}:
        require(tilt in EN673_TILTS, f"EN 673 gives constants for 90, 45 and 0 degrees, not for {tilt:g}")
    for gap in makeups.gaps:
        en673_properties(dict(gap.fill))


def _degrees(tilt: float) -> float:
    return round(math.degrees(tilt), 9)


def reference_stacks(makeups: MakeUps) -> ReferenceStacks:
    """The EN 673 view of make-ups.

    Raises
    ------
    ModelError    A make-up the standard does not cover; the text says why.
    """
    _require_covered(makeups)
    pane, gap = makeups.pane_index, makeups.gap_index
    rows = np.array([_gas_row(g) for g in makeups.gaps], float).reshape(-1, 5).T[:, gap]
    resistance, out, inn = np.array([_pane_row(p) for p in makeups.panes], float).T
    laws = np.array([EN673_TILTS[round(_degrees(t))] for t in makeups.tilt], float).T
    return ReferenceStacks(
        pane_resistance=resistance[pane].sum(axis=0),
        width=rows[0],
        density=rows[1],
        viscosity=rows[2],
        conductivity=rows[3],
        heat_capacity=rows[4],
        exchange=exchange_factor(inn[pane[:-1]], out[pane[1:]]),
        room_emissivity=inn[pane[-1]],
        factor=laws[0],
        exponent=laws[1],
    )


def _gas_row(gap: Gap) -> tuple[float, ...]:
    return (gap.width, *en673_properties(dict(gap.fill)))


def _pane_row(pane: Pane) -> tuple[float, float, float]:
    return 1.0 / pane.conductance, pane.emissivity_out, pane.emissivity_in


def u_value(unit: Unit) -> float:
    """U-value of one unit by EN 673 [W/(m2 K)], unrounded."""
    return float(u_values(reference_stacks(MakeUps.of([unit])))[0])


def is_declared_case(unit: Unit) -> bool:
    """Whether the unit stands vertical, the position declared values belong to."""
    return _degrees(unit.tilt) == 90.0


def declared(value: float) -> float:
    """The declared U-value: one decimal, a five up."""
    return half_up(value, 1)
