"""The study tables of a case file, and its documented words."""

import copy
import math
import re
import tomllib
from pathlib import Path

import pytest

from igu.errors import CaseError
from igu.model.case import case_from_table, read_case
from igu.model.casefile.keys import KEYS, LIMITS, limit
from igu.model.study_tables import COLUMNS, QUANTITIES, CaseLayer, GapChoices, PaneChoices, Vary

ROOT = Path(__file__).parents[2]
DOCUMENT = (ROOT / "docs/case-file.md").read_text(encoding="utf-8")
TABLE = tomllib.loads("""
[[layer]]
glass = "clear"
thickness_mm = 6
coating_in = "soft-single"
[[layer]]
gap_mm = 16
gas = { argon = 0.9, air = 0.1 }
[[layer]]
glass = "clear"
thickness_mm = 4
[[conditions]]
name = "cold night"
outdoor_C = -18
indoor_C = 21
wind_m_s = 5.5
""")


def case(**tables):
    return case_from_table(copy.deepcopy(TABLE) | tables, file="case.toml", folder=ROOT)


def fault(**tables):
    """The one line that these study tables are refused with."""
    with pytest.raises(CaseError) as caught:
        case(**tables)
    (line,) = caught.value.faults
    return line.removeprefix("case.toml: ")


def test_without_study_tables_there_are_none():
    read = case()
    assert (read.compare, read.sweep, read.seek, read.tolerance, read.frame, read.loads) == (None,) * 6


def test_compare():
    compare = case(
        compare={"faces": [2, 3], "coatings": ["hard"], "cold": "cold night", "columns": ["selectivity"]}
    ).compare
    assert (compare.faces, compare.coatings, compare.cold, compare.sun) == ((2, 3), ("hard",), "cold night", None)
    assert compare.columns == ("selectivity",)


@pytest.mark.parametrize(
    ("row", "values"),
    [
        ({"from": 6, "to": 20, "step": 2}, (6, 8, 10, 12, 14, 16, 18, 20)),
        ({"from": 0.5, "to": 1, "step": 0.2}, (0.5, 0.7, 0.9)),
        ({"from": 6, "to": 20, "count": 3}, (6, 13, 20)),
        ({"values": [20, 6]}, (20, 6)),
    ],
)
def test_values_of_a_sweep(row, values):
    (vary,) = case(sweep={"vary": [{"key": "layer.2.gap_mm", **row}]}).sweep.vary
    assert vary == Vary(("layer.2.gap_mm",), values, ranged="from" in row)


def test_what_a_sweep_shows_and_judges_by():
    rows = [{"key": "layer.2.gap_mm", "values": [12]}]
    one = case(sweep={"vary": rows, "of": "light_transmittance"}).sweep
    assert (one.of, one.minimise) == (("light_transmittance",), False)
    two = case(sweep={"vary": rows, "of": ["U_W_m2K", "selectivity"]}).sweep
    assert (two.of, two.minimise) == (("U_W_m2K", "selectivity"), True)
    assert case(sweep={"vary": rows, "minimise": False}).sweep.minimise is False


SEEK = {
    "panes": [2, 3],
    "glasses": ["clear", "low-iron"],
    "thickness_mm": [4, 6],
    "gases": ["argon"],
    "gap_mm": [12, 16],
}


def test_seek_for_the_whole_unit():
    seek = case(seek=SEEK | {"coatings": ["soft-single"], "faces": [2, 5], "limits": {"room_face_min_C": 15}}).seek
    pane, gap = PaneChoices(("clear", "low-iron"), (0.004, 0.006)), GapChoices((0.012, 0.016), ((("argon", 1.0),),))
    assert seek.layers == (pane, gap, pane, gap, pane)
    assert (seek.panes, seek.faces, seek.coatings_max, seek.keep) == ((2, 3), (2, 5), 1, 10)
    assert seek.targets.room_face_min == pytest.approx(288.15)
    assert seek.targets.U_max is None


def test_seek_layer_by_layer_fills_up_from_the_whole_unit():
    rows = [{"glasses": ["green"]}, {}, {"thickness_mm": [8]}]
    seek = case(seek={k: v for k, v in SEEK.items() if k != "panes"} | {"layers": rows}).seek
    assert seek.panes == (2,)
    assert seek.layers[0] == PaneChoices(("green",), (0.004, 0.006))
    assert seek.layers[2] == PaneChoices(("clear", "low-iron"), (0.008,))


