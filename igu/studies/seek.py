"""Which make-up meets the targets: every combination solved in blocks, the best kept."""

from __future__ import annotations

from collections import deque
from collections.abc import Callable, Iterator
from concurrent.futures import Executor, Future
from dataclasses import dataclass, replace

import numpy as np

from igu.arrays import Array, BoolArray, IntArray
from igu.model.catalogue import Library
from igu.model.conditions import Conditions
from igu.model.study_tables import Seek, Targets
from igu.model.unit import Gap, Pane, Unit
from igu.ratings.figures import figures
from igu.studies.quantities import readings, room_air
from igu.studies.space import Space, spaces

BLOCK = 4096
"""Make-ups rated at once: memory stays bounded however large the search is, and an interrupt is soon heard."""

Progress = Callable[[int, int], None]


@dataclass(frozen=True)
class Limit:
    """One target: a quantity (in the unit its name carries) and its bound; `most` tells a maximum from a minimum."""

    quantity: str
    bound: float
    most: bool

    @property
    def words(self) -> str:
        """The limit in words."""
        return f"{self.quantity} {'at most' if self.most else 'at least'} {self.bound:g}"

    def excess(self, values: Array) -> Array:
        """How far each value is beyond the bound, relative to it, at most 0 where it is met; unknown: infinite."""
        beyond = (values - self.bound) if self.most else (self.bound - values)
        return np.where(np.isfinite(values), beyond / max(abs(self.bound), 1e-12), np.inf)


@dataclass(frozen=True)
class Candidate:
    """One make-up with its quantities by name (each in the unit its name carries, NaN where not known)."""

    panes: tuple[Pane, ...]
    gaps: tuple[Gap, ...]
    values: dict[str, float]


@dataclass(frozen=True)
class Search:
    """What a search found. `excluded` says for each limit how many make-ups fail it alone; `front` are the make-ups no
    other of those that meet everything beats in both of `front_axes`; `nearest` the one that misses its worst
    limit by least where none meets everything, `misses` by how much of each bound."""

    total: int
    done: int
    partial: bool
    meeting: int
    unsolved: int
    limits: tuple[Limit, ...]
    excluded: tuple[int, ...]
    rank_by: str
    minimise: bool
    best: tuple[Candidate, ...]
    front_axes: tuple[tuple[str, bool], tuple[str, bool]]
    front: tuple[Candidate, ...]
    nearest: Candidate | None
    misses: tuple[float, ...]


@dataclass(frozen=True)
class _Job:
    """One block of one space, with all a worker needs to rate it."""

    space: Space
    start: int
    stop: int
    plan: _Plan


@dataclass(frozen=True)
class _Plan:
    cold: Conditions | None
    sun: Conditions | None
    limits: tuple[Limit, ...]
    axes: tuple[tuple[str, bool], tuple[str, bool]]
    rank_by: str
    minimise: bool
    keep: int


@dataclass(frozen=True)
class _Tally:
    """What is kept of the blocks rated so far."""

    done: int
    meeting: int
    unsolved: int
    excluded: IntArray
    best: tuple[Candidate, ...]
    front: tuple[Candidate, ...]
    nearest: tuple[Candidate, ...]


def limits_of(targets: Targets) -> tuple[Limit, ...]:
    """The limits a case sets, in the units of the quantities."""
    rows = (
        ("U_W_m2K", targets.U_max, True, 1.0, 0.0),
        ("solar_factor_g", targets.g_min, False, 1.0, 0.0),
        ("solar_factor_g", targets.g_max, True, 1.0, 0.0),
        ("light_transmittance", targets.light_transmittance_min, False, 1.0, 0.0),
        ("light_transmittance", targets.light_transmittance_max, True, 1.0, 0.0),
        ("selectivity", targets.selectivity_min, False, 1.0, 0.0),
        ("room_face_C", targets.room_face_min, False, 1.0, -273.15),
        ("hottest_pane_C", targets.hottest_pane_max, True, 1.0, -273.15),
        ("thickness_mm", targets.thickness_max, True, 1e3, 0.0),
        ("mass_kg_m2", targets.mass_max, True, 1.0, 0.0),
    )
    return tuple(
        Limit(name, bound * factor + shift, most) for name, bound, most, factor, shift in rows if bound is not None
    )


def seek(
    spec: Seek,
    unit: Unit,
    library: Library,
    *,
    cold: Conditions | None,
    sun: Conditions | None,
    executor: Executor | None = None,
    workers: int = 1,
    progress: Progress | None = None,
) -> Search:
    """Rate every make-up of a search and keep the best.

    Parameters
    ----------
    spec, unit, library       The search; size and tilt come from the unit, the names from the library.
    cold, sun : Conditions    For U and the room-side face, and for everything in the sun; None leaves these out.
    executor : Executor       Rates the blocks, any `concurrent.futures.Executor` (its workers must import igu);
                              left out: this process.
    workers : int             Blocks under way at once in the executor.
    progress : callable       Told make-ups done and make-ups in all, after every block.

    An interrupt (Ctrl-C) ends the search early; the result then says it is partial.
    """
    found = spaces(spec, unit, library)
    limits = limits_of(spec.targets)
    plan = _Plan(cold, sun, limits, _axes(spec.targets), spec.rank_by, spec.minimise, spec.keep)
    total = sum(space.size for space in found)
    tally = _Tally(0, 0, 0, np.zeros(len(limits), np.intp), (), (), ())
    partial = False
    try:
        for part in _rated(_jobs(found, plan), executor, workers):
            tally = _merged(tally, part, plan)
            if progress:
                progress(tally.done, total)
    except KeyboardInterrupt:
        partial = True
    return _concluded(tally, plan, total, partial)


