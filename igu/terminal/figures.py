"""Figures for a report, readable in grey print. The one door to matplotlib, an optional extra."""

from __future__ import annotations

import math
from collections.abc import Sequence
from pathlib import Path
from typing import Any

import numpy as np

from igu.errors import OutputError
from igu.laws.constants import CELSIUS
from igu.laws.plate import centre_line
from igu.model.case import Case
from igu.model.unit import Unit
from igu.ratings.result import Result
from igu.studies.ageing import Ageing
from igu.studies.bowing import Bowed
from igu.studies.compare import Comparison
from igu.studies.seek import Search
from igu.studies.service import Service
from igu.studies.sweep import Table as Swept
from igu.studies.verdicts import state, worst_state
from igu.terminal.output import NO_MATPLOTLIB
from igu.terminal.tables import number

LINES = ("-", "--", "-.", ":")
MARKERS = ("o", "s", "^", "D", "v", "P")
LABELS = {
    "U_W_m2K": "U, W/(m²K)",
    "U_en673_W_m2K": "U by EN 673, W/(m²K)",
    "solar_factor_g": "solar factor g",
    "solar_transmittance": "solar transmittance",
    "secondary_factor_q_i": "secondary factor",
    "light_transmittance": "light transmittance τ_v",
    "selectivity": "τ_v/g",
    "room_face_C": "room-side face, °C",
    "fog_humidity_pct": "fogs from, % r.h.",
    "hottest_pane_C": "hottest face, °C",
    "thickness_mm": "thickness, mm",
    "mass_kg_m2": "mass, kg/m²",
}
"""Axis labels of the quantities."""

ABREAST = 3
"""Panels of one figure side by side."""

STYLE = {
    "font.size": 9.0,
    "axes.spines.top": False,
    "axes.spines.right": False,
    "svg.fonttype": "path",
    "svg.hashsalt": "igu",
}


def _pyplot() -> Any:
    try:
        import matplotlib
    except ImportError as error:
        raise OutputError(NO_MATPLOTLIB) from error
    matplotlib.use("Agg")
    import matplotlib.pyplot as pyplot

    return pyplot


