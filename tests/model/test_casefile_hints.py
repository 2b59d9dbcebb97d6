"""What helps to mend a case: the nearest name, the remedy in a line that is not TOML, every fault in one run, and what
is only warned of."""

import copy
import math
import tomllib
from pathlib import Path

import pytest

from igu.errors import CaseError, ModelError
from igu.model.case import case_from_table, read_case
from igu.model.casefile.faults import Faults, nearest
from igu.model.casefile.files import parse_toml
from igu.model.casefile.keys import KEYS
from igu.model.casefile.paths import patched
from igu.model.study_tables import COLUMNS, QUANTITIES
from igu.model.unit import TREATMENTS

ROOT = Path(__file__).parents[2]
BASE = tomllib.loads((ROOT / "cases/reading-room.toml").read_text(encoding="utf-8"))


def read(**tables):
    return case_from_table(copy.deepcopy(BASE) | tables, file="case.toml", folder=ROOT / "cases")


def faults(**tables):
    with pytest.raises(CaseError) as caught:
        read(**tables)
    return [line.removeprefix("case.toml: ") for line in caught.value.faults]


@pytest.mark.parametrize(
    ("given", "known", "meant"),
    [
        ("U_max", KEYS["limits"], "U_max_W_m2K"),
        ("U", QUANTITIES, "U_W_m2K"),
        ("u-value", QUANTITIES, "U_W_m2K"),
        ("g", COLUMNS, "solar_factor_g"),
        ("g_value", QUANTITIES, "solar_factor_g"),
        ("gap", KEYS["layer.gap_mm"], "gap_mm"),
        ("emissivity", KEYS["pane"], "emissivity_coated_side"),
        ("humidity", KEYS["conditions"], "indoor_humidity_pct"),
        ("indoor_temperature_C", KEYS["conditions"], "indoor_C"),
        ("wind_speed_m_s", KEYS["conditions"], "wind_m_s"),
        ("Argon", ["air", "argon"], "argon"),
        ("EN 673", ["en-410", "en-673"], "en-673"),
        ("soft", ["hard", "soft-single", "soft-double"], "soft-single"),
        ("thicknes_mm", KEYS["layer.glass"], "thickness_mm"),
        ("tempered", TREATMENTS, "toughened"),
        ("Fully tempered", TREATMENTS, "toughened"),
        ("HST", TREATMENTS, "toughened"),
        ("tempered", QUANTITIES, None),
        ("price", QUANTITIES, None),
        ("value", QUANTITIES, None),
        ("", QUANTITIES, None),
    ],
)
def test_the_nearest_name(given, known, meant):
    assert nearest(given, known) == meant


@pytest.mark.parametrize(
    ("line", "remedy"),
    [
        ("gap_mm = 16,5", "a point in place of the decimal comma: 16.5"),
        ("gas = { argon = 0,9, air = 0.1 }", "a point in place of the decimal comma: 0.9"),
        ("glass = clear  # bare", 'text in quotation marks: "clear"'),
        ("name = cold night", 'text in quotation marks: "cold night"'),
        ('title = "half', "a quotation mark before and after a text"),
        ('title = half"', "a quotation mark before and after a text"),
        ("title = “half”", "straight quotation marks"),
        ("outdoor_C = −5", "a hyphen as the minus sign"),
        ("gap_mm = 16 mm", "the number alone"),
        ("tilt_deg = 30°", "the number alone"),
        ("emissivity = .03", "a digit before and after the decimal point"),
        ("gap_mm = 016", "does not begin with 0"),
        ("vented = True", "true or false, in small letters"),
        ("gap_mm =", "a value after ="),
        ("gap_mm: 16", "key = value"),
        ("gap_mm 16", "key = value"),
        ("faces = [1 2]", "a comma between the values"),
        ("gas = { argon = 0.9 air = 0.1 }", "a comma between the entries"),
        ('spectrum = "data\\pane.csv"', "/ in place of \\"),
        ("[[layer]", "[[name]] at the head"),
        ("// a comment", "# before a comment"),
        ("[layer]\n[layer]", "headed [[layer]]"),
    ],
)
def test_a_line_that_is_not_toml_is_told_its_remedy(line, remedy):
    found = Faults()
    assert parse_toml(f"{line}\n", "case.toml", found) is None
    (said,) = found.lines
    assert remedy in said.split("; allowed ")[1]


