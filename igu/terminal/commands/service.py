"""igu service: fogging, gas pressure and bowing, thermal fracture, ageing, tolerances."""

from __future__ import annotations

import argparse
from pathlib import Path

from igu.model.case import Case
from igu.studies.service import CAUTION, Service, service
from igu.terminal.output import add_output_options, check_targets, deliver, json_text
from igu.terminal.page.service import judged, methods, report
from igu.terminal.reading import read_cases
from igu.terminal.record.service import service_record
from igu.terminal.record.service_tables import service_tables
from igu.terminal.tables import table_of


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Arguments of the command."""
    parser.add_argument("cases", nargs="+", metavar="CASE", help="case files (TOML)")
    figure = "the panes as they bow in the worst state of the first case, and its U over the years"
    add_output_options(parser, ("json", "csv", "markdown"), figure=figure)


def run(args: argparse.Namespace) -> int:
    """Print the report of every case."""
    check_targets(args)
    found = [(case, service(case)) for case in read_cases(args.cases)]
    deliver(args, _rendered(args.format, found), figure=lambda path: _draw(*found[0], path))
    return 0


def _rendered(form: str, found: list[tuple[Case, Service]]) -> str:
    if form == "json":
        return json_text([service_record(case, s, judged(case, s), methods(case, s)) for case, s in found])
    if form == "csv":
        rows = [
            {"file": case.file, "table": name, **row}
            for case, s in found
            for name, table in service_tables(case, s, judged(case, s)).items()
            for row in table.records()
        ]
        return table_of(rows).cautioned([CAUTION] * len(rows)).csv()
    if form == "markdown":
        return "\n\n".join(_markdown(case, s) for case, s in found)
    return "\n\n\n".join(report(case, s) for case, s in found)


def _markdown(case: Case, s: Service) -> str:
    tables = service_tables(case, s, judged(case, s)).items()
    parts = [f"## {case.title}", CAUTION]
    parts += [f"### {name.capitalize()}\n\n{table.markdown()}" for name, table in tables]
    return "\n\n".join([*parts, "### What it rests on", *methods(case, s)])


def _draw(case: Case, found: Service, path: Path) -> None:
    from igu.terminal.figures import draw_service

    draw_service(case, found, path)
