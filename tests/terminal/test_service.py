"""The service report: short, verdicts first, everything once, the same figures in every format."""

import csv
import io
import json
from pathlib import Path

import pytest

from igu.terminal.figures import label_rows
from igu.terminal.main import main
from tests.terminal.test_commands import ROOT, run
from tests.terminal.test_report import odd_case

ROOM, ROOF = "cases/reading-room.toml", "cases/roof-light.toml"
FRAME = "\n[frame]\nedge_loss_W_mK = 0.06\n"


@pytest.fixture(autouse=True)
def _at_the_top(monkeypatch):
    monkeypatch.chdir(ROOT)


def said(capsys, *words):
    code, out, err = run(capsys, "service", *words)
    assert (code, err) == (0, "")
    return out


@pytest.fixture
def snowed(tmp_path):
    path = tmp_path / "roof.toml"
    given = "[loads]\nsnow_Pa = 1200"
    text = (ROOT / ROOF).read_text(encoding="utf-8")
    assert given in text
    path.write_text(text.replace(given, f"{FRAME}[loads]\nsnow_Pa = 2500\nwind_Pa = 800"), encoding="utf-8")
    return str(path)


def test_a_double_unit_takes_about_a_hundred_lines(capsys, snowed):
    assert [len(said(capsys, path).splitlines()) <= 120 for path in (ROOM, ROOF)] == [True, True]
    assert len(said(capsys, snowed).splitlines()) <= 140


def test_verdicts_come_first_and_are_the_ones_of_the_json(capsys):
    out = said(capsys, ROOF)
    block = " ".join(out.split("In short")[1].split("Limits of this program")[0].split())
    (record,) = json.loads(said(capsys, ROOF, "--json"))
    assert [v["verdict"] for v in record["verdicts"]] == [
        "doubtful",
        "doubtful",
        "doubtful",
        "passes",
        "doubtful",
        "passes",
    ]
    assert block == " ".join(f"{v['question']} {v['verdict']} {v['because']}" for v in record["verdicts"])
    assert out.index("In short") < out.index("Fogging at") < out.index("Gas pressure")


@pytest.mark.parametrize("path", [ROOM, ROOF, "cases/highland-facade.toml", "cases/vacuum-unit.toml"])
def test_cautions_and_methods_are_said_once(capsys, path):
    text = " ".join(said(capsys, path).split())
    for words in (
        "licensed engineer",
        "exact gas law",
        "half the thickness (*): linear",
        "Partial shade",
        "Marks:",
        "Closed at",
    ):
        assert text.count(words) <= 1, words
    assert text.count("Marks:") == ("[memory]" in text or "[seen]" in text)


@pytest.mark.parametrize("panes", [1, 3, 8])
@pytest.mark.parametrize(("kind", "gap", "tilt"), [
    ("plain", "mixture", 0), ("laminated", "mixture", 30), ("measured", "vacuum", 90), ("sheet", "mixture", 90),
])  # fmt: skip
def test_80_columns_hold_it(capsys, tmp_path, panes, kind, gap, tilt):
    path = odd_case(tmp_path / "c.toml", panes, "plain" if panes == 1 and kind == "sheet" else kind, gap, tilt, 2)
    with Path(path).open("a", encoding="utf-8") as file:
        file.write(f"{FRAME}[loads]\nsnow_Pa = 2500\nwind_Pa = 800\n")
    out = said(capsys, path)
    assert max(len(line) for line in out.splitlines()) <= 80


def test_snow_is_a_state_of_its_own_with_its_strength(capsys, snowed):
    out = " ".join(said(capsys, snowed).split())
    assert "clear calm night, dark with snow" in out
    assert "midsummer, dark with snow" not in out
    assert "11.0 (snow, 30 days)" in out
    (record,) = json.loads(said(capsys, snowed, "--json"))
    names = [(b["state"], b["shear_transfer"]) for b in record["bowing"]]
    assert len(set(names)) == len(names)


