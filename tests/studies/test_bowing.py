"""Sealed units bow and load their panes: limits in closed form, the standards' sums, published orders of magnitude."""

import math
from dataclasses import replace

import pytest

from igu.laws.plate import flexural_rigidity, plate_coefficients
from igu.model.catalogue import catalogue
from igu.model.strength import permissible_stress
from igu.model.unit import Gap, Pillars, Sealed, Unit, Vacuum
from igu.studies.bowing import bow, permanent_load, snow_across, standard_loads
from tests.studies.build import ARGON, SUMMER, WINTER, double, pane, tilted

SMALL = {"width": 0.5, "height": 0.5}


def test_standard_loads_of_a_small_square_unit():
    """At 16 kPa: phi 0.228, 3.65 kPa, 2.35 mm at the centre [computed, E 70 GPa, nu 0.23]."""
    summer, winter = standard_loads(replace(double(), **SMALL))
    assert summer.gaps[0].overpressure == pytest.approx(3650.0, abs=15.0)
    assert 1e3 * summer.panes[1].centre == pytest.approx(2.35, abs=0.01)
    assert winter.gaps[0].overpressure == pytest.approx(-summer.gaps[0].overpressure)
    assert winter.panes[0].centre == pytest.approx(-summer.panes[0].centre)


def test_a_metre_square_unit_is_soft():
    """phi 0.0181: 0.29 kPa, 2.99 mm [computed]."""
    summer, _ = standard_loads(replace(double(), width=1.0, height=1.0))
    assert summer.gaps[0].overpressure == pytest.approx(290.0, abs=5.0)
    assert 1e3 * summer.panes[1].centre == pytest.approx(2.99, abs=0.03)


def test_a_unit_at_its_sealing_state_stands_flat():
    unit = replace(double(), sealed=Sealed(temperature=290.0))
    still = replace(WINTER, outdoor_air=290.0, indoor_air=290.0)
    state = bow(unit, still, None)[0]
    assert [p.load for p in state.panes] == pytest.approx([0.0, 0.0], abs=1e-6)
    assert state.gaps[0].mean == pytest.approx(0.016, abs=1e-12)


def test_cold_draws_the_panes_together_and_altitude_pushes_them_apart():
    cold = bow(double(), WINTER, None)[0]
    assert cold.gaps[0].centre < cold.gaps[0].mean < 0.016
    assert cold.panes[0].centre > 0.0 > cold.panes[1].centre
    high = replace(WINTER, outdoor_air=293.15, indoor_air=293.15, pressure=79495.0)
    assert bow(double(), high, None)[0].gaps[0].mean > 0.016


def test_the_gas_law_closes_over_the_bowed_gap():
    state = bow(replace(double(), **SMALL), WINTER, None)[0]
    pressure = 101325.0 + state.gaps[0].overpressure
    temperature = pressure * state.gaps[0].mean / (101325.0 * 0.016) * 293.15
    assert 255.15 < temperature < 294.15
    shape = plate_coefficients(1.0)
    expected = state.panes[0].load * shape.mean * 0.5**4 / flexural_rigidity(0.004)
    assert state.panes[0].mean == pytest.approx(float(expected), rel=1e-9)


def test_a_rigid_small_unit_keeps_its_volume():
    unit = Unit((pane(0.019), pane(0.019)), (Gap(0.016, ARGON),), width=0.15, height=0.15)
    state = bow(unit, WINTER, None)[0]
    assert state.gaps[0].mean == pytest.approx(0.016, rel=2e-3)
    assert state.gaps[0].overpressure < -5000.0


RESPONDEK = 5.0
"""Per cent. Respondek, Materials 13 (2020) 286, abstract [seen]: triple units in mild winter up to +5 %, double with
gaps of 10-14 mm about +4.6 % of heat loss by bowing; they need a raised barometric pressure."""


@pytest.mark.parametrize("panes", [2, 3])
def test_bowing_raises_the_heat_loss_by_some_per_cent_under_high_pressure(panes):
    soft = pane(coating_in="soft-double")
    unit = Unit((soft,) * (panes - 1) + (pane(),), (Gap(0.012, ARGON),) * (panes - 1), width=1.0, height=1.5)
    mild = replace(WINTER, outdoor_air=273.15, pressure=104000.0)
    state = bow(unit, mild, None)[0]
    rise = 100.0 * (state.U / state.U_flat - 1.0)
    assert 0.2 * RESPONDEK < rise < 2.0 * RESPONDEK


def test_bowing_changes_little_in_wide_gaps():
    unit = double(pane(coating_in="soft-double"), width=0.024)
    state = bow(unit, replace(WINTER, outdoor_air=273.15), None)[0]
    assert abs(state.U / state.U_flat - 1.0) < 0.02


def test_the_sun_is_a_state_of_its_own():
    dark, lit = bow(double(), SUMMER, (0.3, 0.1))
    assert lit.gaps[0].overpressure > dark.gaps[0].overpressure


def test_wind_loads_the_unit_and_a_single_pane_alike():
    unit = Unit((pane(0.006),), (), width=1.0, height=1.0)
    state = bow(unit, WINTER, None, wind=1000.0)[0]
    assert state.panes[0].load == pytest.approx(1000.0)
    assert state.duration == "wind"
    both = bow(double(), WINTER, None, wind=1000.0)[0]
    calm = bow(double(), WINTER, None)[0]
    shared = sum(p.load for p in both.panes) - sum(p.load for p in calm.panes)
    assert shared == pytest.approx(1000.0, rel=1e-6)


