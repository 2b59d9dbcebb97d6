"""igu seek: the make-ups that meet the targets of a case."""

from __future__ import annotations

import argparse
import os
import sys
from collections.abc import Collection, Iterator, Sequence
from concurrent.futures import Executor
from contextlib import contextmanager
from dataclasses import replace
from pathlib import Path
from typing import Any

from igu.errors import ModelError
from igu.model.case import Case
from igu.model.study_tables import CaseLayer, PaneChoices
from igu.model.unit import Pane, Unit
from igu.studies.compare import kept_off
from igu.studies.seek import TIE, Candidate, Search, conditions_of, seek
from igu.terminal.output import add_output_options, check_targets, deliver, json_text
from igu.terminal.page.comparison import quantity_column
from igu.terminal.page.remarks import judged_under, measured, remarks_on, warned, warnings_of
from igu.terminal.page.section import makeup_words
from igu.terminal.page.text import WIDTH, caution, wrapped
from igu.terminal.progress import Bar
from igu.terminal.reading import read_cases
from igu.terminal.tables import Cell, Column, Table, known, number

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
    if args.workers < 1:
        raise ModelError(f"--workers: given {args.workers}; allowed a whole number from 1")
    case = read_cases([args.case])[0]
    if case.seek is None:
        raise ModelError(f"{case.file}: nothing to seek; it has no [seek] table (docs/case-file.md)")
    cold, sun = conditions_of(case, case.seek)
    bar = Bar("make-ups")
    with _pool(args.workers) as (executor, workers):
        found = seek(
            case.seek, case.unit, case.library, cold=cold, sun=sun, executor=executor, workers=workers, progress=bar
        )
    bar.close()
    undrawn = args.figure is not None and not found.front
    if undrawn:
        args.figure = None
    deliver(args, _rendered(args.format, case, found), figure=lambda path: _draw(case, found, path))
    if undrawn:
        print("no make-up meets the targets: there is no front to draw", file=sys.stderr)
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


def candidate_table(candidates: Sequence[Candidate], found: Search) -> Table:
    """Numbered make-ups with their quantities; the make-up itself comes last."""
    judged = dict.fromkeys((found.rank_by, *(limit.quantity for limit in found.limits)))
    shown = (*(name for name in judged if name not in SHOWN), *SHOWN)
    heads = [quantity_column(name) for name in shown]
    heads[shown.index(found.rank_by)] = _telling(candidates, found.rank_by)
    columns = (Column("number", "no."), *heads, Column("makeup", "make-up"))
    rows: list[tuple[Cell, ...]] = [
        (k, *(c.values[name] for name in shown), makeup_words(c.panes, c.gaps)) for k, c in enumerate(candidates, 1)
    ]
    return Table(columns, tuple(rows))


MORE_DECIMALS = 2


def _telling(candidates: Sequence[Candidate], ranked: str) -> Column:
    """The column of the ranked quantity, with up to two decimals more where that tells apart what it ranks."""
    column = quantity_column(ranked)
    told = [
        len({number(c.values[ranked], column.decimals + more) for c in candidates}) for more in range(MORE_DECIMALS + 1)
    ]
    return replace(column, decimals=column.decimals + told.index(max(told)))


def _lists(found: Search) -> dict[str, tuple[Candidate, ...]]:
    """The lists of make-ups by name."""
    return {"best": found.best, "front": found.front, "nearest": (found.nearest,) if found.nearest else ()}


def _rows(found: Search) -> Table:
    """Every list in one table for scripts; without any make-up its head alone."""
    tables = {name: candidate_table(listed, found) for name, listed in _lists(found).items()}
    rows = tuple((name, *row) for name, table in tables.items() for row in table.rows)
    return Table((Column("list", "list"), *tables["best"].columns), rows)


def _plain(table: Table) -> str:
    """The table without make-ups, and these as lines beneath."""
    short = table.only(range(len(table.columns) - 1))
    return "\n".join([short.folded(WIDTH), *(_numbered(row[0], str(row[-1])) for row in table.rows)])


def _numbered(k: Cell, words: str) -> str:
    """A make-up with its number in the margin."""
    lines = "\n".join(wrapped(words, "     "))
    return f"{k:>3}  {lines.lstrip()}"


def _rendered(form: str, case: Case, found: Search) -> str:
    if form == "json":
        return json_text(_record(case, found))
    if form == "csv":
        table = _rows(found)
        return table.cautioned([caution([case.unit])] * len(table.rows)).csv()

    def show(candidates: Sequence[Candidate]) -> str:
        table = candidate_table(candidates, found).known_only()
        return _plain(table) if form == "plain" else table.markdown()

    parts = ["\n".join(wrapped(case.title)), "\n".join(line for text in _summary(found) for line in wrapped(text))]
    if found.limits:
        limits = _limits(found)
        parts.append(limits.plain() if form == "plain" else limits.markdown())
    if found.best:
        parts.append(f"{_best_words(found)}\n\n{show(found.best)}")
    if len(found.front) > 1:
        parts.append(f"{_front_words(found)}\n\n{show(found.front)}")
    if found.nearest is not None:
        parts.append(f"{_miss_words(found, found.nearest)}\n\n{show((found.nearest,))}")
    remarks = " ".join(remarks_on(_shown(case, found), found.sun))
    ending = [_states(found), remarks, *_left_out(case), caution([case.unit]), *warned([case])]
    parts += ["\n".join(wrapped(text)) for text in ending if text]
    return "\n\n".join(parts)


