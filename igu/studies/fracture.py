"""Thermal fracture: the hottest centre of every pane in the sun against its edge in the rebate."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from igu.model.conditions import Conditions
from igu.model.strength import permissible_difference
from igu.model.study_tables import Frame
from igu.model.unit import Pane, Unit
from igu.ratings.rate import dark_result
from igu.ratings.result import PaneResult, Result

EDGES = {
    "conditions": "given in the conditions",
    "frame": "given in [frame]",
    "dark": "at the same pane's dark temperature",
}
"""Where the temperature of a covered edge comes from, and its words; the first that is known holds."""

SPARE = 10.0
"""Margin [K] below which it is said what would help. Common practice, no source."""


@dataclass(frozen=True)
class Fracture:
    """One pane (from 0) under the worst of the conditions: hottest centre and edge [K], where the edge comes from (of
    `EDGES`), their difference and the permissible one [K], the margin [K] (negative: beyond it), what would help."""

    pane: int
    conditions: str
    centre: float
    edge: float
    edge_from: str
    difference: float
    permissible: float
    margin: float
    helps: tuple[str, ...]


@dataclass(frozen=True)
class InterlayerHeat:
    """Hottest temperature [K] of an interlayer of a laminated pane (from 0), and under which conditions."""

    pane: int
    material: str
    conditions: str
    temperature: float


def fractures(unit: Unit, results: Sequence[Result], frame: Frame | None) -> tuple[Fracture, ...]:
    """Every pane over the worst of the sunny conditions; none where no condition has sun.

    The covered edge is taken as the conditions give it, or else the frame, or else at the same pane's dark temperature
    under the same conditions.
    """
    sunny = [r for r in results if _is_sunny(r)]
    edges = [dark_result(unit, r.conditions) for r in sunny]
    found = []
    for k, pane in enumerate(unit.panes):
        if pane.is_sheet or not sunny:
            continue
        rows = [_row(k, pane, r, d, frame) for r, d in zip(sunny, edges, strict=True)]
        found.append(min(rows, key=lambda row: row.margin))
    return tuple(found)


def _is_sunny(r: Result) -> bool:
    return r.outcome == "solved" and r.panes[0].face_out is not None and any((p.absorbed or 0.0) > 0.0 for p in r.panes)


def _row(k: int, pane: Pane, lit: Result, dark: Result, frame: Frame | None) -> Fracture:
    centre = max(lit.panes[k].face_out or 0.0, lit.panes[k].face_in or 0.0)
    edge_from, given = given_edge(lit.conditions, frame)
    edge = _own(dark.panes[k]) if given is None else given
    permissible = permissible_difference(pane.treatment, pane.edge_work)
    margin = permissible - (centre - edge)
    return Fracture(
        pane=k,
        conditions=lit.conditions.name,
        centre=centre,
        edge=edge,
        edge_from=edge_from,
        difference=centre - edge,
        permissible=permissible,
        margin=margin,
        helps=_helps(pane) if margin < SPARE else (),
    )


def given_edge(conditions: Conditions, frame: Frame | None) -> tuple[str, float | None]:
    """Where the temperature of the covered edges comes from, one of `EDGES`, and it [K] where it is given."""
    if conditions.edge is not None:
        return "conditions", conditions.edge
    if frame is not None and frame.edge is not None:
        return "frame", frame.edge
    return "dark", None


def _own(pane: PaneResult) -> float:
    """Mean temperature of a pane [K]."""
    return 0.5 * ((pane.face_out or 0.0) + (pane.face_in or 0.0))


def _helps(pane: Pane) -> tuple[str, ...]:
    """What lowers the risk."""
    ways = ["a glass or coating that absorbs less in this pane"]
    if pane.coating_out or pane.coating_in:
        ways.append("the coating on another face")
    if pane.treatment == "annealed":
        if pane.edge_work == "as-cut":
            ways.append("worked edges")
        ways.append("heat-strengthened or toughened glass")
    return tuple(ways)


def interlayer_heat(unit: Unit, results: Sequence[Result]) -> tuple[InterlayerHeat, ...]:
    """The hottest state of every interlayer over the conditions, linear between the faces of its pane."""
    found = []
    for k, pane in enumerate(unit.panes):
        places = _interlayer_places(pane)
        states = [(r, r.panes[k]) for r in results if r.panes[k].face_out is not None]
        for material, share in places:
            heats = [
                (r.conditions.name, (1.0 - share) * (p.face_out or 0.0) + share * (p.face_in or 0.0)) for r, p in states
            ]
            if heats:
                name, hottest = max(heats, key=lambda pair: pair[1])
                found.append(InterlayerHeat(k, material, name, hottest))
    return tuple(found)


def _interlayer_places(pane: Pane) -> list[tuple[str, float]]:
    """Material of every interlayer and the share of the pane's resistance outside of its middle."""
    resistances = [ply.thickness / ply.conductivity for ply in pane.plies]
    whole = sum(resistances)
    return [
        (ply.material, (sum(resistances[:j]) + 0.5 * resistances[j]) / whole)
        for j, ply in enumerate(pane.plies)
        if ply.kind == "interlayer"
    ]
