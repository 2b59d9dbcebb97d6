"""The commands as a user calls them: exit codes, contract, tables, files, faults, narrow terminals."""

import csv
import io
import json
import os
import re
import subprocess
import sys
from pathlib import Path

import pytest

from igu.terminal.main import COMMANDS, main
from tests.terminal.build import SUN_A

ROOT = Path(__file__).parents[2]
CASES = sorted(str(p.relative_to(ROOT)) for p in (ROOT / "cases").glob("*.toml"))
ROOM = "cases/reading-room.toml"


@pytest.fixture(autouse=True)
def _at_the_top(monkeypatch):
    monkeypatch.chdir(ROOT)


def run(capsys, *words):
    code = main(list(words))
    out, err = capsys.readouterr()
    return code, out, err


CONTRACT = {
    "conditions", "method", "outcome", "warnings", "U_W_m2K", "U_declared_W_m2K", "flux_to_room_W_m2", "solar_factor_g",
    "solar_transmittance", "solar_reflectance_out", "light_transmittance", "light_reflectance_out",
    "light_reflectance_in", "secondary_factor_q_i", "panes", "gaps", "films", "largest_imbalance_W_m2", "iterations",
}  # fmt: skip
PANE = {"face_out_C", "face_in_C", "solar_absorptance", "absorbed_W_m2", "inward_flowing_fraction"}
GAP = {"width_mm", "mean_C", "rayleigh", "nusselt", "convection_W_m2K", "radiation_W_m2K", "flux_W_m2"}
FILMS = {"outdoor_convection_W_m2K", "outdoor_radiation_W_m2K", "indoor_convection_W_m2K", "indoor_radiation_W_m2K"}


@pytest.mark.parametrize("path", CASES)
def test_json_keeps_the_contract(capsys, path):
    code, out, err = run(capsys, "solve", path, "--json")
    assert (code, err) == (0, "")
    document = json.loads(out)
    assert set(document) == {"igu", "cases"}
    (case,) = document["cases"]
    assert case["file"] == path
    for r in case["results"]:
        assert set(r) >= CONTRACT
        assert set(r["films"]) == FILMS
        assert all(set(p) >= PANE for p in r["panes"])
        assert all(set(g) >= GAP for g in r["gaps"])
        assert len(r["gaps"]) == len(r["panes"]) - 1


def results(capsys, path):
    return {r["conditions"]: r for r in json.loads(run(capsys, "solve", path, "--json")[1])["cases"][0]["results"]}


def test_what_is_not_defined_is_null(capsys):
    found = results(capsys, ROOM)
    standard, night, noon = found["en-673"], found["cold night"], found["July noon"]
    assert standard["U_declared_W_m2K"] == 1.2
    assert standard["panes"][0]["face_out_C"] is None
    assert night["U_declared_W_m2K"] is None
    assert night["solar_factor_g"] is None
    assert noon["solar_factor_g"] == pytest.approx(noon["solar_transmittance"] + noon["secondary_factor_q_i"])
    film = results(capsys, "cases/film-winter.toml")["frost"]
    assert [g["radiation_W_m2K"] for g in film["gaps"]] == [None, None]
    assert film["gaps"][0]["flux_W_m2"] < 0.0
    vacuum = results(capsys, "cases/vacuum-unit.toml")["ansi-nfrc-100"]
    assert vacuum["gaps"][0]["rayleigh"] is None


def test_the_budget_adds_up(capsys):
    budget = results(capsys, ROOM)["July noon"]["budget"]
    net = budget.pop("net_W_m2")
    assert sum(budget.values()) == pytest.approx(net, abs=1e-9)


@pytest.mark.parametrize("path", CASES)
@pytest.mark.parametrize("command", ["solve", "service", "angles"])
def test_reports_fit_80_columns(capsys, command, path):
    code, out, _ = run(capsys, command, path)
    assert code == 0
    assert max(len(line) for line in out.splitlines()) <= 80


@pytest.mark.parametrize("path", [p for p in CASES if "film" not in p])
def test_comparisons_fit_100_columns(capsys, path):
    code, out, _ = run(capsys, "compare", path)
    assert code == 0
    assert max(len(line) for line in out.splitlines()) <= 100


def test_the_report_names_models_methods_and_defaults(capsys):
    out = " ".join(run(capsys, "solve", ROOM)[1].split())
    for words in ("model, not a measurement", "ISO 15099:2003", "EN 673:2011", "ASTM G173", "natural, computed",
                  "U_g 1.2 W/(m²K)", "largest imbalance"):  # fmt: skip
        assert words in out