def test_a_remedy_belongs_to_the_line_of_the_fault():
    found = Faults()
    parse_toml('a = "x, y = 1,5"\nb = 2\nc = [1, 2]]\nd = clear\n', "case.toml", found)
    (said,) = found.lines
    assert said.startswith("case.toml: line 3: ")
    assert said.endswith("allowed TOML")


def test_one_slip_is_one_line():
    """A misspelt key is not missing besides, and a table headed as one is still read."""
    layers = copy.deepcopy(BASE["layer"])
    layers[0]["thicknes_mm"] = layers[0].pop("thickness_mm")
    layers[1]["gapmm"] = layers[1].pop("gap_mm")
    (first, second) = faults(layer=layers)
    assert {first.split(": ")[0], second.split(": ")[0]} == {"layer.1.thicknes_mm", "layer.2.gapmm"}
    lines = faults(conditions=BASE["conditions"][0] | {"indoor_C": 500})
    assert [line.split(": ")[0] for line in lines][:2] == ["conditions", "conditions.1.indoor_C"]


def test_a_case_of_no_layers_under_a_misspelt_key_is_that_one_fault():
    table = {"lyer": [], "conditions": copy.deepcopy(BASE["conditions"])}
    with pytest.raises(CaseError) as caught:
        case_from_table(table, file="case.toml", folder=ROOT / "cases")
    (only,) = caught.value.faults
    assert only.startswith("case.toml: lyer: given an unknown key")
    assert only.endswith("did you mean layer?")


def test_a_layer_that_does_not_say_what_it_is_is_judged_all_the_same():
    layers = copy.deepcopy(BASE["layer"])
    layers[0] = {"glas": "claer", "thickness_mm": 6000, "coating_in": "sft-single"}
    layers[1] = {"gas": "argn"}
    layers[2] = {"thickness_mm": 4, "coating_out": "none"}
    assert [line.split(": ")[0] for line in faults(layer=layers)] == [
        "layer.1.glas", "layer.1.thickness_mm", "layer.1.glass", "layer.1.coating_in", "layer.2.gap_mm", "layer.2.gas",
        "layer.3.glass", "layer.3.coating_out",
    ]  # fmt: skip


def test_what_a_unit_with_faults_still_tells_is_judged():
    """A fault in one pane hides neither the number of panes, nor the fills, nor the tilt."""
    layers = copy.deepcopy(BASE["layer"])
    layers[0]["glass"] = "claer"
    layers[1]["gas"] = "helium"
    conditions = [BASE["conditions"][0] | {"absorbed_W_m2": [1.0]}, {"set": "en-673"}]
    lines = faults(unit={"tilt_deg": 30}, layer=layers, conditions=conditions, compare={"faces": [9]})
    assert [line.split(": ")[0] for line in lines] == [
        "layer.1.glass", "conditions.1.absorbed_W_m2", "conditions.1.gas_properties", "conditions.2.set",
        "conditions.2.set", "compare.faces",
    ]  # fmt: skip


def test_a_file_that_does_not_read_makes_no_faults_of_the_names_it_may_define():
    layers = copy.deepcopy(BASE["layer"])
    layers[0]["coating_in"] = "house"
    (line,) = faults(layer=layers, use=["nowhere.toml"])
    assert "no file of this name" in line
    assert any("house" in line for line in faults(layer=layers))


def test_a_sweep_is_tried_on_a_case_with_other_faults(tmp_path):
    text = (ROOT / "cases/reading-room.toml").read_text(encoding="utf-8").replace("indoor_C = 21.0", "indoor_C = 210.0")
    path = tmp_path / "case.toml"
    rows = '[sweep]\nof = "U"\n[[sweep.vary]]\nkey = "layer.2.gap_mm"\nvalues = [12, 1200]\n'
    path.write_text(f"{text}\n{rows}", encoding="utf-8")
    with pytest.raises(CaseError) as caught:
        read_case(path)
    places = [line.removeprefix(f"{path}: ").split(": ")[0] for line in caught.value.faults]
    assert places == ["conditions.1.indoor_C", "sweep.of", "sweep.vary"]
    assert "1200" in caught.value.faults[-1]


def test_a_gas_by_its_name_has_no_share_to_vary():
    table = copy.deepcopy(BASE)
    table["layer"][1]["gas"] = "argon"
    with pytest.raises(ModelError, match="written as shares"):
        patched(table, "layer.2.gas.argon", 0.5)
    (line,) = faults(layer=table["layer"], sweep={"vary": [{"key": "layer.2.gas.argon", "values": [0.5]}]})
    assert line.startswith("sweep.vary.1.key: ")


