"""EN 410 / ISO 9050: the secondary factor by the formulas as printed, limits, what carries it."""

from __future__ import annotations

import numpy as np
import pytest

from igu.errors import ModelError
from igu.model.makeups import MakeUps
from igu.model.unit import Gap, Unit, Vacuum
from igu.ratings import en410, en673
from igu.ratings.rate import rate
from tests.ratings.build import ARGON, EN410, double, pane
from tests.validation import build

N = 50


def fractions(resistance: np.ndarray, conductance: np.ndarray, emissivity: np.ndarray) -> np.ndarray:
    return en410.inward_fractions(pane_resistance=resistance, gap_conductance=conductance, room_emissivity=emissivity)


def random_stacks(n: int) -> tuple[np.ndarray, np.ndarray, np.ndarray, np.ndarray]:
    """Pane resistances, gap conductances, room emissivities and absorptances of N stacks."""
    rng = np.random.default_rng(n)
    resistance, conductance = rng.uniform(0.002, 0.02, (n, N)), rng.uniform(0.8, 8.0, (n - 1, N))
    return resistance, conductance, rng.uniform(0.05, 0.9, N), rng.uniform(0.01, 0.3, (n, N))


def test_the_internal_coefficient_at_its_printed_points() -> None:
    """3.6 + 4.4 eps/0.837: 8.0 uncoated, 3.6 for a mirror; not EN 673's 7.7."""
    assert en410.internal_coefficient([0.837, 0.0]) == pytest.approx([8.0, 3.6], rel=1e-12)


def test_one_pane_as_printed() -> None:
    """q_i = a h_i/(h_e + h_i); the glass has no resistance in it."""
    resistance, conductance, emissivity, a = random_stacks(1)
    h_i = 3.6 + 4.4 * emissivity / 0.837
    assert a * fractions(resistance, conductance, emissivity) == pytest.approx(a * h_i / (23.0 + h_i), rel=1e-12)


def test_two_panes_as_printed() -> None:
    """q_i = [(a1 + a2)/h_e + a2/L] / [1/h_i + 1/h_e + 1/L], L from outer to inner face of the whole unit."""
    resistance, conductance, emissivity, (a_1, a_2) = (parts := random_stacks(2))
    h_i, between = 3.6 + 4.4 * emissivity / 0.837, resistance.sum(axis=0) + 1.0 / conductance[0]
    printed = ((a_1 + a_2) / 23.0 + a_2 * between) / (1.0 / h_i + 1.0 / 23.0 + between)
    assert (fractions(resistance, conductance, emissivity) * parts[3]).sum(axis=0) == pytest.approx(printed, rel=1e-12)


def test_three_panes_as_printed() -> None:
    """q_i = [a3/L23 + (a3 + a2)/L12 + (a3 + a2 + a1)/h_e] / [1/h_i + 1/h_e + 1/L12 + 1/L23], L to pane 2's centre."""
    resistance, conductance, emissivity, (a_1, a_2, a_3) = (parts := random_stacks(3))
    h_i = 3.6 + 4.4 * emissivity / 0.837
    first = resistance[0] + 0.5 * resistance[1] + 1.0 / conductance[0]
    second = 0.5 * resistance[1] + resistance[2] + 1.0 / conductance[1]
    top = a_3 * second + (a_3 + a_2) * first + (a_3 + a_2 + a_1) / 23.0
    printed = top / (1.0 / h_i + 1.0 / 23.0 + first + second)
    assert (fractions(resistance, conductance, emissivity) * parts[3]).sum(axis=0) == pytest.approx(printed, rel=1e-12)


@pytest.mark.parametrize("n", [1, 2, 3, 5, 8])
def test_the_further_in_a_pane_stands_the_more_it_passes(n: int) -> None:
    resistance, conductance, emissivity, _ = random_stacks(n)
    found = fractions(resistance, conductance, emissivity)
    assert np.all((found > 0.0) & (found < 1.0))
    assert np.all(np.diff(found, axis=0) > 0.0)


def test_a_perfect_gap_keeps_the_outer_panes_heat_out_and_the_inner_panes_in() -> None:
    found = fractions(np.full((2, 1), 0.004), np.array([[1e-9]]), np.array([0.837]))[:, 0]
    assert found == pytest.approx([0.0, 1.0], abs=1e-7)


def test_four_panes_are_a_chain_of_nodes() -> None:
    """Against a network solved as a linear system: nodes at the outer face, the centres and the room face."""
    resistance, conductance, emissivity, a = (part[..., 0] for part in random_stacks(4))
    own = resistance * np.array([1.0, 0.5, 0.5, 1.0])
    links = np.concatenate([[23.0], 1.0 / (own[:-1] + own[1:] + 1.0 / conductance), [3.6 + 4.4 * emissivity / 0.837]])
    network = np.diag(links[:-1] + links[1:]) - np.diag(links[1:-1], 1) - np.diag(links[1:-1], -1)
    warmer = np.linalg.solve(network, a)
    found = fractions(resistance[:, None], conductance[:, None], emissivity[None])[:, 0]
    assert float(found @ a) == pytest.approx(links[-1] * warmer[-1], rel=1e-12)


def test_whole_units_take_their_gaps_from_en_673() -> None:
    unit = build.double(16.0, build.ARGON, 0.05)
    gap = en673.gap_conductances(en673.reference_stacks(MakeUps.of([unit])))
    expected = fractions(np.full((2, 1), 0.004), gap, np.array([0.837]))
    assert en410.makeup_inward_fractions(MakeUps.of([unit])) == pytest.approx(expected, rel=1e-12)


@pytest.mark.parametrize(
    "unit", [Unit((pane(),)), double(), double(pane(coating_in="soft-single"))], ids=["single", "double", "low-e"]
)
def test_g_is_what_is_transmitted_and_what_flows_in(unit: Unit) -> None:
    result = rate(unit, EN410)
    solar = result.solar
    assert solar is not None
    inward = [p.inward_fraction for p in result.panes]
    assert solar.q_i == pytest.approx(np.dot(inward, solar.absorptance), rel=1e-12)
    assert solar.g == pytest.approx(solar.transmittance + solar.q_i, rel=1e-12)
    assert solar.transmittance < solar.g < 1.0 - solar.reflectance_out


def test_a_coat_moved_to_face_3_gains_by_the_inner_pane() -> None:
    units = (double(pane(coating_in="soft-single")), double(pane(), pane(coating_out="soft-single")))
    outer, inner = (rate(unit, EN410).solar for unit in units)
    assert inner.transmittance == pytest.approx(outer.transmittance, rel=1e-9)
    assert inner.g > outer.g + 0.01


def test_an_evacuated_gap_is_not_covered() -> None:
    unit = Unit((pane(), pane()), (Gap(0.0002, ARGON, vacuum=Vacuum(0.1)),))
    with pytest.raises(ModelError, match="evacuated"):
        rate(unit, EN410)
