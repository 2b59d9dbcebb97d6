"""Where results go: standard output or a file, and the figure beside."""

from __future__ import annotations

import argparse
import sys
from collections.abc import Callable, Sequence
from importlib.util import find_spec
from pathlib import Path
from typing import Any

from igu.errors import OutputError
from igu.terminal.files import refuse_existing, write_text, write_whole

FIGURE_KINDS = (".svg", ".png", ".pdf")

NO_MATPLOTLIB = "a figure needs matplotlib: pip install 'igu[figures]'"

FORMATS = {
    "json": "print JSON for scripts (unrounded)",
    "csv": "print CSV for a spreadsheet (unrounded)",
    "markdown": "print a Markdown table for a report",
}


def add_output_options(parser: argparse.ArgumentParser, formats: Sequence[str], *, figure: str | None = None) -> None:
    """The options every command that prints results has."""
    group = parser.add_mutually_exclusive_group()
    for name in formats:
        group.add_argument(f"--{name}", dest="format", action="store_const", const=name, help=FORMATS[name])
    parser.add_argument("--output", type=Path, metavar="FILE", help="write the result to a file instead of printing it")
    if figure is not None:
        parser.add_argument("--figure", type=Path, metavar="FILE", help=f"draw {figure} (svg, png or pdf)")
    parser.add_argument("--force", action="store_true", help="replace files that exist")
    parser.set_defaults(format="plain", figure=None)


def check_targets(args: argparse.Namespace) -> None:
    """Refuse, before any long work, files that may not be written and figures that cannot be drawn."""
    if args.output is not None:
        refuse_existing(args.output, force=args.force)
    if args.figure is not None:
        if args.figure.suffix not in FIGURE_KINDS:
            raise OutputError(f"{args.figure}: a figure ends in {', '.join(FIGURE_KINDS)}")
        if find_spec("matplotlib") is None:
            raise OutputError(NO_MATPLOTLIB)
        refuse_existing(args.figure, force=args.force)


def deliver(args: argparse.Namespace, text: str, *, figure: Callable[[Path], None] | None = None) -> None:
    """Print the text or write it to the file asked for, and draw the figure where one is asked for; a figure that
    cannot be drawn does not keep the text back."""
    check_targets(args)
    undrawn = None
    if args.figure is not None and figure is not None:
        try:
            write_whole(args.figure, figure, force=args.force)
        except OutputError as error:
            undrawn = error
    if args.output is not None:
        write_text(args.output, text, force=args.force)
    else:
        say(text)
    if undrawn:
        raise undrawn


def say(text: str) -> None:
    """Print on standard output, all of it."""
    if sys.stdout is None:
        raise OutputError("there is no standard output to print on")
    try:
        print(text, flush=True)
    except BrokenPipeError:
        raise
    except OSError as error:
        raise OutputError(f"standard output could not be written: {error.strerror or error}") from error


def json_text(value: Any) -> str:
    """The value as JSON; letters beyond ASCII are escaped where standard output may not know them."""
    import json

    narrow = str(getattr(sys.stdout, "encoding", "utf-8")).lower() not in ("utf-8", "utf8")
    return json.dumps(value, ensure_ascii=narrow, allow_nan=False, indent=1)
