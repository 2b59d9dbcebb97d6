"""From the normal emissivity, which is measured, to the hemispherical one, which the heat balance needs."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike

NORMAL = (0.03, 0.05, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.89)
RATIO = (1.22, 1.18, 1.14, 1.10, 1.06, 1.03, 1.00, 0.98, 0.96, 0.95, 0.94)
"""EN 12898, table of the ratio of corrected to normal emissivity [-]. Below and above it the end values hold."""


def hemispherical_emissivity(normal: ArrayLike) -> Array:
    """Hemispherical ("corrected") emissivity of a face from its normal emissivity [-], of the same shape.

        eps = ratio(eps_n) eps_n,   ratio linear between the points of the table

    Validity: faces of glass, coated or not; the table spans 0.03 to 0.89, beyond it the end ratios hold. Against
    Fresnel's laws it is right within 1 % for bare dielectrics and up to 7 % low for a plain metal (n = k); the film
    stacks of the catalogue, whose covering layers emit at grazing angles, have ratios up to 1.46.
    Source: EN 12898, determination of the emissivity, table of ratios.
    """
    eps = np.asarray(normal, dtype=np.float64)
    return np.asarray(eps * np.interp(eps, NORMAL, RATIO))
