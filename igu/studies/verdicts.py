"""The service study in six judgements: the worst of each question, and whether it passes."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from igu.model.unit import Unit
from igu.ratings.result import Result
from igu.studies.ageing import Ageing
from igu.studies.bowing import Bowed
from igu.studies.fracture import SPARE, Fracture
from igu.studies.service import Service
from igu.studies.tolerance import Tolerances

CLEAR = 1.0
"""Margin to the dew or frost point [K] below which a face is doubtful. Common practice, no source."""

PASSES, DOUBTFUL, FAILS, OPEN = "passes", "doubtful", "fails", "not judged"

UNLOADED = 1e-6
"""Share of the strength that is none."""

HOLDS = (0.95, 0.50)
"""Share of samples in which a declared value has to hold to pass, and below which it fails. Common practice, no source:
the 95 per cent of the spreads, and a toss."""


@dataclass(frozen=True)
class Verdict:
    """One question: its outcome, and the worst it was judged by. `value` against `limit`: fogging and fracture, the
    margin [K]; gap, the width at the centre and as sealed [m]; stress, stress and design strength [Pa]; ageing, the
    year the declared value is left (None: never) and the last of the table; tolerance, the share of samples. `at`
    numbers the pane, the gap or the face from 1, `under` names the conditions or the state."""

    question: str
    outcome: str
    value: float | None = None
    limit: float | None = None
    at: int | None = None
    under: str = ""


def verdicts(unit: Unit, found: Service) -> tuple[Verdict, ...]:
    """Every question, in the order of the report."""
    return (
        _fogging(found.results),
        _gap(unit, found.bowed),
        _stress(found.bowed),
        _fracture(found.fractures),
        _ageing(found.ageing),
        _tolerance(found.tolerances),
    )


def _fogging(results: Sequence[Result]) -> Verdict:
    """A face towards the room or inside a gap must not fog; the outdoor face may, and is doubtful then, as is any face
    that hardly stays clear."""
    rows = [
        (fog.margin, fog.where != "outdoor face", fog, r) for r in results for fog in r.fog if fog.margin is not None
    ]
    if not rows:
        return Verdict("fogging", OPEN)
    wet = [row for row in rows if row[0] < -1e-6]
    inner = [row for row in wet if row[1]]
    margin, _, fog, r = min(inner or wet or rows, key=lambda row: row[0])
    outcome = FAILS if inner else PASSES if margin >= CLEAR else DOUBTFUL
    return Verdict("fogging", outcome, margin, 0.0, fog.face, r.conditions.name)


def _gap(unit: Unit, bowed: Sequence[Bowed]) -> Verdict:
    """The gap that is left least of its width."""
    rows = [
        (gap.centre, unit.gaps[k].width, k, b)
        for b in bowed
        for k, gap in enumerate(b.gaps)
        if not unit.gaps[k].evacuated
    ]
    if not rows:
        return Verdict("gap", OPEN)
    centre, width, k, b = min(rows, key=lambda row: row[0] / row[1])
    bent = all(pane.linear for pane in b.panes[k : k + 2])
    return Verdict(
        "gap", FAILS if centre <= 0.0 else PASSES if bent else DOUBTFUL, centre, width, k + 1, state(b, bowed)
    )


def _stress(bowed: Sequence[Bowed]) -> Verdict:
    """The pane that uses most of its strength; doubtful where linear plates may read a stress too low, not judged where
    nothing loads a pane."""
    rows = [(pane.use, k, pane, b) for b in bowed for k, pane in enumerate(b.panes) if pane.use is not None]
    if not rows or max(row[0] for row in rows) < UNLOADED:
        return Verdict("stress", OPEN)
    use, k, pane, b = max(rows, key=lambda row: row[0])
    low = any(not p.linear and not b.given_pressure for _, _, p, b in rows)
    outcome = FAILS if use > 1.0 else DOUBTFUL if low else PASSES
    return Verdict("stress", outcome, pane.stress, pane.strength, k + 1, state(b, bowed))


def _fracture(rows: Sequence[Fracture]) -> Verdict:
    if not rows:
        return Verdict("fracture", OPEN)
    worst = min(rows, key=lambda row: row.margin)
    outcome = FAILS if worst.margin < 0.0 else DOUBTFUL if worst.margin < SPARE else PASSES
    return Verdict("fracture", outcome, worst.margin, worst.permissible, worst.pane + 1, worst.conditions)


def _ageing(a: Ageing | None) -> Verdict:
    """The declared value through the years of the table; doubtful where it is left: no standard says how long it has
    to last."""
    if a is None or a.declared is None:
        return Verdict("ageing", OPEN)
    last = a.years[-1]
    left = any(year is not None and year <= last for year in (a.leaves, a.leaves_linear))
    return Verdict("ageing", DOUBTFUL if left else PASSES, a.leaves, last)


def _tolerance(t: Tolerances | None) -> Verdict:
    if t is None or t.holds is None:
        return Verdict("tolerance", OPEN)
    high, low = HOLDS
    outcome = PASSES if t.holds >= high else FAILS if t.holds < low else DOUBTFUL
    return Verdict("tolerance", outcome, t.holds, high)


def state(b: Bowed, among: Sequence[Bowed]) -> str:
    """A state by everything that tells it from the others."""
    return f"{b.name}, {shear(b)}" if any(other.transfer == 0.0 for other in among) else b.name


def shear(b: Bowed) -> str:
    """How the plies of laminated panes are taken to hold together."""
    return "layered" if b.transfer == 0.0 else "monolithic"


def worst_state(bowed: Sequence[Bowed]) -> Bowed | None:
    """The state that uses most of a pane's strength, or, where no stress is worked out, bends a pane most."""
    uses = [max((p.use for p in b.panes if p.use is not None), default=None) for b in bowed]
    if all(use is None for use in uses):
        uses = [max(abs(p.centre) for p in b.panes) for b in bowed]
    worst = max(range(len(bowed)), key=lambda k: uses[k] or 0.0, default=None)
    return None if worst is None else bowed[worst]
