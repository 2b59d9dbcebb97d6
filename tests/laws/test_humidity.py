"""Saturation, dew and frost points against steam tables, CoolProp and psychrolib."""

from __future__ import annotations

import numpy as np
import pytest

from igu.arrays import Array
from igu.laws import humidity

ZERO = 273.15


def test_water_and_ice_meet_at_the_triple_point() -> None:
    # 611.657 Pa at 273.16 K: Guildner, Johnson & Jones 1976 (memory)
    water, ice = humidity.saturation_over_water(273.16), humidity.saturation_over_ice(273.16)
    np.testing.assert_allclose([water, ice], 611.657, rtol=2e-6)


def test_over_water_to_the_reference_equation_of_state() -> None:
    from CoolProp.CoolProp import PropsSI

    t = np.linspace(0.02, 60.0, 61) + ZERO
    expected = [PropsSI("P", "T", x, "Q", 0, "Water") for x in t]
    np.testing.assert_allclose(humidity.saturation_over_water(t), expected, rtol=1e-4)


def test_over_water_and_ice_to_hyland_and_wexler() -> None:
    # psychrolib has Hyland & Wexler 1983: water above the triple point, ice below; two fits, 0.1 % apart at -60 degC
    import psychrolib

    psychrolib.SetUnitSystem(psychrolib.SI)
    warm, cold = np.linspace(0.1, 60.0, 61), np.linspace(-60.0, -0.1, 61)
    np.testing.assert_allclose(
        humidity.saturation_over_water(warm + ZERO), [psychrolib.GetSatVapPres(t) for t in warm], rtol=4e-4
    )
    np.testing.assert_allclose(
        humidity.saturation_over_ice(cold + ZERO), [psychrolib.GetSatVapPres(t) for t in cold], rtol=1e-3
    )


def test_ice_holds_back_its_vapour_more_than_water() -> None:
    t = np.linspace(-60.0, 0.0, 61) + ZERO
    assert np.all(humidity.saturation_over_ice(t) < humidity.saturation_over_water(t))


def test_slope_is_the_latent_heat() -> None:
    # Clausius-Clapeyron, d ln e/dT = L/(R_v T^2): sublimation 2834.5 J/g at -10 degC, evaporation 2453.5 J/g at 20 degC
    # (handbooks, memory); the vapour is ideal to 0.1 %
    for law, t, latent in (
        (humidity.saturation_over_ice, -10.0, 2.8345e6),
        (humidity.saturation_over_water, 20, 2.4535e6),
    ):
        low, high = np.log(law(np.array([t - 0.01, t + 0.01]) + ZERO))
        assert (high - low) / 0.02 * 461.52 * (t + ZERO) ** 2 == pytest.approx(latent, rel=2e-3)


def test_points_are_the_inverse() -> None:
    t = np.linspace(*humidity.SATURATION_RANGE, 401)
    np.testing.assert_allclose(humidity.dew_point(humidity.saturation_over_water(t)), t, rtol=0, atol=1e-9)
    cold = t[t < 273.16]
    np.testing.assert_allclose(humidity.frost_point(humidity.saturation_over_ice(cold)), cold, rtol=0, atol=1e-9)


@pytest.mark.parametrize("celsius", [15.0, 20.0, 26.0, 35.0])
@pytest.mark.parametrize("share", [0.1, 0.3, 0.5, 0.7, 0.95])
def test_dew_and_frost_points_of_rooms_to_two_libraries(celsius: float, share: float) -> None:
    # CoolProp counts the enhancement factor, 1.0041 at 5 degC but 1.0045 at 35 degC: up to 4e-4 of the vapour, at 6.5 %
    # a kelvin 6 mK; psychrolib leaves it out, but has the older saturation formula: 3 mK
    import psychrolib
    from CoolProp.CoolProp import HAPropsSI

    psychrolib.SetUnitSystem(psychrolib.SI)
    point, frost = humidity.fogging_temperature(share, air=celsius + ZERO)
    assert point == pytest.approx(HAPropsSI("D", "T", celsius + ZERO, "P", 101325, "R", share), abs=7e-3)
    assert point - ZERO == pytest.approx(psychrolib.GetTDewPointFromRelHum(celsius, share), abs=4e-3)
    assert frost == (point < ZERO)


def enhancement(celsius: float) -> float:
    """Of moist air at 1013.25 hPa over water, below zero over ice: Buck Research CR-1A manual, 1996 (memory)."""
    base, pressed, bent = (2.2, 0.0383, 6.4e-6) if celsius < 0.0 else (7.2, 0.0320, 5.9e-6)
    return 1.0 + 1e-4 * (base + 1013.25 * (pressed + bent * celsius**2))


CLIMATE = [-40.0, -30.0, -20.0, -10.0, -1.0, 1.0, 10.0, 20.0, 30.0, 40.0, 50.0]


