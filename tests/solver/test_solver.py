"""The heat balance: a computed example, derivatives, identities, steps of the gap law, robustness, effort."""

from dataclasses import replace
from itertools import product

import numpy as np
import pytest
from scipy.optimize import brentq, root

from igu.errors import ModelError, SolveError
from igu.laws.convection import LOW, MIDDLE, PUBLISHED, STEP, STEP_WIDTH
from igu.laws.longwave import emissive_power
from igu.model.unit import Gap, Pane, Pillars, Ply, Unit, Vacuum
from igu.ratings.iso15099 import u_of
from igu.solver.balance import evaluate, full_jacobian, jacobian, residual, spread
from igu.solver.chain import Bands, solve_chain
from igu.solver.newton import ACCEPTED, solve
from igu.solver.outcome import Outcome
from igu.solver.problem import assemble
from igu.solver.readout import breakdown, inward_fractions
from tests.solver.build import (
    ARGON,
    FILMS_GIVEN,
    WINTER,
    contract_unit,
    pane,
    problem_near_step,
    random_problem,
    sheet,
)


def test_the_contracts_computed_example():
    """6 mm, emissivity 0.05 on face 2, 16 mm argon 90 %, 4 mm; 1.5 m high; -18/21 C, 26 W/m2K [computed]."""
    problem = assemble([contract_unit()], [WINTER])
    solution = solve(problem, throw=True)
    parts = breakdown(problem, solution)
    assert u_of(problem)[0] == pytest.approx(1.4630, abs=5e-5)
    assert solution.T[:, 0] - 273.15 == pytest.approx([-16.05, -15.70, 12.45, 12.68], abs=0.0051)
    assert solution.flux_to_room[0] == pytest.approx(-57.06, abs=0.0051)
    assert parts.rayleigh[0, 0] == pytest.approx(20249.0, abs=2.0)
    assert parts.nusselt[0, 0] == pytest.approx(1.697, abs=0.00051)
    assert parts.convection_coefficient[:, 0] == pytest.approx([26.0, 1.801, 2.229], abs=0.00051)
    assert parts.radiation_coefficient[:, 0] == pytest.approx([3.19, 0.225, 4.631], abs=0.00051)
    assert inward_fractions(problem, solution)[0, 0] == pytest.approx(0.0704, abs=5e-5)


def test_the_examples_second_fraction_is_the_difference_for_one_watt():
    """The example prints 0.7464, the one-sided difference for 1 W/m2; the tangent, which is meant, is 0.7466."""
    problem = assemble([contract_unit()], [WINTER])
    base, more = solve(problem), solve(problem.with_absorbed([0.0, 1.0]))
    assert more.flux_to_room[0] - base.flux_to_room[0] == pytest.approx(0.7464, abs=5e-5)
    little = [solve(problem.with_absorbed([0.0, d])).flux_to_room[0] for d in (0.01, -0.01)]
    assert inward_fractions(problem, base)[1, 0] == pytest.approx((little[0] - little[1]) / 0.02, abs=1e-6)


@pytest.mark.parametrize("sheets", [False, True])
@pytest.mark.parametrize("n", [1, 2, 3, 5])
def test_the_jacobian_is_the_derivative_of_the_residual(n, sheets):
    problem = random_problem(n, 40, seed=n, sheets=sheets)
    balance = spread(problem)
    rng = np.random.default_rng(n)
    T = rng.uniform(250.0, 330.0, (2 * n, 40))
    state = evaluate(T, balance)
    held = np.zeros((n - 1, 40), int) + 1
    state = evaluate(T, balance, held)
    exact = full_jacobian(T, state, balance)
    step = 1e-4
    for j in range(2 * n):
        moved = np.zeros_like(T)
        moved[j] = step
        ends = [residual(evaluate(T + sign * moved, balance, held), balance) for sign in (1, -1)]
        assert pytest.approx((ends[0] - ends[1]) / (2 * step), rel=2e-5, abs=2e-4) == exact[:, :, j].T
    if balance.gains is None:
        assert jacobian(state, balance).dense() == pytest.approx(exact)


def test_chain_elimination_solves_what_a_dense_solver_solves():
    rng = np.random.default_rng(0)
    bands = Bands(rng.uniform(0, 1, (6, 30)), rng.uniform(-4, -3, (6, 30)), rng.uniform(0, 1, (6, 30)))
    right = rng.normal(size=(6, 30))
    dense = np.linalg.solve(bands.dense(), right.T[..., None])[..., 0].T
    assert solve_chain(bands, right) == pytest.approx(dense)
    assert bands.transposed().dense() == pytest.approx(bands.dense().transpose(0, 2, 1))