def test_a_horizontal_pane_of_4_mm_weighs_98_pascal():
    """About 98 Pa per 4 mm [computed from 2500 kg/m3]."""
    unit = Unit((pane(),), (), width=1.0, height=1.0, tilt=0.0)
    assert permanent_load(unit, WINTER)[0].panes[0].load == pytest.approx(98.0, abs=0.1)
    assert permanent_load(tilted(unit, 180.0), WINTER)[0].panes[0].load == pytest.approx(-98.0, abs=0.1)


ROOF = replace(double(), tilt=math.radians(30.0), width=1.0, height=1.4)


def test_snow_acts_across_the_slope_of_the_outdoor_pane_and_is_shared_through_the_gap():
    """1 kPa on the plan: 1000 cos² 30° = 750 Pa across, weight besides 2500 x 9.80665 x 0.008 cos 30° = 169.86 Pa."""
    plain, (snowed,) = bow(ROOF, WINTER, None)[0], bow(ROOF, WINTER, None, snow=1000.0)
    assert snowed.duration == "snow"
    assert sum(p.load for p in snowed.panes) == pytest.approx(750.0 + 169.86, abs=0.02)
    assert sum(p.load for p in plain.panes) == pytest.approx(169.86, abs=0.02)
    assert snowed.gaps[0].overpressure > plain.gaps[0].overpressure + 200.0
    assert snowed.panes[0].strength == pytest.approx(10.99e6, abs=0.02e6)  # 0.4395 x 45 / 1.8, arithmetic


@pytest.mark.parametrize("degrees", [90.0, 120.0, 180.0])
def test_no_snow_lies_on_a_pane_that_is_vertical_or_looks_down(degrees):
    assert snow_across(tilted(double(), degrees), 2000.0) == 0.0


def test_snow_and_sun_are_not_taken_together():
    assert len(bow(ROOF, SUMMER, (0.3, 0.1), snow=500.0)) == 1


def test_the_standards_loads_carry_the_weight_of_a_tilted_unit():
    for state in standard_loads(ROOF):
        assert sum(p.load for p in state.panes) == pytest.approx(169.86, abs=0.02)
    lower, upper = (standard_loads(unit)[0].panes[1].stress for unit in (replace(ROOF, tilt=math.pi / 2), ROOF))
    assert upper > lower


def test_a_gust_on_a_vented_unit_is_shared_and_lasting_snow_is_not():
    """The tube lets the gap breathe in weeks, not in seconds: the gust is shared nearly half and half."""
    vented = replace(ROOF, sealed=Sealed(vented=True))
    weight = 169.86 / 2.0
    (snowed,) = bow(vented, WINTER, None, snow=1000.0)
    assert [p.load for p in snowed.panes] == pytest.approx([750.0 + weight, weight], abs=0.02)
    (gust,) = bow(vented, WINTER, None, wind=1000.0)
    assert [p.load for p in gust.panes] == pytest.approx([500.0 + weight] * 2, rel=0.05)


def test_a_vented_unit_keeps_the_pressure_of_the_site():
    unit = replace(double(), sealed=Sealed(vented=True))
    state = bow(unit, replace(WINTER, pressure=80000.0), None)[0]
    assert state.gaps[0].overpressure == pytest.approx(0.0, abs=1e-6)
    assert pytest.approx(state.U_flat, rel=1e-9) == state.U


def test_an_evacuated_gap_does_not_bow_apart():
    gap = Gap(0.0002, vacuum=Vacuum(0.1), pillars=Pillars(0.02, 0.00025, 20.0))
    unit = Unit((pane(), pane(), pane()), (gap, Gap(0.012, ARGON)), width=0.8, height=0.8)
    state = bow(unit, WINTER, None)[0]
    assert state.panes[0].centre == pytest.approx(state.panes[1].centre, rel=1e-6)
    assert state.gaps[0].overpressure is None


def test_a_laminated_pane_lies_between_layered_and_monolithic():
    library = catalogue()
    plies = [
        library.glass_ply("clear", 0.004),
        library.interlayer_ply("pvb", 0.00076),
        library.glass_ply("clear", 0.004),
    ]
    layered, whole = bow(replace(double(inner=library.pane(plies)), **SMALL), WINTER, None)
    assert (layered.transfer, whole.transfer) == (0.0, 1.0)
    assert abs(layered.panes[1].centre) > abs(whole.panes[1].centre)
    assert abs(layered.gaps[0].overpressure) < abs(whole.gaps[0].overpressure)


def test_annealed_glass_is_never_allowed_its_characteristic_strength_for_long():
    """Some 7 MPa for lasting loads, not 45 (EN 16612 form [memory])."""
    lasting = permissible_stress("annealed", "permanent")
    assert 6.5e6 < lasting < 8.0e6
    assert permissible_stress("annealed", "wind") < 26e6
    assert permissible_stress("toughened", "permanent") > 5.0 * lasting


def test_deflections_beyond_half_the_thickness_are_marked():
    state = standard_loads(double())[0]
    assert not all(p.linear for p in state.panes)
