"""Dotted paths into a case: a copy with another value, never the table itself."""

import copy

import pytest

from igu.errors import ModelError
from igu.model.casefile.paths import patched

TABLE = {
    "unit": {"tilt_deg": 90},
    "layer": [
        {"glass": "clear", "thickness_mm": 6, "coating_in": "hard"},
        {"gap_mm": 16, "gas": {"argon": 0.9, "krypton": 0.06, "air": 0.04}},
        {"plies": [{"glass": "clear", "thickness_mm": 4}, {"interlayer": "pvb", "thickness_mm": 0.76}]},
    ],
    "conditions": [{"name": "cold night", "wind_m_s": 5}, {"set": "en-673"}, {"name": "v1.2", "indoor_C": 20}],
    "glass": {"own": {"emissivity": 0.8}},
}


@pytest.mark.parametrize(
    ("path", "read"),
    [
        ("unit.tilt_deg", lambda t: t["unit"]["tilt_deg"]),
        ("unit.height_m", lambda t: t["unit"]["height_m"]),
        ("layer.2.gap_mm", lambda t: t["layer"][1]["gap_mm"]),
        ("layer.2.gas", lambda t: t["layer"][1]["gas"]),
        ("layer.3.plies.2.thickness_mm", lambda t: t["layer"][2]["plies"][1]["thickness_mm"]),
        ("conditions.cold night.wind_m_s", lambda t: t["conditions"][0]["wind_m_s"]),
        ("conditions.1.wind_m_s", lambda t: t["conditions"][0]["wind_m_s"]),
        ("conditions.en-673.name", lambda t: t["conditions"][1]["name"]),
        ("conditions.v1.2.indoor_C", lambda t: t["conditions"][2]["indoor_C"]),
        ("glass.own.emissivity", lambda t: t["glass"]["own"]["emissivity"]),
    ],
)
def test_the_value_lands_and_nothing_else_moves(path, read):
    before = copy.deepcopy(TABLE)
    changed = patched(TABLE, path, 0.123)
    assert read(changed) == 0.123
    assert before == TABLE
    differing = [key for key in TABLE if changed[key] != TABLE[key]]
    assert differing == [path.split(".")[0]]


def test_a_share_moves_the_others_in_proportion():
    gas = patched(TABLE, "layer.2.gas.argon", 0.5)["layer"][1]["gas"]
    assert gas == pytest.approx({"argon": 0.5, "krypton": 0.3, "air": 0.2})


def test_the_coating_moves_from_face_to_face():
    rows = patched(TABLE, "face", 3)["layer"]
    assert rows[2]["coating_out"] == "hard"
    assert "coating_in" not in rows[0]
    assert patched({**TABLE, "layer": rows}, "face", 2)["layer"][0] == TABLE["layer"][0]


@pytest.mark.parametrize(
    ("path", "words"),
    [
        ("unit", "leads to no key"),
        ("", "leads to no key"),
        ("unit.", "leads to no key"),
        ("unit.tilt_deg.deep", "no key"),
        ("layer.0.gap_mm", "1 to 3"),
        ("layer.4.gap_mm", "1 to 3"),
        ("layer.two.gap_mm", "1 to 3"),
        ("layer.2", "whole table"),
        ("sealed.temperature_C", "no sealed"),
        ("conditions.summer.wind_m_s", "no conditions summer"),
        ("conditions.9.wind_m_s", "1 to 3"),
        ("glass.other.emissivity", "no other"),
    ],
)
def test_a_path_that_leads_nowhere_is_refused(path, words):
    with pytest.raises(ModelError, match=words):
        patched(TABLE, path, 1)


def test_a_share_needs_others_to_take_up_the_rest():
    pure = {**TABLE, "layer": [{"gap_mm": 12, "gas": {"argon": 1.0}}]}
    with pytest.raises(ModelError, match="other gases"):
        patched(pure, "layer.1.gas.argon", 0.5)


@pytest.mark.parametrize("face", [0, 5, 2.0, True, "2"])
def test_a_face_is_a_whole_number_of_the_unit(face):
    with pytest.raises(ModelError, match="whole number from 1 to 4"):
        patched(TABLE, "face", face)


def test_face_wants_one_coating():
    bare = {**TABLE, "layer": [{"glass": "clear", "thickness_mm": 4}]}
    with pytest.raises(ModelError, match="this one has 0"):
        patched(bare, "face", 1)