@pytest.mark.parametrize("sheets", [False, True])
@pytest.mark.parametrize("n", [1, 2, 3])
def test_inward_fractions_are_what_a_little_more_heat_does(n, sheets):
    problem = random_problem(n, 60, seed=10 + n, sheets=sheets)
    base = solve(problem)
    fractions = inward_fractions(problem, base)
    little = 1e-3
    for i in range(n):
        ends = []
        for sign in (1.0, -1.0):
            heat = problem.absorbed.copy()
            heat[i] += sign * little
            ends.append(solve(replace(problem, absorbed=heat)))
        quiet = ~(base.on_step | ends[0].on_step | ends[1].on_step).any(axis=0)
        change = (ends[0].flux_to_room - ends[1].flux_to_room) / (2.0 * little)
        assert fractions[i][quiet] == pytest.approx(change[quiet], abs=5e-6)


def test_heat_in_is_heat_out():
    problem = random_problem(4, 200, seed=4, sheets=True)
    solution = solve(problem)
    parts = breakdown(problem, solution)
    gain = parts.flux[-1] - parts.flux[0]
    assert gain == pytest.approx(problem.absorbed.sum(axis=0), abs=1e-5)


def test_an_opaque_stack_seen_as_one_with_a_sheet_of_no_transmittance_is_the_same():
    unit = Unit((pane(), pane(inn=0.1), pane()), (Gap(0.012), Gap(0.012)))
    faint = Unit((pane(), replace(pane(inn=0.1), longwave_transmittance=1e-13), pane()), unit.gaps)
    one, other = (solve(assemble([u], [WINTER])).T for u in (unit, faint))
    assert one == pytest.approx(other, abs=1e-8)


def test_a_suspended_sheet_lies_between_opaque_and_absent():
    def u(middle):
        panes = (pane(), *([middle] if middle else []), pane())
        gaps = (Gap(0.02),) * (len(panes) - 1) if middle else (Gap(0.04),)
        return float(u_of(assemble([Unit(panes, gaps)], [WINTER]))[0])

    assert u(sheet(0.0, 0.5)) < u(sheet(0.3, 0.5)) < u(None)


def test_mirror_image():
    """Outdoors and indoors exchanged, films given, the tilt turned round: the same state read backwards."""
    fixed = replace(WINTER, indoor_convection=26.0, indoor_air=300.0)
    swapped = replace(fixed, outdoor_air=fixed.indoor_air, indoor_air=fixed.outdoor_air)
    for tilt in np.deg2rad([20.0, 65.0, 90.0, 130.0]):
        unit = Unit((pane(0.006, inn=0.1), pane(), pane(out=0.2)), (Gap(0.01, ARGON), Gap(0.02)), tilt=tilt)
        turned = Unit((pane(inn=0.2), pane(), pane(0.006, out=0.1)), unit.gaps[::-1], tilt=np.pi - tilt)
        one, other = solve(assemble([unit], [fixed])), solve(assemble([turned], [swapped]))
        assert one.T[:, 0] == pytest.approx(other.T[::-1, 0], abs=1e-7)
        assert one.flux_to_room == pytest.approx(-other.flux_to_room, abs=1e-6)


def test_nothing_flows_at_equal_temperatures():
    still = replace(WINTER, outdoor_air=290.0, indoor_air=290.0)
    for tilt in (0.0, 1.0, np.pi / 2, 2.5):
        solution = solve(assemble([replace(contract_unit(), tilt=tilt)], [still]))
        assert abs(solution.flux_to_room[0]) < 1e-8
        assert solution.T[:, 0] == pytest.approx(290.0, abs=1e-9)


def test_a_single_pane_in_closed_form():
    """Faces at the same radiant and air temperature, no radiation left: 1/U = 1/h + d/k + 1/h."""
    unit = Unit((pane(0.006, 1e-9, 1e-9),))
    fixed = replace(WINTER, indoor_convection=8.0)
    assert u_of(assemble([unit], [fixed]))[0] == pytest.approx(1.0 / (1 / 26.0 + 0.006 + 1 / 8.0), rel=1e-8)