def test_what_can_hurt_someone_carries_a_caution(capsys, tmp_path):
    assert "licensed engineer" in run(capsys, "solve", "cases/roof-light.toml")[1]
    assert "licensed engineer" in run(capsys, "service", ROOM)[1]
    path = tmp_path / "c.toml"
    text = (ROOT / ROOM).read_text(encoding="utf-8") + '[compare]\ncolumns = ["U_W_m2K", "fracture_margin_K"]\n'
    path.write_text(text, encoding="utf-8")
    assert "licensed" in run(capsys, "compare", str(path))[1]


STUDIES = """
[compare]
coatings = ["soft-single"]
columns = ["U_W_m2K"%s]
[sweep]
vary = [{ key = "unit.tilt_deg", values = [%g, 90] }]
of = ["U_W_m2K"]
[seek]
panes = [2]
glasses = ["clear"]
thickness_mm = [4]
gap_mm = [12]
gases = ["air"]
rank_by = "U_W_m2K"
"""


@pytest.mark.parametrize(("tilt", "column", "words"), [
    (90, "", None), (30, "", "Overhead glazing."), (90, ', "deflection_mm"', "Bowing and thermal fracture."),
])  # fmt: skip
def test_machine_formats_carry_the_caution_too(capsys, tmp_path, tilt, column, words):
    text = (ROOT / ROOM).read_text(encoding="utf-8")
    path = tmp_path / "c.toml"
    text = text.replace("[unit]", f"[unit]\ntilt_deg = {tilt}").partition('[[conditions]]\nset = "en-673"')[0]
    path.write_text(text + STUDIES % (column, tilt), encoding="utf-8")
    for command in ("solve", "compare", "sweep", "seek"):
        expected = words if command == "compare" or words != "Bowing and thermal fracture." else None
        record = json.loads(run(capsys, command, str(path), "--json")[1])
        record = record["cases"][0] if command == "solve" else record
        rows = csv_rows(capsys, command, str(path))
        assert list(rows[0])[-1] == "caution"
        markdown = " ".join(run(capsys, command, str(path), "--markdown")[1].split())
        if expected is None:
            assert record["caution"] is None
            assert {row["caution"] for row in rows} == {""}
            assert "licensed" not in markdown
        else:
            assert record["caution"].startswith(expected)
            assert rows[0]["caution"] == record["caution"]
            assert record["caution"] in markdown
            assert rows[-1]["caution"] == ("" if command == "sweep" else record["caution"])  # upright at its end
    assert {"licensed engineer" in row["caution"] for row in csv_rows(capsys, "service", str(path))} == {True}


LAYERS = """
layer = [{ pane = "sun-A", coated_face = "in" }, { gap_mm = 14, gas = "air" }, { glass = "clear", thickness_mm = 4 }]
"""
MEASURED = (
    LAYERS
    + SUN_A
    + """
[[conditions]]
name = "summer"
outdoor_C = 32
indoor_C = 24
wind_m_s = 2
sun_W_m2 = 800
[sweep]
vary = [{ key = "layer.2.gap_mm", values = [12, 14] }]
of = ["solar_factor_g"]
[seek]
layers = [{ case_layer = 1 }, { case_layer = 2 }, { case_layer = 3 }]
rank_by = "solar_factor_g"
"""
)


def test_what_measured_panes_leave_uncertain_is_in_the_json(capsys, tmp_path):
    text = (ROOT / ROOM).read_text(encoding="utf-8")
    path = tmp_path / "c.toml"
    path.write_text(text + STUDIES % ("", 90), encoding="utf-8")
    for command in ("compare", "sweep", "seek"):
        record = json.loads(run(capsys, command, str(path), "--json")[1])
        plain = " ".join(run(capsys, command, str(path))[1].split())
        assert record["warnings"] == []
        assert "band values" not in plain
    path.write_text(MEASURED, encoding="utf-8")
    for command in ("compare", "sweep", "seek"):
        record = json.loads(run(capsys, command, str(path), "--json")[1])
        plain = " ".join(run(capsys, command, str(path))[1].split())
        (said,) = record["warnings"]
        assert "known by band values" in said
        assert said in plain


def test_a_roof_light_is_declared_by_its_vertical_values_and_says_so(capsys):
    out = " ".join(run(capsys, "solve", "cases/roof-light.toml")[1].split())
    for words in ("Position (unit built at 30°) vertical vertical", "en-673: vertical (as declared), unit built at 30°",
                  "U_g 1.2 W/(m²K)", "vertical position, as declared; the unit is built at 30°"):  # fmt: skip
        assert words in out
    found = results(capsys, "cases/roof-light.toml")
    assert {name: r["tilt_deg"] for name, r in found.items()} == {
        "clear calm night": 30.0, "midsummer": 30.0, "en-673": 90.0, "en-410": 90.0,
    }  # fmt: skip
    assert found["en-673"]["U_declared_W_m2K"] == 1.2
    assert "Position" not in run(capsys, "solve", ROOM)[1]