def test_seek_holds_a_layer_of_the_case_and_names_a_treatment():
    rows = [{"treatment": "toughened"}, {"case_layer": 2}, {}, {}, {"case_layer": 3}]
    whole = {k: v for k, v in SEEK.items() if k != "panes"} | {"treatment": "heat-strengthened"}
    seek = case(seek=whole | {"layers": rows}).seek
    assert seek.panes == (3,)
    assert [seek.layers[k] for k in (1, 4)] == [CaseLayer(2), CaseLayer(3)]
    assert [seek.layers[k].treatment for k in (0, 2)] == ["toughened", "heat-strengthened"]


@pytest.mark.parametrize(
    ("row", "words"),
    [
        ({"case_layer": 2}, "seek.layers.1.case_layer: given 2; allowed the number of a pane of the case: 1, 3"),
        ({"case_layer": 5}, "seek.layers.1.case_layer: given 5; allowed the number of a pane of the case: 1, 3"),
        ({"case_layer": 1, "glasses": ["clear"]}, "seek.layers.1.glasses: given beside case_layer; allowed one"),
        ({"treatment": "tempered"}, 'seek.layers.1.treatment: given "tempered"; allowed annealed, heat-strengthened'),
    ],
)
def test_a_layer_that_cannot_be_held_there_is_refused(row, words):
    assert fault(seek=SEEK | {"panes": [2], "layers": [row, {}, {}]}).startswith(words)


def test_the_second_quantity_of_a_sweep_may_lie_in_what_the_first_sets():
    gases = {"key": "layer.2.gas", "values": [{"argon": 0.9, "air": 0.1}, {"krypton": 0.9, "air": 0.1}]}
    share = {"key": "layer.2.gas.air", "values": [0.05, 0.1]}
    layers = [TABLE["layer"][0], {"gap_mm": 16, "gas": "argon"}, TABLE["layer"][2]]
    vary = case(layer=layers, sweep={"vary": [gases, share]}).sweep.vary
    assert [v.keys for v in vary] == [("layer.2.gas",), ("layer.2.gas.air",)]
    assert "the gas is a name there" in fault(layer=layers, sweep={"vary": [share, gases]})


def test_tolerances_frame_and_loads_become_si():
    tolerance = {
        "thickness_mm": 0.2,
        "gap_mm": 1,
        "fill_pct": [-5, 10],
        "conductivity_pct": 5,
        "samples": 1000,
        "seed": 7,
    }
    read = case(
        tolerance=tolerance, frame={"edge_C": 4, "edge_loss_W_mK": 0.05}, loads={"wind_Pa": -800, "snow_Pa": 1200}
    )
    t = read.tolerance
    assert (t.thickness, t.gap, t.conductivity) == pytest.approx((2e-4, 1e-3, 0.05))
    assert t.fill == pytest.approx((-0.05, 0.1))
    assert (t.samples, t.seed, t.distribution, t.emissivity) == (1000, 7, "uniform", None)
    assert (read.frame.edge, read.frame.edge_loss) == (pytest.approx(277.15), 0.05)
    assert (read.loads.wind, read.loads.snow) == (-800, 1200)
    assert case(tolerance={"fill_pct": 3}).tolerance.fill == pytest.approx((-0.03, 0.03))


