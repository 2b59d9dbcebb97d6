"""Solved cases as one table: a row for every case and condition."""

from __future__ import annotations

from collections.abc import Sequence

from igu.model.case import Case
from igu.ratings.result import Result
from igu.terminal.contract import celsius
from igu.terminal.tables import Cell, Column, Table

COLUMNS = (
    Column("file", "file"),
    Column("conditions", "conditions"),
    Column("method", "method"),
    Column("outcome", "outcome"),
    Column("U_W_m2K", "U\nW/(m²K)", 2),
    Column("U_declared_W_m2K", "declared", 1),
    Column("flux_to_room_W_m2", "heat to room\nW/m²", 1),
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