def test_where_the_edge_temperature_comes_from_is_said(capsys, tmp_path):
    text = (ROOT / ROOM).read_text(encoding="utf-8").replace('name = "July noon"', 'name = "July noon"\nedge_C = 30')
    text += '[compare]\ncolumns = ["U_W_m2K", "fracture_margin_K"]\n'
    path = tmp_path / "c.toml"
    path.write_text(text, encoding="utf-8")
    assert "edge 30.0 °C given in the conditions" in " ".join(run(capsys, "service", str(path))[1].split())
    assert "Edge in its rebate given in the conditions." in " ".join(run(capsys, "compare", str(path))[1].split())
    (row, *_) = json.loads(run(capsys, "service", str(path), "--json")[1])[0]["thermal_fracture"]
    assert (row["edge_C"], row["edge_from"]) == (pytest.approx(30.0), "conditions")
    path.write_text(text.replace("edge_C = 30", "") + "[frame]\nedge_C = 25\n", encoding="utf-8")
    assert "edge 25.0 °C given in [frame]" in " ".join(run(capsys, "service", str(path))[1].split())


def test_resistances_add_to_one_over_u(capsys):
    out = run(capsys, "solve", ROOM)[1]
    one_over_u = float(out.split("1/U = ")[1].split()[0])
    parts = out.split("1/U = ")[1].split("\n\n")[0].split("\n", 1)[1]
    terms = [float(part.split(" (")[0].split()[-1]) for part in " ".join(parts.split()).split(" = ")[0].split(" + ")]
    assert sum(terms) == pytest.approx(one_over_u, abs=3e-4)
    assert one_over_u == pytest.approx(1.0 / results(capsys, ROOM)["cold night"]["U_W_m2K"], abs=5e-5)


def csv_rows(capsys, *words):
    """Rows by header, numbers as numbers, as a spreadsheet or a data frame reads them."""
    reader = csv.DictReader(io.StringIO(run(capsys, *words, "--csv")[1]), strict=True)
    rows = list(reader)
    assert len(set(reader.fieldnames)) == len(reader.fieldnames)
    assert all(None not in row and None not in row.values() for row in rows)
    return rows


def test_csv_has_every_figure_of_the_json_in_full(capsys):
    paths = [ROOM, "cases/north-triple.toml", "cases/film-winter.toml"]
    rows = csv_rows(capsys, "solve", *paths)
    document = json.loads(run(capsys, "solve", *paths, "--json")[1])
    found = [(case["file"], r) for case in document["cases"] for r in case["results"]]
    assert len(rows) == len(found) == 10
    compared = 0
    for row, (file, r) in zip(rows, found, strict=True):
        assert (row["file"], row["conditions"], row["warnings"]) == (file, r["conditions"], "; ".join(r["warnings"]))
        flat = {key: value for key, value in r.items() if key != "budget" and not isinstance(value, list | dict)}
        flat |= {f"pane_{k}_{key}": value for k, pane in enumerate(r["panes"], 1) for key, value in pane.items()}
        flat |= {f"gap_{k}_{key}": value for k, gap in enumerate(r["gaps"], 1) for key, value in gap.items()}
        flat |= {f"budget_{key}": value for key, value in (r["budget"] or {}).items()}
        for key, value in flat.items():
            assert row[key] == ("" if value is None else str(value)), key
            compared += value is not None
    assert compared > 300
    assert rows[0]["pane_3_face_in_C"] == ""


def test_csv_of_angles_is_one_table_of_numbers(capsys):
    rows = csv_rows(capsys, "angles", ROOM, "cases/north-triple.toml")
    beams = [row for row in rows if row["diffuse_share"] == "0.0"]
    assert [int(row["incidence_deg"]) for row in beams] == [*range(0, 90, 5)] * 2
    assert [row["incidence_deg"] for row in rows if row not in beams] == ["", ""]
    assert rows[0]["pane_3_solar_absorptance"] == ""
    for row in rows:
        parts = ["solar_transmittance", "solar_reflectance_out", *(f"pane_{k}_solar_absorptance" for k in (1, 2, 3))]
        assert sum(float(row[name] or 0.0) for name in parts) == pytest.approx(1.0, abs=1e-9)
    (case, _) = json.loads(run(capsys, "angles", ROOM, "cases/north-triple.toml", "--json")[1])
    assert case["rows"][-1]["incidence_deg"] is None
    assert str(case["rows"][3]["solar_factor_g"]) == rows[3]["solar_factor_g"]


def test_faults_of_all_files_at_once_and_nothing_on_stdout(capsys):
    code, out, err = run(capsys, "solve", "tests/invalid/no-layers.toml", ROOM, "tests/invalid/not-toml.toml")
    assert (code, out) == (2, "")
    assert len(err.splitlines()) == 2
    assert "Traceback" not in err


