"""igu check: reads and validates cases, solves nothing."""

from __future__ import annotations

import argparse
import sys

from igu.terminal.output import say
from igu.terminal.reading import read_cases
from igu.terminal.section import gap_words


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Arguments of the command."""
    parser.add_argument("cases", nargs="+", metavar="CASE", help="case files (TOML)")


def run(args: argparse.Namespace) -> int:
    """Read, say what was understood, and warn of what nothing uses."""
    for case in read_cases(args.cases):
        unit = case.unit
        parts = ["+".join(f"{1e3 * ply.thickness:g}" for ply in unit.panes[0].plies)]
        for gap, pane in zip(unit.gaps, unit.panes[1:], strict=True):
            parts += [f"({' '.join(gap_words(gap))})", "+".join(f"{1e3 * ply.thickness:g}" for ply in pane.plies)]
        names = ", ".join(c.name for c in case.conditions)
        say(f"{case.file}: sound. {' - '.join(parts)} mm, outdoors first; conditions: {names}")
        for warning in case.warnings:
            print(f"warning: {warning}", file=sys.stderr)
    return 0