def test_figures_of_laminated_panes_stand_side_by_side(capsys):
    out = said(capsys, ROOF)
    (record,) = json.loads(said(capsys, ROOF, "--json"))
    layered, whole = (b for b in record["bowing"] if b["state"] == "standard summer load")
    rows = out.split("  standard summer load\n")[1].splitlines()
    low, high = layered["panes"][1], whole["panes"][1]
    star = ["" if pane["small_deflection"] else "*" for pane in (low, high)]
    assert rows[2].split()[2:] == [
        f"{low['load_Pa']:.0f}/{high['load_Pa']:.0f}",
        f"{low['centre_deflection_mm']:.2f}{star[0]}/{high['centre_deflection_mm']:.2f}{star[1]}",
        f"{low['mean_deflection_mm']:.2f}/{high['mean_deflection_mm']:.2f}",
        f"{low['stress_MPa']:.1f}/{high['stress_MPa']:.1f}",
        "/".join(f"{100 * p['stress_MPa'] / p['design_strength_MPa']:.0f}" for p in (low, high)),
    ]


def test_csv_has_every_table_and_the_figures_of_the_json(capsys):
    rows = list(csv.DictReader(io.StringIO(said(capsys, ROOM, ROOF, "--csv"))))
    records = json.loads(said(capsys, ROOM, ROOF, "--json"))
    for record in records:
        own = [row for row in rows if row["file"] == record["file"]]
        tables = {name: [row for row in own if row["table"] == name] for name in {row["table"] for row in own}}
        sizes = {"verdicts": 6, "fogging": 4, "ageing": 4, "thermal fracture": 2}
        assert {name: len(tables[name]) for name in sizes} == sizes
        parts = [part for b in record["bowing"] for part in (*b["panes"], *b["gaps"])]
        assert len(tables["bowing"]) == len(parts)
        stresses = [row["stress_MPa"] for row in tables["bowing"] if row["stress_MPa"]]
        assert stresses == [str(p["stress_MPa"]) for b in record["bowing"] for p in b["panes"]]
        assert [row["margin_K"] for row in tables["thermal fracture"]] == [
            str(f["margin_K"]) for f in record["thermal_fracture"]
        ]
        for key in ("year", "share_pct", "U_W_m2K", "share_linear_pct", "U_linear_W_m2K"):
            assert [float(row[key]) for row in tables["ageing"]] == record["ageing"][key]
        assert len(tables["tolerances"]) == len(record["tolerances"]["spreads"])


BARE = {"verdict", "quantity", "nominal", "low", "median", "high"}
"""Keys of numbers in the unit that the quantity beside them names, and of words."""

PURE = {"variable", "permanent", "shear_transfer", "face", "pane", "samples", "seed", "year"} | {
    "left_in_year", "left_in_year_linear",
}  # fmt: skip
"""Keys of numbers without a unit: factors, counts, years."""


def numbers(value, key=""):
    """Every number of a record with the key it stands under."""
    if isinstance(value, dict):
        for name, part in value.items():
            yield from numbers(part, key if key.endswith("_pct") else name)
    elif isinstance(value, list):
        for part in value:
            yield from numbers(part, key)
    elif isinstance(value, int | float) and not isinstance(value, bool):
        yield key


@pytest.mark.parametrize("path", [ROOM, ROOF])
def test_every_number_of_the_json_has_its_unit_in_its_key(capsys, path):
    (record,) = json.loads(said(capsys, path, "--json"))
    keys = set(numbers(record)) - BARE - PURE
    units = ("_C", "_K", "_Pa", "_MPa", "_mm", "_pct", "_pct_a", "_W_m2K")
    assert [key for key in keys if not key.endswith(units)] == []
    a, t = record["ageing"], record["tolerances"]
    assert (a["leakage_pct_a"], a["U_declared_W_m2K"]) == (1.0, t["U_declared_W_m2K"])
    assert a["U_W_m2K"][0] == t["spreads"][0]["nominal"]
    assert f"holds in {t['holds_pct']:.1f} %" in record["verdicts"][-1]["because"]


def test_markdown_has_a_table_for_every_question(capsys):
    out = said(capsys, ROOF, "--markdown")
    heads = [line[4:] for line in out.splitlines() if line.startswith("### ")]
    assert heads == [
        "Verdicts",
        "Fogging",
        "Bowing",
        "Thermal fracture",
        "Interlayers",
        "Ageing",
        "Tolerances",
        "What it rests on",
    ]
    assert "licensed engineer" in out
    assert out.count("|:") >= len(heads) - 1
    for words in ("EN 16612:2019 [memory]", "Marks: [memory]", "common practice, no source", "200 K"):
        assert words in out.split("### What it rests on")[1]


