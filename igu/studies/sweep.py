"""One or two quantities of a case varied: a table, its optimum, and how flat that is."""

from __future__ import annotations

import itertools
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, replace
from typing import Any

import numpy as np

from igu.arrays import Array
from igu.model.case import Case, case_from_table
from igu.model.casefile.paths import patched
from igu.model.conditions import Conditions
from igu.model.makeups import MakeUps
from igu.model.study_tables import Sweep, Vary
from igu.model.unit import Unit
from igu.ratings.figures import figures
from igu.studies.conditions import cold_and_sun
from igu.studies.quantities import readings, room_air

FLAT = 0.01
"""An optimum is called flat over the range in which the quantity stays within this share of its best value."""

WIDTH = 1e-4
"""The optimum is bracketed to this share of the swept range."""

DIP = 1e-7
"""Figures that differ by less than this share are alike: what round-off leaves of a level line makes no optimum."""

_GOLDEN = (5.0**0.5 - 1.0) / 2.0


@dataclass(frozen=True)
class Optimum:
    """Best value of the judged quantity along the first axis, for one value of the second (None: there is no second).

    `at` is where it lies, of a range refined between its points; `low` to `high` is the range within
    1 % of the best (inside the swept range); `edge` says that the best lies at an end of the range. `local` is, of the
    other places inside the range where the quantity turns back on both sides, the best one and the quantity there,
    refined likewise.
    """

    across: Any
    at: Any
    best: float
    low: float | None
    high: float | None
    edge: bool
    local: tuple[float, float] | None = None


@dataclass(frozen=True)
class Table:
    """A sweep: the varied keys and values, and per quantity an array over them, (first,) or (first, second), each in
    the unit its name carries, NaN where not known; optima of the first quantity along the first axis; the unit of every
    point, the second axis fastest."""

    vary: tuple[Vary, ...]
    quantities: dict[str, Array]
    judged: str
    minimise: bool
    optima: tuple[Optimum, ...]
    cold: Conditions | None
    sun: Conditions | None
    units: tuple[Unit, ...]


def sweep(case: Case, spec: Sweep) -> Table:
    """Solve the case for every value, or pair of values, of its sweep.

    Raises
    ------
    CaseError     A value makes the case faulty.
    ModelError    A method does not cover one of the units.
    """
    cold, sun = cold_and_sun(case, spec.cold, spec.sun)
    spec = replace(spec, cold=cold.name if cold else None, sun=sun.name if sun else None)  # the same at every point
    cases = [_patched_case(case, spec, point) for point in itertools.product(*(v.values for v in spec.vary))]
    values = _solve(cases, spec)
    shape = tuple(len(v.values) for v in spec.vary)
    quantities = {name: values[name].reshape(shape) for name in spec.of}
    optima = _optima(case, spec, quantities[spec.of[0]])
    return Table(spec.vary, quantities, spec.of[0], spec.minimise, optima, cold, sun, tuple(c.unit for c in cases))


def _patched_case(case: Case, spec: Sweep, point: Sequence[Any]) -> Case:
    table = case.table
    for vary, value in zip(spec.vary, point, strict=True):
        for key in vary.keys:
            table = patched(table, key, value)
    table = {name: part for name, part in table.items() if name != "sweep"}  # its keys may lead nowhere from here
    return case_from_table(table, file=case.file, folder=case.folder)


def _solve(cases: Sequence[Case], spec: Sweep) -> dict[str, Array]:
    """Every quantity of these points, (points,); points of one kind are solved together."""
    surroundings = [cold_and_sun(c, spec.cold, spec.sun) for c in cases]
    kinds: dict[Any, list[int]] = {}
    for k, (one, (cold, sun)) in enumerate(zip(cases, surroundings, strict=True)):
        kinds.setdefault((len(one.unit.panes), _kind(cold), _kind(sun)), []).append(k)
    result: dict[str, Array] = {}
    for places in kinds.values():
        makeups = MakeUps.of([cases[k].unit for k in places])
        colds, suns = ([surroundings[k][side] for k in places] for side in (0, 1))
        found = figures(makeups, cold=_all_or_none(colds), sun=_all_or_none(suns))
        air = np.array([room_air(c) for c in colds])
        for name, column in readings(makeups, found, room_air=air, names=spec.of).items():
            result.setdefault(name, np.full(len(cases), np.nan))[places] = column
    return result