@pytest.mark.parametrize("path", sorted((ROOT / "tests/invalid").glob("*.toml")), ids=lambda p: p.stem)
def test_the_command_says_what_the_reader_says(capsys, monkeypatch, path):
    monkeypatch.chdir(path.parent)
    code, out, err = run(capsys, "check", path.name)
    assert (code, out) == (2, "")
    assert err == path.with_suffix(".expected.txt").read_text(encoding="utf-8")


def test_check_says_what_it_understood(capsys):
    code, out, err = run(capsys, "check", *CASES)
    assert (code, err) == (0, "")
    assert [line.split(":")[0] for line in out.splitlines() if not line.startswith(" ")] == CASES
    assert max(map(len, out.splitlines())) <= 80
    assert "6 clear [2 soft-single] | 16 mm 90 % argon, 10 % air | 4 clear" in out
    assert "[sweep]" in out


@pytest.mark.parametrize("kind", ["glasses", "coatings", "gases", "interlayers", "conditions"])
def test_list_gives_figures_and_sources(capsys, kind):
    code, out, _ = run(capsys, "list", kind, "--json")
    rows = json.loads(out)[kind]
    assert code == 0
    assert all(row["source"] for row in rows)
    plain = run(capsys, "list", kind)[1]
    assert max(len(line) for line in plain.splitlines()) <= 80
    assert all(row["name"] in plain for row in rows)


def test_glasses_and_coatings_are_listed_with_what_solve_says_of_a_single_pane(capsys, tmp_path):
    path = tmp_path / "c.toml"
    for kind, name, keys in (("glasses", "grey", 'glass = "grey"'), ("coatings", "hard", 'glass = "clear"')):
        rows = json.loads(run(capsys, "list", kind, "--json")[1])[kind]
        (row,) = (row for row in rows if row["name"] == name)
        coated = 'coating_out = "hard"\n' if kind == "coatings" else ""
        path.write_text(
            f'[[layer]]\n{keys}\nthickness_mm = 6\n{coated}[[conditions]]\nset = "en-410"\n', encoding="utf-8"
        )
        found = results(capsys, str(path))["en-410"]
        reflected = row["solar_reflectance_coated_side" if coated else "solar_reflectance"]
        assert row["light_transmittance"] == pytest.approx(found["light_transmittance"], abs=1e-12)
        assert row["solar_transmittance"] == pytest.approx(found["solar_transmittance"], abs=1e-12)
        assert reflected == pytest.approx(found["solar_reflectance_out"], abs=1e-12)


def test_the_whole_list_is_one_csv_and_explains_its_marks(capsys):
    rows = list(csv.DictReader(io.StringIO(run(capsys, "list", "--csv")[1])))
    assert {row["kind"] for row in rows} == {"glasses", "coatings", "gases", "interlayers", "conditions"}
    assert all(row["source"] and None not in row for row in rows)
    assert float(next(row for row in rows if row["name"] == "argon")["mole_mass_g_mol"]) == pytest.approx(39.948)
    assert "[memory] recalled" in " ".join(run(capsys, "list", "interlayers")[1].split())
    assert "[memory]" not in run(capsys, "list", "glasses")[1]


def test_sweep_prints_matrix_and_optima(capsys):
    code, out, _ = run(capsys, "sweep", "cases/lake-gap-widths.toml")
    assert code == 0
    assert "with layer.2.gas argon" in out
    rows = json.loads(run(capsys, "sweep", "cases/lake-gap-widths.toml", "--json")[1])
    assert len(rows["rows"]) == 30
    assert rows["optima"][1]["at"] == pytest.approx(14.7, abs=0.1)


SWEEP = """
[sweep]
of = ["U_W_m2K", "solar_factor_g", "selectivity", "light_transmittance"]
[[sweep.vary]]
key = "layer.1.glass"
values = ["clear", "green"]
[[sweep.vary]]
key = "%s"
values = %s
"""
ACROSS = [("layer.2.gap_mm", list(range(6, 26))), ("layer.3.glass", ["clear", "grey"])]


@pytest.mark.parametrize(("key", "values"), ACROSS)
def test_choices_down_are_told_and_drawn(capsys, tmp_path, key, values):
    """A wide matrix is folded; of choices, which the tables mark, the best alone has a sentence."""
    path = tmp_path / "s.toml"
    text = (ROOT / ROOM).read_text(encoding="utf-8") + SWEEP % (key, json.dumps(values))
    path.write_text(text, encoding="utf-8")
    code, out, _ = run(capsys, "sweep", str(path), "--figure", str(tmp_path / "f.png"))
    assert code == 0
    assert (tmp_path / "f.png").stat().st_size > 3000
    assert max(map(len, out.splitlines())) <= 80
    assert out.count("least U_W_m2K") == 1
    for value in values:
        assert re.search(rf"(?<!\S){value}(?!\S)", out)


