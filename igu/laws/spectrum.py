"""Weights over wavelength and angle: band averages, diffuse light, thermal radiation."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike

PLANCK_C1 = 3.741771852e-16
"""First radiation constant [W m2], CODATA 2018."""

PLANCK_C2 = 1.438776877e-2
"""Second radiation constant [m K], CODATA 2018."""

DIFFUSE_NODES = 8
"""Gauss nodes over the cosine; units of up to three panes, coated or not, integrate to 1e-5, of eight clear panes to
1e-4 (compared with 200 nodes)."""


def black_body_emission(wavelength: ArrayLike, T: ArrayLike) -> Array:
    """Spectral emissive power of a black body [W/m3], at wavelength [m] and T [K]. Source: Planck's law.

    The weight of the emissivities that the catalogue has of its coatings; tests work them out anew.
    """
    length = np.asarray(wavelength, float)
    return np.asarray(PLANCK_C1 / length**5 / np.expm1(PLANCK_C2 / (length * np.asarray(T, float))))


def diffuse_cosines(nodes: int = DIFFUSE_NODES) -> tuple[Array, Array]:
    """Cosines and weights for isotropic diffuse light, 2 integral f(cos) cos d(cos) from 0 to 1, each (nodes,).

    Gauss-Legendre over the cosine, in which the optics of panes are smooth down to grazing light; the weights sum to 1.
    """
    points, weights = np.polynomial.legendre.leggauss(nodes)
    cosines = 0.5 * (points + 1.0)
    return cosines, weights * cosines