@pytest.mark.parametrize("path", [ROOF, "cases/retrofit-single.toml"])
def test_the_figure_is_drawn(capsys, tmp_path, path):
    target = tmp_path / "f.svg"
    said(capsys, path, "--figure", str(target))
    assert target.stat().st_size > 3000


def test_a_unit_without_bowing_is_not_drawn(capsys, tmp_path):
    target = tmp_path / "f.svg"
    assert main(["service", "cases/film-winter.toml", "--figure", str(target)]) == 2
    assert "nothing to draw" in capsys.readouterr().err
    assert not target.exists()


def test_a_figure_that_cannot_be_drawn_does_not_keep_the_report_back(capsys, tmp_path):
    report = said(capsys, "cases/film-winter.toml")
    assert main(["service", "cases/film-winter.toml", "--figure", str(tmp_path / "f.svg")]) == 2
    assert capsys.readouterr().out == report


def test_labels_of_close_panes_stand_above_one_another():
    close = [(1.5, "0.0"), (45.0, "0.0"), (49.0, "0.0"), (53.0, "0.0")]
    assert label_rows(close, 65.0) == [0, 0, 1, 0]
    assert label_rows(close, 40.0) == [0, 0, 0, 0]


def written(tmp_path, name, *changes):
    text = (ROOT / f"cases/{name}.toml").read_text(encoding="utf-8")
    for before, after in changes:
        assert before in text
        text = text.replace(before, after)
    path = tmp_path / "c.toml"
    path.write_text(text, encoding="utf-8")
    return str(path)


def test_partial_factors_are_named_in_the_line_the_notes_and_the_json(capsys, tmp_path):
    plain, factored = ROOF, written(tmp_path, "roof-light", ("[loads]\n", "[loads]\npartial_factor = 1.5\n"))
    records = [json.loads(said(capsys, path, "--json"))[0] for path in (plain, factored)]
    lines = [next(v["because"] for v in r["verdicts"] if v["question"] == "stress") for r in records]
    assert "loads without partial factors" in lines[0]
    assert "partial factors 1.5 (variable), 1 (permanent)" in lines[1]
    assert [r["partial_factors"] for r in records] == [
        {"variable": 1.0, "permanent": 1.0},
        {"variable": 1.5, "permanent": 1.0},
    ]
    assert any("without partial factors" in note for note in records[0]["notes"])
    assert any("1.5 on wind, snow and climate" in note for note in records[1]["notes"])
    snow = [next(b for b in r["bowing"] if "snow" in b["state"])["panes"][0] for r in records]
    assert snow[0]["load_Pa"] == snow[1]["load_Pa"]
    assert snow[1]["stress_MPa"] > 1.2 * snow[0]["stress_MPa"]


def test_the_standards_loads_are_explained_and_the_sites_height_named(capsys):
    room, highland = (" ".join(said(capsys, path).split()) for path in (ROOM, "cases/highland-facade.toml"))
    for words in ("summer +20 K, −2 kPa, +600 m", "winter −25 K, +4 kPa, −300 m", "without the site's own height"):
        assert room.count(words) == 1
    assert "φ = 0.0091, a* = 372 mm" in room  # 28.9 (16 x 216 x 64 / (280 x 0.0288))^(1/4) and 1 / (1 + (1200 / a*)^4)
    assert "site's own height stands for" in highland
    assert "+600 m;" not in highland


def test_a_vented_unit_with_argon_says_one_thing(capsys, tmp_path):
    head = '[[conditions]]\nname = "cold night"'
    path = written(tmp_path, "reading-room", (head, f"[sealed]\nvented = true\n\n{head}"))
    out = " ".join(said(capsys, path).split())
    assert "no gas to lose" not in out
    assert "does not keep its gas" in out
    assert "of samples, as filled" in out
    assert "inside the vented gap not judged" in out
    assert "no load acts: no wind given" in out
    code, solved, _ = run(capsys, "solve", path)
    assert code == 0
    assert "A vented unit does not keep a gas other than air" in " ".join(solved.split())
    (record,) = json.loads(run(capsys, "solve", path, "--json")[1])["cases"]
    assert any("hold as filled" in reason for reason in record["declaration"]["reasons"])