def test_a_figure_that_cannot_be_drawn_does_not_cost_the_search(capsys, tmp_path):
    path = tmp_path / "s.toml"
    path.write_text(SEEK % 0.4, encoding="utf-8")
    code, out, err = run(capsys, "seek", str(path), "--workers", "1", "--figure", str(tmp_path / "f.svg"))
    assert code == 1
    assert "Nearest miss" in out
    assert "no front to draw" in err
    assert not (tmp_path / "f.svg").exists()


UNKNOWN_IN_THE_SUN = """
layer = [{ glass = "own", thickness_mm = 4 }]
[glass.own]
conductivity_W_mK = 1
emissivity = 0.84
[[conditions]]
set = "en-673"
"""


@pytest.mark.parametrize(("command", "words"), [("angles", "nothing is known of the sun"), ("compare", "no coating")])
def test_a_unit_that_a_study_refuses_is_told_with_its_file(capsys, tmp_path, command, words):
    path = tmp_path / "own.toml"
    path.write_text(UNKNOWN_IN_THE_SUN, encoding="utf-8")
    code, out, err = run(capsys, command, str(path))
    assert (code, out) == (2, "")
    assert err.startswith(f"{path}: ")
    assert words in err


def test_a_case_without_the_table_is_told(capsys):
    for command, words in (("sweep", "no [sweep] table"), ("seek", "no [seek] table")):
        code, out, err = run(capsys, command, ROOM)
        assert (code, out) == (2, "")
        assert words in err


SEEK = """
title = "small search"
layer = [{ glass = "clear", thickness_mm = 4 }]
[[conditions]]
set = "en-673"
[seek]
panes = [2]
glasses = ["clear"]
thickness_mm = [4, 6]
gap_mm = [12, 16]
gases = ["air", "argon"]
coatings = ["soft-single"]
[seek.limits]
U_max_W_m2K = %s
"""


def test_seek_finds_or_names_the_nearest_miss(capsys, tmp_path):
    path = tmp_path / "s.toml"
    path.write_text(SEEK % 1.3, encoding="utf-8")
    code, out, err = run(capsys, "seek", str(path), "--workers", "1")
    assert code == 0
    assert err == ""
    assert "meet everything" in out
    path.write_text(SEEK % 0.4, encoding="utf-8")
    code, out, _ = run(capsys, "seek", str(path), "--workers", "1", "--json")
    found = json.loads(out)
    assert code == 1
    assert found["meeting"] == 0
    assert found["nearest"]["U_W_m2K"] > 0.4


@pytest.mark.parametrize("workers", ["0", "-2"])
def test_seek_refuses_less_than_one_worker(capsys, tmp_path, workers):
    path = tmp_path / "s.toml"
    path.write_text(SEEK % 1.3, encoding="utf-8")
    words = f"--workers: given {workers}; allowed a whole number from 1\n"
    assert run(capsys, "seek", str(path), "--workers", workers) == (2, "", words)


def test_seek_csv_has_every_list_under_one_head(capsys, tmp_path):
    path = tmp_path / "s.toml"
    path.write_text((SEEK % 1.3).replace("[seek]", '[[conditions]]\nset = "en-410"\n[seek]'), encoding="utf-8")
    rows = list(csv.DictReader(io.StringIO(run(capsys, "seek", str(path), "--workers", "1", "--csv")[1])))
    found = json.loads(run(capsys, "seek", str(path), "--workers", "1", "--json")[1])
    assert [row["makeup"] for row in rows] == [c["makeup"] for c in found["best"] + found["front"]]
    assert {row["list"] for row in rows} == {"best", "front"}
    path.write_text(SEEK % 0.4, encoding="utf-8")
    (nearest,) = csv.DictReader(io.StringIO(run(capsys, "seek", str(path), "--workers", "1", "--csv")[1]))
    assert nearest["list"] == "nearest"


def test_seek_says_what_ties_and_how_many_fail_a_limit(capsys, tmp_path):
    path = tmp_path / "s.toml"
    path.write_text((SEEK % 1.3).replace("[seek]", '[seek]\nkeep = 1\nrank_by = "mass_kg_m2"'), encoding="utf-8")
    out = run(capsys, "seek", str(path), "--workers", "1")[1]
    found = json.loads(run(capsys, "seek", str(path), "--workers", "1", "--json")[1])
    assert found["tied"] > 0
    assert f"Best, by least mass_kg_m2; {found['tied']} more tie with the last" in out
    (limit,) = found["limits"]
    assert limit["fails"] == limit["excludes_alone"] == found["total"] - found["meeting"]
    assert "U under en-673; no sunny conditions in the case" in out


