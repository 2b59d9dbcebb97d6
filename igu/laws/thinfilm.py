"""Coherent thin films between two thick media: characteristic matrix, s and p polarised light."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from igu.arrays import Array, ArrayLike, ComplexArray
from igu.laws.fresnel import admittances, refracted_cosine


def film_optics(
    wavelength: Array,
    *,
    cosine: ArrayLike,
    before: ArrayLike,
    after: ArrayLike,
    indices: Sequence[ArrayLike] = (),
    thicknesses: Sequence[float] = (),
) -> tuple[Array, Array]:
    """Reflectance and transmittance of a stack of films (none: the bare interface) for light from the first medium.

        delta = 2 pi N d cos / lambda,    M = [[cos delta, -i sin delta / y], [-i y sin delta, cos delta]]
        (B, C) = M_1 M_2 ... (1, y_after)
        R = |(y_before B - C)/(y_before B + C)|^2,    T = 4 y_before Re(y_after) / |y_before B + C|^2

    Parameters
    ----------
    wavelength : (W,)                      [m].
    cosine : array_like                    Cosine of the angle the light has in air [-], broadcasting with (W,).
    before, after : array_like             Index of the two media [-]; `before` is taken as real, which leaves out of
                                           R an interference of order k within an absorbing medium.
    indices : sequence of array_like       Complex index N = n + ik of every film in the order the light meets them.
    thicknesses : sequence of float        Their thicknesses [m].

    Returns
    -------
    R, T : ndarray (2, ...)                Polarisation first: s, p.

    Validity: plane, homogeneous films; coherent light within the stack.
    Source: characteristic matrix of Abeles; Born & Wolf, Principles of Optics, 1.6; H. A. Macleod, Thin-Film
    Optical Filters.
    """
    cosine = np.broadcast_to(cosine, np.broadcast_shapes(np.shape(cosine), np.shape(wavelength)))
    real = np.real(np.asarray(before, complex))
    y_before = admittances(real, refracted_cosine(cosine, index=real)).real
    y_after = admittances(after, refracted_cosine(cosine, index=after))
    b, c = _through(wavelength, cosine, y_after, indices, thicknesses)
    sum_, difference = y_before * b + c, y_before * b - c
    denominator = np.abs(sum_) ** 2
    return np.abs(difference) ** 2 / denominator, 4.0 * y_before * y_after.real / denominator


def _through(
    wavelength: Array,
    cosine: ArrayLike,
    y_after: ComplexArray,
    indices: Sequence[ArrayLike],
    thicknesses: Sequence[float],
) -> tuple[ComplexArray, ComplexArray]:
    """Fields (B, C) before the films, for unit field behind them."""
    b, c = np.ones_like(y_after), y_after
    for index, thickness in zip(reversed(indices), reversed(thicknesses), strict=True):
        inside = refracted_cosine(cosine, index=index)
        y = admittances(index, inside)
        delta = 2.0 * np.pi * np.asarray(index) * thickness * inside / wavelength
        cos, sin = np.cos(delta), -1j * np.sin(delta)
        b, c = cos * b + sin / y * c, y * sin * b + cos * c
    return b, c