def test_what_was_not_loaded_or_not_worked_out_is_in_the_line(capsys):
    lines = {}
    for path in (ROOM, ROOF, "cases/vacuum-unit.toml"):
        (record,) = json.loads(said(capsys, path, "--json"))
        lines[path] = next(v["because"] for v in record["verdicts"] if v["question"] == "stress")
    assert "climate and weight only, no wind given" in lines[ROOM]
    assert "no wind given" in lines[ROOF]
    assert "climate and weight only" not in lines[ROOF]
    assert lines["cases/vacuum-unit.toml"] == "no stress was worked out"


def test_sealing_is_told_where_gas_is_sealed_and_says_what_is_taken_by_default(capsys, tmp_path):
    vacuum, room = said(capsys, "cases/vacuum-unit.toml"), " ".join(said(capsys, ROOM).split())
    for words in ("Closed at", "exact gas law", "at that bowing", "Standard loads"):
        assert words not in vacuum
    assert "Closed at 20.0 °C and 1013 hPa by default; exact gas law" in room
    assert room.count("U in the sun is the dark U at that bowing.") == 1
    head = '[[conditions]]\nname = "cold night"'
    for given, words in (
        ("temperature_C = 18", "Closed at 18.0 °C and 1013 hPa by default;"),
        ("pressure_Pa = 98000", "Closed at 20.0 °C by default and 980 hPa;"),
        ("temperature_C = 18\npressure_Pa = 98000", "Closed at 18.0 °C and 980 hPa;"),
    ):
        path = written(tmp_path, "reading-room", (head, f"[sealed]\n{given}\n\n{head}"))
        assert words in " ".join(said(capsys, path).split())


TOUCHING = """
layer = [{ glass = "clear", thickness_mm = 3 }, { gap_mm = 6, gas = "air" }, { glass = "clear", thickness_mm = 19 }]
[unit]
width_m = 2.5
height_m = 2.5
tilt_deg = 0
[sealed]
vented = true
[[conditions]]
name = "frosty"
outdoor_C = -8
indoor_C = 19
wind_m_s = 2
"""


def test_panes_that_touch_have_no_u(capsys, tmp_path):
    path = tmp_path / "c.toml"
    path.write_text(TOUCHING, encoding="utf-8")
    bowed = json.loads(said(capsys, str(path), "--json"))[0]["bowing"][0]
    assert bowed["gaps"][0]["touching"]
    assert bowed["U_W_m2K"] is None
    assert f"frosty, dark: U – (contact) bowed, {bowed['U_flat_W_m2K']:.3f} flat\n" in said(capsys, str(path))


def test_an_edge_colder_than_both_airs_is_told_once(capsys, tmp_path):
    head = '[[conditions]]\nname = "cold night"'
    path = written(tmp_path, "reading-room", (head, f"[frame]\nedge_C = 5\n\n{head}"))
    out = " ".join(said(capsys, path).split())
    assert out.count("edge 5.0 °C given in [frame]") == 2
    assert out.count("colder than the air on both sides under July noon; it is taken under every") == 1


MIXED = """
[[layer]]
glass = "clear"
thickness_mm = 3
[[layer]]
gap_mm = 40
gas = "air"
[[layer]]
glass = "clear"
thickness_mm = 4
[[layer]]
gap_mm = 0.2
vacuum = { pressure_Pa = 0.1, gas = "air", accommodation = 0.6 }
pillars = { pitch_mm = 25, radius_mm = 0.25, conductivity_W_mK = 15 }
[[layer]]
glass = "clear"
thickness_mm = 4
[loads]
wind_Pa = [600, -400]
[[conditions]]
name = "frosty"
outdoor_C = -8
indoor_C = 19
wind_m_s = 2
"""


def test_panes_beside_a_vacuum_are_named_where_others_are_judged(capsys, tmp_path):
    path = tmp_path / "c.toml"
    path.write_text(MIXED, encoding="utf-8")
    out = " ".join(said(capsys, str(path)).split())
    assert "panes 2, 3 beside a vacuum not judged" in out
    assert "no wind" not in out
    assert "frosty, dark with suction 400 Pa" in out


def test_a_likely_slip_in_the_loads_is_warned_of(capsys, tmp_path):
    path = written(tmp_path, "roof-light", ("snow_Pa = 1200", "snow_Pa = 1.2"))
    assert "WARNING" in (out := said(capsys, path))
    assert "1.2 Pa is hardly a load" in " ".join(out.split())
    (record,) = json.loads(said(capsys, path, "--json"))
    assert len(record["warnings"]) == 1