def _axes(targets: Targets) -> tuple[tuple[str, bool], tuple[str, bool]]:
    """What the front weighs against U: g where the case limits it (less where a maximum is set), else the light."""
    if targets.g_max is not None or targets.g_min is not None:
        return ("U_W_m2K", True), ("solar_factor_g", targets.g_max is not None)
    return ("U_W_m2K", True), ("light_transmittance", False)


def _jobs(found: tuple[Space, ...], plan: _Plan) -> Iterator[_Job]:
    for space in found:
        for start in range(0, space.size, BLOCK):
            yield _Job(space, start, min(start + BLOCK, space.size), plan)


def _rated(jobs: Iterator[_Job], executor: Executor | None, workers: int) -> Iterator[_Tally]:
    """Tallies of all jobs; in an executor a few more than its workers are under way, so that memory stays bounded."""
    if executor is None:
        yield from map(_rate, jobs)
        return
    waiting: deque[Future[_Tally]] = deque()
    try:
        for job in jobs:
            waiting.append(executor.submit(_rate, job))
            if len(waiting) >= 2 * workers:
                yield waiting.popleft().result()
        while waiting:
            yield waiting.popleft().result()
    finally:
        for future in waiting:
            future.cancel()


def _rate(job: _Job) -> _Tally:
    """Rate one block and keep what could matter in the end."""
    plan, makeups = job.plan, job.space.block(job.start, job.stop)
    found = figures(makeups, cold=plan.cold, sun=plan.sun)
    values = readings(makeups, found, room_air=room_air(plan.cold))
    excess = np.array([limit.excess(values[limit.quantity]) for limit in plan.limits]).reshape(-1, makeups.size)
    failed = excess > 0.0
    meets = ~failed.any(axis=0) & found.solved
    alone = failed & (failed.sum(axis=0) == 1)
    worst = excess.max(axis=0, initial=0.0)

    def candidates(chosen: IntArray) -> tuple[Candidate, ...]:
        return tuple(
            Candidate(*makeups.parts(int(k)), {name: float(column[k]) for name, column in values.items()})
            for k in chosen
        )

    ranked = values[plan.rank_by] * (1.0 if plan.minimise else -1.0)
    return _Tally(
        done=makeups.size,
        meeting=int(meets.sum()),
        unsolved=int((~found.solved).sum()),
        excluded=alone.sum(axis=1),
        best=candidates(_least(ranked, meets, plan.keep)),
        front=candidates(_undominated(_cost(values, plan.axes[0]), _cost(values, plan.axes[1]), meets)),
        nearest=candidates(_least(worst, found.solved & np.isfinite(worst), 1)),
    )


def _cost(values: dict[str, Array], axis: tuple[str, bool]) -> Array:
    name, less = axis
    return values[name] if less else -values[name]


def _least(cost: Array, allowed: BoolArray, keep: int) -> IntArray:
    """Places of the least costs among the allowed, in order; unknown costs are left out."""
    places = np.flatnonzero(allowed & np.isfinite(cost))
    return np.asarray(places[np.argsort(cost[places], kind="stable")[:keep]])


def _undominated(first: Array, second: Array, allowed: BoolArray) -> IntArray:
    """Places that no other allowed place equals or beats in both costs, by rising first cost."""
    places = np.flatnonzero(allowed & np.isfinite(first) & np.isfinite(second))
    places = places[np.lexsort((second[places], first[places]))]
    if not places.size:
        return places
    lowest = np.minimum.accumulate(second[places])
    return np.asarray(places[np.concatenate([[True], second[places][1:] < lowest[:-1]])])


def _merged(tally: _Tally, part: _Tally, plan: _Plan) -> _Tally:
    best, front, nearest = tally.best + part.best, tally.front + part.front, tally.nearest + part.nearest
    everyone = np.ones(len(front), bool)
    first, second = (np.array([c.values[name] for c in front]) * (1.0 if less else -1.0) for name, less in plan.axes)
    ranked = np.array([c.values[plan.rank_by] for c in best]) * (1.0 if plan.minimise else -1.0)
    worst = np.array([max(_misses(c, plan.limits), default=0.0) for c in nearest])
    return replace(
        part,
        done=tally.done + part.done,
        meeting=tally.meeting + part.meeting,
        unsolved=tally.unsolved + part.unsolved,
        excluded=tally.excluded + part.excluded,
        best=tuple(best[k] for k in _least(ranked, np.ones(len(best), bool), plan.keep)),
        front=tuple(front[k] for k in _undominated(first, second, everyone)),
        nearest=tuple(nearest[k] for k in _least(worst, np.ones(len(nearest), bool), 1)),
    )


def _misses(candidate: Candidate, limits: tuple[Limit, ...]) -> tuple[float, ...]:
    return tuple(float(limit.excess(np.array(candidate.values[limit.quantity]))) for limit in limits)


def _concluded(tally: _Tally, plan: _Plan, total: int, partial: bool) -> Search:
    nearest = tally.nearest[0] if tally.nearest and not tally.meeting else None
    return Search(
        total=total,
        done=tally.done,
        partial=partial,
        meeting=tally.meeting,
        unsolved=tally.unsolved,
        limits=plan.limits,
        excluded=tuple(int(x) for x in tally.excluded),
        rank_by=plan.rank_by,
        minimise=plan.minimise,
        best=tally.best,
        front_axes=plan.axes,
        front=tally.front,
        nearest=nearest,
        misses=_misses(nearest, plan.limits) if nearest else (),
    )