def test_pure_conduction_in_a_narrow_gap():
    """3 mm of still air at the mean temperature, mirrors on both faces."""
    unit = Unit((pane(inn=1e-9), pane(out=1e-9)), (Gap(0.003),))
    problem = assemble([unit], [replace(WINTER, indoor_convection=8.0)])
    solution = solve(problem)
    mean = 0.5 * (solution.T[1, 0] + solution.T[2, 0])
    k = 2.873e-3 + 7.760e-5 * mean
    flux = k / 0.003 * (solution.T[1, 0] - solution.T[2, 0])
    assert solution.flux_to_room[0] == pytest.approx(flux, rel=1e-5)


def test_black_bodies_across_a_vacuum():
    """No gas, no pillars, black faces: sigma (T_a^4 - T_b^4)."""
    unit = Unit((pane(inn=1.0), pane(out=1.0)), (Gap(0.001, vacuum=Vacuum(0.0)),))
    solution = solve(assemble([unit], [WINTER]))
    expected = emissive_power(solution.T[1, 0]) - emissive_power(solution.T[2, 0])
    assert solution.flux_to_room[0] == pytest.approx(float(expected), rel=1e-9)


def test_better_insulation_lets_less_heat_through():
    u = [
        u_of(assemble([Unit((pane(inn=e), pane()), (Gap(0.016, ARGON),))], [WINTER]))[0] for e in (0.8, 0.4, 0.1, 0.02)
    ]
    assert np.all(np.diff(u) < 0.0)


def test_a_single_case_is_a_batch_of_one_and_blocks_do_not_matter():
    problem = random_problem(3, 300, seed=7, sheets=True)
    whole, small = solve(problem), solve(problem, block=17)
    assert pytest.approx(small.T, abs=1e-9) == whole.T
    for k in (0, 41, 299):
        assert solve(problem.columns(np.array([k]))).T[:, 0] == pytest.approx(whole.T[:, k], abs=1e-9)


def reduced(problem):
    """A double unit with given films and no long wave as one equation: what the gap carries less what the films and
    panes bring [W/m2], and the gap's Ra, both by the temperature difference across the gap."""
    balance = spread(problem)
    p, s = problem.panes, problem.surroundings
    total = float(s.outdoor_air[0] - s.indoor_air[0])
    panes = 1.0 / p.conductance[problem.pane_index[:, 0]]
    outer = 1.0 / s.outdoor_convection[0] + panes[0]
    rest = outer + panes[1] + 1.0 / s.indoor_convection[0]

    def state(difference):
        face = s.outdoor_air[0] - (total - difference) / rest * outer
        T = np.array([face, face, face - difference, face - difference])[:, None]
        return evaluate(T, balance)

    def misfit(difference):
        return state(difference).spaces[1, 0] - (total - difference) / rest

    return misfit, lambda difference: state(difference).gaps.rayleigh[0, 0]


def stepped_unit(width, tilt=np.pi / 2):
    """A double unit without long-wave exchange, films given."""
    return Unit((pane(0.006, 1e-12, 1e-12), pane(0.004, 1e-12, 1e-12)), (Gap(width),), height=3.0, tilt=tilt)


def widths_with(mark, lows, tilt=np.pi / 2):
    widths = np.linspace(*lows, 4000)
    problem = assemble([stepped_unit(w, tilt) for w in widths], [FILMS_GIVEN] * len(widths))
    solution = solve(problem)
    assert (solution.outcome == Outcome.SOLVED).all()
    return widths, problem, solution, getattr(solution, mark)[0]


def roots_within(problem, k, around, side):
    """Differences across the gap at which stack k is in balance, on one side of the Ra of a step, by bracketing."""
    misfit, rayleigh = reduced(problem.columns(np.array([k])))
    step = brentq(lambda d: rayleigh(d) - around, -60.0, -1e-3, xtol=1e-13)
    ends = (-1e-3, step * (1.0 - 1e-12)) if side == "below" else (step * (1.0 + 1e-12), -60.0)
    signs = [np.sign(misfit(d)) for d in ends]
    return [brentq(misfit, *ends, xtol=1e-13)] if signs[0] != signs[1] else []


