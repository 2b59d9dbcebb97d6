"""Sealed units bow and load their panes: limits in closed form, the standards' sums, published orders of magnitude."""

import math
from dataclasses import replace

import pytest

from igu.laws.plate import flexural_rigidity, plate_coefficients
from igu.model.catalogue import catalogue
from igu.model.strength import permissible_stress
from igu.model.study_tables import AS_GIVEN, Factors
from igu.model.unit import Gap, Pane, Pillars, Ply, Sealed, Unit, Vacuum
from igu.ratings.rate import rate
from igu.studies.bowing import bow, permanent_load, snow_across, standard_loads
from tests.studies.build import ARGON, SUMMER, WINTER, double, laminated, pane, tilted

SMALL = {"width": 0.5, "height": 0.5}


def test_standard_loads_of_a_small_square_unit():
    """At 16 kPa: phi 0.228, 3.65 kPa, 2.35 mm at the centre [computed, E 70 GPa, nu 0.23]."""
    summer, winter = standard_loads(replace(double(), **SMALL))
    assert summer.gaps[0].overpressure == pytest.approx(3650.0, abs=15.0)
    assert 1e3 * summer.panes[1].centre == pytest.approx(2.35, abs=0.01)
    assert winter.gaps[0].overpressure == pytest.approx(-summer.gaps[0].overpressure)
    assert winter.panes[0].centre == pytest.approx(-summer.panes[0].centre)


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


EN1990 = Factors(variable=1.5, permanent=1.35)


def test_partial_factors_act_on_the_stress_alone():
    flat = Unit((pane(0.006),), (), width=1.0, height=1.0)
    plain, factored = (bow(flat, WINTER, None, wind=500.0, factors=f)[0].panes[0] for f in (AS_GIVEN, EN1990))
    assert factored.stress == pytest.approx(1.5 * plain.stress, rel=1e-12)
    assert (factored.load, factored.centre, factored.strength) == (plain.load, plain.centre, plain.strength)
    lying = replace(flat, tilt=0.0)
    own, more = (permanent_load(lying, WINTER, factors=f)[0].panes[0] for f in (AS_GIVEN, EN1990))
    assert more.stress == pytest.approx(1.35 * own.stress, rel=1e-12)


def test_weight_that_relieves_suction_is_not_raised():
    """6 mm of glass lying flat weigh 147.1 Pa: 1.5 x 1000 - 147.1 of the 852.9 Pa as given."""
    lying = Unit((pane(0.006),), (), width=1.0, height=1.0, tilt=0.0)
    plain, factored = (bow(lying, WINTER, None, wind=-1000.0, factors=f)[0].panes[0] for f in (AS_GIVEN, EN1990))
    assert factored.stress / plain.stress == pytest.approx((1500.0 - 147.1) / 852.9, rel=1e-4)


def test_the_altitude_of_the_standards_loads_is_their_permanent_part():
    """Summer: 8.8 kPa of climate and 7.2 kPa of altitude: (1.5 x 8.8 + 1.35 x 7.2) / 16."""
    plain, factored = (standard_loads(double(), factors=f)[0].panes[0] for f in (AS_GIVEN, EN1990))
    assert factored.stress / plain.stress == pytest.approx(22.92 / 16.0, rel=1e-12)


def test_the_sites_own_altitude_stands_for_that_of_the_standards():
    """340 Pa/K, less the rise of pressure, and 12 Pa/m: 8.8 kPa in summer and -12.5 kPa in winter besides altitude; the
    standards print -16 kPa for the -16.1 kPa of their winter [memory]."""
    fixed = [state.gaps[0].overpressure for state in standard_loads(double())]
    own = {h: [s.gaps[0].overpressure for s in standard_loads(double(), climb=h)] for h in (600.0, -300.0, 0.0, 1800.0)}
    assert own[600.0][0] == pytest.approx(fixed[0], rel=1e-12)
    assert own[-300.0][1] == pytest.approx(fixed[1] * 16.1 / 16.0, rel=1e-12)
    assert own[0.0] == pytest.approx([fixed[0] * 8.8 / 16.0, fixed[1] * 12.5 / 16.0], rel=1e-12)
    assert own[1800.0][1] == pytest.approx(fixed[0] * (21.6 - 12.5) / 16.0, rel=1e-12)


def test_pressure_and_suction_are_states_of_their_own():
    names = [bow(double(), WINTER, None, wind=wind)[0].name for wind in (800.0, -600.0)]
    assert names == ["winter, dark with wind 800 Pa", "winter, dark with suction 600 Pa"]


TALL = {"width": 1.0, "height": 2.0}
MOMENT = 0.1005
"""Of a plate of b/a = 2 spanning its short side, over q a², at the 0.23 of glass. At 0.3 it is 0.1017, that along the
long side 0.0464 (Timoshenko & Woinowsky-Krieger, Theory of Plates and Shells, table 8 [memory]): m + 0.3 n and
n + 0.3 m, so that m = 0.0965, n = 0.0175 and m + 0.23 n = 0.1005 [arithmetic]."""


