"""Water vapour: saturation over water and ice, dew and frost points, when a face starts to fog."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike, BoolArray
from igu.laws.constants import CELSIUS

SATURATION_RANGE = (173.15, 373.15)
"""Temperatures the saturation formulas hold for [K]; over ice up to 273.16 K. Sonntag 1990."""

_WATER = (-6096.9385, 21.2409642, -2.711193e-2, 1.673952e-5, 2.433502)
_ICE = (-6024.5282, 29.32707, 1.0613868e-2, -1.3198825e-5, -0.49382577)


def saturation_over_water(T: ArrayLike) -> Array:
    """Saturation pressure of water vapour over (also supercooled) water [Pa], T [K].

        ln e = a/T + b + c T + d T^2 + f ln T

    Validity: `SATURATION_RANGE`. Moist air saturates some 0.4 % higher (enhancement factor), which a ratio of two
    saturation pressures cancels.
    Source: D. Sonntag, Z. Meteorol. 40 (1990) 340 [memory].
    """
    return np.exp(_log_saturation(T, _WATER))


def saturation_over_ice(T: ArrayLike) -> Array:
    """Saturation pressure of water vapour over ice [Pa], T [K]. Source: D. Sonntag, Z. Meteorol. 40 (1990) 340."""
    return np.exp(_log_saturation(T, _ICE))


def _log_saturation(T: ArrayLike, terms: tuple[float, ...]) -> Array:
    t = np.asarray(T, float)
    a, b, c, d, f = terms
    return np.asarray(a / t + b + c * t + d * t * t + f * np.log(t))


def dew_point(vapour_pressure: ArrayLike) -> Array:
    """Temperature below which this vapour pressure [Pa] condenses, to supercooled water below 0 degrees [K]."""
    return _saturation_temperature(vapour_pressure, _WATER)


def frost_point(vapour_pressure: ArrayLike) -> Array:
    """Temperature at which this vapour pressure [Pa] saturates over ice [K]; up to 273.16 K."""
    return _saturation_temperature(vapour_pressure, _ICE)


def _saturation_temperature(vapour_pressure: ArrayLike, terms: tuple[float, ...]) -> Array:
    """Inverse of the saturation formula by Newton in 1/T, where its logarithm is nearly straight: four steps
    reach round-off over the whole range."""
    target = np.log(np.asarray(vapour_pressure, float))
    a, _, c, d, f = terms
    t = np.full(np.shape(target), 280.0)
    for _ in range(6):
        slope = -a / t**2 + c + 2.0 * d * t + f / t
        error = _log_saturation(t, terms) - target
        t = 1.0 / (1.0 / t + error / (slope * t * t))
    return np.asarray(t)


def fogging_humidity(face: ArrayLike, *, air: ArrayLike) -> Array:
    """Relative humidity of the air, over water, at which a face starts to fog or, below 0 degrees Celsius, to frost
    [-].

        phi = e_s(T_face) / e_w(T_air),   e_s over water from 0 degrees up, over ice below

    Parameters
    ----------
    face : array_like    Temperature of the face [K].
    air : array_like     Temperature of the air the humidity is meant for [K].

    Returns
    -------
    ndarray    Above 1 where the face is warmer than the air.
    """
    t = np.asarray(face, float)
    at_face = np.where(t < CELSIUS, saturation_over_ice(t), saturation_over_water(t))
    return np.asarray(at_face / saturation_over_water(air))


def fogging_temperature(humidity: ArrayLike, *, air: ArrayLike) -> tuple[Array, BoolArray]:
    """Face temperature at which air of this relative humidity (over water) starts to fog a face [K], and whether it is
    a frost point (below 0 degrees Celsius, over ice).

    Parameters
    ----------
    humidity : array_like    Relative humidity over water [-], above 0.
    air : array_like         Temperature of the air [K].
    """
    vapour = np.asarray(humidity, float) * saturation_over_water(air)
    dew = dew_point(vapour)
    frost = np.asarray(dew < CELSIUS)
    return np.where(frost, np.minimum(frost_point(vapour), CELSIUS), dew), frost
