"""Comparisons in print: rows told apart, what stays is said, moves in sentences, width."""

import csv
import io
import itertools
import json
from pathlib import Path

import pytest

from igu.terminal.main import main
from tests.terminal.build import SUN_A

ROOT = Path(__file__).parents[2]
CONDITIONS = """
[[conditions]]
name = "winter"
outdoor_C = -18
indoor_C = 21
wind_m_s = 5
[[conditions]]
name = "summer"
outdoor_C = 32
indoor_C = 24
wind_m_s = 2
sun_W_m2 = 800
"""
GAP = '{ gap_mm = 14, gas = "argon" }'


def pane(**how):
    keys = {"glass": "clear", "thickness_mm": 4, **how}
    return "{ " + ", ".join(f"{key} = {json.dumps(value)}" for key, value in keys.items()) + " }"


@pytest.fixture
def compared(capsys, tmp_path, monkeypatch):
    """What compare prints for a case of these layers."""
    monkeypatch.chdir(tmp_path)

    def of(*layers, more="", form=()):
        text = f'title = "t"\nlayer = [{", ".join(layers)}]\n{CONDITIONS}{more}'
        (tmp_path / "case.toml").write_text(text, encoding="utf-8")
        assert main(["compare", "case.toml", *form]) == 0
        return capsys.readouterr().out

    return of


def together(text):
    return " ".join(text.split())


def test_a_row_without_the_coating_says_what_low_emissivity_stays(compared):
    out = compared('{ pane = "sun-A", coated_face = "in" }', GAP, pane(coating_in="hard"), more=SUN_A)
    assert "none added" in out
    assert "In every row: face 2 ε 0.03 (sun-A)." in together(out)
    bare = compared(pane(), GAP, pane(coating_in="hard"))
    assert "none added" not in bare
    assert "In every row" not in bare


def test_a_measured_pane_that_turns_is_not_said_to_stay(compared):
    out = compared(pane(), GAP, '{ pane = "sun-A", coated_face = "out" }', more=SUN_A)
    assert "3 sun-A <" in out
    assert "In every row" not in out
    assert "From face 3 to face 4: U" in out


def test_the_unit_as_in_the_case_has_a_column_of_its_own_for_scripts(compared):
    layers = (pane(coating_in="soft-single"), GAP, pane())
    rows = list(csv.DictReader(io.StringIO(compared(*layers, form=["--csv"]))))
    assert [(row["coating_on_face"], row["as_in_case"]) for row in rows] == [
        ("none", "False"),
        ("2 soft-single", "True"),
        ("3 soft-single", "False"),
    ]
    found = json.loads(compared(*layers, form=["--json"]))["rows"]
    assert [row["as_in_case"] for row in found] == [False, True, False]
    assert "2 soft-single <" in compared(*layers)


def test_coatings_named_that_the_case_has_mark_its_row_too(compared):
    more = '[compare]\ncoatings = ["soft-single"]\n'
    found = json.loads(compared(pane(coating_in="soft-single"), GAP, pane(), more=more, form=["--json"]))["rows"]
    assert [row["as_in_case"] for row in found] == [False, True, False]
    bare = json.loads(compared(pane(), GAP, pane(), more=more, form=["--json"]))["rows"]
    assert [row["as_in_case"] for row in bare] == [True, False, False]


PAIRS = list(itertools.product(("soft-single", "soft-double", "hard"), repeat=2))


@pytest.mark.parametrize("pair", PAIRS, ids="+".join)
def test_two_coatings_fit_a_hundred_columns(compared, pair):
    out = compared(pane(coating_in=pair[0]), GAP, pane(), GAP, pane(coating_out=pair[1]))
    assert max(map(len, out.splitlines())) <= 100
    assert out.count("τ_v/g") == 1
    assert "the other staying on face" in together(out)


def test_the_move_of_one_of_two_coatings_is_that_of_the_rows(compared):
    layers = (pane(coating_in="soft-single"), GAP, pane(), GAP, pane(coating_out="soft-single"))
    found = json.loads(compared(*layers, form=["--json"]))
    rows = {row["coating_on_face"]: row for row in found["rows"]}
    gain = rows["3+5 soft-single"]["solar_factor_g"] - rows["2+5 soft-single"]["solar_factor_g"]
    (move,) = [text for text in found["remarks"] if text.startswith("soft-single from face 2 to face 3")]
    assert f"the other staying on face 5: U unchanged, g up {gain:.3f}" in move


