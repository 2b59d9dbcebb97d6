"""Rounding as the standards round: a five goes up."""

from __future__ import annotations

from decimal import ROUND_HALF_UP, Decimal

import numpy as np

from igu.arrays import Array, ArrayLike


def half_up(value: float, decimals: int) -> float:
    """The value rounded to this many decimals, a five up (2.45 to 2.5, 2.8499 to 2.8)."""
    return float(Decimal(repr(float(value))).quantize(Decimal(1).scaleb(-decimals), rounding=ROUND_HALF_UP))


def half_up_all(values: ArrayLike, decimals: int) -> Array:
    """The same for arrays, by the shortest decimal form to 12 digits, so that 2.45 counts as a five."""
    scaled = np.round(np.asarray(values, float) * 10.0**decimals, 9)
    return np.asarray(np.floor(scaled + 0.5) / 10.0**decimals)
