"""Ratings of one unit: definitions and limits of U, g, N_i, the budget, positions, what is left unknown."""

import math
from dataclasses import replace

import pytest

from igu.errors import ModelError
from igu.model.catalogue import catalogue
from igu.model.makeups import MakeUps
from igu.model.optics import BroadbandOptics
from igu.model.unit import Gap, Pane, Ply, Unit
from igu.ratings import en673
from igu.ratings.rate import rate
from tests.ratings.build import EN410, EN673, SOFT, SUMMER, UPRIGHT, WINTER, double, pane, tilted


def with_optics(*optics):
    panes = tuple(Pane((Ply("x", 0.004, 1.0),), 0.837, 0.837, optics=o, name=f"p{k}") for k, o in enumerate(optics))
    return Unit(panes, (Gap(0.016),) * (len(panes) - 1))


def test_u_does_not_know_of_the_sun():
    assert pytest.approx(rate(SOFT, replace(SUMMER, sun=0.0)).U, rel=1e-9) == rate(SOFT, SUMMER).U


def test_u_is_the_secant_over_environmental_temperatures():
    cold_sky = replace(WINTER, outdoor_radiant=240.0, indoor_radiant=290.0)
    r = rate(SOFT, cold_sky)
    assert pytest.approx(r.flux_to_room / (r.environment_out - r.environment_in), rel=1e-12) == r.U
    h_c, h_r = r.films.outdoor_convection, r.films.outdoor_radiation
    assert r.environment_out == pytest.approx((h_c * 255.15 + h_r * 240.0) / (h_c + h_r), rel=1e-9)
    assert 240.0 < r.environment_out < 255.15


def test_the_environmental_temperatures_are_those_of_the_dark_state_that_u_belongs_to():
    sunny = replace(SUMMER, outdoor_radiant=300.0, indoor_radiant=295.0)
    r = rate(SOFT, sunny)
    assert r.budget.temperature_difference == pytest.approx(r.U * (r.environment_out - r.environment_in), rel=1e-9)
    unknown = rate(with_optics(None, None), sunny)
    dark = rate(with_optics(None, None), replace(sunny, sun=0.0))
    assert unknown.flux_to_room is None
    assert pytest.approx(dark.U, rel=1e-9) == unknown.U
    assert unknown.environment_out == pytest.approx(dark.environment_out, rel=1e-9)


def test_u_is_not_defined_at_nearly_equal_temperatures_with_a_computed_film():
    near = replace(WINTER, outdoor_air=293.65)
    assert rate(SOFT, near).U is None
    assert rate(SOFT, replace(near, indoor_convection=3.6)).U is not None
    assert rate(SOFT, replace(near, outdoor_air=294.15, indoor_convection=3.6)).U is None


def test_given_heat_is_absorbed_and_counts_for_the_faces_only():
    heated = replace(WINTER, absorbed=(100.0, 0.0))
    r, dark = rate(SOFT, heated), rate(SOFT, WINTER)
    assert pytest.approx(dark.U, rel=1e-9) == r.U
    assert r.panes[0].face_out > dark.panes[0].face_out
    gained = r.flux_to_room - dark.flux_to_room
    assert gained == pytest.approx(100.0 * dark.panes[0].inward_fraction, rel=0.05)


def test_without_absorption_g_is_what_is_transmitted():
    clear = BroadbandOptics(0.8, 0.2, 0.2, 0.8, 0.2, 0.2)
    for conditions in (SUMMER, EN410):
        solar = rate(with_optics(clear, clear), conditions).solar
        assert solar.g == pytest.approx(solar.transmittance, abs=1e-9)


def test_an_opaque_black_outer_pane_passes_its_inward_fraction():
    black, clear = BroadbandOptics(0.0, 0.0, 0.0, 0.0, 0.0, 0.0), BroadbandOptics(0.8, 0.2, 0.2, 0.8, 0.2, 0.2)
    unit = with_optics(black, clear)
    r = rate(unit, EN410)
    assert r.solar.g == pytest.approx(r.panes[0].inward_fraction, rel=1e-12)
    faint = rate(unit, replace(SUMMER, sun=1.0))
    assert faint.solar.g == pytest.approx(faint.panes[0].inward_fraction, rel=1e-3)