def test_several_cases_have_no_move_between_them(capsys):
    """Coatings on faces 2 and 3 of different units are no move of a coating."""
    files = ["reading-room", "lake-gap-widths", "vacuum-unit"]
    paths = [str(ROOT / f"cases/{name}.toml") for name in files]
    assert main(["compare", *paths]) == 0
    out = capsys.readouterr().out
    assert "From face" not in out
    assert "conditions of the first case" in together(out)
    assert "as the case has it" not in out
    main(["compare", *paths, "--csv"])
    rows = list(csv.DictReader(io.StringIO(capsys.readouterr().out)))
    assert [row["file"] for row in rows] == paths
    assert "coating_on_face" not in rows[0]


def test_cases_of_one_name_are_told_apart_by_their_folders(capsys, tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    text = (ROOT / "cases/reading-room.toml").read_text(encoding="utf-8")
    for folder in ("a", "b"):
        (tmp_path / folder).mkdir()
        (tmp_path / folder / "unit.toml").write_text(text, encoding="utf-8")
    main(["compare", "a/unit.toml", "b/unit.toml"])
    out = capsys.readouterr().out
    assert "a/unit.toml" in out
    assert "b/unit.toml" in out


def test_long_names_fold_the_table(capsys, tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    text = (ROOT / "cases/reading-room.toml").read_text(encoding="utf-8")
    names = [f"{'long-name-of-a-case-' * 3}{k}.toml" for k in (1, 2)]
    for name in names:
        (tmp_path / name).write_text(text, encoding="utf-8")
    main(["compare", *names])
    out = capsys.readouterr().out
    assert max(map(len, out.splitlines())) <= 100
    assert out.count(names[0].removesuffix(".toml")) > 1
    for head in ("direct", "τ_v", "pane"):
        assert head in out


def test_more_than_two_coatings_are_told_what_to_do(capsys, tmp_path):
    path = tmp_path / "case.toml"
    layers = [pane(coating_out="hard", coating_in="soft-single"), GAP, pane(coating_in="hard")]
    path.write_text(f"layer = [{', '.join(layers)}]\n{CONDITIONS}", encoding="utf-8")
    assert main(["compare", str(path)]) == 2
    err = capsys.readouterr().err
    assert err.startswith(f"{path}: ")
    assert "not 3; name one or two under compare.coatings" in err


def test_the_default_columns_fit_80_columns(compared, monkeypatch):
    monkeypatch.delenv("COLUMNS", raising=False)
    out = compared(pane(coating_in="soft-double"), GAP, pane())
    assert max(map(len, out.splitlines())) <= 80
    assert out.count("τ_v/g") == 1


def test_a_narrow_terminal_folds_what_80_columns_do_not_hold(compared, monkeypatch):
    monkeypatch.setenv("COLUMNS", "80")
    out = compared(pane(coating_in="soft-double"), GAP, pane(), GAP, pane(coating_out="hard"))
    assert max(map(len, out.splitlines())) <= 80


def test_a_single_row_says_why_nothing_else_was_tried(compared):
    fixed = SUN_A + "inside_only = true\n"
    out = together(compared('{ pane = "sun-A", coated_face = "in" }', GAP, pane(), more=fixed))
    assert "One row: the unit has nothing that may go on another face." in out
    assert "One row" not in compared('{ pane = "sun-A", coated_face = "in" }', GAP, pane(), more=SUN_A)


def test_generic_coatings_and_measured_panes_are_remarked_on_where_they_are(compared):
    bare = together(compared('{ pane = "sun-A", coated_face = "in" }', GAP, pane(), more=SUN_A))
    assert "models, not measurements" not in bare
    assert bare.count("known by band values") == 1
    coated = together(compared(pane(coating_in="hard"), GAP, pane()))
    assert coated.count("models, not measurements") == 1
    assert "band values" not in coated


def test_heads_in_markdown_are_whole_words(compared):
    head = compared(pane(coating_in="hard"), GAP, pane(), form=["--markdown"]).splitlines()[0]
    assert "room face °C" in head
    assert "- " not in head


def test_vented_gaps_keep_soft_coatings_off(compared):
    out = together(compared(pane(coating_in="soft-single"), GAP, pane(), more="[sealed]\nvented = true\n"))
    assert "soft-single, for sealed gaps only, put on no other face" in out
    assert "3 soft-single" not in out
