"""The closed set of ways a solve can end: the name is for code, the sentence for a person."""

from __future__ import annotations

from enum import IntEnum


class Outcome(IntEnum):
    """How the heat balance of one stack ended."""

    SOLVED = 0
    UNSETTLED = 1
    RUNAWAY = 2

    @property
    def word(self) -> str:
        """One word for files and scripts."""
        return self.name.lower()

    @property
    def advice(self) -> str:
        """What it means and what to try."""
        return _ADVICE[self]


_ADVICE = {
    Outcome.SOLVED: "Every face is in balance.",
    Outcome.UNSETTLED: (
        "The balance did not close to 1e-6 W/m2; the largest imbalance is shown. Look for a gap or ply far thinner "
        "than the others, or change the conditions slightly and compare."
    ),
    Outcome.RUNAWAY: (
        "A face left the range from 100 to 1000 K. Check the absorbed heat, the temperatures and the coefficients."
    ),
}
