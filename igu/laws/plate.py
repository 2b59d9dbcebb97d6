"""Rectangular glass plates, simply supported on four sides, under uniform load: small deflections."""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from igu.arrays import Array, ArrayLike

POISSON = 0.23
"""Poisson's ratio of soda-lime glass [-]. EN 16612:2019 [memory]."""

YOUNG = 70.0e9
"""Young's modulus of soda-lime glass [Pa]. EN 16612:2019; GOST R 54170 [seen]."""

DENSITY = 2500.0
"""Density of soda-lime glass [kg/m3]. EN 572-1; GOST R 54170 [seen]."""

SMALL_DEFLECTION = 0.5
"""Centre deflection over thickness up to which the linear theory holds well; beyond it a plate is stiffer than the
theory, which reads its deflection too high. Timoshenko & Woinowsky-Krieger, ch. 13, has the large deflections."""

_ORDERS = np.arange(1, 16, 2)
"""Half waves along the short side; what is left out of the series is below exp(-17 pi/2), 3e-12, of a square plate."""

_SEVENTH = 127.0 / 128.0 * 1.0083492773819228
"""Sum of m^-7 over odd m: (1 - 2^-7) zeta(7)."""


class PlateCoefficients(NamedTuple):
    """Of a plate with sides a <= b under load q: centre and mean deflection over q a^4 / D, and the bending moments at
    the centre, spanning the short and the long side, over q a^2 [-]. Glass is judged by the first, the
    greater; the second is published beside it."""

    centre: Array
    mean: Array
    moment_short: Array
    moment_long: Array


def plate_coefficients(aspect: ArrayLike, *, poisson: float = POISSON) -> PlateCoefficients:
    """Deflections and moments of a simply supported plate under uniform load.

    Levy's single series with its slowly converging part summed in closed form (5/384, 1/8, 1/120 and zeta(7)): the
    rest falls off as exp(-m pi b / 2a).

    Parameters
    ----------
    aspect : array_like    Long over short side, b/a >= 1 [-].
    poisson : float        Poisson's ratio [-]; the deflections over q a^4 / D do not depend on it.

    The moment spanning the short side is the greatest principal moment of the plate.
    Source: Timoshenko & Woinowsky-Krieger, Theory of Plates and Shells, 2nd ed., art. 30, Table 8; the mean is the
    integral of the same series.
    """
    ratio = np.asarray(aspect, float)[..., None]
    m = _ORDERS
    sign = np.where(m % 4 == 1, 1.0, -1.0)
    half = m * np.pi * ratio / 2.0
    decay = np.exp(-2.0 * half)
    sech, tanh = 2.0 * np.exp(-half) / (1.0 + decay), (1.0 - decay) / (1.0 + decay)
    bend = half * tanh * sech / 2.0
    lift = bend + sech
    ends = 0.5 * sech**2 + 3.0 / half * decay / (1.0 + decay)
    long_strip = 1.0 / 120.0 - 24.0 / np.pi**7 * _SEVENTH / ratio[..., 0]
    centre = 5.0 / 384.0 - 4.0 / np.pi**5 * (sign / m**5 * lift).sum(axis=-1)
    mean = long_strip + 8.0 / np.pi**6 * (ends / m**6).sum(axis=-1)
    along = 1.0 / 8.0 - 4.0 / np.pi**3 * (sign / m**3 * lift).sum(axis=-1)
    across = 4.0 / np.pi**3 * (sign / m**3 * bend).sum(axis=-1)
    return PlateCoefficients(centre, mean, along + poisson * across, across + poisson * along)


def centre_line(width: float, height: float, at: Array) -> Array:
    """Deflection along the upright line through the centre of a simply supported plate under uniform load, over that at
    the centre [-].

        w(y) ~ sum over odd m, n of sin(m pi / 2) sin(n pi y / b) / (m n (m^2/a^2 + n^2/b^2)^2)

    Parameters
    ----------
    width, height : float    Sides a and b [m].
    at : (K,)                Heights y / b, 0 to 1 [-].

    Source: Navier's series; Timoshenko & Woinowsky-Krieger, Theory of Plates and Shells, 2nd ed., art. 28.
    """
    m, n = np.meshgrid(np.arange(1, 40, 2), np.arange(1, 40, 2))
    weight = np.sin(m * np.pi / 2.0) / (m * n * ((m / width) ** 2 + (n / height) ** 2) ** 2)
    rows = weight.sum(axis=1) @ np.sin(n[:, :1] * np.pi * np.append(at, 0.5))
    return np.asarray(rows[:-1] / rows[-1])


def flexural_rigidity(thickness: ArrayLike, *, young: float = YOUNG, poisson: float = POISSON) -> Array:
    """Flexural rigidity D = E t^3 / (12 (1 - nu^2)) [N m] of a plate of thickness t [m]."""
    t = np.asarray(thickness, float)
    return np.asarray(young * t * t * t / (12.0 * (1.0 - poisson * poisson)))


def effective_thickness(thicknesses: ArrayLike, interlayers: ArrayLike, *, transfer: ArrayLike) -> tuple[Array, Array]:
    """Effective thicknesses of a laminated pane: for deflection, and for the stress of every glass ply [m].

        h_w^3 = sum h_j^3 + 12 w sum h_j e_j^2,   h_s,j = sqrt(h_w^3 / (h_j + 2 w |e_j|))

    with e_j the distance of the middle of ply j from the middle of the section.

    Parameters
    ----------
    thicknesses : (J, ...)       Glass plies [m].
    interlayers : (J - 1, ...)   Interlayers [m].
    transfer : (...)             Shear transfer w [-]: 0 layered (plies slide), 1 monolithic.

    Returns
    -------
    tuple of ndarray    h_w (...) and h_s (J, ...); the ply of least h_s is stressed most.

    Validity: plies of one modulus; w of an interlayer at its temperature and load duration is the caller's to know.
    Source: EN 16612:2019, laminated glass [memory].
    """
    h, w = np.asarray(thicknesses, float), np.asarray(transfer, float)
    middles = np.cumsum(h, axis=0) - h / 2.0
    middles[1:] += np.cumsum(np.asarray(interlayers, float), axis=0)
    lever = middles - (h * middles).sum(axis=0) / h.sum(axis=0)
    cube = (h**3).sum(axis=0) + 12.0 * w * (h * lever**2).sum(axis=0)
    return np.asarray(np.cbrt(cube)), np.asarray(np.sqrt(cube / (h + 2.0 * w * np.abs(lever))))


def bending_stress(moment: ArrayLike, *, thickness: ArrayLike) -> Array:
    """Greatest bending stress 6 M / t^2 [Pa] of a moment M [N m/m] in a plate of thickness t [m]."""
    t = np.asarray(thickness, float)
    return np.asarray(6.0 * np.asarray(moment, float) / (t * t))