@pytest.mark.parametrize(
    ("tables", "words"),
    [
        ({"compare": {"faces": [0]}}, "compare.faces"),
        ({"compare": {"sun": "noon"}}, '"cold night"'),
        ({"sweep": {}}, "one or two tables"),
        ({"sweep": {"vary": [{"key": "layer.9.gap_mm", "values": [1]}]}}, "1 to 3"),
        ({"sweep": {"vary": [{"key": "layer.2.gap_mm", "from": 1, "to": 2}]}}, "step or count"),
        ({"sweep": {"vary": [{"key": "layer.2.gap_mm", "from": 1, "to": 2, "step": 5e-324}]}}, "2 to"),
        ({"sweep": {"vary": [{"key": "layer.2.gap_mm", "from": 1, "to": 2, "step": 3}]}}, "2 to"),
        ({"sweep": {"vary": [{"key": "layer.2.gap_mm", "values": [1]}], "of": "price"}}, "sweep.of"),
        ({"seek": SEEK | {"panes": [1], "layers": [{}, {}]}}, "odd number"),
        ({"seek": SEEK | {"layers": [{}, {}, {}]}}, "at most 2"),
        ({"seek": SEEK | {"panes": [2], "layers": [{}, {"glasses": ["clear"]}, {}]}}, "in the place of a gap"),
        ({"seek": SEEK | {"gases": ["argon", "argon"]}}, "each gas once"),
        ({"seek": {k: v for k, v in SEEK.items() if k != "gap_mm"}}, "seek.gap_mm"),
        ({"tolerance": {"fill_pct": -1}}, "tolerance.fill_pct"),
        ({"tolerance": {"fill_pct": [1, 10]}}, "tolerance.fill_pct"),
        ({"tolerance": {"seed": 1.5}}, "a whole number"),
    ],
)
def test_one_fault_one_line(tables, words):
    assert words in fault(**tables)


def test_conditions_with_a_fault_are_still_named():
    """A fault in the conditions adds none where a study names them."""
    conditions = [TABLE["conditions"][0] | {"outdoor_C": 500}]
    assert fault(conditions=conditions, compare={"cold": "cold night"}).startswith("conditions.1.outdoor_C")


def write(tmp_path, text):
    path = tmp_path / "case.toml"
    path.write_text(text, encoding="utf-8")
    return path


def test_a_sweep_is_tried_on_the_case_when_its_file_is_read(tmp_path):
    text = (ROOT / "tests/invalid/sweep-of-nothing.toml").read_text(encoding="utf-8")
    with pytest.raises(CaseError) as caught:
        read_case(write(tmp_path, text))
    assert len(caught.value.faults) == 3
    fixed = text.replace("to = 600", "to = 500").replace("[1, 2, 3, 9]", "[2, 3]")
    assert read_case(write(tmp_path, fixed)).sweep.vary[1].values == (2, 3)


def test_every_key_is_documented():
    missing = {(kind, key) for kind, keys in KEYS.items() for key in keys if key not in DOCUMENT}
    shown = {
        f"light_{part}"
        for part in ("transmittance", "reflectance", "reflectance_coated_side", "reflectance_glass_side")
    }
    shown |= {f"normal_emissivity_{side}" for side in ("coated_side", "glass_side")}  # documented as "likewise"
    assert {key for _, key in missing} <= shown
    assert all(name in DOCUMENT for name in (*COLUMNS, *QUANTITIES))


def test_the_documented_ranges_are_those_that_hold():
    section = DOCUMENT.split("## Range of every number")[1]
    rows = dict(re.findall(r"^\| `([^`]+)` \| (.+?) \|$", section, flags=re.MULTILINE))
    assert rows == {key: allowed.words for key, allowed in LIMITS.items()}


def test_ranges_contain_what_they_say_and_nothing_else():
    for key, allowed in LIMITS.items():
        assert allowed.low < allowed.high, key
        assert allowed.allows(allowed.low) != allowed.above
        assert allowed.allows(allowed.high) != allowed.below
        outside = (math.nextafter(allowed.low, -math.inf), math.nextafter(allowed.high, math.inf), math.nan)
        assert not any(allowed.allows(value) for value in outside), key
    assert limit("tolerance", "gap_mm") != limit("layer.gap_mm", "gap_mm")


def test_wind_may_be_several_and_loads_have_partial_factors():
    loads = case(loads={"wind_Pa": [800, -600, 0], "partial_factor": 1.5}).loads
    assert loads.winds == (800, -600)
    assert loads.factors == (1.5, 1.0)
    assert case(loads={}).loads.winds == ()
    for wind in ([], [800, 800], [800, "a"], [2e4]):
        with pytest.raises(CaseError, match=r"loads\.wind_Pa"):
            case(loads={"wind_Pa": wind})


def test_kilopascals_are_warned_of():
    (wind, snow) = case(loads={"wind_Pa": [800, -0.8], "snow_Pa": 1.2}).warnings
    assert "-800" in wind
    assert "1200" in snow
    assert case(loads={"wind_Pa": [50, -50], "snow_Pa": 0}).warnings == ()
