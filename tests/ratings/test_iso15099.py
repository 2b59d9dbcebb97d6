"""U by ISO 15099: the dark state, the secant, environmental temperatures, where U has no meaning."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from igu.laws.constants import STEFAN_BOLTZMANN
from igu.model.conditions import Conditions
from igu.model.unit import Gap, Unit, Vacuum
from igu.ratings.iso15099 import dark, u_of, u_values
from igu.solver.newton import solve
from igu.solver.outcome import Outcome
from igu.solver.problem import Problem, assemble
from igu.solver.readout import breakdown
from tests.validation.build import AIR, ARGON, double, pane, triple

WINTER = Conditions("winter", outdoor_air=255.15, indoor_air=294.15, outdoor_convection=26.0)
FIXED = replace(WINTER, indoor_convection=3.6)
SKY = replace(WINTER, outdoor_radiant=238.0, indoor_radiant=291.0)
UNIT = double(16.0, ARGON, 0.05)


def problem(*conditions: Conditions, unit: Unit = UNIT) -> Problem:
    return assemble([unit] * len(conditions), list(conditions))


def secant(a: float, b: float) -> float:
    """sigma (a^4 - b^4)/(a - b)."""
    return STEFAN_BOLTZMANN * (a**4 - b**4) / (a - b)


@pytest.mark.parametrize("conditions", [WINTER, FIXED, SKY], ids=["natural", "given", "radiant"])
def test_u_does_not_know_of_absorbed_heat(conditions: Conditions) -> None:
    unlit = problem(conditions)
    lit = unlit.with_absorbed([150.0, 40.0])
    assert u_of(lit)[0] == pytest.approx(u_of(unlit)[0], rel=1e-9)
    assert solve(lit).flux_to_room[0] > solve(unlit).flux_to_room[0] + 30.0
    assert np.all(dark(lit).absorbed == 0.0)


@pytest.mark.parametrize("unit", [Unit((pane(),)), UNIT, triple(12.0, AIR)], ids=["single", "double", "triple"])
def test_environmental_temperatures_by_hand_and_the_secant_over_them(unit: Unit) -> None:
    """T_ne = (h_c T_air + h_r T_rad)/(h_c + h_r) with h_r = eps sigma (T_rad^4 - T_s^4)/(T_rad - T_s)."""
    stack = problem(replace(SKY, indoor_convection=3.6), unit=unit)
    solution = solve(stack)
    outer, inner = float(solution.T[0, 0]), float(solution.T[-1, 0])
    h_out, h_in = 0.837 * secant(238.0, outer), 0.837 * secant(291.0, inner)
    out = (26.0 * 255.15 + h_out * 238.0) / (26.0 + h_out)
    room = (3.6 * 294.15 + h_in * 291.0) / (3.6 + h_in)
    parts = breakdown(stack, solution)
    assert parts.environment_out[0] == pytest.approx(out, abs=1e-9)
    assert parts.environment_in[0] == pytest.approx(room, abs=1e-9)
    flux = 26.0 * (255.15 - outer) + 0.837 * STEFAN_BOLTZMANN * (238.0**4 - outer**4)
    assert u_of(stack)[0] == pytest.approx(flux / (out - room), rel=1e-8)


def test_one_film_over_the_environmental_temperature_carries_the_whole_flux() -> None:
    stack = problem(SKY)
    solution = solve(stack)
    parts = breakdown(stack, solution)
    assert parts.radiation_coefficient is not None
    film = parts.convection_coefficient[-1] + parts.radiation_coefficient[-1]
    assert film * (solution.T[-1] - parts.environment_in) == pytest.approx(solution.flux_to_room, rel=1e-9)


def test_radiant_at_air_temperature_makes_the_environment_the_air() -> None:
    stack = problem(WINTER)
    parts = breakdown(stack, solve(stack))
    assert parts.environment_out[0] == pytest.approx(255.15, abs=1e-9)
    assert parts.environment_in[0] == pytest.approx(294.15, abs=1e-9)
    assert u_of(stack)[0] == pytest.approx(float(solve(stack).flux_to_room[0]) / (255.15 - 294.15), rel=1e-9)


def test_a_cold_sky_lowers_the_environment_not_only_the_flux() -> None:
    """U is the unit's: through a gap that only conducts, a sky 17 K colder draws some 4 % more heat and leaves U."""
    air, clear = (problem(c, unit=double(6.0, ARGON, 0.05)) for c in (FIXED, replace(FIXED, outdoor_radiant=238.0)))
    assert solve(clear).flux_to_room[0] / solve(air).flux_to_room[0] == pytest.approx(1.04, abs=0.01)
    assert u_of(clear)[0] == pytest.approx(u_of(air)[0], rel=5e-3)


