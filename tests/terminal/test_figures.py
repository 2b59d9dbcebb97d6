"""Figures: numbers of a front that can be told apart, titles and words, what cannot be drawn."""

from itertools import pairwise
from pathlib import Path

import matplotlib
import matplotlib.figure
import pytest

from igu.model.study_tables import QUANTITIES
from igu.terminal.figures import APART, FIRST, LABELS, plainly, spread
from igu.terminal.main import main

matplotlib.use("Agg")
ROOT = Path(__file__).parents[2]
CROWDS = [[0.5] * 12, [0.05, 0.05, 0.06, 0.06, 0.07, 0.9], [0.1, 0.5, 0.9], [], [k / 29 for k in range(30)]]


@pytest.mark.parametrize("places", CROWDS, ids=len)
def test_numbers_stand_apart_in_their_order_on_the_axes(places):
    moved = spread(places)
    assert len(moved) == len(places)
    assert all(b - a >= APART - 1e-12 for a, b in pairwise(moved))
    assert all(FIRST <= place <= 1.0 + 1e-12 for place in moved)


def test_numbers_far_apart_stand_over_their_points():
    assert spread([0.1, 0.5, 0.9]) == [0.1, 0.5, 0.9]


def test_every_quantity_has_a_label_in_words():
    assert set(LABELS) >= set(QUANTITIES)
    assert plainly("U_W_m2K") == "U"
    assert plainly("hottest_pane_C") == "hottest face"


@pytest.fixture
def drawn(monkeypatch, tmp_path):
    """The texts of the figure that a command draws, and where each numbered point lies."""
    kept = []
    saved = matplotlib.figure.Figure.savefig
    monkeypatch.setattr(
        matplotlib.figure.Figure, "savefig", lambda self, *a, **k: (kept.append(self), saved(self, *a, **k))
    )
    monkeypatch.chdir(ROOT)

    def by(*words):
        assert main([*words, "--force", "--figure", str(tmp_path / "f.svg")]) == 0
        return kept[-1]

    return by


def texts(figure):
    axes = figure.get_axes()
    legends = [text.get_text() for a in axes if a.get_legend() for text in a.get_legend().get_texts()]
    return [figure.get_suptitle(), *legends, *(a.get_title(loc="right") for a in axes)]


SEEK = """
title = "small search"
layer = [{ glass = "clear", thickness_mm = 4 }]
[[conditions]]
set = "en-673"
[[conditions]]
set = "en-410"
[seek]
panes = [2]
glasses = ["clear", "low-iron"]
thickness_mm = [4, 6]
gap_mm = [12, 16]
gases = ["air", "argon"]
coatings = ["soft-single", "soft-double"]
"""


def test_a_front_is_numbered_point_by_point(drawn, tmp_path):
    path = tmp_path / "s.toml"
    path.write_text(SEEK, encoding="utf-8")
    figure = drawn("seek", str(path), "--workers", "1")
    (axes,) = figure.get_axes()
    front = next(line for line in axes.get_lines() if line.get_label().startswith("front"))
    points = {str(k): point for k, point in enumerate(zip(*front.get_data(), strict=True), 1)}
    assert len(points) > 2
    assert {note.get_text(): note.xy for note in axes.texts} == points
    assert texts(figure)[:3] == ["small search", "front, numbered as in the table", "best by U"]


def test_a_sweep_and_a_comparison_have_titles_and_the_cross_is_told(drawn):
    words = texts(drawn("sweep", "cases/lake-gap-widths.toml"))
    assert words[0] == "Reading room, gap width and gas"
    assert "× least U" in words
    assert texts(drawn("compare", "cases/reading-room.toml"))[0] == "Reading room, lake façade, unit A"


def test_the_section_of_several_cases_is_refused(capsys, tmp_path):
    paths = [str(ROOT / f"cases/{name}.toml") for name in ("reading-room", "vacuum-unit")]
    assert main(["solve", *paths, "--figure", str(tmp_path / "f.svg")]) == 2
    assert capsys.readouterr() == ("", "--figure draws one case; given 2\n")
    assert list(tmp_path.iterdir()) == []
