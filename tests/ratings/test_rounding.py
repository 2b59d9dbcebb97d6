"""Rounding as the standards round: a five goes up, however the number is held in binary."""

from decimal import ROUND_HALF_UP, Decimal

import numpy as np
import pytest

from igu.ratings.rounding import half_up, half_up_all

FIVES = [
    (2.45, 1, 2.5),
    (1.15, 1, 1.2),
    (0.285, 2, 0.29),
    (1.005, 2, 1.01),
    (0.5, 0, 1.0),
    (2.5, 0, 3.0),
    (3.5, 0, 4.0),
    (1.1499999999999997, 1, 1.2),
    (0.1 + 0.2 + 0.85, 1, 1.2),
    (-2.45, 1, -2.5),
    (-2.44, 1, -2.4),
    (123456.785, 2, 123456.79),
]
"""Binary holds 1.15, 0.285 and 1.005 below the five; `round` would give 1.1, 0.28, 1.0, and 2 for 2.5. What round-off
leaves beside a five is the five. Whether heat flows out or in does not change how it is rounded."""


@pytest.mark.parametrize(("value", "decimals", "rounded"), FIVES)
def test_a_five_goes_up_as_printed_not_as_held(value: float, decimals: int, rounded: float) -> None:
    assert half_up(value, decimals) == rounded
    assert half_up_all(value, decimals) == rounded


@pytest.mark.parametrize(
    ("value", "rounded"), [(2.8499, 2.8), (2.849862, 2.8), (2.85, 2.9), (2.8501, 2.9), (0.04, 0.0)]
)
def test_rounding_is_done_once(value: float, rounded: float) -> None:
    """2.8499 is 2.8, not 2.85 and then 2.9."""
    assert half_up(value, 1) == rounded
    assert half_up_all(value, 1) == rounded


@pytest.mark.parametrize("decimals", [0, 1, 2])
def test_arrays_round_as_single_numbers_and_as_decimal_arithmetic(decimals: int) -> None:
    thousandths = np.arange(0, 12_000, 5)
    exact = [
        Decimal(int(t)).scaleb(-3).quantize(Decimal(1).scaleb(-decimals), rounding=ROUND_HALF_UP) for t in thousandths
    ]
    values = thousandths / 1000.0
    assert list(half_up_all(values, decimals)) == [float(e) for e in exact]
    assert list(half_up_all(-values, decimals)) == [-float(e) for e in exact]
    assert [half_up(v, decimals) for v in values] == [float(e) for e in exact]


@pytest.mark.parametrize("decimals", [0, 1, 2])
def test_a_ten_millionth_of_the_last_digit_below_a_five_is_no_five(decimals: int) -> None:
    fives = (np.arange(60) + 0.5) / 10.0**decimals
    below = fives - 1e-7 / 10.0**decimals
    assert np.all(half_up_all(below, decimals) < half_up_all(fives, decimals))


def test_nothing_is_plain_zero_and_the_unknown_stays_unknown() -> None:
    assert str(half_up(-0.04, 1)) == "0.0"
    assert np.isnan(half_up(float("nan"), 1))
    assert half_up(float("inf"), 1) == float("inf")


def test_a_rounded_number_stays_and_shapes_are_kept() -> None:
    values = np.linspace(0.1, 6.0, 60).reshape(3, 20)
    once = half_up_all(values, 1)
    assert once.shape == (3, 20)
    assert np.array_equal(half_up_all(once, 1), once)
    assert np.abs(once - values).max() <= 0.05 + 1e-12