def test_the_stress_of_a_single_pane_in_the_wind_by_hand():
    """1 kPa on 1 x 2 m of 10 mm: M = 0.1005 x 1000 x 1² N, 6 M / t² = 6.03 MPa of the 45 / 1.8 = 25 MPa of a gust on
    annealed glass (EN 16612 [memory])."""
    (state,) = bow(Unit((pane(0.010),), (), **TALL), WINTER, None, wind=1000.0)
    assert state.panes[0].stress == pytest.approx(6.0 * MOMENT * 1000.0 / 0.010**2, rel=1e-3)
    assert state.panes[0].strength == pytest.approx(25.0e6, rel=1e-12)
    assert state.panes[0].use == pytest.approx(6.03 / 25.0, rel=1e-3)


def test_the_ply_of_a_laminated_pane_that_is_stressed_most_is_taken():
    """4 + 0.76 + 8 mm. Layered: the plies share the moment by t³, and the 8 mm ply takes 512/576 of it. Monolithic:
    the axis lies 4.507 mm from the middle of the 4 mm ply, I = (64 + 512) / 12 + 4 · 4.507² + 8 · 2.253² = 169.86 mm³;
    the outside of that ply is 6.507 mm away, that of the other 6.253 mm [mechanics of a beam]."""
    unit = Unit((laminated(("clear", 0.004), ("clear", 0.008)),), (), **TALL)
    layered, whole = (state.panes[0].stress for state in bow(unit, WINTER, None, wind=1000.0))
    assert layered == pytest.approx(6.0 * MOMENT * 1000.0 * 512.0 / 576.0 / 0.008**2, rel=1e-3)
    assert whole == pytest.approx(MOMENT * 1000.0 * 6.5067e-3 / 169.86e-9, rel=1e-3)


def test_every_load_is_judged_by_the_strength_for_its_duration():
    """45 / 1.8 MPa times 0.663 t^(-1/16), t in hours, at most 1 (EN 16612 [memory]): 5 s, 720 h, 4380 h and 438 000 h;
    toughened glass has (120 - 45) / 1.2 = 62.5 MPa besides. Snow of a month is not a season, nor is the sun a gust."""
    panes = (replace(pane(), treatment="toughened"), pane())
    unit = replace(double(*panes), tilt=math.radians(30.0))
    found = {
        "wind": bow(unit, SUMMER, (0.2, 0.1), wind=500.0),
        "snow": bow(unit, WINTER, None, snow=500.0),
        "climatic-season": bow(unit, SUMMER, (0.2, 0.1)) + standard_loads(unit),
        "permanent": permanent_load(unit, WINTER),
    }
    annealed = {"wind": 25.0, "snow": 10.99, "climatic-season": 9.81, "permanent": 7.36}
    assert [len(states) for states in found.values()] == [2, 1, 4, 1]
    for duration, states in found.items():
        for state in states:
            assert state.duration == duration
            strengths = [p.strength / 1e6 for p in state.panes]
            assert strengths == pytest.approx([annealed[duration] + 62.5, annealed[duration]], abs=0.006)


def test_a_vented_unit_of_unequal_panes_shares_a_gust_by_their_stiffness():
    """4 mm over 8 mm lying, 1 m square: mean deflections k = 0.00170 a⁴ / D per load (Navier's series, as in the
    validation), D by t³. The gas gives way by 16 mm / 101 kPa besides: of the gust the inner pane takes
    k1 / (k1 + k2 + 16 mm / 101 kPa). Both keep their weight, 2500 x 9.80665 t, under which the gap took in air before
    the gust [mechanics]."""
    k1, k2 = (0.00170 / (70e9 * t**3 / (12.0 * (1.0 - 0.23**2))) for t in (0.004, 0.008))
    for gust in (1000.0, -1000.0):
        unit = double(pane(0.004), pane(0.008), width=0.016)
        lying = replace(unit, width=1.0, height=1.0, tilt=0.0, sealed=Sealed(vented=True))
        (state,) = bow(lying, WINTER, None, wind=gust)
        inner = gust * k1 / (k1 + k2 + 0.016 / 101325.0)
        weights = [2500.0 * 9.80665 * t for t in (0.004, 0.008)]
        expected = [weights[0] + gust - inner, weights[1] + inner]
        assert [p.load for p in state.panes] == pytest.approx(expected, abs=0.01 * abs(gust))


def test_a_pane_of_unknown_density_weighs_as_glass():
    unknown = Pane((Ply("own", 0.004, 1.0),), 0.837, 0.837)
    unit = Unit((unknown,), (), width=1.0, height=1.0, tilt=0.0)
    assert permanent_load(unit, WINTER)[0].panes[0].load == pytest.approx(2500.0 * 9.80665 * 0.004, rel=1e-6)


def test_where_panes_touch_there_is_no_u():
    """A thin pane lying over a stiff one would sag through its vented gap: the heat balance knows no contact."""
    unit = replace(double(pane(0.003), pane(0.019), width=0.006), width=2.5, height=2.5, tilt=0.0)
    (state,) = bow(replace(unit, sealed=Sealed(vented=True)), WINTER, None)
    assert state.gaps[0].touching
    assert state.gaps[0].mean < 0.0
    assert state.U is None
    assert state.U_flat == pytest.approx(rate(unit, WINTER).U, rel=1e-6)
    (apart,) = bow(replace(unit, sealed=Sealed(vented=True), tilt=math.pi / 2), WINTER, None)
    assert pytest.approx(rate(replace(unit, tilt=math.pi / 2), WINTER).U, rel=1e-6) == apart.U
