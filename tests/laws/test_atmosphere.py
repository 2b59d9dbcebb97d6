"""The standard atmosphere against its own table and an independent library."""

from __future__ import annotations

import numpy as np
import pytest

from igu.laws.atmosphere import ALTITUDE_RANGE, standard_altitude, standard_pressure


def test_an_independent_library() -> None:
    # fluids has the U.S. Standard Atmosphere 1976, the same troposphere; it asks for the geometric altitude
    from fluids.atmosphere import ATMOSPHERE_1976

    levels = [ATMOSPHERE_1976(z) for z in np.linspace(-1500.0, 11000.0, 26)]
    np.testing.assert_allclose(standard_pressure([x.H for x in levels]), [x.P for x in levels], rtol=3e-6)


def test_geometric_altitude_would_be_little_else() -> None:
    # 5 km: 540.48 hPa by geometric altitude, U.S. Standard Atmosphere 1976 (memory)
    assert standard_pressure(5000.0) == pytest.approx(54048.0, rel=6e-4)


def test_the_pressure_falls_by_the_weight_of_the_air() -> None:
    # 12.0 Pa/m at the ground (DIN 18008-1 has 0.012 kPa/m): rho g = 1.225 x 9.80665 = 12.013 Pa/m, ISO 2533 (memory)
    assert standard_pressure(-0.5) - standard_pressure(0.5) == pytest.approx(12.013, abs=1e-3)


def test_inverse() -> None:
    h = np.linspace(*ALTITUDE_RANGE, 53)
    np.testing.assert_allclose(standard_altitude(standard_pressure(h)), h, rtol=0, atol=1e-7)
    assert standard_altitude(101325.0) == 0.0
