"""Tolerances: spreads in closed form, shares of the variance by brute force, what was varied and what was not."""

from dataclasses import replace
from pathlib import Path
from statistics import NormalDist

import numpy as np
import pytest

from igu.model.case import read_case
from igu.model.study_tables import Tolerance
from igu.model.unit import Unit
from igu.ratings import en673
from igu.ratings.rate import rate
from igu.studies.tolerance import OPTICS, SEED, tolerances
from tests.studies.build import SOFT, SUMMER, WINTER, double, laminated, pane

ROOT = Path(__file__).parents[2]


@pytest.fixture(scope="module")
def spread():
    return tolerances(SOFT, Tolerance(samples=2048), cold=WINTER, sun=SUMMER)


def test_the_nominal_unit_is_the_unit(spread):
    nominal = {s.quantity: s.nominal for s in spread.spreads}
    assert nominal["U_en673_W_m2K"] == pytest.approx(en673.u_value(SOFT), rel=1e-12)
    assert nominal["U_W_m2K"] == pytest.approx(rate(SOFT, WINTER).U, rel=1e-8)
    assert nominal["solar_factor_g"] == pytest.approx(rate(SOFT, SUMMER).solar.g, rel=1e-8)


def test_spreads_are_ordered_and_shares_explain_nearly_all(spread):
    for s in spread.spreads:
        assert s.low < s.median < s.high
        assert 0.95 < sum(s.shares.values()) < 1.02
    assert spread.seed == SEED


def test_one_uniform_tolerance_alone_spreads_as_a_uniform_does():
    """U is nearly linear in a small emissivity tolerance: 5 and 95 per cent lie at 0.9 of the half-width."""
    only = Tolerance(thickness=0.0, gap=0.0, fill=(0.0, 0.0), emissivity=0.002, conductivity=0.0, samples=1024)
    (u, *_) = tolerances(SOFT, only, cold=None, sun=None).spreads
    eps = SOFT.panes[0].emissivity_in
    ends = [en673.u_value(replace(SOFT, panes=(replace(SOFT.panes[0], emissivity_in=eps + d), SOFT.panes[1])))
            for d in (-0.0018, 0.0018)]  # fmt: skip
    assert [u.low, u.high] == pytest.approx(ends, abs=2e-5)
    assert u.shares == {"emissivity": pytest.approx(1.0, abs=1e-3)}


def test_a_value_on_the_edge_of_its_rounding_holds_in_half_of_the_samples():
    only = Tolerance(thickness=0.0, gap=0.0, fill=(0.0, 0.0), emissivity=0.01, conductivity=0.0, samples=4096)
    eps = SOFT.panes[0].emissivity_in
    low, high = 0.03, 0.2
    for _ in range(60):
        eps = 0.5 * (low + high)
        at = replace(SOFT, panes=(replace(SOFT.panes[0], emissivity_in=eps), SOFT.panes[1]))
        low, high = (eps, high) if en673.u_value(at) < 1.35 - 1e-7 else (low, eps)
    unit = replace(SOFT, panes=(replace(SOFT.panes[0], emissivity_in=low), SOFT.panes[1]))
    found = tolerances(unit, only, cold=None, sun=None)
    assert found.declared == 1.3
    assert found.holds == pytest.approx(0.5, abs=0.02)


def _en673_by_hand(share, gap, emissivity, outer, inner, conductivity):
    """U of a bare EN 673 double: gas table at 10 degC, 15 K, Nu = 0.035 (Gr Pr)^0.38, films 25 and 7.7."""
    air, argon = np.array([1.232, 1.761e-5, 2.496e-2, 1008.0]), np.array([1.699, 2.164e-5, 1.684e-2, 519.0])
    density, viscosity, k, heat = np.multiply.outer(air, 1.0 - share) + np.multiply.outer(argon, share)
    rayleigh = 9.81 * gap**3 * 15.0 * density**2 * heat / (283.0 * viscosity * k)
    across = np.maximum(1.0, 0.035 * rayleigh**0.38) * k / gap
    across += 4.0 * 5.67e-8 * 283.0**3 / (1.0 / emissivity + 1.0 / 0.837 - 1.0)
    return 1.0 / (1.0 / 25.0 + 1.0 / 7.7 + 1.0 / across + (outer + inner) / conductivity)


def test_the_variance_shares_are_sobols_total_effects():
    """Brute force: one kind drawn anew with all others frozen (Saltelli's pick and freeze), on a formula of its own."""
    unit = double(pane(0.006, coating_in="soft-single"), pane(0.004))
    found = tolerances(unit, None, cold=None, sun=None).spreads[0]
    rng = np.random.default_rng(11)
    first, second = rng.uniform(-1.0, 1.0, (2, 6, 100_000))

    def model(draw):
        share = 0.9 + np.where(draw[0] < 0.0, 0.05, 0.10) * draw[0]
        films = 0.06 + 0.01 * draw[2]
        return _en673_by_hand(share, 0.016 + 0.0005 * draw[1], films, 0.006 + 0.0002 * draw[3],
                              0.004 + 0.0002 * draw[4], 1.0 + 0.02 * draw[5])  # fmt: skip

    values = model(first)
    assert np.percentile(values, [5, 50, 95]) == pytest.approx([found.low, found.median, found.high], abs=1e-3)
    for row, kind in ((0, "fill"), (1, "gap"), (2, "emissivity")):
        frozen = first.copy()
        frozen[row] = second[row]
        total = 0.5 * ((values - model(frozen)) ** 2).mean() / values.var()
        assert found.shares[kind] == pytest.approx(total, abs=0.01)


