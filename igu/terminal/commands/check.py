"""igu check: reads and validates cases, solves nothing."""

from __future__ import annotations

import argparse
import sys

from igu.model.case import TABLES_OF_STUDIES, Case
from igu.studies.conditions import cold_and_sun
from igu.terminal.output import say
from igu.terminal.page.section import makeup_words
from igu.terminal.page.text import position, wrapped
from igu.terminal.reading import read_cases


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Arguments of the command."""
    parser.add_argument("cases", nargs="+", metavar="CASE", help="case files (TOML)")


def run(args: argparse.Namespace) -> int:
    """Read, say what was understood, and warn of what nothing uses."""
    cases = read_cases(args.cases)
    for case in cases:
        _require_conditions(case)
    for case in cases:
        say("\n".join(_understood(case)))
        for warning in case.warnings:
            print(f"warning: {warning}", file=sys.stderr)
    return 0


def _require_conditions(case: Case) -> None:
    """ModelError where a study of the case is given conditions that it cannot use."""
    for study in (case.compare, case.sweep):
        if study is not None:
            cold_and_sun(case, study.cold, study.sun)
    if case.seek is not None:
        from igu.studies.seek import conditions_of

        conditions_of(case, case.seek)


def _understood(case: Case) -> list[str]:
    """The case in a few lines: panes outdoors first with the coatings of their faces, conditions, studies."""
    unit = case.unit
    tables = [f"[{name}]" for name in (*TABLES_OF_STUDIES, "sealed") if name in case.table]
    lines = [
        makeup_words(unit.panes, unit.gaps),
        f"{unit.width:g} m wide, {unit.height:g} m high, {position(unit)}",
        f"conditions: {', '.join(c.name for c in case.conditions)}",
        *([f"studies: {', '.join(tables)}"] if tables else []),
    ]
    return [f"{case.file}: sound", *(line for text in lines for line in wrapped(text, "  "))]
