"""A row of the validation: what, source, mark, the figure as printed, ours, and how near it has to be."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

MARKS = ("seen", "memory", "computed", "inferred", "common practice, no source")


@dataclass(frozen=True)
class Row:
    """`published` is the figure as printed; `tolerance` None means half a unit of its last printed digit, any other
    needs a `reason`. `computed` gives our value in the same unit."""

    topic: str
    what: str
    source: str
    mark: str
    published: str
    computed: Callable[[], float]
    tolerance: float | None = None
    reason: str = ""

    @property
    def digits(self) -> int:
        """Decimals of the printed figure."""
        return len(self.published.split(".")[1]) if "." in self.published else 0

    @property
    def allowed(self) -> float:
        """Largest deviation."""
        return 0.5 * 10.0**-self.digits if self.tolerance is None else self.tolerance

    def deviation(self) -> float:
        """Computed less published."""
        return float(self.computed()) - float(self.published)

    def holds(self) -> bool:
        """Whether the computed value rounds to the printed one, or lies within the stated tolerance."""
        return abs(self.deviation()) <= self.allowed * (1.0 + 1e-9) + 1e-12


def markdown(rows: list[Row]) -> str:
    """The whole document."""
    lines = [
        "# Validation",
        "",
        "Every published value this package is held to. Written by `python -m tests.validation`; a test keeps it",
        "current. Mark: **seen** the number stood in a text of the source; **memory** recalled from the source named;",
        "**computed** or **inferred** arithmetic from published formulas. Tolerance: half a unit of the last printed digit",
        "unless a reason is given.",
    ]
    for topic in dict.fromkeys(row.topic for row in rows):
        group = [row for row in rows if row.topic == topic]
        lines += ["", f"## {topic}", "", "| what | source | mark | published | computed | deviation | tolerance |",
                  "|---|---|---|---:|---:|---:|---|"]  # fmt: skip
        lines += [_line(row) for row in group]
    return "\n".join(lines) + "\n"


def _line(row: Row) -> str:
    more = row.digits + 2
    tolerance = "printed digit" if row.tolerance is None else f"±{row.tolerance:g}: {row.reason}"
    computed, deviation = float(row.computed()), row.deviation()
    sign = f"{deviation:+.{more}f}"
    sign = sign.replace("-", "+") if not sign.strip("+-0.") else sign
    return f"| {row.what} | {row.source} | {row.mark} | {row.published} | {computed:.{more}f} | {sign} | {tolerance} |"