@pytest.mark.parametrize("celsius", CLIMATE)
def test_what_moist_air_has_more_is_the_enhancement_factor(celsius: float) -> None:
    # CoolProp's humid air saturates 0.41 to 0.59 % above the law. Buck's factor is good to 0.02 %; the rest is
    # Sonntag's vapour over ice, 0.065 % below Hyland & Wexler's at -40 degC
    from CoolProp.CoolProp import HAPropsSI

    t = celsius + ZERO
    law = humidity.saturation_over_ice if celsius < 0 else humidity.saturation_over_water
    moist = HAPropsSI("P_w", "T", t, "P", 101325, "R", 1)
    assert law(t) * enhancement(celsius) == pytest.approx(moist, rel=9e-4 if celsius < 0 else 3e-4)


@pytest.mark.parametrize("celsius", CLIMATE)
def test_dew_and_frost_points_of_vapour_to_two_libraries(celsius: float) -> None:
    # 0.03 % of vapour over water, 0.085 % over ice, are 6 to 8 mK; CoolProp's moist air condenses 0.05 to 0.10 K lower
    # for the same vapour, by the enhancement factor, which is taken out of the vapour here
    import psychrolib
    from CoolProp.CoolProp import HAPropsSI

    psychrolib.SetUnitSystem(psychrolib.SI)
    vapour = psychrolib.GetSatVapPres(celsius)
    point = humidity.frost_point if celsius < 0 else humidity.dew_point
    assert point(vapour) - ZERO == pytest.approx(celsius, abs=6e-3)
    moist = HAPropsSI("P_w", "T", 60.0 + ZERO, "P", 101325, "D", celsius + ZERO)
    assert point(moist / enhancement(celsius)) - ZERO == pytest.approx(celsius, abs=9e-3)


def test_humidity_below_zero_is_meant_over_water() -> None:
    # psychrolib means it over ice below zero: over water the same number is more vapour, by e_w/e_i = 5.0 % at -5 degC
    import psychrolib

    psychrolib.SetUnitSystem(psychrolib.SI)
    air = -5.0 + ZERO
    over_ice = 0.8 * humidity.saturation_over_water(air) / humidity.saturation_over_ice(air)
    assert over_ice / 0.8 == pytest.approx(1.050, abs=1e-3)
    point, frost = humidity.fogging_temperature(0.8, air=air)
    assert frost
    assert point - ZERO == pytest.approx(psychrolib.GetTDewPointFromRelHum(-5.0, float(over_ice)), abs=4e-3)


def test_supercooled_water_and_ice_to_murphy_and_koop() -> None:
    # Q. J. R. Meteorol. Soc. 131 (2005) 1539, eqs 7 and 10 (memory). The formulas part with the cold, since supercooled
    # water is hard to measure: bounds are what the two differ by at -30 degC
    t = np.linspace(-30.0, 0.0, 61) + ZERO
    water, ice = murphy_koop(t)
    np.testing.assert_allclose(humidity.saturation_over_water(t), water, rtol=2.5e-3)
    np.testing.assert_allclose(humidity.saturation_over_ice(t), ice, rtol=1.1e-3)


def murphy_koop(t: Array) -> tuple[Array, Array]:
    log = np.log(t)
    bulk = 54.842763 - 6763.22 / t - 4.210 * log + 0.000367 * t
    cold = np.tanh(0.0415 * (t - 218.8)) * (53.878 - 1331.22 / t - 9.44523 * log + 0.014025 * t)
    ice = 9.550426 - 5723.265 / t + 3.53068 * log - 0.00728332 * t
    return np.exp(bulk + cold), np.exp(ice)


def test_dew_point_and_frost_point_differ_by_up_to_three_kelvin() -> None:
    # the formulas of Murphy & Koop read backwards; 0.25 % of vapour is 0.03 K
    fine = np.linspace(-40.0, 0.0, 4001) + ZERO
    dew = np.array([-30.0, -20.0, -10.0]) + ZERO
    expected = np.interp(murphy_koop(dew)[0], murphy_koop(fine)[1], fine)
    frost = humidity.frost_point(humidity.saturation_over_water(dew))
    np.testing.assert_allclose(frost, expected, rtol=0, atol=0.03)
    assert frost[0] - dew[0] == pytest.approx(3.0, abs=0.15)


def test_humidity_limit_and_fogging_temperature_belong_together() -> None:
    face = np.linspace(-40.0, 25.0, 131) + ZERO
    limit = humidity.fogging_humidity(face, air=21.0 + ZERO)
    back, frost = humidity.fogging_temperature(limit, air=21.0 + ZERO)
    np.testing.assert_allclose(back, face, rtol=0, atol=1e-9)
    assert np.array_equal(frost, face < ZERO)


def test_limit_rises_with_the_face_and_has_no_gap_at_zero() -> None:
    face = np.linspace(-20.0, 20.0, 4001) + ZERO
    limit = humidity.fogging_humidity(face, air=20.0 + ZERO)
    assert np.all(np.diff(limit) > 0.0)
    assert limit[-1] == pytest.approx(1.0, rel=1e-14)


def test_vapour_between_ice_and_water_at_zero_freezes_at_zero() -> None:
    between = 0.5 * (humidity.saturation_over_ice(ZERO) + humidity.saturation_over_water(ZERO))
    point, frost = humidity.fogging_temperature(between / humidity.saturation_over_water(290.0), air=290.0)
    assert frost
    assert point == ZERO
