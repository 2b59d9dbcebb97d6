"""What no glass can beat: the most selective glass of a light transmittance, and a gap without long-wave exchange."""

import numpy as np
import pytest

from igu.model.optics import grid
from igu.ratings import en673
from igu.ratings.ideal import bounds, selectivity_bound
from igu.ratings.rate import rate
from tests.ratings.build import EN410, SOFT, double, pane


def test_the_selectivity_bound_is_reached_by_its_own_glass_and_beats_every_other():
    for light in (0.3, 0.6, 0.8):
        assert selectivity_bound(light) > 2.0
    assert selectivity_bound(1.0) < selectivity_bound(0.5) < selectivity_bound(0.1)
    g = grid()
    visible = g.solar[(g.wavelength > 380e-9) & (g.wavelength < 780e-9)].sum()
    assert selectivity_bound(1.0) == pytest.approx(1.0 / visible, rel=0.02)
    for coating in ("soft-single", "soft-double", "hard"):
        found = bounds(SOFT, rate(double(pane(coating_in=coating)), EN410).solar)
        assert found.selectivity < found.selectivity_bound


def test_no_long_wave_is_the_least_u():
    found = bounds(SOFT, rate(SOFT, EN410).solar)
    assert found.winter_U < en673.u_value(SOFT)


def test_the_ideal_winter_glass_leaves_the_gas_alone_by_hand():
    """EN 673:2011, clauses 5.3 and 7.2, table 1 at 10 degC (air, argon) [memory]: Nu = 0.035 (Gr Pr)^0.38, 15 K about
    283 K; films 1/25 and 1/7.7, glass 10 mm of 1 W/(m K). No radiation crosses the gap, whatever its faces."""
    density, viscosity, k, heat = 0.1 * np.array([1.232, 1.761e-5, 2.496e-2, 1008.0]) + 0.9 * np.array(
        [1.699, 2.164e-5, 1.684e-2, 519.0]
    )
    rayleigh = 9.81 * 0.016**3 * 15.0 * density**2 * heat / (283.0 * viscosity * k)
    gas = max(1.0, 0.035 * rayleigh**0.38) * k / 0.016
    expected = 1.0 / (1.0 / 25.0 + 1.0 / 7.7 + 0.010 + 1.0 / gas)
    for unit in (SOFT, double(pane(0.006))):
        assert bounds(unit, rate(unit, EN410).solar).winter_U == pytest.approx(expected, rel=1e-6)
