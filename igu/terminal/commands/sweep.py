"""igu sweep: one or two quantities of a case varied."""

from __future__ import annotations

import argparse
import math
from collections.abc import Sequence
from pathlib import Path
from typing import Any

import numpy as np

from igu.arrays import Array
from igu.errors import ModelError
from igu.model.case import Case
from igu.studies.sweep import Optimum, sweep
from igu.studies.sweep import Table as Swept
from igu.terminal.output import add_output_options, check_targets, deliver, json_text
from igu.terminal.page.comparison import quantity_column
from igu.terminal.page.remarks import measured, remarks_on, warned, warnings_of
from igu.terminal.page.text import WIDTH, caution, under, wrapped
from igu.terminal.reading import read_cases
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
    deliver(args, _rendered(args.format, case, found), figure=lambda path: _draw(case, found, path))
    return 0


def _rendered(form: str, case: Case, found: Swept) -> str:
    if form == "json":
        return json_text(_record(case, found))
    if form == "csv":
        return long_table(found).cautioned([caution([unit]) for unit in found.units]).csv()
    tables = matrices(found) if len(found.vary) > 1 else [(None, long_table(found))]
    words = [*(_optimum_words(found, o) for o in _told(found)), _states(found), *remarks_on(found.units, found.sun)]
    careful = caution(found.units)
    words += [*([careful] if careful else []), *warned([case])]
    drawn = [(name, t.folded(WIDTH) if form == "plain" else t.markdown()) for name, t in tables]
    fitted = wrapped if form == "plain" else lambda text: [text]
    parts = ["\n".join([*fitted(name), "", text]) if name else text for name, text in drawn]
    lines = [line for text in words for line in wrapped(text)]
    return "\n\n".join([*wrapped(case.title), *parts, "\n".join(lines)])


def short_key(keys: tuple[str, ...]) -> str:
    """What is varied, as a column's head."""
    return keys[0] if len(keys) == 1 else f"{keys[0]} and {len(keys) - 1} more"


def _equal(keys: tuple[str, ...]) -> str:
    """What is varied, before its value in a sentence."""
    return keys[0] if len(keys) == 1 else f"{' = '.join(keys)} ="


def _head(keys: tuple[str, ...]) -> str:
    """The same in the lines of a column's head."""
    first, dot, last = keys[0].rpartition(".")
    return f"{first}{dot}\n{last}" + (f"\nand {len(keys) - 1} more" if len(keys) > 1 else "")


def said(value: Any) -> str:
    """A varied value in a sentence or a head."""
    return f"{value:g}".replace("-", "−") if isinstance(value, float) else str(value_words(value))


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
    heads = [Column(v.keys[0], _head(v.keys), _decimals(v.values)) for v in found.vary]
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
    column = len(found.vary) + list(found.quantities).index(found.judged)
    return frozenset((r, column) for r in _best(found, found.quantities[found.judged]))


def _best(found: Swept, values: Array) -> list[int]:
    """Rows of the best of these values; none where none is known."""
    known = values[np.isfinite(values)]
    best = (known.min() if found.minimise else known.max()) if known.size else np.nan
    return [int(r) for r in np.flatnonzero(values == best)]


def matrices(found: Swept) -> list[tuple[str | None, Table]]:
    """A matrix for every quantity: the first key down, the second across, the best of every column marked."""
    down, across = found.vary
    made: list[tuple[str | None, Table]] = []
    for name, values in found.quantities.items():
        column = quantity_column(name)
        heads = [Column(f"{name} {said(v)}", said(v), column.decimals) for v in across.values]
        rows = [(value_words(a), *(float(x) for x in values[i])) for i, a in enumerate(down.values)]
        stars = [(r, c) for c, one in enumerate(values.T, 1) for r in _best(found, one)]
        marks = frozenset(stars) if name == found.judged else frozenset()
        first = Column(down.keys[0], _head(down.keys), _decimals(down.values))
        title = f"{name} by {short_key(down.keys)} (down) and {short_key(across.keys)} (across)"
        made.append((title, Table((first, *heads), tuple(rows), marks)))
    return made


def _decimals(values: tuple[Any, ...]) -> int:
    """Decimals that show every value of an axis."""
    lengths = [len(f"{v:.6f}".rstrip("0").split(".")[1]) for v in values if isinstance(v, float)]
    return max(lengths, default=0)


def _told(found: Swept) -> tuple[Optimum, ...]:
    """Optima worth a sentence: along a range each, among choices, which the table marks, the best alone."""
    if not found.optima or found.vary[0].ranged:
        return found.optima
    return ((min if found.minimise else max)(found.optima, key=lambda o: o.best),)


def _optimum_words(found: Swept, o: Optimum) -> str:
    word = "least" if found.minimise else "greatest"
    where = f" with {_equal(found.vary[1].keys)} {said(o.across)}" if o.across is not None else ""
    decimals = _place_decimals(found.vary[0].values)
    at = number(o.at, decimals) if found.vary[0].ranged else said(o.at)
    text = f"{word} {found.judged} {number(o.best, 3)} at {_equal(found.vary[0].keys)} {at}{where}"
    if o.edge:
        text += ", an end of the range"
    if o.low is not None and o.high is not None:
        text += f"; within 1 % from {number(o.low, decimals)} to {number(o.high, decimals)}"
    if o.local is not None:
        text += f"; a local {word} of {number(o.local[1], 3)} at {number(o.local[0], decimals)} inside the range"
    return f"{text}."


def _place_decimals(values: Sequence[Any]) -> int:
    """Decimals that place an optimum as closely as it is bracketed."""
    if not all(isinstance(v, int | float) for v in values) or values[-1] == values[0]:
        return 0
    return max(0, 4 - math.ceil(math.log10(abs(values[-1] - values[0]))))


def _states(found: Swept) -> str:
    cold = under(found.cold) if found.cold else "none"
    sun = under(found.sun) if found.sun else "none"
    together = " ".join(f"{' and '.join(v.keys)} vary together." for v in found.vary if len(v.keys) > 1)
    return f"Conditions: cold {cold}, sun {sun}. * best of {found.judged}. {together}".rstrip()


def _record(case: Case, found: Swept) -> dict[str, Any]:
    return {
        "file": case.file,
        "title": case.title,
        "cold": found.cold and found.cold.name,
        "sun": found.sun and found.sun.name,
        "keys": [list(v.keys) for v in found.vary],
        "caution": caution(found.units),
        "warnings": [*warnings_of([case]), *measured(found.units, found.sun)],
        "rows": long_table(found).records(),
        "judged": found.judged,
        "optima": [
            vars(o) | {"local": o.local and dict(zip(("at", "best"), o.local, strict=True))} for o in found.optima
        ],
    }


def _draw(case: Case, found: Swept, path: Path) -> None:
    from igu.terminal.figures import draw_sweep

    heads = [short_key(v.keys) for v in found.vary]
    draw_sweep(found, heads, [[said(value) for value in v.values] for v in found.vary], path, title=case.title)
