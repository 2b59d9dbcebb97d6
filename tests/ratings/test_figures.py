"""Figures of many make-ups at once are those of each alone."""

import math
from dataclasses import replace

import numpy as np
import pytest

from igu.model.makeups import MakeUps
from igu.ratings import en673
from igu.ratings.figures import figures
from igu.ratings.rate import rate
from tests.ratings.build import EN410, EN673, SOFT, SUMMER, UPRIGHT, WINTER, double, pane, tilted


def test_make_ups_are_rated_in_the_position_of_their_conditions_too():
    built = tilted(SOFT, 30.0)
    upright, leaning = (replace(EN673, tilt=math.radians(degrees)) for degrees in (90.0, 45.0))
    found = figures(MakeUps.of([built, built]), cold=[upright, leaning], sun=replace(EN410, tilt=UPRIGHT))
    assert pytest.approx([rate(SOFT, EN673).U, rate(tilted(SOFT, 45.0), EN673).U], rel=1e-12) == found.U
    assert found.g == pytest.approx([rate(SOFT, EN410).solar.g] * 2, rel=1e-12)


def test_batch_figures_are_the_single_ratings():
    units = [SOFT, double(), double(pane(glass="green"), pane(coating_out="soft-double"))]
    found = figures(MakeUps.of(units), cold=WINTER, sun=SUMMER)
    for k, unit in enumerate(units):
        cold, sun = rate(unit, WINTER), rate(unit, SUMMER)
        assert found.U[k] == pytest.approx(cold.U, rel=1e-9)
        assert found.g[k] == pytest.approx(sun.solar.g, rel=1e-8)
        assert found.room_face[k] == pytest.approx(cold.panes[-1].face_in, abs=1e-8)
        assert found.inward[:, k] == pytest.approx([p.inward_fraction for p in sun.panes], abs=1e-7)
        assert found.hottest[k] == pytest.approx(max(max(p.face_out, p.face_in) for p in sun.panes), abs=1e-8)


def test_standard_methods_rate_batches_too():
    units = [SOFT, double()]
    found = figures(MakeUps.of(units), cold=EN673, sun=EN410)
    assert pytest.approx([en673.u_value(u) for u in units]) == found.U
    assert found.g == pytest.approx([rate(u, EN410).solar.g for u in units])
    assert np.isnan(found.room_face).all()
