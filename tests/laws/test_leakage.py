"""Leakage against the differential equation and whole-year arithmetic."""

from __future__ import annotations

import numpy as np
import pytest

from igu.laws.leakage import remaining_share, remaining_share_linear

YEARS = np.array([0.0, 10.0, 20.0, 30.0])


def test_a_hundredth_of_what_is_left_every_year() -> None:
    left = 0.9
    for _ in range(30):
        left -= 0.01 * left
    assert remaining_share(0.9, rate=0.01, years=30.0) == pytest.approx(left, rel=1e-13)


def test_percentage_points_of_the_whole() -> None:
    share = remaining_share_linear(0.9, rate=0.01, years=[0.0, 10.0, 30.0, 90.0, 120.0])
    np.testing.assert_allclose(share, [0.9, 0.8, 0.6, 0.0, 0.0], rtol=0, atol=1e-15)


def test_points_of_the_whole_are_the_pessimistic_line() -> None:
    years = np.linspace(0.0, 100.0, 101)[1:]
    assert np.all(remaining_share_linear(0.9, rate=0.01, years=years) < remaining_share(0.9, rate=0.01, years=years))


def test_slow_leaks_follow_the_exponential() -> None:
    assert remaining_share(1.0, rate=1e-5, years=1e5) == pytest.approx(np.exp(-1.0), rel=1e-5)


def test_years_add() -> None:
    half = remaining_share(0.93, rate=0.02, years=12.5)
    assert remaining_share(half, rate=0.02, years=7.5) == pytest.approx(0.93 * 0.98**20, rel=1e-14)


def test_gases_of_a_mixture_keep_their_proportion() -> None:
    shares = np.array([[0.5], [0.4]])
    left = remaining_share(shares, rate=0.01, years=YEARS)
    assert left.shape == (2, 4)
    np.testing.assert_allclose(left[0] / left[1], 1.25, rtol=1e-14)
    assert np.all(1.0 - left.sum(axis=0) >= 0.1 - 1e-15)


def test_a_tight_gap_and_no_time_change_nothing() -> None:
    for law in (remaining_share, remaining_share_linear):
        assert law(0.87, rate=0.0, years=30.0) == 0.87
        assert law(0.87, rate=0.01, years=0.0) == 0.87
