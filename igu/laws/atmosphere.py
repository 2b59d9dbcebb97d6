"""Pressure of the standard atmosphere, and the altitude that has it."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike
from igu.laws.constants import ATMOSPHERE, GRAVITY

_T0, _LAPSE, _AIR = 288.15, 0.0065, 287.05287

_EXPONENT = GRAVITY / (_AIR * _LAPSE)

ALTITUDE_RANGE = (-2000.0, 11000.0)
"""Altitudes the formula holds for [m]. ISO 2533:1975, troposphere."""


def standard_pressure(altitude: ArrayLike) -> Array:
    """Station pressure of the standard atmosphere [Pa] at an altitude [m].

        p = p0 (1 - L h / T0)^(g / (R L)),   exponent 5.25588

    Validity: `ALTITUDE_RANGE`; geopotential altitude (4 m less than the geometric at 5 km: 0.05 % of pressure).
    Source: ISO 2533:1975.
    """
    return np.asarray(ATMOSPHERE * (1.0 - _LAPSE * np.asarray(altitude, float) / _T0) ** _EXPONENT)


def standard_altitude(pressure: ArrayLike) -> Array:
    """Altitude [m] at which the standard atmosphere has this station pressure [Pa]; inverse of `standard_pressure`.

    A station's own altitude differs from it by its weather: about 8.3 m per hectopascal at sea level.
    """
    return np.asarray(_T0 / _LAPSE * (1.0 - (np.asarray(pressure, float) / ATMOSPHERE) ** (1.0 / _EXPONENT)))
