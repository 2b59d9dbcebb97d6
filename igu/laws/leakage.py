"""Loss of fill gas over the years."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike

LEAKAGE_LIMIT = 0.01
"""Yearly leakage that the standard allows [1/a]. EN 1279-3:2018 [memory]."""


def remaining_share(share: ArrayLike, *, rate: ArrayLike, years: ArrayLike) -> Array:
    """Share of a gas that is left when it leaks in proportion to what remains, x (1 - L)^t [-]; air takes its place.

    Parameters
    ----------
    share : array_like    Mole fraction at the start [-].
    rate : array_like     Leakage L [1/a], 0 to below 1.
    years : array_like    Time t [a].

    Source: EN 1279-3, leakage rate in per cent by volume of the gas per year [memory].
    """
    return np.asarray(np.asarray(share, float) * (1.0 - np.asarray(rate, float)) ** np.asarray(years, float))


def remaining_share_linear(share: ArrayLike, *, rate: ArrayLike, years: ArrayLike) -> Array:
    """The same with the leakage read as a share of the whole gap, x - L t, at least 0: the pessimistic line [-]."""
    lost = np.asarray(rate, float) * np.asarray(years, float)
    return np.asarray(np.maximum(np.asarray(share, float) - lost, 0.0))
