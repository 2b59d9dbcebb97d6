"""The command line: arguments in, exit code out. Errors of this package become messages here and nowhere else."""

from __future__ import annotations

import argparse
import contextlib
import importlib
import os
import sys
import textwrap
from collections.abc import Sequence

from igu import __version__
from igu.errors import CaseError, IguError, OutputError, SolveError
from igu.terminal.plain import tolerate_narrow_encodings

COMMANDS = {
    "solve": "solve cases: U, temperatures, heat paths, sun, fogging",
    "check": "read and validate cases, solve nothing",
    "list": "what the catalogue offers, with figures and sources",
    "angles": "transmitted, reflected, absorbed and g by angle of incidence",
    "compare": "the coating on every face where it may go, or several cases side by side",
    "sweep": "one or two quantities of a case varied",
    "seek": "the make-ups that meet the targets of a case",
    "service": "fogging, gas pressure and bowing, thermal fracture, ageing, tolerances",
}
"""Every command and what it does; `igu.terminal.commands` has a module for each."""

FIRST_CASE = """\
layer = [
  { glass = "clear", thickness_mm = 6, coating_in = "soft-single" },
  { gap_mm = 16, gas = { argon = 0.9, air = 0.1 } },
  { glass = "clear", thickness_mm = 4 },
]
[[conditions]]
set = "en-673"
"""
"""A smallest case, outdoors first."""

EPILOG = """\
exit codes: 0 done; 1 done, but a balance did not close or a search found
nothing; 2 bad input, every fault on stderr, or a result that could not be
written; 130 interrupted. Results go to stdout, everything else to stderr.
Estimates for design: local codes and a licensed engineer decide."""

FIRST_STEPS = f"""\
a smallest case file, outdoors first (what it may name: igu list; more keys:
docs/case-file.md and the examples in cases/):

{textwrap.indent(FIRST_CASE, "  ")}
then: igu check first.toml, igu solve first.toml, igu COMMAND --help

{EPILOG}"""


def main(argv: Sequence[str] | None = None) -> int:
    """Run one command; returns the exit code."""
    given = sys.argv[1:] if argv is None else list(argv)
    tolerate_narrow_encodings()
    try:
        args = _parser(given).parse_args(given)
        return int(args.run(args))
    except SystemExit as stop:
        return stop.code if isinstance(stop.code, int) else 2
    except CaseError as error:
        return _complain(error.faults, 2)
    except OutputError as error:
        _drop_unwritten()
        return _complain((str(error),), 2)
    except SolveError as error:
        return _complain((str(error),), 1)
    except IguError as error:
        return _complain((str(error),), 2)
    except BrokenPipeError:
        _drop_unwritten()
        return 0
    except KeyboardInterrupt:
        return 130


def _complain(lines: Sequence[str], code: int) -> int:
    if sys.stderr is not None:
        print("\n".join(lines), file=sys.stderr)
    return code


def _drop_unwritten() -> None:
    """What standard output did not take is not tried again at exit."""
    with contextlib.suppress(OSError, ValueError, AttributeError):
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())


def _parser(given: Sequence[str]) -> argparse.ArgumentParser:
    """The parser; only the chosen command's module is imported, so that start-up stays light."""
    parser = argparse.ArgumentParser(
        prog="igu",
        description="Heat, sun and service life of insulating glass units, from a case file.",
        epilog=FIRST_STEPS,
        formatter_class=argparse.RawDescriptionHelpFormatter,
    )
    parser.add_argument("--version", action="version", version=f"igu {__version__}")
    commands = parser.add_subparsers(title="commands", metavar="COMMAND", required=True)
    chosen = next((word for word in given if not word.startswith("-")), None)
    for name, words in COMMANDS.items():
        sub = commands.add_parser(name, help=words, description=words, epilog=EPILOG,
                                  formatter_class=argparse.RawDescriptionHelpFormatter)  # fmt: skip
        if name == chosen:
            module = importlib.import_module(f"igu.terminal.commands.{name}")
            module.add_arguments(sub)
            sub.set_defaults(run=module.run)
    return parser
