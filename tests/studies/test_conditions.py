"""Which conditions a study takes where none is named."""

from pathlib import Path
from typing import Any

from igu.model.case import Case, case_from_table
from igu.studies.conditions import cold_and_sun

GLASS = {"glass": "clear", "thickness_mm": 4}


def case(*conditions: dict[str, Any]) -> Case:
    table = {"title": "t", "layer": [GLASS, {"gap_mm": 16.0, "gas": "argon"}, GLASS], "conditions": list(conditions)}
    return case_from_table(table, file="t.toml", folder=Path())


def weather(name: str, outdoor: float, indoor: float, sun: float = 0.0) -> dict[str, Any]:
    return {"name": name, "outdoor_C": outdoor, "indoor_C": indoor, "wind_m_s": 4.0, "sun_W_m2": sun}


def test_the_coldest_is_the_lowest_outdoors_of_those_with_a_warmer_room() -> None:
    """Not the largest difference, nor a store that is colder than the weather."""
    among = case(weather("mild", -5.0, 30.0), weather("coldest", -8.0, 15.0), weather("cold store", -12.0, -25.0))
    cold, sun = cold_and_sun(among, None, None)
    assert cold is not None
    assert cold.name == "coldest"
    assert sun is None


def test_without_a_heated_room_the_cold_is_the_standards_or_none() -> None:
    store = weather("cold store", -12.0, -25.0)
    cold, _ = cold_and_sun(case(store, {"set": "en-673"}), None, None)
    assert cold is not None
    assert cold.method == "en-673"
    assert cold_and_sun(case(store), None, None) == (None, None)


def test_the_sunniest_is_the_strongest_sun_before_the_standards() -> None:
    among = case({"set": "en-410"}, weather("haze", 30.0, 25.0, 300.0), weather("noon", 28.0, 25.0, 800.0))
    sun = cold_and_sun(among, None, None)[1]
    assert sun is not None
    assert sun.name == "noon"
    standard = cold_and_sun(case({"set": "en-410"}, weather("night", -5.0, 20.0)), None, None)[1]
    assert standard is not None
    assert standard.method == "en-410"