@pytest.mark.parametrize(
    ("path", "words"),
    [
        ("unot.tilt_deg", "did you mean unit"),
        ("sweep.of", r"write \[sweep\] first"),
        ("conditions.cold nite.wind_m_s", "did you mean cold night"),
    ],
)
def test_a_path_that_leads_nowhere_is_told_the_nearest(path, words):
    with pytest.raises(ModelError, match=words):
        patched(BASE, path, 1)


def gap(width, **more):
    layers = copy.deepcopy(BASE["layer"])
    layers[1] = {"gap_mm": width, **(more or {"gas": "air"})}
    return layers


@pytest.mark.parametrize(("width", "warned"), [(2.9, 1), (3, 0), (100, 0), (101, 1)])
def test_an_unusual_gap_is_warned_of(width, warned):
    found = read(layer=gap(width)).warnings
    assert len(found) == warned
    assert all(line.startswith("case.toml: layer.2.gap_mm: ") for line in found)


def test_an_evacuated_gap_is_thin_by_nature():
    vacuum = {"vacuum": {"pressure_Pa": 0.1}, "pillars": {"pitch_mm": 20, "radius_mm": 0.25, "conductivity_W_mK": 20}}
    assert read(layer=gap(0.2, **vacuum), conditions=BASE["conditions"][:1]).warnings == ()


@pytest.mark.parametrize(("percent", "warned"), [(0, 1), (0.5, 1), (1, 1), (1.1, 0), (50, 0)])
def test_a_humidity_that_is_likely_a_share_is_warned_of(percent, warned):
    found = read(conditions=[BASE["conditions"][0] | {"outdoor_humidity_pct": percent}]).warnings
    assert [line.split(": ")[1] for line in found] == ["conditions.1.outdoor_humidity_pct"] * warned


@pytest.mark.parametrize(
    ("solar", "light", "warned"),
    [
        (0.40, 0.70, ()),
        (0.26, 0.60, ()),
        (0.08, 0.80, ("solar_transmittance",)),
        (0.86, 0.04, ("solar_transmittance",)),
    ],
)
def test_solar_and_light_values_that_no_spectrum_has_are_warned_of(solar, light, warned):
    """A common and a very selective pane are let pass; so are their reflectances."""
    bands = {f"{band}_reflectance_{side}_side": 0.1 for band in ("solar", "light") for side in ("coated", "glass")}
    pane = {"thickness_mm": 6, "emissivity_coated_side": 0.03, "solar_transmittance": solar,
            "light_transmittance": light, **bands}  # fmt: skip
    layers = [{"pane": "a", "coated_face": "in"}, *copy.deepcopy(BASE["layer"][1:])]
    found = read(pane={"a": pane}, layer=layers).warnings
    assert tuple(line.split(": ")[1] for line in found) == tuple(f"pane.a.{key}" for key in warned)


COATED, BARE = {"emissivity_coated_side": 0.03}, {"emissivity_glass_side": 0.837}


@pytest.mark.parametrize(
    ("keys", "warned", "noted"),
    [
        (COATED | BARE, "", ""),
        ({"normal_emissivity_coated_side": 0.02} | BARE, "", ""),
        (COATED, "", "emissivity of glass side 0.837 by default"),
        (BARE, "coated side taken", "emissivity of coated side 0.837 by default"),
        ({}, "coated side and glass side taken", "emissivity of coated side and glass side 0.837 by default"),
    ],
)
def test_a_measured_pane_without_emissivity_is_said_to_be_taken_as_bare(keys, warned, noted):
    layers = [{"pane": "a", "coated_face": "in"}, *copy.deepcopy(BASE["layer"][1:])]
    case = read(pane={"a": {"thickness_mm": 6} | keys}, layer=layers)
    (note,) = (note for note in case.notes if note.startswith("a: data of"))
    assert note == "a: data of case.toml" + (f"; {noted}" if noted else "")
    assert len(case.warnings) == bool(warned)
    assert all("pane.a.emissivity_coated_side" in text and warned in text for text in case.warnings)


