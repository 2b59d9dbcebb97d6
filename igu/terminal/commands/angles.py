"""igu angles: transmitted, reflected, absorbed and g by angle of incidence."""

from __future__ import annotations

import argparse

from igu.model.case import Case
from igu.studies.angles import ByAngle, by_angle
from igu.studies.conditions import cold_and_sun
from igu.terminal.output import add_output_options, deliver, json_text
from igu.terminal.reading import read_cases
from igu.terminal.report import under, wrapped
from igu.terminal.tables import Cell, Column, Table


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Arguments of the command."""
    parser.add_argument("cases", nargs="+", metavar="CASE", help="case files (TOML)")
    parser.add_argument("--sun", metavar="NAME", help="conditions that g belongs to; left out: the strongest sun")
    add_output_options(parser, ("json", "csv", "markdown"))


def run(args: argparse.Namespace) -> int:
    """Print one table a case."""
    cases = read_cases(args.cases)
    found = [(case, by_angle(case.unit, cold_and_sun(case, None, args.sun)[1])) for case in cases]
    deliver(args, _rendered(args.format, found))
    return 0


def _rendered(form: str, found: list[tuple[Case, ByAngle]]) -> str:
    if form == "json":
        records = [
            {"file": case.file, "sun": a.sun.name if a.sun else None, "rows": angle_table(a).records()}
            for case, a in found
        ]
        return json_text(records)
    if form != "plain":
        return "\n\n".join(str(getattr(angle_table(a), form)()) for _, a in found)
    return "\n\n".join(
        "\n".join([*wrapped(case.title), "", angle_table(a).plain(), "", *_words(a)]) for case, a in found
    )


def _words(a: ByAngle) -> list[str]:
    sun = f"g under the conditions {under(a.sun)}" if a.sun else "no g: the case has no sunny conditions"
    return wrapped(f"Solar weighting ASTM G173 global; both polarisations, combined before they are averaged; {sun}.")


def angle_table(a: ByAngle) -> Table:
    """The table of one unit."""
    panes = len(a.bands.absorptance)
    columns = (
        Column("incidence_deg", "angle\n°"),
        Column("solar_transmittance", "T\nsun", 3),
        Column("solar_reflectance_out", "R\nsun", 3),
        *(Column(f"pane_{k + 1}_solar_absorptance", f"A{k + 1}\nsun", 3) for k in range(panes)),
        Column("solar_factor_g", "g", 3),
        Column("light_transmittance", "T\nlight", 3),
        Column("light_reflectance_out", "R light\nout", 3),
    )
    return Table(columns, tuple(_row(a, k) for k in range(len(a.degrees))))


def _row(a: ByAngle, k: int) -> tuple[Cell, ...]:
    b = a.bands
    degrees = a.degrees[k]
    return (
        "diffuse" if degrees is None else str(degrees),
        float(b.transmittance[k]),
        float(b.reflectance_out[k]),
        *(float(x) for x in b.absorptance[:, k]),
        float(a.figures.g[k]),
        float(b.light_transmittance[k]),
        float(b.light_reflectance_out[k]),
    )
