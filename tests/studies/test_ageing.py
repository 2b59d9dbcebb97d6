"""Ageing: loss of gas by both readings of the standard's limit, and the year the declared value is left."""

from dataclasses import replace

import numpy as np
import pytest

from igu.laws.leakage import remaining_share_linear
from igu.model.unit import Gap, Sealed, Unit
from igu.ratings import en673
from igu.studies.ageing import aged, ageing
from tests.studies.build import ARGON, SOFT, WINTER, double, pane


def test_ageing_by_the_standards_limit():
    """1 % a year of what remains (EN 1279-3 [memory]): 90 % falls to 66.6 % in 30 years, in points to 60 %."""
    found = ageing(SOFT, None)
    assert found.share == pytest.approx((0.90, 0.8139, 0.7361, 0.6657), abs=1e-4)
    assert found.share_linear == pytest.approx((0.9, 0.8, 0.7, 0.6))
    assert np.all(np.diff(found.U) > 0.0)
    assert np.all(np.array(found.U_linear) >= found.U)
    # alone and in a batch: the last digits differ between machines
    assert found.U[0] == pytest.approx(en673.u_value(SOFT), rel=1e-13)
    year = int(found.leaves)
    left = replace(SOFT, gaps=(Gap(0.016, (("argon", 0.9 * 0.99**year), ("air", 1 - 0.9 * 0.99**year))),))
    before = replace(
        SOFT, gaps=(Gap(0.016, (("argon", 0.9 * 0.99 ** (year - 1)), ("air", 1 - 0.9 * 0.99 ** (year - 1)))),)
    )
    assert en673.declared(en673.u_value(before)) == found.declared
    assert en673.declared(en673.u_value(left)) != found.declared


def test_points_of_the_whole_are_shared_by_the_gases_of_a_mixture():
    unit = double(fill=(("krypton", 0.5), ("argon", 0.4), ("air", 0.1)))
    assert ageing(unit, None).share_linear[1] == pytest.approx(0.8)
    left = dict(aged(unit, remaining_share_linear, rate=0.01, years=10.0).gaps[0].fill)
    assert left == pytest.approx({"krypton": 0.5 * 8 / 9, "argon": 0.4 * 8 / 9, "air": 0.2})


def test_air_does_not_age_and_leakage_can_be_given():
    assert ageing(double(fill=(("air", 1.0),)), WINTER) is None
    tight = replace(SOFT, sealed=Sealed(leakage=0.0))
    found = ageing(tight, None)
    assert not found.assumed
    assert found.U[0] == pytest.approx(found.U[-1])
    assert found.leaves is None


def test_the_share_told_is_that_of_the_fullest_gap():
    """90 % beside 50 %, either way round; in points 1 % a year of the whole."""
    gaps = (Gap(0.014, ARGON), Gap(0.014, (("argon", 0.5), ("air", 0.5))))
    for order in (gaps, gaps[::-1]):
        found = ageing(Unit((pane(),) * 3, order), None)
        assert (found.share[0], found.share_linear[1]) == pytest.approx((0.9, 0.8), rel=1e-12)