def picks(marked):
    """A few stacks with the mark and the nearest ones without it."""
    at = np.flatnonzero(marked)
    return [*at[:: max(1, len(at) // 4)], at[0] - 1, at[-1] + 1]


@pytest.mark.parametrize("tilt", [75.0, 90.0, 120.0])
def test_a_stack_without_an_exact_state_ends_on_the_step(tilt):
    """Bracketing finds no root on either side for the marked stacks, and one for their neighbours."""
    _, problem, solution, on_step = widths_with("on_step", (0.018, 0.030), np.deg2rad(tilt))
    assert on_step.any()
    assert solution.imbalance[on_step].max() <= ACCEPTED
    ra = breakdown(problem, solution).rayleigh[0]
    assert np.abs(ra[on_step] / 5e4 - 1.0).max() <= STEP_WIDTH
    for k in picks(on_step):
        roots = [r for side in ("below", "above") for r in roots_within(problem, k, 5e4, side)]
        assert len(roots) == (0 if on_step[k] else 1)


@pytest.mark.parametrize("tilt", [75.0, 90.0, 120.0])
def test_two_states_the_lower_rayleigh_number_is_given_and_said(tilt):
    """Bracketing finds a root on either side for the marked stacks, the lower one given; their neighbours have one."""
    _, problem, solution, two = widths_with("two_states", (0.0110, 0.0150), np.deg2rad(tilt))
    assert two.any()
    assert breakdown(problem, solution).rayleigh[0][two].max() <= 1e4
    for k in picks(two):
        below, above = (roots_within(problem, k, 1e4, side) for side in ("below", "above"))
        assert (len(below), len(above)) in ([(1, 1)] if two[k] else [(1, 0), (0, 1)])
        assert solution.T[1, k] - solution.T[2, k] == pytest.approx((below or above)[0], abs=1e-6)


def states_beside_the_drop(problem, solution, k):
    """Every state of stack k with its gaps on either side of Ra = 1e4, by scipy.optimize.root from the solved one:
    which gaps stand beyond the step."""
    balance = spread(problem.columns(np.array([k])))
    found = []
    for beyond in product([False, True], repeat=problem.pane_count - 1):
        piece = np.where(np.array(beyond), MIDDLE, LOW)[:, None]
        end = root(
            lambda T, piece=piece: residual(evaluate(T[:, None], balance, piece), balance)[:, 0],
            solution.T[:, k],
            tol=1e-12,
        ).x[:, None]
        state = evaluate(end, balance, piece)
        if np.abs(residual(state, balance)).max() < 1e-6 and np.array_equal(state.gaps.rayleigh[:, 0] > 1e4, beyond):
            found.append(beyond)
    return np.array(found)


@pytest.mark.parametrize(("n", "count"), [(3, 120), (4, 80)])
def test_several_gaps_at_the_drop_every_second_state_is_said(n, count):
    problem = problem_near_step(n, 1e4, count, seed=n)
    solution = solve(problem)
    assert solution.solved.all()
    ra = breakdown(problem, solution).rayleigh
    several = 0
    for k in range(problem.size):
        states = states_beside_the_drop(problem, solution, k)
        several += len(states) > 1
        assert list(solution.two_states[:, k]) == list(states.any(axis=0) & ~states.all(axis=0))
        assert (ra[:, k] > 1e4).sum() == states.sum(axis=1).min()
    assert several > 10


@pytest.mark.parametrize("n", [3, 5, 8])
def test_several_gaps_at_the_rise_each_ends_on_the_published_law_or_on_its_step(n):
    problem = problem_near_step(n, 5e4, 200, seed=n)
    solution = solve(problem)
    assert solution.solved.all()
    assert (solution.on_step.sum(axis=0) > 1).any()
    ra = breakdown(problem, solution).rayleigh
    assert np.abs(ra[solution.on_step] / 5e4 - 1.0).max() <= STEP_WIDTH
    free = ~solution.on_step.any(axis=0)
    balance = spread(problem)
    published = residual(evaluate(solution.T, balance), balance)
    assert np.abs(published[:, free]).max() <= ACCEPTED
    piece = np.where(solution.on_step, STEP, PUBLISHED)
    held = residual(evaluate(solution.T, balance, piece), balance)
    assert np.abs(held).max() <= ACCEPTED


def test_rayleigh_numbers_rise_steadily_through_both_steps():
    for lows in ((0.0110, 0.0150), (0.018, 0.030)):
        _, problem, solution, _ = widths_with("on_step", lows)
        ra = breakdown(problem, solution).rayleigh[0]
        assert np.all(np.diff(ra) > -1e-6 * ra[1:])


@pytest.mark.parametrize("sheets", [False, True])
@pytest.mark.parametrize("n", range(1, 9))
def test_ten_thousand_random_stacks_end_in_a_known_outcome(n, sheets):
    problem = random_problem(n, 650, seed=100 + n, sheets=sheets)
    solution = solve(problem)
    assert set(np.unique(solution.outcome)) <= {int(o) for o in Outcome}
    assert np.isfinite(solution.imbalance).all()
    assert solution.solved.all()
    assert solution.imbalance.max() <= ACCEPTED
    assert np.median(solution.iterations) <= 5
    assert solution.iterations.mean() <= 6
    assert np.quantile(solution.iterations, 0.99) <= 15


def test_all_the_sun_in_one_pane():
    """1200 W/m2 in one pane of eight: up to 840 K and hundreds of kelvin from the first guess."""
    problem = random_problem(8, 600, seed=20, sheets=False)
    heat = np.zeros((8, 600))
    heat[np.arange(600) % 8, np.arange(600)] = 1200.0
    solution = solve(replace(problem, absorbed=heat))
    assert solution.solved.all()
    assert solution.iterations.max() <= 15


@pytest.mark.parametrize("heat", [1e6, 1e9, 1e80, -1e9])
@pytest.mark.parametrize("sheets", [False, True])
@pytest.mark.parametrize("n", [1, 3, 8])
def test_one_poisoned_stack_does_not_take_the_others_down(n, sheets, heat):
    problem = random_problem(n, 50, seed=5, sheets=sheets)
    before = solve(problem)
    for lost in (0, 23, 49):
        poisoned = np.where(np.arange(50) == lost, heat, problem.absorbed)
        after = solve(replace(problem, absorbed=poisoned))
        assert after.outcome[lost] == Outcome.RUNAWAY
        others = np.arange(50) != lost
        assert after.T[:, others] == pytest.approx(before.T[:, others], abs=1e-9)
        assert np.isfinite(after.imbalance).all()


def test_an_unsolved_stack_is_raised_when_asked():
    problem = random_problem(2, 10, seed=5, sheets=False)
    poisoned = np.where(np.arange(10) == 7, 1e9, problem.absorbed)
    with pytest.raises(SolveError, match=r"1 of 10 stacks not solved; stack 7: runaway.*Check the absorbed heat"):
        solve(replace(problem, absorbed=poisoned), throw=True)


@pytest.mark.parametrize("outcome", list(Outcome))
def test_every_outcome_has_a_word_and_a_sentence(outcome):
    assert outcome.word == outcome.name.lower()
    assert outcome.advice.endswith(".")


def test_batches_of_different_pane_counts_or_gas_properties_are_refused():
    with pytest.raises(ModelError, match="same number of panes"):
        assemble([contract_unit(), Unit((pane(),))], [WINTER, WINTER])
    with pytest.raises(ModelError, match="gas properties"):
        assemble([contract_unit()] * 2, [WINTER, replace(WINTER, gas_properties="reference")])


def test_the_outdoor_face_falls_below_the_air_under_a_cold_sky():
    clear = replace(WINTER, outdoor_air=278.15, outdoor_convection=6.0, sky=258.15, ground=277.15)
    solution = solve(assemble([replace(contract_unit(), tilt=np.deg2rad(30.0))], [clear]))
    assert solution.T[0, 0] < 278.15


def test_thin_air_convects_less():
    unit = replace(contract_unit(), gaps=(Gap(0.02, (("air", 1.0),)),))
    problem = assemble([unit, unit], [WINTER, replace(WINTER, pressure=6e4)])
    assert breakdown(problem, solve(problem)).nusselt[0, 1] < breakdown(problem, solve(problem)).nusselt[0, 0]


def test_pillars_between_unlike_glasses_meet_the_spreading_in_either():
    """1/(4 k a) in each glass and the pillar itself, one after the other, on p^2 (docs/equations.md, eq. 11)."""
    glasses = (Pane((Ply("clear", 0.004, 1.0),), 0.837, 0.837), Pane((Ply("other", 0.004, 0.4),), 0.837, 0.837))
    gap = Gap(0.0002, vacuum=Vacuum(0.0), pillars=Pillars(0.02, 0.00025, 20.0))
    resistance = 1 / (4 * 1.0 * 0.00025) + 1 / (4 * 0.4 * 0.00025) + 0.0002 / (20.0 * np.pi * 0.00025**2)
    found = spread(assemble([Unit(glasses, (gap,))], [WINTER])).pillar
    assert 1.0 / float(found[0, 0]) == pytest.approx(0.02**2 * resistance, rel=1e-12)
