"""The reader: valid cases, every fault at once, and arbitrary input ending in a case or in sentences."""

import copy
import math
import tomllib
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from igu.errors import CaseError
from igu.model.case import Case, case_from_table, read_case
from igu.model.casefile.keys import KEYS
from igu.model.optics import BroadbandOptics, SpectralOptics

ROOT = Path(__file__).parents[2]
INVALID = sorted((ROOT / "tests/invalid").glob("*.toml"))
CASES = sorted((ROOT / "cases").glob("*.toml"))
QUICK = settings(max_examples=120, deadline=None, derandomize=True, suppress_health_check=list(HealthCheck))

BASE = tomllib.loads((ROOT / "cases/reading-room.toml").read_text(encoding="utf-8"))


def read(table, folder=ROOT / "cases"):
    return case_from_table(table, file="case.toml", folder=folder)


def faults(table, folder=ROOT / "cases"):
    with pytest.raises(CaseError) as caught:
        read(table, folder)
    return caught.value.faults


@pytest.mark.parametrize("path", CASES, ids=lambda p: p.stem)
def test_every_shipped_case_reads_without_warning(path):
    case = read_case(path)
    assert case.conditions
    assert case.warnings == ()
    assert "invented" in path.read_text(encoding="utf-8")


@pytest.mark.parametrize("path", INVALID, ids=lambda p: p.stem)
def test_every_fault_of_an_invalid_case_in_its_words(path, monkeypatch):
    monkeypatch.chdir(path.parent)
    with pytest.raises(CaseError) as caught:
        read_case(path.name)
    expected = path.with_suffix(".expected.txt").read_text(encoding="utf-8").splitlines()
    assert list(caught.value.faults) == expected


def test_missing_directory_and_huge_files_get_a_sentence(tmp_path):
    for path, words in ((tmp_path / "none.toml", "no file"), (tmp_path, "directory")):
        with pytest.raises(CaseError, match=words):
            read_case(path)
    huge = tmp_path / "huge.toml"
    huge.write_text("# " + "x" * 1_100_000, encoding="utf-8")
    with pytest.raises(CaseError, match="more than"):
        read_case(huge)


def test_units_become_si():
    unit, conditions = read(BASE).unit, read(BASE).conditions[0]
    assert unit.panes[0].thickness == 0.006
    assert unit.gaps[0].width == 0.016
    assert unit.tilt == math.pi / 2
    assert conditions.outdoor_air == pytest.approx(255.15)
    assert conditions.outdoor_convection == 26.0
    assert conditions.indoor_humidity == 0.4


def test_a_named_set_brings_its_keys_and_an_override_is_recorded():
    table = copy.deepcopy(BASE)
    table["conditions"] = [{"set": "ansi-nfrc-200"}, {"set": "ansi-nfrc-200", "name": "b", "wind_m_s": 1.0}]
    plain, changed = read(table).conditions
    assert (plain.sun, plain.outdoor_convection, plain.overridden) == (783.0, 15.0, ())
    assert (changed.outdoor_convection, changed.overridden) == (8.0, ("wind_m_s",))


def test_defaults_are_said():
    said = " ".join(read(BASE).conditions[0].defaults)
    for words in ("natural", "sea level", "iso-15099", "no sun"):
        assert words in said


def test_normal_emissivity_is_corrected():
    """EN 12898: 0.031 normal is 0.037 hemispherical."""
    table = copy.deepcopy(BASE)
    table["coating"] = {"mine": {"normal_emissivity": 0.03, "inside_only": True}}
    table["layer"][0]["coating_in"] = "mine"
    case = read(table)
    assert case.unit.panes[0].emissivity_in == pytest.approx(0.03 * 1.22)
    assert case.unit.panes[0].optics is None


def measured(**more):
    table = copy.deepcopy(BASE)
    table["pane"] = {"sun-A": {"thickness_mm": 6, "emissivity_coated_side": 0.03, "solar_transmittance": 0.4,
                               "solar_reflectance_coated_side": 0.4,
                               "solar_reflectance_glass_side": 0.3, **more}}  # fmt: skip
    table["layer"][0] = {"pane": "sun-A", "coated_face": "in"}
    return table


def test_a_measured_pane_is_turned_as_built_in():
    inward = read(measured()).unit.panes[0]
    table = measured()
    table["layer"][0]["coated_face"] = "out"
    outward = read(table).unit.panes[0]
    assert (inward.emissivity_out, inward.emissivity_in) == (0.837, 0.03)
    assert (outward.emissivity_out, outward.emissivity_in) == (0.03, 0.837)
    assert isinstance(inward.optics, BroadbandOptics)
    assert inward.optics.solar_reflectance_in == outward.optics.solar_reflectance_out == 0.4


def test_which_way_round_must_be_said():
    table = measured()
    del table["layer"][0]["coated_face"]
    assert any("coated_face" in line for line in faults(table))


