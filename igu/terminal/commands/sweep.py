"""igu sweep: one or two quantities of a case varied."""

from __future__ import annotations

import argparse
from pathlib import Path
from typing import Any

from igu.errors import ModelError
from igu.model.case import Case
from igu.studies.sweep import Optimum, sweep
from igu.studies.sweep import Table as Swept
from igu.terminal.comparison import quantity_column
from igu.terminal.output import add_output_options, check_targets, deliver, json_text
from igu.terminal.reading import read_cases
from igu.terminal.report import under, wrapped
from igu.terminal.tables import Cell, Column, Table, number


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Arguments of the command."""
    parser.add_argument("case", metavar="CASE", help="a case file with a [sweep] table")
    add_output_options(parser, ("json", "csv", "markdown"), figure="the quantities against the first key")


def run(args: argparse.Namespace) -> int:
    """Print a table, or a matrix for every quantity."""
    check_targets(args)
    case = read_cases([args.case])[0]
    if case.sweep is None:
        raise ModelError(f"{case.file}: nothing to sweep; it has no [sweep] table (docs/case-file.md)")
    found = sweep(case, case.sweep)
    deliver(args, _rendered(args.format, case, found), figure=lambda path: _draw(found, path))
    return 0


def _rendered(form: str, case: Case, found: Swept) -> str:
    if form == "json":
        return json_text(_record(case, found))
    if form == "csv":
        return long_table(found).csv()
    tables = matrices(found) if len(found.vary) > 1 else [(None, long_table(found))]
    words = [*(_optimum_words(found, o) for o in found.optima), _states(found)]
    parts = [f"{name}\n\n{getattr(t, form)()}" if name else str(getattr(t, form)()) for name, t in tables]
    lines = [line for text in words for line in wrapped(text)]
    return "\n\n".join([*wrapped(case.title), *parts, "\n".join(lines)])


def short_key(keys: tuple[str, ...]) -> str:
    """What is varied, as a column's head."""
    return keys[0] if len(keys) == 1 else f"{keys[0]} and {len(keys) - 1} more"


def value_words(value: Any) -> Cell:
    """A varied value for a table: numbers as they are, a fill or other choice in words."""
    if isinstance(value, bool) or not isinstance(value, int | float | str):
        if isinstance(value, dict):
            return ", ".join(f"{100 * share:g} % {gas}" for gas, share in value.items())
        return str(value)
    return value


def long_table(found: Swept) -> Table:
    """One row a point, with every quantity."""
    names = list(found.quantities)
    heads = [Column(f"{v.keys[0]}", short_key(v.keys).replace(".", ".\n", 1), _decimals(v.values)) for v in found.vary]
    rows = []
    first = found.vary[0].values
    second = found.vary[1].values if len(found.vary) > 1 else (None,)
    for i, a in enumerate(first):
        for j, b in enumerate(second):
            at = (i,) if b is None and len(found.vary) == 1 else (i, j)
            point = (value_words(a),) if len(found.vary) == 1 else (value_words(a), value_words(b))
            rows.append((*point, *(float(found.quantities[name][at]) for name in names)))
    marks = _marks(found) if len(found.vary) == 1 else frozenset()
    return Table((*heads, *(quantity_column(n) for n in names)), tuple(rows), marks)


def _marks(found: Swept) -> frozenset[tuple[int, int]]:
    values = found.quantities[found.judged]
    known = values[values == values]
    if not known.size:
        return frozenset()
    best = known.min() if found.minimise else known.max()
    return frozenset((int(r), 1) for r in (values == best).nonzero()[0])


def matrices(found: Swept) -> list[tuple[str | None, Table]]:
    """A matrix for every quantity: the first key down, the second across, the best of every column marked."""
    down, across = found.vary
    made: list[tuple[str | None, Table]] = []
    for name, values in found.quantities.items():
        column = quantity_column(name)
        heads = [Column(f"{name} {value_words(v)}", str(value_words(v)), column.decimals) for v in across.values]
        rows = [(value_words(a), *(float(x) for x in values[i])) for i, a in enumerate(down.values)]
        best = values.argmin(axis=0) if found.minimise else values.argmax(axis=0)
        marks = frozenset((int(r), c + 1) for c, r in enumerate(best)) if name == found.judged else frozenset()
        first = Column(down.keys[0], short_key(down.keys), _decimals(down.values))
        title = f"{name} by {short_key(down.keys)} (down) and {short_key(across.keys)} (across)"
        made.append((title, Table((first, *heads), tuple(rows), marks)))
    return made


def _decimals(values: tuple[Any, ...]) -> int:
    """Decimals that show every value of an axis."""
    lengths = [len(f"{v:.6f}".rstrip("0").split(".")[1]) for v in values if isinstance(v, float)]
    return max(lengths, default=0)


def _optimum_words(found: Swept, o: Optimum) -> str:
    word = "least" if found.minimise else "greatest"
    where = f" with {short_key(found.vary[1].keys)} {value_words(o.across)}" if o.across is not None else ""
    at = value_words(o.at) if not isinstance(o.at, float) else number(o.at, 2)
    text = f"{word} {found.judged} {number(o.best, 3)} at {short_key(found.vary[0].keys)} {at}{where}"
    if o.edge:
        text += ", an end of the range"
    if o.low is not None and o.high is not None:
        text += f"; within 1 % from {number(o.low, 2)} to {number(o.high, 2)}"
    return f"{text}."


def _states(found: Swept) -> str:
    cold = under(found.cold) if found.cold else "none"
    sun = under(found.sun) if found.sun else "none"
    return f"Conditions: cold {cold}, sun {sun}. * best of the judged quantity."


def _record(case: Case, found: Swept) -> dict[str, Any]:
    return {
        "file": case.file,
        "title": case.title,
        "cold": found.cold and found.cold.name,
        "sun": found.sun and found.sun.name,
        "keys": [list(v.keys) for v in found.vary],
        "rows": long_table(found).records(),
        "judged": found.judged,
        "optima": [vars(o) for o in found.optima],
    }


def _draw(found: Swept, path: Path) -> None:
    from igu.terminal.figures import draw_sweep

    draw_sweep(found, path)
