"""igu compare: the coating on every face where it may go, or several cases side by side."""

from __future__ import annotations

import argparse
from collections.abc import Sequence
from dataclasses import replace
from pathlib import Path
from shutil import get_terminal_size
from typing import Any

from igu.errors import about
from igu.model.case import Case
from igu.model.study_tables import Compare
from igu.model.unit import Unit
from igu.studies.compare import Arrangement, Comparison, compare, compare_units, kept_off, worn_coatings
from igu.studies.conditions import cold_and_sun
from igu.studies.fracture import EDGES, given_edge
from igu.studies.service_quantities import SERVICE
from igu.terminal.output import add_output_options, deliver, json_text
from igu.terminal.page.comparison import comparison_table, differences, staying
from igu.terminal.page.remarks import judged_under, measured, remarks_on, warned, warnings_of
from igu.terminal.page.text import WIDTH, caution, wrapped
from igu.terminal.reading import read_cases
from igu.terminal.tables import Cell, Column, Table


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
        with about(case.file):
            found = compare(case.unit, case.library, spec, cold=cold, sun=sun, frame=case.frame)
        labels = [_worn(row) for row in found.rows]
    else:
        found = compare_units([c.unit for c in cases], spec, cold=cold, sun=sun, frame=case.frame)
        labels = _names([c.file for c in cases])
    text = _rendered(args.format, cases, found, labels)
    deliver(args, text, figure=lambda path: _draw(cases, found, labels, path))
    return 0


def _worn(row: Arrangement) -> str:
    """The faces and coatings of a row."""
    names = {name for _, name in row.worn}
    if not names:
        return "none added" if staying(row) else "none"
    one = "+".join(str(face) for face, _ in row.worn) + " " + "".join(names)
    return one if len(names) == 1 else " ".join(f"{face} {name}" for face, name in row.worn)


def _names(files: Sequence[str]) -> list[str]:
    """The cases by the names of their files, or by the paths where two have one name."""
    stems = [Path(file).stem for file in files]
    return stems if len(set(stems)) == len(stems) else list(files)


def _rendered(form: str, cases: Sequence[Case], found: Comparison, labels: list[str]) -> str:
    case, several = cases[0], len(cases) > 1
    remarks = [] if several else differences(found)
    columns = (case.compare or Compare()).columns
    if form in ("json", "csv"):
        table = comparison_table(found, _script_heads(cases, found, labels), columns)
        if form == "csv":
            return table.cautioned([caution([row.unit], service=_has_service(found)) for row in found.rows]).csv()
        return json_text(_record(cases, found, table, remarks))
    heads = {Column("case", "case"): labels} if several else _heads(found, labels)
    table = comparison_table(found, heads, columns)
    table = table if columns else table.known_only()
    words = [_states(found, several), *remarks_on(_units(found), found.sun), *remarks]
    words += [] if several else _untried(case, found)
    said = _caution(found)
    words += [f"{said}{_edge(case, found)}"] if said else []
    words += warned(cases)
    if form == "markdown":
        return "\n\n".join([table.markdown(), *words]).replace("\N{NO-BREAK SPACE}", " ")
    title = [] if several else [*wrapped(case.title), ""]
    return "\n".join([*title, table.folded(_room(table)), "", *(line for text in words for line in wrapped(text))])


MOST_COLUMNS = 100
"""A table for a terminal that is not known to be narrower; a wider one is folded."""


def _room(table: Table) -> int:
    """Columns for the table: 80 where it fits, or else as many as the terminal has, up to 100."""
    if replace(table, close=True).width <= WIDTH:
        return WIDTH
    return max(WIDTH, min(MOST_COLUMNS, get_terminal_size((MOST_COLUMNS, 24)).columns))


def _untried(case: Case, found: Comparison) -> list[str]:
    """Why there is nothing to compare, and which coatings a vented unit keeps off."""
    spec = case.compare or Compare()
    names = spec.coatings or [name for _, name in worn_coatings(case.unit)]
    off = kept_off(case.unit, case.library, names)
    words = [f"The gaps are vented: {', '.join(off)}, for sealed gaps only, put on no other face."] if off else []
    if len(found.rows) == 1:
        words.append(
            "One row: the unit has nothing that may go on another face. Measured panes keep their faces unless their "
            "coated side may be turned; coatings in [compare] names coatings to try on the other panes."
        )
    return words


def _heads(found: Comparison, labels: Sequence[str]) -> dict[Column, list[str]]:
    """What tells the rows apart in a table for people: coatings and faces in one column, or, where two are unlike, the
    face of each; "<" marks the unit as the case has it."""
    mark = [" <" if row.as_given else "" for row in found.rows]
    names = sorted({name for row in found.rows for _, name in row.worn})
    if len(names) < 2:
        column = Column("coating_on_face", "coating\non face")
        return {column: [label + end for label, end in zip(labels, mark, strict=True)]}
    faces = {name: [_face(row, name) for row in found.rows] for name in names}
    faces[names[-1]] = [face + end for face, end in zip(faces[names[-1]], mark, strict=True)]
    return {Column(name, f"{name}\non face"): column for name, column in faces.items()}


def _face(row: Arrangement, name: str) -> str:
    """The face that carries a coating, a word where none does."""
    return next((str(face) for face, worn in row.worn if worn == name), "none")


def _script_heads(cases: Sequence[Case], found: Comparison, labels: Sequence[str]) -> dict[Column, Sequence[Cell]]:
    """What tells the rows apart in a table for scripts."""
    if len(cases) > 1:
        return {Column("file", "file"): [c.file for c in cases]}
    given = [row.as_given for row in found.rows]
    return {Column("coating_on_face", "coating"): labels, Column("as_in_case", "as in case"): given}


def _record(cases: Sequence[Case], found: Comparison, table: Table, remarks: Sequence[str]) -> dict[str, Any]:
    return {
        "file": cases[0].file,
        "title": cases[0].title,
        "cold": found.cold and found.cold.name,
        "sun": found.sun and found.sun.name,
        "caution": _caution(found),
        "warnings": [*warnings_of(cases), *measured(_units(found), found.sun)],
        "rows": table.records(),
        "remarks": remarks,
    }


def _caution(found: Comparison) -> str | None:
    """The caution of the whole table."""
    return caution(_units(found), service=_has_service(found))


def _has_service(found: Comparison) -> bool:
    """Whether the table has bowing or thermal fracture."""
    return bool(SERVICE.keys() & found.rows[0].values.keys())


def _units(found: Comparison) -> list[Unit]:
    return [row.unit for row in found.rows]


def _edge(case: Case, found: Comparison) -> str:
    """Where the edge temperature of the fracture margin comes from."""
    if found.sun is None or "fracture_margin_K" not in found.rows[0].values:
        return ""
    return f" Edge in its rebate {EDGES[given_edge(found.sun, case.frame)[0]]}."


def _states(found: Comparison, several: bool) -> str:
    best = "*\N{NO-BREAK SPACE}best of its column (least U, g and heat, most light, warmest room face)"
    mark = ", conditions of the first case" if several else "; <\N{NO-BREAK SPACE}as the case has it"
    stay = "" if several or not staying(found.rows[0]) else f" In every row: {staying(found.rows[0])}."
    return f"{judged_under(found.cold, found.sun)}. {best}{mark}.{stay}"


def _draw(cases: Sequence[Case], found: Comparison, labels: list[str], path: Path) -> None:
    from igu.terminal.figures import draw_comparison

    draw_comparison(
        found, labels, path, title=cases[0].title if len(cases) == 1 else judged_under(found.cold, found.sun)
    )
