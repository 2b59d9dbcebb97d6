"""A row of the validation: what, source, mark, the figure as printed, ours, and how near it has to be."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property

from igu.ratings.rounding import half_up

MARKS = ("seen", "memory", "computed", "common practice, no source")

HEAD = """\
# Validation

Published values this package is held to. Written by `python -m tests.validation`; a test keeps it current.
Mark: **seen** the number stood in a text of the source; **memory** recalled from the source named and not read again;
**computed** arithmetic from published formulas, no publication; **common practice** without a source. Tolerance: half a
unit of the last printed digit; where it is another, the note under the table says why. **Does not follow** stands at a
figure that our value does not round to and is tested not to. Where the figures themselves ship as data (the gas table of
EN 673, emissivity ratios, tolerances of float glass, permissible values), a row holds the data to the source and nothing
more."""


@dataclass(frozen=True)
class Row:
    """`published` is the figure as printed; `ours` computes our value in the same unit. `tolerance` None means half a
    unit of the last printed digit; any other needs a `reason`, and so does a figure that does not follow."""

    topic: str
    what: str
    source: str
    mark: str
    published: str
    ours: Callable[[], float]
    tolerance: float | None = None
    reason: str = ""
    follows: bool = True

    @cached_property
    def computed(self) -> float:
        """Our value."""
        return float(self.ours())

    @property
    def decimals(self) -> int:
        """Decimals of the printed figure."""
        return len(self.published.partition(".")[2])

    @property
    def allowed(self) -> float:
        """Largest deviation."""
        return 0.5 * 10.0**-self.decimals if self.tolerance is None else self.tolerance

    @property
    def deviation(self) -> float:
        """Computed less published."""
        return self.computed - float(self.published)

    @property
    def holds(self) -> bool:
        """Whether the computed value rounds to the printed one, or lies within the stated tolerance."""
        return abs(self.deviation) <= self.allowed * (1.0 + 1e-9)

    @property
    def as_stated(self) -> bool:
        """Whether it holds, or, of a figure said not to follow, that it does not."""
        return self.holds is self.follows


def markdown(rows: list[Row]) -> str:
    """The whole document."""
    topics = dict.fromkeys(row.topic for row in rows)
    return "\n".join([HEAD, *(_topic(t, [row for row in rows if row.topic == t]) for t in topics)]) + "\n"


def _topic(topic: str, rows: list[Row]) -> str:
    reasons = list(dict.fromkeys(row.reason for row in rows if row.reason))
    return "\n".join(
        [
            f"\n## {topic}\n",
            "| what | source | mark | published | computed | deviation | tolerance |",
            "|---|---|---|---:|---:|---:|---|",
            *(_line(row, reasons) for row in rows),
            *(f"\n({k}) {reason}." for k, reason in enumerate(reasons, 1)),
        ]
    )


def _line(row: Row, reasons: list[str]) -> str:
    tolerance = "does not follow" if not row.follows else "digit" if row.tolerance is None else f"±{row.tolerance:.3g}"
    tolerance += f" ({reasons.index(row.reason) + 1})" if row.reason else ""
    more = row.decimals + 2
    cells = (row.what, row.source, row.mark, row.published, _figure(row.computed, more),
             _figure(row.deviation, more, sign="+"), tolerance)  # fmt: skip
    return f"| {' | '.join(cells)} |"


def _figure(value: float, decimals: int, sign: str = "") -> str:
    """The value to so many decimals, the same whatever its last bits."""
    return f"{half_up(value, decimals):{sign}.{decimals}f}"