def test_the_same_seed_gives_the_same_samples_and_another_does_not():
    first, again, other = (
        tolerances(SOFT, Tolerance(samples=256, seed=seed), cold=None, sun=None).spreads[0].low for seed in (1, 1, 2)
    )
    assert first == again != other


def test_evacuated_and_single_units_have_tolerances_too():
    case = read_case(ROOT / "cases/vacuum-unit.toml")
    assert tolerances(case.unit, None, cold=case.conditions[0], sun=None).spreads
    single = read_case(ROOT / "cases/retrofit-single.toml")
    assert tolerances(single.unit, None, cold=single.conditions[0], sun=None).declared is not None


def test_what_was_not_varied_is_not_listed_as_assumed():
    case = read_case(ROOT / "cases/vacuum-unit.toml")
    said = " ".join(tolerances(case.unit, Tolerance(samples=64), cold=case.conditions[0], sun=None).assumed)
    assert "gap width ±" not in said
    assert "evacuated gap are not varied" in said


def test_a_tolerance_on_a_computed_film_is_said_not_to_act():
    said = tolerances(SOFT, Tolerance(samples=64, indoor_film=0.5), cold=WINTER, sun=None).assumed
    assert any("indoor film is computed" in text for text in said)


def test_what_the_sun_figures_leave_out_is_said_where_there_are_any(spread):
    assert OPTICS in spread.assumed
    assert OPTICS not in tolerances(SOFT, Tolerance(samples=64), cold=WINTER, sun=None).assumed


NOTHING = Tolerance(thickness=0.0, gap=0.0, fill=(0.0, 0.0), emissivity=0.0, conductivity=0.0, samples=4096)
FILMS = 1.0 / 25.0 + 1.0 / 7.7
"""EN 673:2011, 5.4 [memory]: resistance of the films of an uncoated pane [m2 K/W]."""


def resistances(unit, tolerance):
    """5 % and 95 % of the resistance of a unit less its films [m2 K/W]: the greater U is the lesser resistance."""
    (u,) = tolerances(unit, tolerance, cold=None, sun=None).spreads
    return [1.0 / u.high - FILMS, 1.0 / u.low - FILMS]


CUT = NormalDist().cdf(-2.0)
"""Share of a normal distribution beyond two standard deviations on one side."""


@pytest.mark.parametrize(
    ("distribution", "reach"),
    [("uniform", 0.9), ("normal", -0.5 * NormalDist().inv_cdf(CUT + 0.05 * (1.0 - 2.0 * CUT)))],
)
def test_a_thickness_is_spread_as_its_distribution_says(distribution, reach):
    """5 and 95 % in closed form, of 6 ± 0.5 mm of 1 W/(m K): at 0.9 of the tolerance if uniform; if normal with half of
    the tolerance for its deviation, cut at two of them, at 0.736. The resistance of a pane follows its thickness."""
    single = Unit((pane(0.006),), ())
    found = resistances(single, replace(NOTHING, thickness=0.0005, distribution=distribution))
    assert found == pytest.approx([0.006 - reach * 0.0005, 0.006 + reach * 0.0005], abs=2e-6)


def test_a_conductivity_alone_divides_the_resistance():
    """12 mm of 1 W/(m K), ± 30 %: 5 and 95 % of a uniform one are 1.27 and 0.73 W/(m K)."""
    found = resistances(Unit((pane(0.012),), ()), replace(NOTHING, conductivity=0.3))
    assert found == pytest.approx([0.012 / 1.27, 0.012 / 0.73], rel=2e-3)


def test_every_glass_ply_of_a_laminated_pane_has_its_tolerance():
    """The sum of two uniform deviations is triangular: 5 and 95 % lie at 2 (1 - sqrt 0.1) = 1.3675 of the tolerance of
    one, either way round; the interlayer, 0.76 mm of 0.2 W/(m K), is as given."""
    for plies in ((("clear", 0.004), ("green", 0.006)), (("green", 0.006), ("clear", 0.004))):
        low, high = resistances(Unit((laminated(*plies),), ()), replace(NOTHING, thickness=0.0005))
        assert 0.5 * (low + high) == pytest.approx(0.010 + 0.00076 / 0.2, abs=2e-5)
        assert 0.5 * (high - low) == pytest.approx(2.0 * (1.0 - np.sqrt(0.1)) * 0.0005, rel=0.01)


def test_turning_a_laminated_pane_keeps_the_spread_of_its_light():
    """Clear beside green, optically joined: by Beer's law the order is nothing to the transmittance."""
    green_in, green_out = (
        Unit((laminated(*plies),), ())
        for plies in ((("clear", 0.004), ("green", 0.004)), (("green", 0.004), ("clear", 0.004)))
    )
    one, other = (
        {s.quantity: s for s in tolerances(u, Tolerance(samples=4096), cold=None, sun=SUMMER).spreads}
        for u in (green_in, green_out)
    )
    for name in ("solar_factor_g", "light_transmittance"):
        wide = [s[name].high - s[name].low for s in (one, other)]
        assert wide[0] == pytest.approx(wide[1], rel=0.05)