def test_seek_and_check_refuse_limits_that_the_conditions_do_not_tell(capsys, tmp_path):
    path = tmp_path / "s.toml"
    path.write_text(SEEK % 1.3 + "room_face_min_C = 15\n", encoding="utf-8")
    words = f"{path}: seek: room_face_C: not told by the conditions of the search (cold en-673, sun none)\n"
    assert run(capsys, "seek", str(path), "--workers", "1") == (2, "", words)
    assert run(capsys, "check", str(path)) == (2, "", words)


def test_seek_holds_a_declared_u_and_a_room_face_together(capsys, tmp_path):
    path = tmp_path / "s.toml"
    night = '[[conditions]]\nname = "night"\noutdoor_C = -10\nindoor_C = 20\nwind_m_s = 4\n[seek]'
    limits = "room_face_min_C = 14\nU_en673_max_W_m2K = 1.2\n"
    path.write_text((SEEK % 2.0).replace("[seek]", night) + limits, encoding="utf-8")
    code, out, _ = run(capsys, "seek", str(path), "--workers", "1")
    assert code == 0
    assert "U_en673_W_m2K at most 1.2" in out
    assert "U and room face under night" in out
    found = json.loads(run(capsys, "seek", str(path), "--workers", "1", "--json")[1])
    assert found["cold"] == "night"
    assert 0 < found["meeting"] < found["total"]
    assert all(c["U_en673_W_m2K"] <= 1.2 and c["room_face_C"] >= 14.0 for c in found["best"])


def test_seek_shows_the_decimals_that_tell_its_ranking_apart(capsys, tmp_path):
    path = tmp_path / "s.toml"
    path.write_text((SEEK % 1.3).replace("[12, 16]", "[15, 15.2]"), encoding="utf-8")
    out = run(capsys, "seek", str(path), "--workers", "1")[1]
    found = json.loads(run(capsys, "seek", str(path), "--workers", "1", "--json")[1])
    ranked = [c["U_W_m2K"] for c in found["best"]]
    apart = [len({f"{u:.{decimals}f}" for u in ranked}) for decimals in (2, 3, 4)]
    assert apart[0] < apart[2]
    needed = 2 + apart.index(apart[2])
    for u in ranked:
        assert f" {u:.{needed}f} " in out


def test_soft_coatings_are_not_sought_in_a_vented_unit(capsys, tmp_path):
    path = tmp_path / "s.toml"
    path.write_text((SEEK % 6.0).replace("[seek]", "[sealed]\nvented = true\n[seek]"), encoding="utf-8")
    out = run(capsys, "seek", str(path), "--workers", "1")[1]
    assert "soft-single, for sealed gaps only" in out
    assert "[2 soft-single]" not in out
    assert "models, not measurements" not in out


def test_seek_names_a_layer_of_the_case_that_is_not_in_the_search(capsys, tmp_path):
    path = tmp_path / "s.toml"
    text = (ROOT / "cases/highland-facade.toml").read_text(encoding="utf-8")
    text += '[seek]\nglasses = ["green"]\nthickness_mm = [6]\ngap_mm = [14]\ngases = ["argon"]\n'
    text += 'coatings = ["soft-double"]\n'
    path.write_text(text + "panes = [2]\n", encoding="utf-8")
    out = " ".join(run(capsys, "seek", str(path), "--workers", "1")[1].split())
    assert "not in the search: layer 1 (toughened), layer 3 (laminated); case_layer" in out
    held = '[[seek.layers]]\ntreatment = "toughened"\n[[seek.layers]]\n[[seek.layers]]\ncase_layer = 3\n'
    path.write_text(text + held, encoding="utf-8")
    out = " ".join(run(capsys, "seek", str(path), "--workers", "1")[1].split())
    assert "not in the search" not in out
    assert "6 green toughened [2 soft-double] | 14 mm argon | 4 clear+0.76 pvb+4 clear" in out


def test_output_files_are_not_overwritten_unasked(capsys, tmp_path):
    target = tmp_path / "out.json"
    assert run(capsys, "solve", ROOM, "--json", "--output", str(target))[:2] == (0, "")
    first = target.read_text(encoding="utf-8")
    code, _, err = run(capsys, "solve", ROOM, "--json", "--output", str(target))
    assert code == 2
    assert "--force" in err
    assert run(capsys, "solve", ROOM, "--csv", "--output", str(target), "--force")[0] == 0
    assert target.read_text(encoding="utf-8") != first
    assert [p.name for p in tmp_path.iterdir()] == ["out.json"]


