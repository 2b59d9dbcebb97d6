"""igu compare: the coating on every face where it may go, or several cases side by side."""

from __future__ import annotations

import argparse
from pathlib import Path
from typing import Any

from igu.model.case import Case
from igu.model.study_tables import Compare
from igu.studies.compare import Arrangement, Comparison, compare, compare_units
from igu.studies.conditions import cold_and_sun
from igu.studies.fracture import EDGES, edge_source
from igu.studies.service_quantities import SERVICE
from igu.terminal.comparison import comparison_table, differences
from igu.terminal.output import add_output_options, deliver, json_text
from igu.terminal.reading import read_cases
from igu.terminal.report import CAUTION, under, wrapped


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Arguments of the command."""
    parser.add_argument(
        "cases",
        nargs="+",
        metavar="CASE",
        help="one case: its coating positions; several: side by side, under the conditions of the first",
    )
    add_output_options(parser, ("json", "csv", "markdown"), figure="U and g of every row side by side")


def run(args: argparse.Namespace) -> int:
    """Print one table."""
    cases = read_cases(args.cases)
    case = cases[0]
    spec = case.compare or Compare()
    cold, sun = cold_and_sun(case, spec.cold, spec.sun)
    if len(cases) == 1:
        found = compare(case.unit, case.library, spec, cold=cold, sun=sun, frame=case.frame)
        labels = [_worn(row) for row in found.rows]
    else:
        found = compare_units([c.unit for c in cases], spec, cold=cold, sun=sun, frame=case.frame)
        labels = [Path(c.file).stem for c in cases]
    table = comparison_table(found, labels, spec.columns)
    deliver(args, _rendered(args.format, case, found, labels, table), figure=lambda path: _draw(found, labels, path))
    return 0


def _worn(row: Arrangement) -> str:
    """The faces and coatings of a row; "<" marks the unit as the case has it."""
    names = {name for _, name in row.worn}
    one = "+".join(str(face) for face, _ in row.worn) + " " + "".join(names)
    each = " ".join(f"{face} {name}" for face, name in row.worn)
    return (one if len(names) == 1 else each or "none") + (" <" if row.as_given else "")


def _rendered(form: str, case: Case, found: Comparison, labels: list[str], table: Any) -> str:
    if form == "json":
        return json_text(
            {
                "file": case.file,
                "title": case.title,
                "cold": found.cold and found.cold.name,
                "sun": found.sun and found.sun.name,
                "rows": table.records(),
                "remarks": differences(found, labels),
            }
        )
    if form == "csv":
        return str(table.csv())
    words = [_states(found), *differences(found, labels)]
    if SERVICE.keys() & found.rows[0].values.keys():
        words.append(f"Bowing and thermal fracture: {CAUTION}{_edge(case, found)}")
    if form == "markdown":
        return "\n\n".join([table.markdown(), *words])
    return "\n".join([*wrapped(case.title), "", table.plain(), "", *(line for text in words for line in wrapped(text))])


def _edge(case: Case, found: Comparison) -> str:
    """Where the edge temperature of the fracture margin comes from."""
    if found.sun is None or "fracture_margin_K" not in found.rows[0].values:
        return ""
    return f" Edge in its rebate {EDGES[edge_source(found.sun, case.frame)]}."


def _states(found: Comparison) -> str:
    cold = f"U and room face under {under(found.cold)}" if found.cold else "no cold conditions in the case"
    sun = f"g and hottest pane under {under(found.sun)}" if found.sun else "no sunny conditions in the case"
    best = "* best of its column (least U, g and heat, most light, warmest room face); < as the case has it"
    return f"{cold}; {sun}. {best}. Generic coatings are models, not measurements."


def _draw(found: Comparison, labels: list[str], path: Path) -> None:
    from igu.terminal.figures import draw_comparison

    draw_comparison(found, [label.removesuffix(" <") for label in labels], path)