def _summary(found: Search) -> list[str]:
    partial = f"INTERRUPTED, partial: {found.done} of {found.total} make-ups rated. " if found.partial else ""
    lines = [f"{partial}{found.meeting} of {found.done} make-ups meet everything."]
    if found.unsolved:
        lines.append(f"{found.unsolved} did not close their balance and are left out.")
    if found.unknown:
        why = "a part without a density, not known in the sun or not covered by EN 673"
        lines.append(f"{found.unknown} have {why} and cannot be judged.")
    return lines


def _limits(found: Search) -> Table:
    """How many make-ups fail each limit, and how many fail no other."""
    columns = (Column("limit", "limit"), Column("fails", "fail it"), Column("excludes_alone", "fail it\nalone"))
    return Table(columns, tuple(zip((x.words for x in found.limits), found.failing, found.excluded, strict=True)))


def _best_words(found: Search) -> str:
    tied = f"; {found.tied} more tie with the last of them" if found.tied else ""
    lead = f"Best, by {'least' if found.minimise else 'greatest'} {found.rank_by}"
    alike = len(found.best) > 1 and len({round(c.values[found.rank_by], TIE) for c in found.best}) == 1
    order = f", all alike, in the order of {found.front_axes[1][0]}" if alike else ""
    return "\n".join(wrapped(f"{lead}{order}{tied}"))


def _front_words(found: Search) -> str:
    first, second = (f"{'less' if less else 'more'} {name}" for name, less in found.front_axes)
    return f"Front: no other has {first} and {second}"


def _miss_words(found: Search, nearest: Candidate) -> str:
    missed = [
        f"{limit.words}, reached {nearest.values[limit.quantity]:.4g}"
        for limit, miss in zip(found.limits, found.misses, strict=True)
        if miss > 0.0
    ]
    return "\n".join(wrapped(f"Nearest miss (its worst miss is the least of all): {'; '.join(missed)}"))


def _states(found: Search) -> str:
    return f"{judged_under(found.cold, found.sun)}. [n name]: coating on face n."


def _shown(case: Case, found: Search) -> list[Unit]:
    """The make-ups shown, as units."""
    shown = [c for listed in _lists(found).values() for c in listed]
    return [replace(case.unit, panes=c.panes, gaps=c.gaps) for c in shown]


def _left_out(case: Case) -> Iterator[str]:
    """Coatings that a vented unit keeps off; layers of the case unlike any that the search makes, and that it does not
    hold."""
    assert case.seek is not None
    off = kept_off(case.unit, case.library, case.seek.coatings)
    if off:
        yield f"The gaps are vented: {', '.join(off)}, for sealed gaps only, put on no face."
    held = {choice.number for choice in case.seek.layers if isinstance(choice, CaseLayer)}
    made = {choice.treatment for choice in case.seek.layers if isinstance(choice, PaneChoices)}
    panes = {2 * k + 1: _unlike(pane, made) for k, pane in enumerate(case.unit.panes)}
    gaps = {2 * k + 2: "evacuated" if gap.evacuated else "" for k, gap in enumerate(case.unit.gaps)}
    left = [f"layer {k} ({what})" for k, what in sorted({**panes, **gaps}.items()) if what and k not in held]
    if left:
        yield f"Of the case not in the search: {', '.join(left)}; case_layer in [[seek.layers]] holds a layer."


def _unlike(pane: Pane, treatments: Collection[str]) -> str:
    """What no pane of these treatments, of one sheet, is."""
    if pane.name is not None:
        return f"{pane.name}, known as a whole"
    return "laminated" if len(pane.plies) > 1 else "" if pane.treatment in treatments else pane.treatment


def _record(case: Case, found: Search) -> dict[str, Any]:
    return {
        "file": case.file,
        "title": case.title,
        "cold": found.cold and found.cold.name,
        "sun": found.sun and found.sun.name,
        "caution": caution([case.unit]),
        "warnings": [*warnings_of([case]), *measured(_shown(case, found), found.sun)],
        "total": found.total,
        "done": found.done,
        "partial": found.partial,
        "meeting": found.meeting,
        "unsolved": found.unsolved,
        "unknown": found.unknown,
        "limits": [
            {"limit": limit.words, "fails": failing, "excludes_alone": alone}
            for limit, failing, alone in zip(found.limits, found.failing, found.excluded, strict=True)
        ],
        "rank_by": found.rank_by,
        "tied": found.tied,
        "best": [_candidate(c) for c in found.best],
        "front": [_candidate(c) for c in found.front],
        "nearest": _candidate(found.nearest) if found.nearest else None,
    }


def _candidate(c: Candidate) -> dict[str, Any]:
    return {"makeup": makeup_words(c.panes, c.gaps), **{name: known(value) for name, value in c.values.items()}}


def _draw(case: Case, found: Search, path: Path) -> None:
    from igu.terminal.figures import draw_front

    draw_front(found, path, title=case.title)
