"""igu angles: transmitted, reflected, absorbed and g by angle of incidence."""

from __future__ import annotations

import argparse

from igu.errors import about
from igu.model.case import Case
from igu.ratings.sunlight import cautions
from igu.studies.angles import ByAngle, by_angle
from igu.studies.conditions import cold_and_sun
from igu.terminal.output import add_output_options, deliver, json_text
from igu.terminal.page.remarks import warned
from igu.terminal.page.text import WIDTH, under, wrapped
from igu.terminal.reading import read_cases
from igu.terminal.tables import Cell, Column, Table, table_of


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Arguments of the command."""
    parser.add_argument("cases", nargs="+", metavar="CASE", help="case files (TOML)")
    parser.add_argument("--sun", metavar="NAME", help="conditions that g belongs to; left out: the strongest sun")
    add_output_options(parser, ("json", "csv", "markdown"))


def run(args: argparse.Namespace) -> int:
    """Print one table a case."""
    cases = read_cases(args.cases)
    found = [(case, _by_angle(case, args.sun)) for case in cases]
    deliver(args, _rendered(args.format, found))
    return 0


def _by_angle(case: Case, sun: str | None) -> ByAngle:
    conditions = cold_and_sun(case, None, sun)[1]
    with about(case.file):
        return by_angle(case.unit, conditions)


def _rendered(form: str, found: list[tuple[Case, ByAngle]]) -> str:
    if form == "json":
        records = [
            {
                "file": case.file,
                "title": case.title,
                "sun": a.sun.name if a.sun else None,
                "warnings": [*case.warnings, *cautions(case.unit, oblique=True)],
                "rows": _rows(a),
            }
            for case, a in found
        ]
        return json_text(records)
    if form == "csv":
        return table_of([{"file": case.file, **row} for case, a in found for row in _rows(a)]).csv()
    if form == "markdown":
        return "\n\n".join(angle_table(a).markdown() for _, a in found)
    return "\n\n\n".join(_report(case, a) for case, a in found)


def _report(case: Case, a: ByAngle) -> str:
    said = [*cautions(case.unit, oblique=True), *warned([case])]
    lines = [line for text in said for line in wrapped(text)]
    return "\n".join([*wrapped(case.title), "", _plain(a), "", *_words(a), *lines])


def _words(a: ByAngle) -> list[str]:
    sun = f"g under the conditions {under(a.sun)}" if a.sun else "no g: the case has no sunny conditions"
    return wrapped(
        "T transmitted, R reflected outdoors, A1 absorbed in pane 1 and so on, each a share of the sun or light. Solar "
        f"weighting ASTM G173 global; both polarisations, combined before they are averaged; {sun}."
    )


def _rows(a: ByAngle) -> list[dict[str, Cell]]:
    """Rows for scripts: diffuse light has no angle, and a share of 1."""
    return [
        {"incidence_deg": degrees, "diffuse_share": float(degrees is None), **row}
        for degrees, row in zip(a.degrees, _figures(a).records(), strict=True)
    ]


def angle_table(a: ByAngle) -> Table:
    """The table of one unit, for people."""
    figures = _figures(a)
    angles = ["diffuse" if degrees is None else degrees for degrees in a.degrees]
    rows = tuple((angle, *row) for angle, row in zip(angles, figures.rows, strict=True))
    return Table((Column("incidence_deg", "angle\n°"), *figures.columns), rows)


def _plain(a: ByAngle) -> str:
    """The table; the panes in one of their own where they are too many for a line."""
    table = angle_table(a)
    text = table.plain()
    if len(text.splitlines()[-1]) <= WIDTH:
        return text
    panes = range(OPTICS + 1, len(table.columns))
    return f"{table.only(range(OPTICS + 1)).plain()}\n\n{table.only([0, *panes]).plain()}"


OPTICS = 5
"""Figures of the whole unit, ahead of those of its panes."""


def _figures(a: ByAngle) -> Table:
    """Figures of one unit, a row an angle."""
    b = a.bands
    values = (b.transmittance, b.reflectance_out, a.figures.g, b.light_transmittance, b.light_reflectance_out)
    columns = (
        Column("solar_transmittance", "T\nsun", 3),
        Column("solar_reflectance_out", "R\nsun", 3),
        Column("solar_factor_g", "g", 3),
        Column("light_transmittance", "T\nlight", 3),
        Column("light_reflectance_out", "R\nlight", 3),
        *(Column(f"pane_{k + 1}_solar_absorptance", f"A{k + 1}\nsun", 3) for k in range(len(b.absorptance))),
    )
    rows = zip(*values, *b.absorptance, strict=True)
    return Table(columns, tuple(tuple(float(x) for x in row) for row in rows))
