"""Fogging: a face against the dew or frost point of the air before it, and of the fill inside a gap."""

from dataclasses import replace

import pytest

from igu.laws.constants import CELSIUS
from igu.ratings.rate import rate
from tests.ratings.build import SOFT, WINTER


def test_fogging_starts_where_the_humidity_says():
    r = rate(SOFT, WINTER)
    room = r.fog[0]
    at = rate(SOFT, replace(WINTER, indoor_humidity=room.limit_humidity)).fog[0]
    assert at.margin == pytest.approx(0.0, abs=1e-6)
    wetter = rate(SOFT, replace(WINTER, indoor_humidity=room.limit_humidity + 0.05)).fog[0]
    assert wetter.margin < 0.0


def test_frost_and_dew_differ_by_some_kelvin_below_zero():
    dry = rate(SOFT, replace(WINTER, indoor_humidity=0.10)).fog[0]
    assert dry.frost
    assert dry.point < CELSIUS


def test_the_gap_fogs_by_its_fills_dew_point():
    wet = replace(SOFT, sealed=replace(SOFT.sealed, fill_dew_point=260.0))
    inside = rate(wet, WINTER).fog[2]
    assert inside.where == "inside gap 1"
    assert inside.face == 2
    assert inside.margin == pytest.approx(rate(wet, WINTER).panes[0].face_in - 260.0)
