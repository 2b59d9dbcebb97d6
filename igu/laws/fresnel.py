"""Light at smooth interfaces and in thick panes: Snell, Fresnel, internal reflections without interference.

Polarisation is the first axis where it appears: 0 is s (perpendicular), 1 is p (parallel to the plane of incidence).
"""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike, ComplexArray


def refracted_cosine(cosine: ArrayLike, *, index: ArrayLike) -> ComplexArray:
    """Cosine of the angle inside a medium for light that comes from air [-].

        cos theta' = sqrt(1 - sin^2 theta / N^2) = sqrt((N^2 - 1 + cos^2 theta) / N^2), exact at grazing light too

    Parameters
    ----------
    cosine : array_like    Cosine of the angle of incidence in air [-].
    index : array_like     Complex refractive index N = n + ik of the medium [-]; they broadcast.

    Source: Snell's law; e.g. Born & Wolf, Principles of Optics.
    """
    squared = np.square(np.asarray(index, complex))
    return np.asarray(np.sqrt((squared - 1.0 + np.square(np.asarray(cosine, float))) / squared))


def admittances(index: ArrayLike, cosine: ArrayLike) -> ComplexArray:
    """Tilted admittances of a medium for s and p light, N cos and N / cos, (2, ...) [-].

    Source: H. A. Macleod, Thin-Film Optical Filters; Born & Wolf, Principles of Optics.
    """
    n, c = np.broadcast_arrays(np.asarray(index, complex), np.asarray(cosine, complex))
    return np.stack([n * c, n / c])


def internal_transmittance(
    wavelength: ArrayLike, *, extinction: ArrayLike, thickness: ArrayLike, cosine: ArrayLike
) -> Array:
    """Transmittance of the inside of a ply, from face to face along the refracted path [-].

        tau = exp(-4 pi k d / (lambda cos theta'))

    Parameters
    ----------
    wavelength, thickness : array_like    [m].
    extinction : array_like               Imaginary part k of the index [-].
    cosine : array_like                   Cosine of the angle inside [-]; all broadcast.

    Source: Beer-Lambert law.
    """
    path = np.asarray(thickness, float) / np.asarray(cosine, float)
    return np.asarray(np.exp(-4.0 * np.pi * np.asarray(extinction, float) * path / np.asarray(wavelength, float)))


def face_reflectance(cosine: ArrayLike, *, index: float) -> Array:
    """Reflectance of one bare face of a clear medium in air for s and p light, (2, ...) [-].

    Source: Fresnel's equations; cosine of the angle in air [-], below 90 degrees.
    """
    outside = np.asarray(cosine, float)
    inside = refracted_cosine(outside, index=index)
    out, inn = admittances(1.0, outside), admittances(index, inside)
    return np.asarray(np.abs((out - inn) / (out + inn)) ** 2)


def lossless_slab_reflectance(cosine: ArrayLike, *, index: float) -> Array:
    """Reflectance of a clear uncoated slab with all internal reflections, mean of both polarisations [-].

        rho = 2 r / (1 + r) for each polarisation, r the Fresnel reflectance of one face

    Source: Fresnel's equations; sum of a geometric series (Stokes).
    """
    face = face_reflectance(cosine, index=index)
    return np.asarray((2.0 * face / (1.0 + face)).mean(axis=0))
