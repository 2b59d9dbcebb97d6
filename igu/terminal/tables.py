"""One formatter for every table: plain text, CSV, Markdown, and rows for JSON."""

from __future__ import annotations

import math
import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

Cell = str | float | int | None

MISSING = "–"
"""What stands for a value that is not known, in tables for people."""


@dataclass(frozen=True)
class Column:
    """A column: key for scripts, head for people (lines divided by a line break), decimals of its numbers; `right`
    where texts stand to the right, as numbers do."""

    key: str
    head: str
    decimals: int = 2
    right: bool = False


@dataclass(frozen=True)
class Table:
    """Columns and rows; `marks` are (row, column) of the cells that carry a star, the best of their column;
    `close`: columns of plain text stand one place apart instead of two."""

    columns: tuple[Column, ...]
    rows: tuple[tuple[Cell, ...], ...]
    marks: frozenset[tuple[int, int]] = frozenset()
    close: bool = False

    def plain(self) -> str:
        """For a terminal: numbers right, text left, heads of several lines standing on the rule."""
        height = max(column.head.count("\n") for column in self.columns)
        heads = ["\n" * (height - column.head.count("\n")) + column.head for column in self.columns]
        lines = self._drawn(heads, self._texts(), "simple").splitlines()
        return "\n".join(line.rstrip() for line in (_closer(lines) if self.close else lines))

    def markdown(self) -> str:
        """For a report."""
        cells = [[cell.strip().replace("|", "\\|") for cell in row] for row in self._texts()]
        heads = [column.head.replace("-\n", "").replace(".\n", ".").replace("\n", " ") for column in self.columns]
        return self._drawn(heads, cells, "pipe")

    def only(self, keep: Sequence[int]) -> Table:
        """The table with these columns."""
        place = {c: k for k, c in enumerate(keep)}
        marks = frozenset((r, place[c]) for r, c in self.marks if c in place)
        rows = tuple(tuple(row[c] for c in keep) for row in self.rows)
        return Table(tuple(self.columns[c] for c in keep), rows, marks, self.close)

    def cautioned(self, cautions: Sequence[str | None]) -> Table:
        """The table with the caution of every row in a last column, for scripts."""
        rows = tuple((*row, said) for row, said in zip(self.rows, cautions, strict=True))
        return replace(self, columns=(*self.columns, Column("caution", "caution")), rows=rows)

    def known_only(self) -> Table:
        """The table without columns in which nothing is known."""
        return self.only([c for c in range(len(self.columns)) if any(known(row[c]) is not None for row in self.rows)])

    def folded(self, width: int) -> str:
        """For a terminal of so many columns: where the table is wider, its columns stand closer, and where that is not
        enough it is several tables under each other, each with the first column."""
        if self.width > width:
            close = replace(self, close=True)
            return close.plain() if close.width <= width else self._parted(width)
        return self.plain()

    def _parted(self, width: int) -> str:
        first = self.only([0]).width
        groups: list[list[int]] = []
        room = 0
        for c in range(1, len(self.columns)):
            wide = self.only([0, c]).width - first
            if not groups or wide > room:
                groups.append([])
                room = width - first
            groups[-1].append(c)
            room -= wide
        return "\n\n".join(self.only([0, *group]).plain() for group in groups)

    @property
    def width(self) -> int:
        """Columns of a terminal that the plain table takes."""
        return max(map(len, self.plain().splitlines()))

    def _drawn(self, heads: Sequence[str], cells: Sequence[Sequence[str]], form: str) -> str:
        import tabulate

        tabulate.MIN_PADDING = 0  # heads no wider than they are; 100 columns are few
        sides = ["right" if self._numeric(c) else "left" for c in range(len(heads))]
        return tabulate.tabulate(
            cells, headers=heads, tablefmt=form, colalign=sides, disable_numparse=True, preserve_whitespace=True
        )

    def _texts(self) -> list[list[str]]:
        return [[self._text(r, c) for c in range(len(self.columns))] for r in range(len(self.rows))]

    def csv(self) -> str:
        """For a spreadsheet: keys as heads, numbers in full, nothing where a value is not known."""
        import csv
        import io

        out = io.StringIO()
        writer = csv.writer(out, lineterminator="\n")
        writer.writerow([column.key for column in self.columns])
        writer.writerows([["" if v is None else v for v in map(known, row)] for row in self.rows])
        return out.getvalue().rstrip("\n")

    def records(self) -> list[dict[str, Any]]:
        """For JSON: one object a row."""
        return [
            {column.key: known(value) for column, value in zip(self.columns, row, strict=True)} for row in self.rows
        ]

    def _numeric(self, c: int) -> bool:
        return self.columns[c].right or any(isinstance(row[c], int | float) for row in self.rows)

    def _text(self, r: int, c: int) -> str:
        text = number(self.rows[r][c], self.columns[c].decimals)
        if not any(column == c for _, column in self.marks):
            return text
        return f"{text}*" if (r, c) in self.marks else f"{text} "


def _closer(lines: list[str]) -> list[str]:
    """The lines of a table with its columns one place apart: of the two under which no rule runs one goes."""
    rule = next(line for line in lines if line and not line.strip("- "))
    kept = [k for k in range(len(rule)) if rule[k : k + 2] != "  "]
    return ["".join(line.ljust(len(rule))[k] for k in kept) for line in lines]


def table_of(records: Sequence[Mapping[str, Cell]]) -> Table:
    """Records as one table of every key that one of them has; a key that a record has not is an empty cell."""
    keys = dict.fromkeys(key for record in records for key in record)
    return Table(
        tuple(Column(key, key) for key in keys), tuple(tuple(record.get(key) for key in keys) for record in records)
    )


LONGEST_WORD = 40
"""A longer word over a column is broken."""


def heads(names: Sequence[str], width: int) -> list[list[str]]:
    """Names over columns, broken between words into lines of at most this width, the last line of each on the same
    row; a longer word has a line of its own (`head_width`)."""
    lines = [[part for line in _lines(name, width) for part in _cut(line)] for name in names]
    height = max(map(len, lines), default=0)
    full = [[""] * (height - len(column)) + column for column in lines]
    return [list(row) for row in zip(*full, strict=True)]


def head_width(names: Sequence[str], *, least: int) -> int:
    """Width of columns that no word of these names leaves."""
    return max([least, *(min(len(word.strip()), LONGEST_WORD) for name in names for word in WORDS.findall(name))])


WORDS = re.compile(r"\s*(?:[^\s-]+-*|-+)")
"""The words of a name with the space before and the hyphens behind them: it breaks behind a hyphen too."""


def _lines(name: str, width: int) -> list[str]:
    lines = [""]
    for word in WORDS.findall(name):
        if lines[-1] and len(lines[-1] + word) > width:
            lines.append("")
        lines[-1] += word if lines[-1] else word.lstrip()
    return lines


def _cut(line: str) -> list[str]:
    return [line[at : at + LONGEST_WORD] for at in range(0, len(line), LONGEST_WORD)] or [""]


def known(value: Cell) -> Cell:
    """The value, None where it is not a number."""
    return None if isinstance(value, float) and not math.isfinite(value) else value


def number(value: Cell, decimals: int) -> str:
    """A value for people: the true minus sign, no minus zero, a dash where it is not known."""
    value = known(value)
    if value is None:
        return MISSING
    if isinstance(value, str):
        return value
    text = f"{value:.{decimals}f}" if isinstance(value, float) else str(value)
    return text.lstrip("-") if not text.strip("-0.") else text.replace("-", "−")