def test_a_spectral_file(tmp_path):
    lines = ["wavelength_nm, transmittance, reflectance_coated_side, reflectance_glass_side", "300, 0.1, 0.2, 0.3",
             "1000, 0.5, 0.3, 0.2", "2500, 0.1, 0.6, 0.3"]  # fmt: skip
    (tmp_path / "a.csv").write_text("\n".join(lines), encoding="utf-8")
    table = copy.deepcopy(BASE)
    table["pane"] = {"a": {"thickness_mm": 4, "emissivity_coated_side": 0.05, "spectrum": "a.csv"}}
    table["layer"][0] = {"pane": "a", "coated_face": "out"}
    optics = case_from_table(table, file=str(tmp_path / "c.toml"), folder=tmp_path).unit.panes[0].optics
    assert isinstance(optics, SpectralOptics)
    assert optics.reflectance_out[1] == 0.3
    for bad, words in (
        ("300, 0.9, 0.2, 0.3", "sum to more than 1"),
        ("2600, 0.1, 0.1, 0.1", "rise"),
        ("x,1,1,1", "numbers"),
    ):
        (tmp_path / "a.csv").write_text("\n".join([lines[0], bad, *lines[2:]]), encoding="utf-8")
        with pytest.raises(CaseError, match=words):
            case_from_table(table, file=str(tmp_path / "c.toml"), folder=tmp_path)
    (tmp_path / "a.csv").write_text("\n".join([lines[0], "500, 0.1, 0.2, 0.3", lines[2]]), encoding="utf-8")
    with pytest.raises(CaseError, match="must reach"):
        case_from_table(table, file=str(tmp_path / "c.toml"), folder=tmp_path)


def test_shared_definitions_and_names_defined_twice(tmp_path):
    (tmp_path / "shared.toml").write_text("[coating.house]\nemissivity = 0.1\n[glass.spare]\n", encoding="utf-8")
    table = copy.deepcopy(BASE) | {"use": ["shared.toml"]}
    table["layer"][0]["coating_in"] = "house"
    case = case_from_table(table, file=str(tmp_path / "c.toml"), folder=tmp_path)
    assert case.unit.panes[0].emissivity_in == 0.1
    assert case.warnings == ()
    table["coating"] = {"house": {"emissivity": 0.2}}
    with pytest.raises(CaseError, match="a second time"):
        case_from_table(table, file=str(tmp_path / "c.toml"), folder=tmp_path)


def test_an_unused_definition_is_a_warning():
    table = copy.deepcopy(BASE) | {"coating": {"spare": {"emissivity": 0.1}}}
    assert read(table).warnings == ("case.toml: coating.spare is defined and not used",)


@pytest.mark.parametrize("value", [True, "12", [], {}, math.nan, math.inf, -1.0, 1e9, None])
def test_no_number_but_a_sensible_one(value):
    table = copy.deepcopy(BASE)
    table["layer"][1]["gap_mm"] = value
    lines = faults(table)
    assert len(lines) == 1
    assert "layer.2.gap_mm" in lines[0]


def test_shares_sum_to_one_within_a_millionth():
    table = copy.deepcopy(BASE)
    table["layer"][1]["gas"] = {"argon": 0.9, "air": 0.1 + 9e-7}
    assert read(table)
    table["layer"][1]["gas"] = {"argon": 0.9, "air": 0.1 + 2e-6}
    assert "sum to 1" in faults(table)[0]


def test_a_fluid_of_coolprop_can_be_a_fill_under_the_reference_properties():
    table = copy.deepcopy(BASE)
    table["layer"][1]["gas"] = "Methane"
    table["conditions"] = [table["conditions"][0] | {"gas_properties": "reference"}]
    assert read(table).unit.gaps[0].fill == (("Methane", 1.0),)
    table["conditions"][0]["gas_properties"] = "iso-15099"
    assert any("gas_properties" in line for line in faults(table))


KEY_NAMES = sorted({key for keys in KEYS.values() for key in keys} | {"layer", "air", "argon"})
VALUES = st.recursive(
    st.one_of(
        st.booleans(), st.integers(), st.floats(), st.text(max_size=12), st.sampled_from(["clear", "air", "pvb"])
    ),
    lambda inner: st.one_of(
        st.lists(inner, max_size=4),
        st.dictionaries(st.sampled_from(KEY_NAMES) | st.text(max_size=6), inner, max_size=5),
    ),
    max_leaves=12,
)


def ends_well(table):
    """Whether the table reads as a case, or is refused with at least one line."""
    try:
        return isinstance(read(table), Case)
    except CaseError as error:
        return bool(error.faults)


@QUICK
@given(st.dictionaries(st.sampled_from(sorted(KEYS["case"])) | st.text(max_size=8), VALUES, max_size=6))
def test_any_table_is_a_case_or_a_list_of_faults(table):
    assert ends_well(table)


def paths(node, at=()):
    if isinstance(node, dict):
        for key, value in node.items():
            yield (*at, key)
            yield from paths(value, (*at, key))
    if isinstance(node, list):
        for k, value in enumerate(node):
            yield (*at, k)
            yield from paths(value, (*at, k))


HIGHLAND = tomllib.loads((ROOT / "cases/highland-facade.toml").read_text(encoding="utf-8"))
SEEKING = tomllib.loads((ROOT / "cases/north-triple.toml").read_text(encoding="utf-8"))


@QUICK
@given(st.sampled_from([(t, p) for t in (HIGHLAND, SEEKING) for p in paths(t)]), VALUES)
def test_a_good_case_with_one_value_changed_is_a_case_or_a_list_of_faults(place, value):
    source, path = place
    table = copy.deepcopy(source)
    node = table
    for step in path[:-1]:
        node = node[step]
    node[path[-1]] = value
    assert ends_well(table)


@QUICK
@given(st.one_of(st.binary(max_size=200), st.text(max_size=200).map(lambda t: t.encode("utf-8", "ignore"))))
def test_any_bytes_are_a_case_or_a_list_of_faults(tmp_path_factory, content):
    path = tmp_path_factory.mktemp("bytes") / "case.toml"
    path.write_bytes(content)
    with pytest.raises(CaseError) as caught:
        read_case(path)
    assert caught.value.faults