def test_nothing_half_written(capsys, tmp_path):
    target = tmp_path / "no-such-folder" / "out.json"
    code, out, err = run(capsys, "solve", ROOM, "--json", "--output", str(target))
    assert (code, out) == (2, "")
    assert "no folder" in err


FIGURES = [["solve", ROOM], ["compare", ROOM], ["sweep", "cases/lake-gap-widths.toml"]]


@pytest.mark.parametrize("words", FIGURES, ids=lambda w: w[0])
@pytest.mark.parametrize("suffix", ["svg", "png", "pdf"])
def test_figures_are_written_whole(capsys, tmp_path, words, suffix):
    target = tmp_path / f"figure.{suffix}"
    assert run(capsys, *words, "--figure", str(target))[0] == 0
    assert target.stat().st_size > 3000
    assert [p.name for p in tmp_path.iterdir()] == [target.name]


def test_a_figure_of_another_kind_is_refused(capsys, tmp_path):
    code, out, err = run(capsys, "solve", ROOM, "--figure", str(tmp_path / "a.gif"))
    assert (code, out) == (2, "")
    assert ".svg" in err


def test_a_missing_matplotlib_gets_a_sentence(capsys, tmp_path, monkeypatch):
    monkeypatch.setitem(sys.modules, "matplotlib", None)
    code, _, err = run(capsys, "solve", ROOM, "--figure", str(tmp_path / "a.svg"))
    assert code == 2
    assert "igu[figures]" in err
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize("command", sorted(COMMANDS))
def test_every_command_has_help(capsys, command):
    code, out, _ = run(capsys, command, "--help")
    assert code == 0
    assert "exit codes" in out


def test_wrong_words_end_with_code_2(capsys):
    assert run(capsys, "sovle", ROOM)[0] == 2
    assert run(capsys)[0] == 2


def test_markdown_tables(capsys):
    for words in (["solve", ROOM], ["compare", ROOM], ["angles", ROOM]):
        out = run(capsys, *words, "--markdown")[1]
        assert out.startswith("| ")


def process(*words, **how):
    return subprocess.run(
        [sys.executable, "-m", "igu", *words], cwd=ROOT, capture_output=True, text=True, check=False, **how
    )


def test_a_closed_pipe_is_no_error():
    command = f'"{sys.executable}" -m igu solve {ROOM} {ROOM} | head -1'
    done = subprocess.run(["bash", "-c", command], cwd=ROOT, capture_output=True, text=True, check=False)
    assert done.stderr == ""
    assert done.stdout.startswith("Reading room")


@pytest.mark.parametrize("words", [["solve", ROOM], ["service", ROOM], ["angles", ROOM], ["list"]], ids=lambda w: w[0])
def test_a_terminal_that_knows_only_ascii_gets_a_report(words):
    done = process(*words, env={**os.environ, "PYTHONIOENCODING": "ascii", "PYTHONUTF8": "0"})
    assert (done.returncode, done.stderr) == (0, "")
    assert "?" not in done.stdout
    assert done.stdout.isascii()
    if words[0] == "solve":
        assert "U, W/(m2K)" in done.stdout
        assert "-18.0  C" in done.stdout


def test_json_loses_no_letter_on_a_narrow_terminal():
    narrow = {**os.environ, "PYTHONIOENCODING": "ascii", "PYTHONUTF8": "0"}
    for words in (["solve", ROOM], ["compare", ROOM], ["list"]):
        wide = json.loads(process(*words, "--json", encoding="utf-8").stdout)
        assert json.loads(process(*words, "--json", env=narrow).stdout) == wide


def test_a_name_that_is_no_unicode_is_no_traceback(tmp_path):
    name = os.fsdecode(b"caf\xff.toml")
    (tmp_path / name).write_bytes((ROOT / ROOM).read_bytes())
    for words in (["--json"], ["--json", "--output", str(tmp_path / "o.json")]):
        done = process("solve", str(tmp_path / name), *words, encoding="utf-8", errors="replace")
        assert (done.returncode, done.stderr) == (0, "")
    assert json.loads((tmp_path / "o.json").read_text(encoding="utf-8"))["cases"][0]["results"]


@pytest.mark.parametrize("where", ["> /dev/full", ">&-"])
def test_a_standard_output_that_takes_nothing_gets_a_sentence(where):
    if not Path("/dev/full").exists():
        pytest.skip("no /dev/full here")
    command = f'"{sys.executable}" -m igu solve {ROOM} {where}'
    done = subprocess.run(["bash", "-c", command], cwd=ROOT, capture_output=True, text=True, check=False)
    assert done.returncode == 2
    assert len(done.stderr.splitlines()) == 1
    assert "standard output" in done.stderr


