"""Rounding as the standards round: a five goes up."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike


def half_up_all(values: ArrayLike, decimals: int) -> Array:
    """The values rounded to this many decimals, a five away from zero (2.45 to 2.5, -2.45 to -2.5, 2.8499 to 2.8).

    A value within a thousand-millionth of the last decimal counts as the five it stands for: binary holds no 1.15, sums
    and ratios end some last bits beside it, which ones differs from machine to machine, and no figure is as certain.
    """
    values = np.asarray(values, float)
    units = np.floor(np.round(np.abs(values) * 10.0**decimals, 9) + 0.5)
    return np.asarray(np.copysign(units / 10.0**decimals, values) + 0.0)


def half_up(value: float, decimals: int) -> float:
    """The same for one number."""
    return float(half_up_all(value, decimals))
