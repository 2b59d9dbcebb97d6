"""Which make-up meets the targets: every combination solved in blocks, the best kept."""

from __future__ import annotations

from collections import deque
from collections.abc import Callable, Iterator, Sequence
from concurrent.futures import Executor, Future
from dataclasses import dataclass, replace

import numpy as np

from igu.arrays import Array, BoolArray, IntArray
from igu.errors import ModelError, require
from igu.laws.constants import CELSIUS
from igu.model.case import Case
from igu.model.catalogue import Library
from igu.model.conditions import Conditions
from igu.model.study_tables import QUANTITIES, Seek, Targets
from igu.model.unit import Gap, Pane, Unit
from igu.ratings.figures import figures
from igu.studies.conditions import cold_and_sun
from igu.studies.quantities import readings, room_air, told
from igu.studies.space import Space, spaces

BLOCK = 4096
"""Make-ups rated at once: memory stays bounded however large the search is, and an interrupt is soon heard."""

TIE = 6
"""Figures that agree to this many decimals are one: what round-off leaves between mirror images ranks nothing."""

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
        """How far each value is beyond the bound, relative to it (a temperature: to 20 K, for degrees Celsius have no
        zero to be relative to), at most 0 where it is met; unknown: infinite."""
        beyond = (values - self.bound) if self.most else (self.bound - values)
        scale = 20.0 if self.quantity.endswith("_C") else max(abs(self.bound), 0.01)
        return np.where(np.isfinite(values), beyond / scale, np.inf)


@dataclass(frozen=True)
class Candidate:
    """One make-up with its quantities by name (each in the unit its name carries, NaN where not known)."""

    panes: tuple[Pane, ...]
    gaps: tuple[Gap, ...]
    values: dict[str, float]


@dataclass(frozen=True)
class Search:
    """What a search found. `unsolved` make-ups did not close their balance, of `unknown` ones a limited or the ranked
    quantity is not known; neither are judged. Of the rest `failing` says for each limit how many fail it,
    `excluded` how many fail it alone. `tied` is the number of make-ups beyond `best` that rank with its last; `front`
    are the make-ups no other of those that meet everything beats in both of `front_axes`; `nearest` the one that
    misses its worst limit by least where none meets everything, `misses` by how much, as `Limit.excess` has it."""

    total: int
    done: int
    partial: bool
    meeting: int
    unsolved: int
    unknown: int
    limits: tuple[Limit, ...]
    failing: tuple[int, ...]
    excluded: tuple[int, ...]
    rank_by: str
    minimise: bool
    best: tuple[Candidate, ...]
    tied: int
    front_axes: tuple[tuple[str, bool], tuple[str, bool]]
    front: tuple[Candidate, ...]
    nearest: Candidate | None
    misses: tuple[float, ...]
    cold: Conditions | None
    sun: Conditions | None


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
    keep: int

    @property
    def judged(self) -> tuple[str, ...]:
        """Quantities without which a make-up cannot be judged."""
        return (self.axes[0][0], *(limit.quantity for limit in self.limits))

    @property
    def read(self) -> tuple[str, ...]:
        """Quantities read of every make-up: all but U by EN 673, which is worked out where it is judged."""
        return tuple(name for name in QUANTITIES if name != "U_en673_W_m2K" or name in self.judged)


@dataclass(frozen=True)
class _Tally:
    """What is kept of the blocks rated so far; `ranks` are the first of the ranked figures, each once, and how many
    make-ups have them, as many as the list of the best is long."""

    done: int
    meeting: int
    unsolved: int
    unknown: int
    failing: IntArray
    excluded: IntArray
    ranks: tuple[Array, IntArray]
    best: tuple[Candidate, ...]
    front: tuple[Candidate, ...]
    nearest: tuple[Candidate, ...]