def test_only_ordinary_files_are_replaced_and_links_stay_links(capsys, tmp_path):
    code, out, err = run(capsys, "solve", ROOM, "--output", os.devnull, "--force")
    assert (code, out) == (2, "")
    assert "no ordinary file" in err
    target, link = tmp_path / "a.txt", tmp_path / "link.txt"
    target.write_text("old", encoding="utf-8")
    link.symlink_to(target)
    assert run(capsys, "solve", ROOM, "--output", str(link), "--force")[0] == 0
    assert link.is_symlink()
    assert target.read_text(encoding="utf-8").startswith("Reading room")


def overheated(path):
    """Eight panes with evacuated gaps that absorb more than they can give off, and a sound condition beside."""
    pane = '[[layer]]\nglass = "clear"\nthickness_mm = 4\n'
    middle = pane + 'coating_out = "soft-double"\ncoating_in = "soft-double"\n'
    gap = "[[layer]]\ngap_mm = 0.2\nvacuum = { pressure_Pa = 0.0 }\n"
    hot = (
        '[[conditions]]\nname = "hot"\noutdoor_C = 40\nindoor_C = 40\noutdoor_convection_W_m2K = 1\n'
        f"absorbed_W_m2 = {[1500] * 8}\n"
    )
    text = gap.join([pane, *[middle] * 6, pane]) + hot + '[[conditions]]\nset = "ansi-nfrc-100"\n'
    path.write_text(text, encoding="utf-8")
    return str(path)


def test_a_balance_that_did_not_close_gives_no_figures(capsys, tmp_path):
    path = overheated(tmp_path / "hot.toml")
    code, out, err = run(capsys, "solve", path, "--json")
    hot, sound = json.loads(out)["cases"][0]["results"]
    assert (code, err) == (1, "")
    assert hot["outcome"] == "runaway"
    assert {hot["U_W_m2K"], hot["flux_to_room_W_m2"], *(p["face_in_C"] for p in hot["panes"])} == {None}
    assert {g["flux_W_m2"] for g in hot["gaps"]} == {None}
    assert hot["fogging"] == []
    assert hot["largest_imbalance_W_m2"] > 1.0
    assert sound["outcome"] == "solved"
    assert sound["panes"][0]["face_out_C"] is not None
    code, out, _ = run(capsys, "solve", path)
    assert code == 1
    assert "not closed" in out
    assert max(len(line) for line in out.splitlines()) <= 80


def test_columns_are_told_apart_and_a_radiant_temperature_is_shown(capsys, tmp_path):
    path = tmp_path / "c.toml"
    path.write_text(
        'layer = [{ glass = "clear", thickness_mm = 4 }]\n[[conditions]]\nset = "iso-15099-8.2-winter"\n'
        '[[conditions]]\nset = "iso-15099-8.2-summer"\n[[conditions]]\nname = "sky"\noutdoor_C = 0\nindoor_C = 20\n'
        "wind_m_s = 1\nsky_C = -20\nground_C = 0\n",
        encoding="utf-8",
    )
    out = run(capsys, "solve", str(path))[1]
    section = out.split("\n\n")[2]
    assert "8.2-winter" in section
    assert "8.2-summer" in section
    (radiant,) = (line for line in section.splitlines() if "OUTDOORS, radiant" in line)
    assert radiant.split()[-2] == "−9.4"  # ((253.15^4 + 273.15^4)/2)^(1/4) - 273.15 = -9.43
    assert "ROOM, radiant" not in section


def test_no_colour_and_no_progress_where_nobody_looks():
    done = process("sweep", "cases/lake-gap-widths.toml")
    assert done.stderr == ""
    assert "\x1b" not in done.stdout + done.stderr


@pytest.mark.parametrize("command", ["solve", "angles", "compare", "sweep", "seek", "service"])
def test_what_a_file_is_warned_of_is_said_by_every_command(capsys, tmp_path, command):
    text = (ROOT / ROOM).read_text(encoding="utf-8")
    asked = (
        '[sweep]\nvary = [{ key = "layer.2.gap_mm", values = [12, 16] }]\n[seek]\npanes = [2]\nglasses = ["clear"]\n'
    )
    asked += 'thickness_mm = [4]\ngases = ["air"]\ngap_mm = [12]\n[glass.spare]\nemissivity = 0.837\n'
    path = tmp_path / "spare.toml"
    path.write_text(text + asked, encoding="utf-8")
    warning = "glass.spare is defined and not used"
    code, out, _ = run(capsys, command, str(path))
    assert code == 0
    assert " ".join(out.split()).count(warning) == 1
    record = json.loads(run(capsys, command, str(path), "--json")[1])
    holder = record["cases"][0] if command == "solve" else record[0] if isinstance(record, list) else record
    assert sum(warning in text for text in holder["warnings"]) == 1
