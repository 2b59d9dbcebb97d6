"""Where the coating goes: the unit with its coatings on every face where they may be, and without them."""

from __future__ import annotations

import itertools
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace

import numpy as np

from igu.errors import require
from igu.model.catalogue import Library
from igu.model.conditions import Conditions
from igu.model.makeups import MakeUps
from igu.model.study_tables import Compare, Frame
from igu.model.unit import Pane, Unit
from igu.ratings.figures import Figures, figures
from igu.studies.quantities import readings, room_air
from igu.studies.service_quantities import SERVICE

MOST_COATINGS = 2


@dataclass(frozen=True)
class Arrangement:
    """One row: which coating is on which face (1 ... 2n), the unit so made, its quantities by name (each in the
    unit its name carries, NaN where not known), and per pane the absorptance and the inward fraction in the sun."""

    worn: tuple[tuple[int, str], ...]
    unit: Unit
    as_given: bool
    values: dict[str, float]
    hottest_pane: int
    absorptance: tuple[float, ...]
    inward: tuple[float, ...]


@dataclass(frozen=True)
class Comparison:
    """All arrangements of one unit, those of the case first as given."""

    rows: tuple[Arrangement, ...]
    cold: Conditions | None
    sun: Conditions | None


@dataclass(frozen=True)
class _Item:
    """A coating that can move: its name, the faces it may be on, and whether it is a measured pane that turns round."""

    name: str
    face: int
    faces: tuple[int, ...]
    measured: bool


def compare(
    unit: Unit,
    library: Library,
    spec: Compare,
    *,
    cold: Conditions | None,
    sun: Conditions | None,
    frame: Frame | None = None,
) -> Comparison:
    """Rate the unit with its coatings on every allowed face or pair of faces, and without them.

    Bowing and the thermal-fracture margin are worked out where `spec.columns` names them.

    Raises
    ------
    ModelError    The unit has no coating that could move, or more than two.
    """
    items = _items(unit, library, spec)
    require(bool(items), "the unit has no coating to move; name one under compare.coatings")
    remedy = "name one or two under compare.coatings, which stand in place of the unit's own"
    require(len(items) <= MOST_COATINGS, f"at most {MOST_COATINGS} coatings can be moved, not {len(items)}; {remedy}")
    turning = any(item.measured for item in items)
    given = tuple(sorted((item.face, item.name) for item in items) if turning else worn_coatings(unit))
    patterns = _patterns(items)
    units = [_dressed(unit, library, items, worn) for worn in patterns]
    found = figures(MakeUps.of(units), cold=cold, sun=sun)
    rows = _rows(patterns, given, units, found, cold)
    return Comparison(_with_service(rows, spec.columns, cold, sun, frame), cold, sun)


def compare_units(
    units: Sequence[Unit],
    spec: Compare,
    *,
    cold: Conditions | None,
    sun: Conditions | None,
    frame: Frame | None = None,
) -> Comparison:
    """Several units side by side, each as given; pane counts may differ."""
    rows: list[Arrangement] = []
    for unit in units:
        found = figures(MakeUps.of([unit]), cold=cold, sun=sun)
        worn = tuple(worn_coatings(unit))
        rows += _rows([worn], worn, [unit], found, cold)
    return Comparison(_with_service(tuple(rows), spec.columns, cold, sun, frame), cold, sun)


def _with_service(
    rows: tuple[Arrangement, ...],
    columns: Sequence[str] | None,
    cold: Conditions | None,
    sun: Conditions | None,
    frame: Frame | None,
) -> tuple[Arrangement, ...]:
    """The rows with the service quantities that the columns name."""
    wanted = [name for name in SERVICE if name in (columns or ())]
    return tuple(
        replace(row, values=row.values | {name: SERVICE[name](row.unit, cold, sun, frame) for name in wanted})
        for row in rows
    )


def worn_coatings(unit: Unit) -> list[tuple[int, str]]:
    """Face and name of every coating of a unit, outdoors first; measured panes are not listed."""
    return [
        (2 * p + side, name)
        for p, pane in enumerate(unit.panes)
        for side, name in ((1, pane.coating_out), (2, pane.coating_in))
        if name is not None
    ]