def test_sun_transmitted_reflected_and_absorbed_sum_to_one():
    for degrees in (0.0, 50.0, 80.0):
        solar = rate(SOFT, replace(SUMMER, incidence=math.radians(degrees), diffuse_share=0.3)).solar
        assert solar.transmittance + solar.reflectance_out + sum(solar.absorptance) == pytest.approx(1.0, abs=1e-12)


def test_the_budget_is_made_of_secants():
    r = rate(SOFT, SUMMER)
    b = r.budget
    assert b.transmitted + b.absorbed_inward + b.temperature_difference == pytest.approx(b.net, abs=1e-9)
    assert b.absorbed_inward == pytest.approx(SUMMER.sun * r.solar.q_i)
    assert b.net == pytest.approx(b.transmitted + r.flux_to_room)


def test_standard_and_half_and_half_nodes_differ_by_little():
    """EN 410's nodes against ISO 15099's halves at the same films: some 4e-4 [computed]."""
    r = rate(double(pane(), pane()), EN410)
    shares = r.solar.absorptance
    gap = 1.0 / float(en673.gap_conductances(en673.reference_stacks(MakeUps.of([double(pane(), pane())])))[0, 0])
    outer, whole = 1 / 23 + 0.002, 1 / 23 + 1 / 8.0 + 0.008 + gap
    halves = (shares[0] * outer + shares[1] * (whole - 1 / 8.0 - 0.002)) / whole
    assert 1e-5 < abs(halves - r.solar.q_i) < 1e-3


def test_panes_unknown_in_the_sun_leave_solar_figures_out_and_keep_u():
    unit = double(replace(pane(), optics=None))
    r = rate(unit, SUMMER)
    assert r.solar is None
    assert r.panes[0].face_out is None
    assert r.flux_to_room is None
    assert pytest.approx(rate(double(), SUMMER).U, rel=1e-9) == r.U
    assert any("pane 1" in text for text in r.warnings)


def test_a_standard_rates_a_tilted_unit_in_the_position_its_conditions_give():
    """Not the built one: the vertical unit's own values, to the last digit, and another at 45 degrees."""
    built = tilted(SOFT, 30.0)
    for conditions in (EN673, EN410):
        with pytest.raises(ModelError, match="not for 30"):
            rate(built, conditions)
    found, vertical = rate(built, replace(EN673, tilt=UPRIGHT)), rate(SOFT, EN673)
    assert (found.U, found.U_declared, found.tilt) == (vertical.U, vertical.U_declared, UPRIGHT)
    assert rate(built, replace(EN410, tilt=UPRIGHT)).solar == rate(SOFT, EN410).solar
    leaning = rate(built, replace(EN673, tilt=math.radians(45.0)))
    assert rate(tilted(SOFT, 45.0), EN673).U == leaning.U > vertical.U
    assert leaning.U_declared is None


def test_only_a_standard_has_a_position_of_its_own():
    with pytest.raises(ModelError, match="position"):
        replace(WINTER, tilt=UPRIGHT)


def test_tinted_glass_and_its_coating_share_the_absorption():
    library = catalogue()
    unit = double(library.pane([library.glass_ply("green", 0.006)], coating_in="soft-double"))
    solar = rate(unit, SUMMER).solar
    coating = solar.coating_absorptance[0][1]
    assert 0.0 < coating < solar.absorptance[0]
    assert solar.coating_absorptance[1] == (None, None)


def test_a_balance_that_did_not_close_has_no_state():
    """Mirrors in still air of no film cannot shed 1500 W/m2 below 2000 K."""
    mirrors = replace(SOFT, panes=tuple(replace(p, emissivity_out=1e-3, emissivity_in=1e-3) for p in SOFT.panes))
    still = replace(WINTER, outdoor_convection=0.0, indoor_convection=0.0, absorbed=(1500.0, 1500.0))
    r = rate(mirrors, still)
    assert r.outcome == "runaway"
    assert r.flux_to_room is None
    assert r.budget is None
    assert r.fog == ()
    assert all(p.face_out is None for p in r.panes)
    assert any("not closed" in text for text in r.warnings)


def test_nothing_is_declared_under_a_set_that_was_departed_from():
    own, departed = rate(SOFT, EN673), rate(SOFT, replace(EN673, set_name="en-673", overridden=("outdoor_C",)))
    assert (own.U_declared, departed.U_declared) == (1.2, None)
    assert departed.U == own.U
