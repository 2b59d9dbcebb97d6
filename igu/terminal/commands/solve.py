"""igu solve: temperatures, U, and what the sun does, for every condition of every case."""

from __future__ import annotations

import argparse
from typing import Any

from igu.errors import OutputError
from igu.model.case import Case
from igu.ratings.declaration import declaration, declared_unit, standard_solar
from igu.ratings.ideal import bounds
from igu.ratings.rate import rate
from igu.ratings.result import Result
from igu.terminal.output import add_output_options, deliver, json_text
from igu.terminal.page.text import caution
from igu.terminal.reading import read_cases


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Arguments of the command."""
    parser.add_argument("cases", nargs="+", metavar="CASE", help="case files (TOML)")
    add_output_options(
        parser, ("json", "csv", "markdown"), figure="temperature through the section, panes and gaps to scale"
    )


def run(args: argparse.Namespace) -> int:
    """Solve and print; exit code 1 where a balance did not close."""
    if args.figure is not None and len(args.cases) > 1:
        raise OutputError(f"--figure draws one case; given {len(args.cases)}")
    cases = read_cases(args.cases)
    solved = [(case, tuple(rate(case.unit, c) for c in case.conditions)) for case in cases]
    deliver(args, _rendered(args, solved), figure=lambda path: _draw(solved, path))
    return 0 if all(r.outcome == "solved" for _, results in solved for r in results) else 1


def _rendered(args: argparse.Namespace, solved: list[tuple[Case, tuple[Result, ...]]]) -> str:
    if args.format == "json":
        from igu.terminal.record.contract import document, solved_case

        records = [solved_case(case, r, declaration(case.unit, case.conditions)) for case, r in solved]
        return json_text(document(records))
    if args.format in ("csv", "markdown"):
        from igu.terminal.record.solve_table import full_table, solve_table

        if args.format == "csv":
            return full_table(solved).csv()
        said = caution(case.unit for case, _ in solved)
        return "\n\n".join([solve_table(solved).markdown(), *([said] if said else [])])
    return "\n\n\n".join(_report(case, results) for case, results in solved)


def _report(case: Case, results: tuple[Result, ...]) -> str:
    from igu.terminal.page.solve import report

    unit = declared_unit(case.unit, case.conditions)
    solar = standard_solar(unit) or next((r.solar for r in results if _straight_sun(r)), None)
    declared = declaration(case.unit, case.conditions)
    return report(case, results, declared, bounds(unit, solar) if solar else None)


def _straight_sun(r: Result) -> bool:
    """Whether the result has a g at normal incidence, as the bounds of a unit mean it."""
    return r.solar is not None and r.solar.g is not None and not (r.conditions.incidence or r.conditions.diffuse_share)


def _draw(solved: list[tuple[Case, tuple[Result, ...]]], path: Any) -> None:
    from igu.terminal.figures import draw_section

    draw_section(solved, path)
