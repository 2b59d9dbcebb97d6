"""Quantities of the studies."""

from dataclasses import replace

import pytest

from igu.laws.humidity import fogging_humidity
from igu.model.makeups import MakeUps
from igu.ratings.figures import figures
from igu.studies.quantities import readings
from tests.studies.build import WINTER, double


def test_a_face_warmer_than_the_room_air_fogs_at_no_humidity_below_all_of_it() -> None:
    one = MakeUps.of([double()])
    for outdoors, cap in ((WINTER.outdoor_air, False), (310.0, True)):
        cold = replace(WINTER, outdoor_air=outdoors)
        found = figures(one, cold=cold, sun=None)
        limit = 100.0 * float(fogging_humidity(found.room_face, air=cold.indoor_air)[0])
        assert (limit > 100.0) is cap
        fog = readings(one, found, room_air=cold.indoor_air, names=["fog_humidity_pct"])["fog_humidity_pct"]
        assert float(fog[0]) == pytest.approx(100.0 if cap else limit)
