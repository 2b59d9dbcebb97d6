"""igu seek: the make-ups that meet the targets of a case."""

from __future__ import annotations

import argparse
import os
from collections.abc import Iterator, Sequence
from concurrent.futures import Executor
from contextlib import contextmanager
from pathlib import Path
from typing import Any

from igu.errors import ModelError
from igu.model.case import Case
from igu.studies.conditions import cold_and_sun
from igu.studies.seek import Candidate, Search, seek
from igu.terminal.comparison import quantity_column
from igu.terminal.output import add_output_options, check_targets, deliver, json_text
from igu.terminal.progress import Bar
from igu.terminal.reading import read_cases
from igu.terminal.report import CAUTION, is_overhead, wrapped
from igu.terminal.section import makeup_words
from igu.terminal.tables import Cell, Column, Table, known

SHOWN = (
    "U_W_m2K",
    "solar_factor_g",
    "light_transmittance",
    "selectivity",
    "room_face_C",
    "hottest_pane_C",
    "thickness_mm",
    "mass_kg_m2",
)


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Arguments of the command."""
    parser.add_argument("case", metavar="CASE", help="a case file with a [seek] table")
    parser.add_argument(
        "--workers", type=int, default=os.cpu_count() or 1, metavar="N", help="processes; left out: one for each core"
    )
    add_output_options(parser, ("json", "csv", "markdown"), figure="the front of make-ups no other beats, labelled")


def run(args: argparse.Namespace) -> int:
    """Search and print; exit code 1 where nothing meets the targets, 130 when interrupted."""
    check_targets(args)
    case = read_cases([args.case])[0]
    if case.seek is None:
        raise ModelError(f"{case.file}: nothing to seek; it has no [seek] table (docs/case-file.md)")
    cold, sun = cold_and_sun(case, case.seek.cold, case.seek.sun)
    bar = Bar("make-ups")
    with _pool(args.workers) as (executor, workers):
        found = seek(
            case.seek, case.unit, case.library, cold=cold, sun=sun, executor=executor, workers=workers, progress=bar
        )
    bar.close()
    deliver(args, _rendered(args.format, case, found), figure=lambda path: _draw(found, path))
    if found.partial:
        return 130
    return 0 if found.meeting else 1


@contextmanager
def _pool(workers: int) -> Iterator[tuple[Executor | None, int]]:
    """Processes to rate blocks in, or none for one worker. The processes leave Ctrl-C to this one."""
    if workers <= 1:
        yield None, 1
        return
    from concurrent.futures import ProcessPoolExecutor

    with ProcessPoolExecutor(workers, initializer=_ignore_interrupts) as executor:
        yield executor, workers


def _ignore_interrupts() -> None:
    import signal

    signal.signal(signal.SIGINT, signal.SIG_IGN)


def candidate_table(candidates: Sequence[Candidate]) -> Table:
    """Numbered make-ups with their quantities; the make-up itself comes last."""
    columns = (Column("number", "no."), *(quantity_column(n) for n in SHOWN), Column("makeup", "make-up"))
    rows: list[tuple[Cell, ...]] = [
        (k, *(c.values[name] for name in SHOWN), makeup_words(c.panes, c.gaps)) for k, c in enumerate(candidates, 1)
    ]
    return Table(columns, tuple(rows))


def _plain(candidates: Sequence[Candidate]) -> str:
    """The table without make-ups, and these as lines beneath."""
    table = candidate_table(candidates)
    short = Table(table.columns[:-1], tuple(row[:-1] for row in table.rows))
    return "\n".join([short.plain(), *(line for row in table.rows for line in wrapped(f"{row[0]}: {row[-1]}", "  "))])


def _rendered(form: str, case: Case, found: Search) -> str:
    if form == "json":
        return json_text(_record(case, found))
    if form == "csv":
        return candidate_table(found.best).csv()
    show = _plain if form == "plain" else lambda c: candidate_table(c).markdown()
    parts = ["\n".join(wrapped(case.title)), "\n".join(line for text in _summary(found) for line in wrapped(text))]
    order = "least" if found.minimise else "greatest"
    if found.best:
        parts.append(f"Best, by {order} {found.rank_by}\n\n{show(found.best)}")
    if len(found.front) > 1:
        (first, _), (second, less) = found.front_axes
        direction = "less" if less else "more"
        parts.append(f"Front: no other has less {first} and {direction} {second}\n\n{show(found.front)}")
    if found.nearest is not None:
        missed = [
            f"{limit.words}, missed by {100 * miss:.1f} %"
            for limit, miss in zip(found.limits, found.misses, strict=True)
            if miss > 0
        ]
        words = "\n".join(wrapped(f"Nearest miss: {'; '.join(missed)}"))
        parts.append(f"{words}\n\n{show((found.nearest,))}")
    parts.append(
        "\n".join(
            wrapped(
                "A search makes every pane of one annealed sheet: laminated panes and treatments of "
                "the case are not in it."
            )
        )
    )
    if is_overhead(case.unit):
        parts.append("\n".join(wrapped(f"Overhead glazing. {CAUTION}")))
    parts.append("\n".join(wrapped("Generic coatings are models, not measurements. [n name]: coating on face n.")))
    return "\n\n".join(parts)


def _summary(found: Search) -> list[str]:
    partial = f"INTERRUPTED, partial: {found.done} of {found.total} make-ups rated. " if found.partial else ""
    lines = [f"{partial}{found.meeting} of {found.done} make-ups meet everything."]
    if found.unsolved:
        lines.append(f"{found.unsolved} did not close their balance and are left out.")
    lines += [
        f"{limit.words}: the only limit that {count} make-ups fail"
        for limit, count in zip(found.limits, found.excluded, strict=True)
    ]
    return lines


def _record(case: Case, found: Search) -> dict[str, Any]:
    return {
        "file": case.file,
        "title": case.title,
        "total": found.total,
        "done": found.done,
        "partial": found.partial,
        "meeting": found.meeting,
        "unsolved": found.unsolved,
        "limits": [
            {"limit": limit.words, "excludes_alone": count}
            for limit, count in zip(found.limits, found.excluded, strict=True)
        ],
        "rank_by": found.rank_by,
        "best": [_candidate(c) for c in found.best],
        "front": [_candidate(c) for c in found.front],
        "nearest": _candidate(found.nearest) if found.nearest else None,
    }


def _candidate(c: Candidate) -> dict[str, Any]:
    return {"makeup": makeup_words(c.panes, c.gaps), **{name: known(value) for name, value in c.values.items()}}


def _draw(found: Search, path: Path) -> None:
    from igu.terminal.figures import draw_front

    draw_front(found, path)
