"""Pressure of the standard atmosphere."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike
from igu.laws.constants import ATMOSPHERE, GRAVITY

_T0, _LAPSE, _AIR = 288.15, 0.0065, 287.05287

ALTITUDE_RANGE = (-2000.0, 11000.0)
"""Altitudes the formula holds for [m]. ISO 2533:1975, troposphere."""


def standard_pressure(altitude: ArrayLike) -> Array:
    """Station pressure of the standard atmosphere [Pa] at an altitude [m].

        p = p0 (1 - L h / T0)^(g / (R L)),   exponent 5.25588

    Validity: `ALTITUDE_RANGE`; geopotential altitude (differs from the geometric by 0.1 % at 5 km).
    Source: ISO 2533:1975.
    """
    return np.asarray(ATMOSPHERE * (1.0 - _LAPSE * np.asarray(altitude, float) / _T0) ** (GRAVITY / (_AIR * _LAPSE)))