def _kind(conditions: Conditions | None) -> tuple[Any, ...] | None:
    """What conditions must share to be solved in one batch."""
    c = conditions
    return None if c is None else (c.method, c.gas_properties, c.incidence, c.diffuse_share)


def _all_or_none(given: Sequence[Conditions | None]) -> list[Conditions] | None:
    known = [c for c in given if c is not None]
    return known or None


def _optima(case: Case, spec: Sweep, judged: Array) -> tuple[Optimum, ...]:
    second = spec.vary[1].values if len(spec.vary) > 1 else (None,)
    columns = judged.reshape(len(judged), -1).T
    return tuple(
        _optimum(case, spec, across, column)
        for across, column in zip(second, columns, strict=True)
        if np.isfinite(column).any()
    )


def _optimum(case: Case, spec: Sweep, across: Any, column: Array) -> Optimum:
    first = spec.vary[0]
    cost = np.where(np.isfinite(column), column if spec.minimise else -column, np.inf)
    k = int(cost.argmin())
    if not first.ranged or len(cost) < 3:
        return Optimum(across, first.values[k], float(column[k]), None, None, False)
    sign = 1.0 if spec.minimise else -1.0

    def price(at: float) -> float:
        point = (at,) if across is None else (at, across)
        value = sign * float(_solve([_patched_case(case, spec, point)], spec)[spec.of[0]][0])
        return value if np.isfinite(value) else np.inf

    places = np.array(first.values, float)
    at, best = _refined(price, places, cost, k)
    low, high = _flat_range(price, places, cost, at, best)
    edge = at in (places[0], places[-1])
    others = [j for j in _dips(cost) if j != k]
    local = _refined(price, places, cost, min(others, key=lambda j: cost[j])) if others else None
    return Optimum(across, at, sign * best, low, high, edge, None if local is None else (local[0], sign * local[1]))


def _dips(cost: Array) -> list[int]:
    """Points that are lower than their neighbours on both sides, by more than round-off."""
    margin = DIP * np.abs(cost[1:-1])
    with np.errstate(invalid="ignore"):
        lower = (cost[:-2] - cost[1:-1] > margin) & (cost[2:] - cost[1:-1] > margin)
    return [int(j) + 1 for j in np.flatnonzero(lower)]


def _refined(price: Callable[[float], float], places: Array, cost: Array, k: int) -> tuple[float, float]:
    """Place and price of the least price between the neighbours of point k; the point itself where none is less."""
    low, high = places[max(k - 1, 0)], places[min(k + 1, len(places) - 1)]
    at = _bracketed(price, low, high, WIDTH * (places[-1] - places[0]))
    found = price(at)
    margin = DIP * abs(cost[k])
    return (at, found) if found < cost[k] - margin else (float(places[k]), float(cost[k]))


def _bracketed(price: Callable[[float], float], low: float, high: float, width: float) -> float:
    """Place of the least price by golden section; needs no slope, so a kink is found like any other minimum."""
    left, right = high - _GOLDEN * (high - low), low + _GOLDEN * (high - low)
    at_left, at_right = price(left), price(right)
    while high - low > width:
        if at_left <= at_right:
            high, right, at_right = right, left, at_left
            left = high - _GOLDEN * (high - low)
            at_left = price(left)
        else:
            low, left, at_left = left, right, at_right
            right = low + _GOLDEN * (high - low)
            at_right = price(right)
    return 0.5 * (low + high)


def _flat_range(
    price: Callable[[float], float], places: Array, cost: Array, at: float, best: float
) -> tuple[float, float]:
    """The range around the optimum in which the price stays within 1 % of the best, inside the swept range."""
    limit = best + FLAT * abs(best)
    below, above = places < at, places > at
    return (
        _crossing(price, limit, at, zip(places[below][::-1], cost[below][::-1], strict=True)),
        _crossing(price, limit, at, zip(places[above], cost[above], strict=True)),
    )


def _crossing(
    price: Callable[[float], float], limit: float, inside: float, outwards: Iterable[tuple[float, float]]
) -> float:
    """Where the price first passes the limit on the way outwards over these points; the last where it stays inside."""
    outside = None
    for place, value in outwards:
        if value > limit:
            outside = float(place)
            break
        inside = float(place)
    if outside is None:
        return inside
    for _ in range(20):
        middle = 0.5 * (inside + outside)
        inside, outside = (middle, outside) if price(middle) <= limit else (inside, middle)
    return 0.5 * (inside + outside)