def _saved(draw: Any, path: Path, size: tuple[float, float], panels: int = 1, *, title: str = "") -> None:
    """Let a function draw on axes of one figure, under a title, and save it."""
    pyplot = _pyplot()
    with pyplot.rc_context(STYLE):
        across, down = min(panels, ABREAST), -(-panels // ABREAST)
        figure, grid = pyplot.subplots(down, across, figsize=(size[0] * across, size[1] * down), squeeze=False)
        try:
            for spare in grid.flat[panels:]:
                spare.set_visible(False)
            draw(*grid.flat[:panels])
            if title:
                figure.suptitle(title, fontsize=10)
            figure.tight_layout()
            metadata = {"Date": None} if path.suffix == ".svg" else None
            figure.savefig(path, dpi=160, metadata=metadata)
        finally:
            pyplot.close(figure)


def draw_section(solved: Sequence[tuple[Case, Sequence[Result]]], path: Path) -> None:
    """Temperature through the section of the first case, panes and gaps to scale."""
    case, results = solved[0]
    states = [r for r in results if r.panes and r.panes[0].face_out is not None]
    if not states:
        raise OutputError(f"{case.file}: no temperatures under its conditions, nothing to draw")

    def draw(axes: Any) -> None:
        places = face_places(case.unit)
        margin = 0.25 * places[-1] + 4.0
        for k, pane in enumerate(case.unit.panes):
            axes.axvspan(places[2 * k], places[2 * k + 1], color="0.85", lw=0)
            for face, coating in ((2 * k, pane.coating_out), (2 * k + 1, pane.coating_in)):
                if coating:
                    axes.axvline(places[face], color="0.35", lw=2.0)
        for line, r in enumerate(states):
            temperatures = _profile(r)
            x = [places[0] - margin, places[0] - 0.3 * margin, *places, places[-1] + 0.3 * margin, places[-1] + margin]
            axes.plot(x, temperatures, color="black", ls=LINES[line % 4], marker=MARKERS[line % 6], ms=3, lw=1.2,
                      label=r.conditions.name)  # fmt: skip
        axes.set_xlabel("outdoors  ←   depth, mm   →  room")
        axes.set_ylabel("temperature, °C")
        axes.set_title(case.title, fontsize=10)
        axes.legend(frameon=False)

    _saved(draw, path, (6.5, 4.0))


def face_places(unit: Unit) -> list[float]:
    """Depth of every face [mm], outdoors first."""
    widths = [1e3 * gap.width for gap in unit.gaps] + [0.0]
    places, at = [], 0.0
    for pane, width in zip(unit.panes, widths, strict=True):
        places += [at, at + 1e3 * pane.thickness]
        at += 1e3 * pane.thickness + width
    return places


def _profile(r: Result) -> list[float]:
    faces = [t - CELSIUS for pane in r.panes for t in (pane.face_out, pane.face_in) if t is not None]
    out, room = r.conditions.outdoor_air - CELSIUS, r.conditions.indoor_air - CELSIUS
    return [out, out, *faces, room, room]


def draw_comparison(found: Comparison, labels: Sequence[str], path: Path, *, title: str) -> None:
    """U and g of every row side by side."""

    def draw(left: Any, right: Any) -> None:
        y = np.arange(len(labels))[::-1]
        for axes, name, grey in ((left, "U_W_m2K", "0.55"), (right, "solar_factor_g", "0.75")):
            values = [row.values[name] for row in found.rows]
            bars = axes.barh(y, np.nan_to_num(values), color=grey, edgecolor="black", lw=0.6)
            if name == "solar_factor_g":
                direct = [row.values["solar_transmittance"] for row in found.rows]
                axes.barh(y, np.nan_to_num(direct), color="white", edgecolor="black", lw=0.6, hatch="////")
            axes.bar_label(bars, [f" {v:.2f}" if math.isfinite(v) else " –" for v in values])
            axes.set_xlabel(LABELS[name] + (" (hatched: direct)" if name == "solar_factor_g" else ""))
            axes.margins(x=0.15)
        left.set_yticks(y, labels)
        right.set_yticks(y, [""] * len(labels))

    _saved(draw, path, (4.6, 1.2 + 0.32 * len(labels)), panels=2, title=title)


def draw_sweep(found: Swept, heads: Sequence[str], words: Sequence[Sequence[str]], path: Path, *, title: str) -> None:
    """Every quantity against the first key that has numbers, a line for each value of the other; `heads` name the keys
    and `words` their values."""
    names = list(found.quantities)
    ordered = [all(isinstance(v, int | float) and not isinstance(v, bool) for v in vary.values) for vary in found.vary]
    along = ordered.index(True) if any(ordered) else 0
    x = np.array(found.vary[along].values, float) if any(ordered) else np.arange(len(words[along]))
    labels = words[1 - along] if len(words) > 1 else [None]

    def draw(*panels: Any) -> None:
        for axes, name in zip(panels, names, strict=True):
            lines = np.moveaxis(found.quantities[name], along, 0).reshape(len(x), -1).T
            for k, (label, line) in enumerate(zip(labels, lines, strict=True)):
                style = LINES[k % 4] if any(ordered) else ""
                axes.plot(x, line, color=f"{0.15 * (k % 4)}", ls=style, marker=MARKERS[k % 6], ms=3, label=label)
            for o in found.optima if name == found.judged and found.vary[0].ranged else ():
                at, best = zip(*[(o.at, o.best), *([o.local] if o.local else [])], strict=True)
                axes.plot(at, best, marker="x", ms=9, color="black", ls="")
                axes.set_title(
                    f"× {'least' if found.minimise else 'greatest'} {plainly(name)}", fontsize=9, loc="right"
                )
            axes.set_xlabel(heads[along])
            axes.set_ylabel(LABELS.get(name, name))
            if not any(ordered):
                axes.set_xticks(x, words[along], rotation=20)
        if len(heads) > 1:
            beside = {"loc": "upper left", "bbox_to_anchor": (1.0, 1.0), "ncols": -(-len(labels) // 12)}
            last = panels[min(len(panels), ABREAST) - 1]
            last.legend(frameon=False, title=heads[1 - along], **beside)

    _saved(draw, path, (5.2, 3.8), panels=len(names), title=title)


def plainly(name: str) -> str:
    """A quantity in words, without its unit."""
    return LABELS[name].split(",")[0]


MOST_LABELS = 30
"""Numbers that fit beside one another over a front."""


def draw_front(found: Search, path: Path, *, title: str) -> None:
    """The front of a search with its make-ups numbered as in the table."""
    (first, _), (second, _) = found.front_axes

    def draw(axes: Any) -> None:
        x = [c.values[first] for c in found.front]
        y = [c.values[second] for c in found.front]
        axes.plot(x, y, color="0.5", lw=0.8, ls="--", marker="o", mfc="black", mec="black", ms=4,
                  label="front, numbered as in the table")  # fmt: skip
        axes.margins(0.1)
        best = [c for c in found.best if c.values[second] == c.values[second]]
        axes.plot([c.values[first] for c in best], [c.values[second] for c in best], ls="", marker="s", mfc="none",
                  mec="black", ms=7, label=f"best by {plainly(found.rank_by)}")  # fmt: skip
        axes.set_xlabel(LABELS.get(first, first))
        axes.set_ylabel(LABELS.get(second, second))
        axes.legend(frameon=False)
        _number(axes, x, y)

    _saved(draw, path, (6.0, 4.4), title=title)


def _number(axes: Any, x: Sequence[float], y: Sequence[float]) -> None:
    """Numbers of points from 1 in a row over the axes, each with a line to its point; of very many each nth alone.

    A front only rises or only falls: the lines lean to the side it leaves free, and cross neither it nor each other."""
    low, high = axes.get_xlim()
    limits = axes.get_ylim()
    chosen = sorted(range(0, len(x), -(-len(x) // MOST_LABELS)), key=lambda k: (x[k], y[k]))
    falling = y[chosen[-1]] < y[chosen[0]]
    share = [(x[k] - low) / (high - low) for k in chosen]
    places = [1.0 - p for p in spread([1.0 - p for p in share[::-1]])][::-1] if falling else spread(share)
    for k, place in zip(chosen, places, strict=True):
        leader = {"arrowstyle": "-", "lw": 0.4, "color": "0.5", "shrinkA": 0, "shrinkB": 3}
        axes.annotate(str(k + 1), (x[k], y[k]), xytext=(place, 1.03), textcoords="axes fraction", ha="center",
                      va="bottom", fontsize=8, arrowprops=leader)  # fmt: skip
    axes.set_ylim(limits)


APART = 1.0 / MOST_LABELS
FIRST = -0.1
"""Share of the axes between two numbers, and where the first may stand."""


def spread(places: Sequence[float]) -> list[float]:
    """Rising places moved to the left, by no more than they need to stand apart; back to the right where that leaves
    too little room."""
    moved = list(places)
    for k in range(len(moved) - 2, -1, -1):
        moved[k] = min(moved[k], moved[k + 1] - APART)
    least = FIRST
    for k, place in enumerate(moved):
        moved[k] = max(place, least)
        least = moved[k] + APART
    return moved


def draw_service(case: Case, found: Service, path: Path) -> None:
    """The section with its panes as they bow in the worst state, and U over the years."""
    worst = worst_state(found.bowed)
    if worst is None:
        raise OutputError(f"{case.file}: no bowing was worked out, nothing to draw")

    def draw(left: Any, right: Any = None) -> None:
        _draw_bowed(left, case, worst, state(worst, found.bowed))
        if right is not None and found.ageing is not None:
            _draw_years(right, found.ageing)

    _saved(draw, path, (5.2, 4.2), panels=2 if found.ageing else 1)


BOX = 1.0
"""Height over width of the drawn section, which its scale follows from."""


def _draw_bowed(axes: Any, case: Case, b: Bowed, name: str) -> None:
    """Panes over their height; deflections to the scale of the depth, which is drawn larger than the height."""
    unit = case.unit
    share = np.linspace(0.0, 1.0, 61)
    shape = centre_line(unit.width, unit.height, share)
    places = face_places(unit)
    for k, pane in enumerate(b.panes):
        bent = 1e3 * pane.centre * shape
        axes.fill_betweenx(
            1e3 * unit.height * share, places[2 * k] + bent, places[2 * k + 1] + bent, color="0.75", lw=0
        )
        for face in places[2 * k : 2 * k + 2]:
            axes.plot(face + bent, 1e3 * unit.height * share, color="black", lw=0.8)
            axes.plot([face, face], [0.0, 1e3 * unit.height], color="0.4", lw=0.6, ls=":")
    margin = max(1e3 * max(abs(pane.centre) for pane in b.panes), 0.1 * places[-1])
    axes.set_xlim(places[0] - 1.4 * margin, places[-1] + 1.4 * margin)
    axes.set_ylim(0.0, 1e3 * unit.height)
    axes.set_box_aspect(BOX)
    low, high = axes.get_xlim()
    labels = _deflection_labels(b, places)
    for (middle, words), row in zip(labels, label_rows(labels, high - low), strict=True):
        axes.annotate(words, (middle, 1.0), xycoords=("data", "axes fraction"), textcoords="offset points",
                      xytext=(0, 2 + 10 * row), ha="center", va="bottom")  # fmt: skip
    scale = 1e3 * unit.height / (high - low) / BOX
    axes.set_xlabel("outdoors  ←   depth, mm   →  room")
    axes.set_ylabel("height, mm")
    scaled = f"deflection at the centre, mm, + towards the room; depth drawn {scale:.0f} times as large as height"
    caution = "an estimate: local codes and a licensed engineer decide"
    axes.set_title(f"{case.title}\n{name}\n{scaled}\n{caution}", fontsize=7.5, pad=26)


LABEL_WIDTH = 0.09
"""Room a deflection's label takes of the width of the drawing."""


def _deflection_labels(b: Bowed, places: Sequence[float]) -> list[tuple[float, str]]:
    """Middle of every pane [mm] and its deflection in words."""
    return [(0.5 * (places[2 * k] + places[2 * k + 1]), number(1e3 * pane.centre, 1)) for k, pane in enumerate(b.panes)]


def label_rows(labels: Sequence[tuple[float, str]], width: float) -> list[int]:
    """The row of every label, 0 or 1: one beside its neighbour stands above it."""
    rows: list[int] = []
    for k, (middle, _) in enumerate(labels):
        close = k > 0 and middle - labels[k - 1][0] < LABEL_WIDTH * width
        rows.append(1 - rows[-1] if close else 0)
    return rows


def _draw_years(axes: Any, a: Ageing) -> None:
    """U over the years by both lines, and where the declared value is left."""
    axes.plot(a.years, a.U, color="black", ls="-", marker="o", ms=3, label=f"{100 * a.rate:g} % a year of what remains")
    axes.plot(
        a.years, a.U_linear, color="0.4", ls="--", marker="s", ms=3, label=f"{100 * a.rate:g} % a year of the whole"
    )
    if a.declared is not None:
        axes.axhline(a.declared + 0.05, color="black", lw=0.8, ls=":")
        axes.annotate(f"below: rounds to {a.declared:.1f}", (a.years[0], a.declared + 0.05), textcoords="offset points",
                      xytext=(0, 3), fontsize=8)  # fmt: skip
    axes.set_xlabel("years")
    axes.set_ylabel(f"U by {a.state}, W/(m²K)")
    axes.legend(frameon=False, loc="lower right", fontsize=8)