@pytest.mark.parametrize("where", ["open", "gap"])
@pytest.mark.parametrize(("emissivity", "keys", "warned"), [
    (0.03, {}, True), (0.19, {}, True), (0.2, {}, False), (0.03, {"inside_only": False}, False),
])  # fmt: skip
def test_a_low_coating_in_the_open_air_is_warned_of_unless_its_definition_says_where_it_may_go(
    where, emissivity, keys, warned
):
    pane = {"thickness_mm": 6, "emissivity_coated_side": emissivity} | keys
    coating = {"emissivity": emissivity} | keys
    rest, face = copy.deepcopy(BASE["layer"][1:]), "in" if where == "gap" else "out"
    coated = {"glass": "clear", "thickness_mm": 6, f"coating_{face}": "a"}
    for found, key in (
        (read(pane={"a": pane}, layer=[{"pane": "a", "coated_face": face}, *rest]), "coated_face"),
        (read(coating={"a": coating}, layer=[coated, *rest]), f"coating_{face}"),
    ):
        expected = [f"layer.1.{key}"] if warned and where == "open" else []
        assert [line.split(": ")[1] for line in found.warnings] == expected


def test_the_room_face_is_open_air_too_and_a_hard_coating_is_made_for_it():
    rest = copy.deepcopy(BASE["layer"][:-1])
    low = {"pane": {"a": {"thickness_mm": 6, "emissivity_coated_side": 0.03}}}
    (found,) = read(**low, layer=[*rest, {"pane": "a", "coated_face": "in"}]).warnings
    assert "in the open air" in found
    hard = {"glass": "clear", "thickness_mm": 6, "coating_in": "hard"}
    assert read(layer=[*rest, hard]).warnings == ()
    mine = {"coating": {"a": {"emissivity": 0.15, "optics": "hard"}}}
    assert read(**mine, layer=[*rest, hard | {"coating_in": "a"}]).warnings == ()


@pytest.mark.parametrize(
    ("keys", "overridden"),
    [
        ({"sun_W_m2": 0}, ()),
        ({"sun_W_m2": 1}, ("sun_W_m2",)),
        ({"outdoor_C": -18}, ()),
        ({"wind_m_s": 5.5}, ()),
        ({"wind_m_s": 4.0, "indoor_C": 21}, ("wind_m_s",)),
        ({"sky_C": -18, "ground_C": -18}, ("sky_C", "ground_C")),
        ({"altitude_m": 0, "gas_properties": "iso-15099"}, ()),
        ({"pressure_Pa": 90000}, ("pressure_Pa",)),
        ({"indoor_humidity_pct": 50, "edge_C": 2}, ()),
    ],
)
def test_an_override_is_a_value_that_differs_from_the_set(keys, overridden):
    """ANSI/NFRC 100 has -18 and 21 C, 26 W/(m2 K), which 4 + 4 V gives at 5.5 m/s, and no sun."""
    (conditions,) = read(conditions=[{"set": "ansi-nfrc-100", **keys}]).conditions
    assert conditions.overridden == overridden


@pytest.mark.parametrize("method", ["en-673", "en-410"])
@pytest.mark.parametrize("tilt", [90, 45, 0])
def test_a_standard_takes_a_position_of_its_own(method, tilt):
    for how in ({"set": method}, {"method": method}):
        case = read(unit={"tilt_deg": 30}, conditions=[{**how, "tilt_deg": tilt}])
        (conditions,) = case.conditions
        assert conditions.tilt == pytest.approx(math.radians(tilt))
        assert conditions.overridden == ()
        assert conditions.placed(case.unit).tilt == conditions.tilt
        assert case.unit.tilt == pytest.approx(math.radians(30))


def test_a_position_that_is_not_covered_or_not_taken_is_refused():
    for tilt in (30, 91, -45, True, "90"):
        (line,) = faults(unit={"tilt_deg": 30}, conditions=[{"set": "en-673", "tilt_deg": tilt}])
        assert line.startswith("conditions.1.tilt_deg: given ")
        assert "90, 45 or 0" in line
    (line,) = faults(unit={"tilt_deg": 30}, conditions=[{"set": "en-673"}])
    assert "tilt_deg = 90 in these conditions" in line
    (line,) = faults(conditions=[BASE["conditions"][0] | {"tilt_deg": 90}])
    assert "under en-673 and en-410 only" in line
    (line,) = faults(conditions=[{"set": "en-673", "edge_C": 5}])
    assert line.startswith("conditions.1.edge_C: given under en-673")


def test_conditions_bring_their_own_edge():
    assert read(conditions=[BASE["conditions"][0] | {"edge_C": 4}]).conditions[0].edge == pytest.approx(277.15)
    assert read().conditions[0].edge is None
