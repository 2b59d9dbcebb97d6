"""Solved cases as one table: a row for every case and condition; the whole JSON record of each for a spreadsheet."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from typing import Any

from igu.model.case import Case
from igu.ratings.result import Result
from igu.terminal.page.text import caution
from igu.terminal.record.contract import celsius, result_record
from igu.terminal.tables import Cell, Column, Table, table_of

COLUMNS = (
    Column("file", "file"),
    Column("conditions", "conditions"),
    Column("method", "method"),
    Column("outcome", "outcome"),
    Column("U_W_m2K", "U\nW/(m²K)", 2),
    Column("U_declared_W_m2K", "declared", 1),
    Column("flux_to_room_W_m2", "heat to room by convection\nand long wave W/m²", 1),
    Column("solar_factor_g", "g", 3),
    Column("solar_transmittance", "direct", 3),
    Column("secondary_factor_q_i", "secondary", 3),
    Column("solar_reflectance_out", "sun\nreflected", 3),
    Column("light_transmittance", "light", 3),
    Column("light_reflectance_out", "light refl.\nout", 3),
    Column("light_reflectance_in", "light refl.\nin", 3),
    Column("room_face_C", "room face\n°C", 1),
    Column("hottest_face_C", "hottest face\n°C", 1),
)


def solve_table(solved: Sequence[tuple[Case, Sequence[Result]]]) -> Table:
    """The table of solved cases; the faces of all panes follow as columns face_1_C, face_2_C …."""
    faces = max(2 * len(r.panes) for _, results in solved for r in results)
    columns = (*COLUMNS, *(Column(f"face_{k}_C", f"face {k}\n°C", 1) for k in range(1, faces + 1)))
    rows = [_row(case, r, faces) for case, results in solved for r in results]
    return Table(columns, tuple(rows))


SENTENCES = ("defaults", "notes")
"""Keys of a result that are too long for a cell."""

PARTS = ("panes", "gaps", "films", "budget", "fogging")
"""Keys of a result that hold more keys, or nothing."""


def full_table(solved: Sequence[tuple[Case, Sequence[Result]]]) -> Table:
    """Every figure of the JSON records under its own key; those of panes and gaps as pane_1_…, gap_1_…"""
    rows = [
        {"file": case.file, "title": case.title, **dict(_cells(result_record(r)))}
        for case, results in solved
        for r in results
    ]
    return table_of(rows).cautioned([caution([case.unit]) for case, results in solved for _ in results])


def _cells(record: Mapping[str, Any], prefix: str = "") -> Iterator[tuple[str, Cell]]:
    """Keys and values of a record; those of its parts with the part and, of a list, the number ahead."""
    for key, value in record.items():
        if key in PARTS:
            numbered = enumerate(value, 1) if isinstance(value, list) else [(None, value)] if value else []
            for k, part in numbered:
                yield from _cells(part, f"{key}_" if k is None else f"{key.removesuffix('s')}_{k}_")
        elif key not in SENTENCES:
            yield f"{prefix}{key}", "; ".join(value) if isinstance(value, list) else value


def _row(case: Case, r: Result, faces: int) -> tuple[Cell, ...]:
    solar = r.solar
    temperatures = [celsius(t) for pane in r.panes for t in (pane.face_out, pane.face_in)]
    known = [t for t in temperatures if t is not None]
    return (
        case.file,
        r.conditions.name,
        r.conditions.method,
        r.outcome,
        r.U,
        r.U_declared,
        r.flux_to_room,
        solar.g if solar else None,
        solar.transmittance if solar else None,
        solar.q_i if solar else None,
        solar.reflectance_out if solar else None,
        solar.light_transmittance if solar else None,
        solar.light_reflectance_out if solar else None,
        solar.light_reflectance_in if solar else None,
        temperatures[-1],
        max(known, default=None),
        *temperatures,
        *(None,) * (faces - len(temperatures)),
    )