def _items(unit: Unit, library: Library, spec: Compare) -> list[_Item]:
    faces = [2 * p + side for p, pane in enumerate(unit.panes) if pane.name is None for side in (1, 2)]
    tried = [f for f in faces if spec.faces is None or f in spec.faces]
    worn = worn_coatings(unit) if spec.coatings is None else [(0, name) for name in spec.coatings]
    moving = [
        _Item(name, face, tuple(f for f in tried if f == face or _may_carry(unit, library, name, f)), False)
        for face, name in worn
    ]
    return moving + ([] if moving else _turning(unit, library))


def _may_carry(unit: Unit, library: Library, name: str, face: int) -> bool:
    return library.may_carry(name, face, faces=2 * len(unit.panes), sealed=not unit.sealed.vented)


def kept_off(unit: Unit, library: Library, names: Iterable[str]) -> tuple[str, ...]:
    """Of these coatings those that need a sealed gap, where the gaps of the unit are vented."""
    coated = [name for name in names if name in library.coatings]
    return tuple(name for name in coated if unit.sealed.vented and library.coatings[name].inside_only)


def _turning(unit: Unit, library: Library) -> list[_Item]:
    """Measured panes with two different sides: their coated side can be turned to the other face."""
    items = []
    for p, pane in enumerate(unit.panes):
        entry = library.panes.get(pane.name or "")
        if entry is not None and entry.two_sided:
            ends = {2 * p + 1: p > 0, 2 * p + 2: p < len(unit.panes) - 1}
            inward = pane.emissivity_in == entry.pane.emissivity_in and pane.optics == entry.pane.optics
            face = 2 * p + 1 + inward
            closed = {f: inside and not unit.sealed.vented for f, inside in ends.items()}
            faces = tuple(f for f in ends if f == face or closed[f] or not entry.inside_only)
            items.append(_Item(entry.pane.name or "", face, faces, True))
    return items


def _patterns(items: Sequence[_Item]) -> list[tuple[tuple[int, str], ...]]:
    """Every way to put the items on different faces, like ones once, and (where they are coatings) none at all."""
    ways = itertools.product(*(item.faces for item in items))
    worn = [
        tuple(sorted(zip(faces, (i.name for i in items), strict=True))) for faces in ways if len({*faces}) == len(faces)
    ]
    bare = [()] if not any(item.measured for item in items) else []
    return list(dict.fromkeys([*bare, *worn]))


def _dressed(unit: Unit, library: Library, items: Sequence[_Item], worn: tuple[tuple[int, str], ...]) -> Unit:
    at = dict(worn)
    if any(item.measured for item in items):
        return replace(unit, panes=tuple(_turned(p, pane, library, at) for p, pane in enumerate(unit.panes)))
    panes = [
        pane
        if pane.name is not None
        else library.recoated(pane, coating_out=at.get(2 * p + 1), coating_in=at.get(2 * p + 2))
        for p, pane in enumerate(unit.panes)
    ]
    return replace(unit, panes=tuple(panes))


def _turned(p: int, pane: Pane, library: Library, at: dict[int, str]) -> Pane:
    entry = library.panes.get(pane.name or "")
    side = "out" if at.get(2 * p + 1) == pane.name else "in" if at.get(2 * p + 2) == pane.name else None
    if entry is None or side is None:
        return pane
    return entry.turned(side, treatment=pane.treatment, edge_work=pane.edge_work)


def _rows(
    patterns: Sequence[tuple[tuple[int, str], ...]],
    given: tuple[tuple[int, str], ...] | None,
    units: Sequence[Unit],
    found: Figures,
    cold: Conditions | None,
) -> tuple[Arrangement, ...]:
    values = readings(MakeUps.of(units), found, room_air=room_air(cold))
    return tuple(
        Arrangement(
            worn=worn,
            unit=units[k],
            as_given=worn == given,
            values={name: float(column[k]) for name, column in values.items()},
            hottest_pane=int(found.hottest_pane[k]),
            absorptance=_column(found.absorptance, k),
            inward=_column(found.inward, k),
        )
        for k, worn in enumerate(patterns)
    )


def _column(rows: np.ndarray, k: int) -> tuple[float, ...]:
    return tuple(float(x) for x in rows[:, k])