def test_resistances_of_films_glass_and_gaps_add_to_the_inverse_of_u() -> None:
    unit = triple(12.0, ARGON, 0.05)
    stack = problem(SKY, unit=unit)
    parts = breakdown(stack, solve(stack))
    assert parts.radiation_coefficient is not None
    spaces = 1.0 / (parts.convection_coefficient + parts.radiation_coefficient)[:, 0]
    assert 1.0 / u_of(stack)[0] == pytest.approx(spaces.sum() + 0.012, rel=1e-8)


def test_a_linear_stack_has_one_u_whatever_the_temperatures() -> None:
    """A pane that radiates nothing between given films only conducts."""
    mirror = Unit((pane(0.006, 1e-12, 1e-12),))
    states = [replace(FIXED, outdoor_air=t) for t in (230.0, 270.0, 294.0, 320.0)]
    assert u_of(problem(*states, unit=mirror)) == pytest.approx([1.0 / (1 / 26.0 + 0.006 + 1 / 3.6)] * 4, rel=1e-7)


def test_summer_and_winter_have_the_same_sign() -> None:
    hot = replace(WINTER, outdoor_air=313.15)
    u = u_of(problem(WINTER, hot))
    assert np.all(u > 0.0)
    flux = solve(problem(WINTER, hot)).flux_to_room
    assert flux[0] < 0.0 < flux[1]


NEAR = [(0.999, True), (1.001, False), (-0.999, True), (-1.001, False), (0.0, True)]
"""Outdoor less indoor air [K], and whether U is left undefined with a computed film."""


@pytest.mark.parametrize(("difference", "undefined"), NEAR)
def test_with_a_computed_film_u_is_not_defined_within_a_kelvin(difference: float, undefined: bool) -> None:
    near = replace(WINTER, outdoor_air=294.15 + difference)
    assert np.isnan(u_of(problem(near))[0]) == undefined


def test_with_a_given_film_u_is_defined_down_to_equal_temperatures() -> None:
    """A narrow gap only conducts, so the limit is smooth; nothing at exactly equal temperatures."""
    narrow = double(6.0, ARGON, 0.05)
    states = [replace(FIXED, outdoor_air=294.15 + d) for d in (-0.5, 0.5, 1e-4, 0.0)]
    u = u_of(problem(*states, unit=narrow))
    assert u[:3] == pytest.approx([u[0]] * 3, rel=5e-3)
    assert np.isnan(u[3])


def test_environmental_not_air_temperatures_decide() -> None:
    """The same air on both sides, a cold sky: the environments differ by more than a kelvin, and U is defined."""
    level = replace(WINTER, outdoor_air=294.15)
    assert np.isnan(u_of(problem(level))[0])
    assert u_of(problem(replace(level, outdoor_radiant=250.0)))[0] > 0.0
    met = replace(WINTER, outdoor_air=293.15, outdoor_radiant=298.0)
    parts = breakdown(problem(met), solve(problem(met)))
    assert abs(float(parts.environment_out[0] - parts.environment_in[0])) < 1.0
    assert np.isnan(u_of(problem(met))[0])


def test_a_stack_that_did_not_close_has_no_u_and_leaves_the_others_theirs() -> None:
    stack = problem(WINTER, WINTER)
    solution = solve(stack)
    failed = next(outcome for outcome in Outcome if outcome is not Outcome.SOLVED)
    broken = replace(solution, outcome=np.array([Outcome.SOLVED, failed], solution.outcome.dtype))
    u = u_values(stack, broken)
    assert u[0] == pytest.approx(u_of(stack)[0], rel=1e-12)
    assert np.isnan(u[1])


def test_no_exchange_at_all_is_a_u_of_nothing() -> None:
    """Mirrors in the gap and no gas: what is left is what their emissivity of 1e-9 passes."""
    empty = Unit((pane(inn=1e-9), pane(out=1e-9)), (Gap(0.001, vacuum=Vacuum(0.0)),))
    assert 0.0 < u_of(problem(FIXED, unit=empty))[0] < 1e-7