def limits_of(targets: Targets) -> tuple[Limit, ...]:
    """The limits a case sets, in the units of the quantities."""
    rows = (
        ("U_W_m2K", targets.U_max, True, 1.0, 0.0),
        ("U_en673_W_m2K", targets.U_en673_max, True, 1.0, 0.0),
        ("solar_factor_g", targets.g_min, False, 1.0, 0.0),
        ("solar_factor_g", targets.g_max, True, 1.0, 0.0),
        ("light_transmittance", targets.light_transmittance_min, False, 1.0, 0.0),
        ("light_transmittance", targets.light_transmittance_max, True, 1.0, 0.0),
        ("selectivity", targets.selectivity_min, False, 1.0, 0.0),
        ("room_face_C", targets.room_face_min, False, 1.0, -CELSIUS),
        ("hottest_pane_C", targets.hottest_pane_max, True, 1.0, -CELSIUS),
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

    Raises
    ------
    ModelError    No make-up is allowed at all, or the conditions do not tell a quantity that is limited or ranked by.
    """
    require_told(spec, cold=cold, sun=sun)
    found = spaces(spec, unit, library)
    limits = limits_of(spec.targets)
    plan = _Plan(cold, sun, limits, _axes(spec), spec.keep)
    total = sum(space.size for space in found)
    none = np.zeros(len(limits), np.intp)
    tally = _Tally(0, 0, 0, 0, none, none, (np.zeros(0), np.zeros(0, np.intp)), (), (), ())
    partial = False
    try:
        for part in _rated(_jobs(found, plan), executor, workers):
            tally = _merged(tally, part, plan)
            if progress:
                progress(tally.done, total)
    except KeyboardInterrupt:
        partial = True
    return _concluded(tally, plan, total, partial)


def conditions_of(case: Case, spec: Seek) -> tuple[Conditions | None, Conditions | None]:
    """Conditions of a search of this case for the cold and for the sun.

    Raises
    ------
    ModelError    None of that name and kind, or none that tells a quantity that is limited or ranked by.
    """
    cold, sun = cold_and_sun(case, spec.cold, spec.sun)
    try:
        require_told(spec, cold=cold, sun=sun)
    except ModelError as error:
        raise ModelError(f"{case.file}: seek: {error}") from error
    return cold, sun


def require_told(spec: Seek, *, cold: Conditions | None, sun: Conditions | None) -> None:
    """ModelError where the conditions do not tell a quantity that is limited or ranked by."""
    judged = (spec.rank_by, *(limit.quantity for limit in limits_of(spec.targets)))
    untold = [name for name in dict.fromkeys(judged) if name not in told(cold, sun)]
    states = ", ".join(f"{key} {c.name if c else 'none'}" for key, c in (("cold", cold), ("sun", sun)))
    require(not untold, f"{', '.join(untold)}: not told by the conditions of the search ({states})")


GOES_WITH_U = ("U_W_m2K", "U_en673_W_m2K", "room_face_C", "fog_humidity_pct")
"""Quantities that U all but decides: a front of one of them against U would say little."""


def _axes(spec: Seek) -> tuple[tuple[str, bool], tuple[str, bool]]:
    """What the front weighs: the ranked quantity against U; where U decides that one, against g if the case limits it
    (less where a maximum is set), or else against the light."""
    ranked, targets = (spec.rank_by, spec.minimise), spec.targets
    if spec.rank_by not in GOES_WITH_U:
        return ranked, ("U_W_m2K", True)
    if targets.g_max is not None or targets.g_min is not None:
        return ranked, ("solar_factor_g", targets.g_max is not None)
    return ranked, ("light_transmittance", False)


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
    values = readings(makeups, found, room_air=room_air(plan.cold), names=plan.read)
    excess = np.array([limit.excess(values[limit.quantity]) for limit in plan.limits]).reshape(-1, makeups.size)
    judged = found.solved & np.isfinite([values[name] for name in plan.judged]).all(axis=0)
    failed = (excess > 0.0) & judged
    meets = ~failed.any(axis=0) & judged
    alone = failed & (failed.sum(axis=0) == 1)
    worst = excess.max(axis=0, initial=0.0)
    first, second = (_cost(values[name], less) for name, less in plan.axes)

    def candidates(chosen: IntArray) -> tuple[Candidate, ...]:
        return tuple(
            Candidate(*makeups.parts(int(k)), {name: float(column[k]) for name, column in values.items()})
            for k in chosen
        )

    return _Tally(
        done=makeups.size,
        meeting=int(meets.sum()),
        unsolved=int((~found.solved).sum()),
        unknown=int((found.solved & ~judged).sum()),
        failing=failed.sum(axis=1),
        excluded=alone.sum(axis=1),
        ranks=_counted(first[meets], None, plan.keep),
        best=candidates(_least(first, second, meets, plan.keep)),
        front=candidates(_undominated(first, second, meets)),
        nearest=candidates(_least(worst, worst, judged, 1)),
    )


def _cost(values: Array, less: bool) -> Array:
    return np.round(values if less else -values, TIE)


def _counted(ranks: Array, counts: IntArray | None, keep: int) -> tuple[Array, IntArray]:
    """The first of these figures, each once, and how often they stand there."""
    each, place = np.unique(ranks, return_inverse=True)
    return each[:keep], np.bincount(place, weights=counts, minlength=each.size).astype(np.intp)[:keep]


def _least(cost: Array, then: Array, allowed: BoolArray, keep: int) -> IntArray:
    """Places of the least costs among the allowed, in order, ties in the order of a second cost; unknown costs are
    left out."""
    places = np.flatnonzero(allowed & np.isfinite(cost))
    return np.asarray(places[np.lexsort((then[places], cost[places]))[:keep]])


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
    worst = np.array([max(_misses(c, plan.limits), default=0.0) for c in nearest])
    ranks, counts = (np.concatenate(pair) for pair in zip(tally.ranks, part.ranks, strict=True))
    return replace(
        part,
        done=tally.done + part.done,
        meeting=tally.meeting + part.meeting,
        unsolved=tally.unsolved + part.unsolved,
        unknown=tally.unknown + part.unknown,
        failing=tally.failing + part.failing,
        excluded=tally.excluded + part.excluded,
        ranks=_counted(ranks, counts, plan.keep),
        best=tuple(best[k] for k in _least(*_costs(best, plan), np.ones(len(best), bool), plan.keep)),
        front=tuple(front[k] for k in _undominated(*_costs(front, plan), np.ones(len(front), bool))),
        nearest=tuple(nearest[k] for k in _least(worst, worst, np.ones(len(nearest), bool), 1)),
    )


def _costs(candidates: Sequence[Candidate], plan: _Plan) -> tuple[Array, Array]:
    first, second = (_cost(np.array([c.values[name] for c in candidates]), less) for name, less in plan.axes)
    return first, second


def _misses(candidate: Candidate, limits: tuple[Limit, ...]) -> tuple[float, ...]:
    return tuple(float(limit.excess(np.array(candidate.values[limit.quantity]))) for limit in limits)


def _concluded(tally: _Tally, plan: _Plan, total: int, partial: bool) -> Search:
    rank_by, minimise = plan.axes[0]
    nearest = tally.nearest[0] if tally.nearest and not tally.meeting else None
    ranks, counts = tally.ranks
    last = _costs(tally.best[-1:], plan)[0]
    tied = int(counts[ranks <= last].sum()) - len(tally.best) if tally.best else 0
    return Search(
        total=total,
        done=tally.done,
        partial=partial,
        meeting=tally.meeting,
        unsolved=tally.unsolved,
        unknown=tally.unknown,
        limits=plan.limits,
        failing=tuple(int(x) for x in tally.failing),
        excluded=tuple(int(x) for x in tally.excluded),
        rank_by=rank_by,
        minimise=minimise,
        best=tally.best,
        tied=tied,
        front_axes=plan.axes,
        front=tally.front,
        nearest=nearest,
        misses=_misses(nearest, plan.limits) if nearest else (),
        cold=plan.cold,
        sun=plan.sun,
    )
