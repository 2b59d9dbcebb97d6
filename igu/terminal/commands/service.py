"""igu service: fogging, gas pressure and bowing, thermal fracture, ageing, tolerances."""

from __future__ import annotations

import argparse
from collections.abc import Iterator

from igu.laws.constants import CELSIUS
from igu.model.case import Case
from igu.model.strength import strength_sources
from igu.studies.ageing import Ageing
from igu.studies.bowing import Bowed
from igu.studies.fracture import EDGES, Fracture
from igu.studies.service import CAUTION, Service, service
from igu.studies.tolerance import Tolerances
from igu.terminal.marks import marks_explained
from igu.terminal.output import add_output_options, deliver, json_text
from igu.terminal.reading import read_cases
from igu.terminal.report import fogging_lines, wrapped
from igu.terminal.service_record import service_record
from igu.terminal.tables import Cell, Column, Table, number


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Arguments of the command."""
    parser.add_argument("cases", nargs="+", metavar="CASE", help="case files (TOML)")
    add_output_options(parser, ("json",))


def run(args: argparse.Namespace) -> int:
    """Print the report of every case."""
    found = [(case, service(case)) for case in read_cases(args.cases)]
    if args.format == "json":
        text = json_text([service_record(case, s) for case, s in found])
    else:
        text = "\n\n\n".join(report(case, s) for case, s in found)
    deliver(args, text)
    return 0


def report(case: Case, found: Service) -> str:
    """The report of one case, no line wider than 80 columns."""
    parts = [
        [*wrapped(case.title), *wrapped(case.file)],
        wrapped(CAUTION),
        list(fogging_lines(found.results)),
        list(_edge(case)),
        [line for text in found.gaps_in_knowledge for line in wrapped(f"WARNING {text}")],
        list(_bowing(case, found)),
        list(_fracture(case, found)),
        list(_ageing(found.ageing)),
        list(_tolerances(found.tolerances)),
    ]
    text = "\n\n".join("\n".join(part) for part in parts if part)
    marks = marks_explained(text)
    return "\n\n".join([text, "\n".join(wrapped(marks))]) if marks else text


def _edge(case: Case) -> Iterator[str]:
    if case.frame and case.frame.edge_loss is not None:
        around = 2.0 * (case.unit.width + case.unit.height)
        loss = case.frame.edge_loss * around
        area = case.unit.width * case.unit.height
        yield from wrapped(
            f"Linear edge loss {case.frame.edge_loss:g} W/(m K) over {around:.2f} m: {loss:.2f} W/K, that is "
            f"{loss / area:.2f} W/(m²K) of the whole glass on top of its centre value."
        )


def _bowing(case: Case, found: Service) -> Iterator[str]:
    if not found.bowed:
        return
    yield "Sealed gas, bowing and stress (+ towards the room)"
    sealed = case.unit.sealed
    if sealed.vented:
        yield from wrapped("Vented by a capillary tube: the gaps keep the pressure of the site.", "  ")
    else:
        yield from wrapped(
            f"Closed at {number(sealed.temperature - CELSIUS, 1)} °C and {sealed.pressure / 100:.0f} hPa. Exact gas "
            "law at the mean temperature of each gap's faces, thin plates on four supported edges, in agreement with "
            "the heat balance; the standards' loads in their linear form.",
            "  ",
        )
    laminated = any(len(pane.plies) > 1 for pane in case.unit.panes)
    for bowed in found.bowed:
        yield ""
        yield from wrapped(_state_words(bowed, laminated=laminated), "  ")
        yield from ("    " + line for line in _state_table(bowed).plain().splitlines())
    yield ""
    yield from (line for text in _bowing_warnings(found.bowed, laminated=laminated) for line in wrapped(text, "  "))
    yield from wrapped(
        f"Strength: {strength_sources()[0]}; the largest stress is at the centre. Durations: wind 5 s; snow 30 days; climatic load "
        "six months; altitude and weight 50 years. An evacuated gap keeps its "
        "width, its panes bend together.",
        "  ",
    )
    if case.unit.mass_per_area is None:
        yield from wrapped("A pane of unknown density is given the weight of glass.", "  ")


def _state_name(b: Bowed, *, laminated: bool) -> str:
    """The state by everything that tells it from the others."""
    loaded = f" with {b.duration}" if b.duration in ("wind", "snow") else ""
    panes = f", laminated panes {'monolithic' if b.transfer else 'layered'}" if laminated else ""
    return f"{b.name}{loaded}{panes}"


def _state_words(b: Bowed, *, laminated: bool) -> str:
    text = _state_name(b, laminated=laminated)
    if b.U is not None and b.U_flat:
        text += f": U {b.U:.3f} bowed, {b.U_flat:.3f} flat ({number(100.0 * (b.U / b.U_flat - 1.0), 1)} %)"
    return text


def _state_table(b: Bowed) -> Table:
    columns = (
        Column("part", "part"),
        Column("load_Pa", "load\nPa", 0),
        Column("centre_mm", "centre\nmm", 2),
        Column("mean_mm", "mean\nmm", 2),
        Column("stress_MPa", "stress\nMPa", 1),
        Column("strength_MPa", "strength\nMPa", 1),
        Column("use", "used\n%", 0),
    )
    rows: list[tuple[Cell, ...]] = []
    for k, pane in enumerate(b.panes):
        strained = [
            None if value is None else value * factor
            for value, factor in ((pane.stress, 1e-6), (pane.strength, 1e-6), (pane.use, 100.0))
        ]
        rows.append((f"pane {k + 1}", pane.load, 1e3 * pane.centre, 1e3 * pane.mean, *strained))
        if k < len(b.gaps):
            gap = b.gaps[k]
            rows.append((f"gap {k + 1} width", gap.overpressure, 1e3 * gap.centre, 1e3 * gap.mean, None, None, None))
    return Table(columns, tuple(rows))


def _bowing_warnings(states: tuple[Bowed, ...], *, laminated: bool) -> Iterator[str]:
    """What is wrong in a state, the state named as its table is."""
    for b in states:
        name = _state_name(b, laminated=laminated)
        for k, gap in enumerate(b.gaps, 1):
            if gap.touching:
                yield f"WARNING {name}: the panes touch in gap {k}; the figures of this state are beyond the model."
        for k, pane in enumerate(b.panes, 1):
            if not pane.linear:
                yield f"WARNING {name}: pane {k} deflects more than half its thickness; {_beyond_linear(b)}."
            if pane.use is not None and pane.use > 1.0:
                yield f"WARNING {name}: pane {k} is stressed beyond its design strength."


def _beyond_linear(b: Bowed) -> str:
    """Which way linear plates err: a given pressure reads too high, given gas leaves membrane stress out."""
    if b.duration == "wind" or not b.gaps:
        return "linear plates then read deflection and stress too high"
    return "linear plates leave out the stress in the plane of the glass, and the stress may read too low"


def _fracture(case: Case, found: Service) -> Iterator[str]:
    yield "Thermal fracture, worst of the conditions"
    if not found.fractures:
        yield from wrapped("no condition of the case has sun on panes known in the sun: not worked out", "  ")
    for f in found.fractures:
        yield from wrapped(_fracture_words(case, f), "  ")
        if _edge_is_doubtful(found, f):
            everywhere = "; it is taken under every condition without its own" if f.edge_from == "frame" else ""
            yield from wrapped(
                f"the edge temperature {EDGES[f.edge_from]} is colder than the air on both sides under these "
                f"conditions{everywhere}",
                "  ",
            )
    for heat in found.interlayers:
        yield from wrapped(
            f"pane {heat.pane + 1}: interlayer {heat.material} reaches {number(heat.temperature - CELSIUS, 1)} °C "
            f"({heat.conditions})",
            "  ",
        )
    if found.fractures:
        edge = ", ".join(words for name, words in EDGES.items() if any(f.edge_from == name for f in found.fractures))
        yield from wrapped(
            f"Edge in its rebate {edge}. Partial shade and a blind close behind are not in it and make it worse. "
            f"Limits: {strength_sources()[1]}.",
            "  ",
        )


def _edge_is_doubtful(found: Service, f: Fracture) -> bool:
    """Whether the edge is colder than both airs of the conditions the verdict belongs to."""
    conditions = next(r.conditions for r in found.results if r.conditions.name == f.conditions)
    return f.edge < min(conditions.outdoor_air, conditions.indoor_air) - 0.05


def _fracture_words(case: Case, f: Fracture) -> str:
    pane = case.unit.panes[f.pane]
    state = f"margin {number(f.margin, 1)} K" if f.margin >= 0.0 else f"BEYOND THE LIMIT by {number(-f.margin, 1)} K"
    given = "" if f.edge_from == "dark" else f" {EDGES[f.edge_from]}"
    helps = f"; what would help: {', '.join(f.helps)}" if f.helps else ""
    edge = f"edge {number(f.edge - CELSIUS, 1)} °C{given}"
    return (
        f"pane {f.pane + 1} ({pane.treatment}, edges {pane.edge_work}): centre {number(f.centre - CELSIUS, 1)} °C, "
        f"{edge}, difference {number(f.difference, 1)} K of {f.permissible:.0f} K, "
        f"{state} ({f.conditions}){helps}"
    )


def _ageing(a: Ageing | None) -> Iterator[str]:
    if a is None:
        return
    assumed = " (the limit of EN 1279-3 [memory])" if a.assumed else ""
    yield from wrapped(
        f"Ageing: {100 * a.rate:g} % of the remaining gas a year{assumed}, replaced by air; U by {a.state}"
    )
    columns = (
        Column("year", "year", 0),
        Column("share_pct", "gas\n%", 1),
        Column("U", "U\nW/(m²K)", 3),
        Column("share_linear_pct", "gas, % of\nthe whole", 1),
        Column("U_linear", "U\nW/(m²K)", 3),
    )
    rows = [
        (t, 100 * x, u, 100 * y, v)
        for t, x, u, y, v in zip(a.years, a.share, a.U, a.share_linear, a.U_linear, strict=True)
    ]
    yield from ("  " + line for line in Table(columns, tuple(rows)).plain().splitlines())
    if a.declared is not None:
        ends = [f"in year {t:.0f}" if t is not None else "not within 100 years" for t in (a.leaves, a.leaves_linear)]
        yield from wrapped(
            f"The declared {a.declared:.1f} is left {ends[0]}; with percentage points of the whole {ends[1]}.", "  "
        )


def _tolerances(t: Tolerances | None) -> Iterator[str]:
    if t is None or not t.spreads:
        return
    yield from wrapped(f"Tolerances: {t.samples} quasi-random samples, {t.distribution}, seed {t.seed}")
    columns = (
        Column("quantity", "quantity"),
        Column("nominal", "nominal", 3),
        Column("low", "5 %", 3),
        Column("median", "median", 3),
        Column("high", "95 %", 3),
        Column("matters", "matters most"),
    )
    rows = [(s.quantity, s.nominal, s.low, s.median, s.high, _shares(s.shares)) for s in t.spreads]
    yield from ("  " + line for line in Table(columns, tuple(rows)).plain().splitlines())
    if t.declared is not None and t.holds is not None:
        yield from wrapped(f"Declared U {t.declared:.1f} holds in {100 * t.holds:.1f} % of the samples.", "  ")
    if t.assumed:
        yield from wrapped(f"Assumed: {'; '.join(t.assumed)}.", "  ")


def _shares(shares: dict[str, float]) -> str:
    """The kind of tolerance with the largest share of the variance."""
    if not shares:
        return ""
    kind, share = max(shares.items(), key=lambda pair: pair[1])
    return f"{kind} {100 * share:.0f} %"
