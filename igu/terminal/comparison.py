"""A comparison as a table, and in sentences: what the move from one face to another does, and why."""

from __future__ import annotations

import math
from collections.abc import Sequence

from igu.studies.compare import Arrangement, Comparison
from igu.terminal.tables import Cell, Column, Table, number

DEFAULT = (
    "U_W_m2K",
    "solar_factor_g",
    "solar_transmittance",
    "secondary_factor_q_i",
    "light_transmittance",
    "selectivity",
    "room_face_C",
    "fog_humidity_pct",
    "hottest_pane_C",
)
"""Columns of a comparison that names none."""

_HEADS = {
    "U_W_m2K": ("U\nW/(m²K)", 2, True),
    "solar_factor_g": ("g", 3, True),
    "solar_transmittance": ("direct", 3, None),
    "secondary_factor_q_i": ("second-\nary", 3, True),
    "light_transmittance": ("τ_v", 3, False),
    "selectivity": ("τ_v/g", 2, False),
    "room_face_C": ("room\nface °C", 1, False),
    "fog_humidity_pct": ("fogs\nat %", 0, False),
    "hottest_pane_C": ("hottest\n°C", 1, True),
    "thickness_mm": ("thick\nmm", 1, True),
    "mass_kg_m2": ("mass\nkg/m²", 1, True),
    "deflection_mm": ("bows\nmm", 2, True),
    "fracture_margin_K": ("margin\nK", 1, False),
}
"""Head, decimals, and whether less is better (None: neither is) of every quantity."""

SAME = 5e-4
"""Relative difference below which two figures are called unchanged."""


def quantity_column(name: str) -> Column:
    """The column of a quantity."""
    head, decimals, _ = _HEADS[name]
    return Column(name, head, decimals)


def comparison_table(found: Comparison, labels: Sequence[str], columns: Sequence[str] | None) -> Table:
    """One row an arrangement; the best of every column is marked."""
    names = [n for n in columns or DEFAULT if n != "inward_flowing_fraction"]
    inward = bool(columns) and "inward_flowing_fraction" in (columns or ())
    panes = max(len(row.inward) for row in found.rows)
    extra = [Column(f"N_{k + 1}", f"N{k + 1}", 3) for k in range(panes)] if inward else []
    hot = [Column("hottest_pane", "pane", 0)] if "hottest_pane_C" in names else []
    heads = (Column("coating_on_face", "coating\non face"), *(quantity_column(n) for n in names), *hot, *extra)
    rows = [
        (
            labels[r],
            *(row.values.get(n, math.nan) for n in names),
            *((row.hottest_pane + 1 if row.hottest_pane >= 0 else None,) if hot else ()),
            *((row.inward + (math.nan,) * (panes - len(row.inward))) if inward else ()),
        )
        for r, row in enumerate(found.rows)
    ]
    return Table(heads, tuple(rows), _best(rows, names))


def _best(rows: Sequence[tuple[Cell, ...]], names: Sequence[str]) -> frozenset[tuple[int, int]]:
    """Cells that are the best of their column as printed; none where all are alike."""
    marks = []
    for c, name in enumerate(names, 1):
        _, decimals, less = _HEADS[name]
        values = [(r, round(v, decimals)) for r, row in enumerate(rows) if isinstance(v := row[c], float) and v == v]
        if less is None or len({v for _, v in values}) < 2:
            continue
        best = (min if less else max)(v for _, v in values)
        marks += [(r, c) for r, v in values if v == best]
    return frozenset(marks)


def differences(found: Comparison, labels: Sequence[str]) -> list[str]:
    """Sentences on the moves of a single coating across one gap, from its outer to its inner face."""
    single = {row.worn[0][0]: row for row in found.rows if len(row.worn) == 1}
    pairs = [(f, f + 1) for f in sorted(single) if f % 2 == 0 and f + 1 in single]
    return [_move(a, single[a], b, single[b]) for a, b in pairs]


def _move(a: int, one: Arrangement, b: int, other: Arrangement) -> str:
    """What moving the coating from face a to face b of the same gap does."""
    parts = [
        _change("U", one, other, "U_W_m2K", 2),
        _change("g", one, other, "solar_factor_g", 3),
        _change("τ_v", one, other, "light_transmittance", 3),
    ]
    return f"From face {a} to face {b}: {', '.join(p for p in parts if p)}{_why(b, one, other)}."


def _change(symbol: str, one: Arrangement, other: Arrangement, name: str, decimals: int) -> str:
    before, after = one.values[name], other.values[name]
    if not (math.isfinite(before) and math.isfinite(after)):
        return ""
    if abs(after - before) <= max(SAME * abs(before), 0.5 * 10.0**-decimals):
        return f"{symbol} unchanged"
    return f"{symbol} {'up' if after > before else 'down'} {number(abs(after - before), decimals)}"


def _why(b: int, one: Arrangement, other: Arrangement) -> str:
    """Where the coating's heat goes, read off the absorbed shares and inward fractions."""
    outer, inner = b // 2 - 1, b // 2
    shares = (one.absorptance[outer], other.absorptance[inner], one.inward[outer], other.inward[inner])
    if not all(math.isfinite(x) for x in shares):
        return ""
    return (
        f": on face {b} it is pane {inner + 1} that absorbs with the coating ({shares[1]:.2f} of the sun) and gives "
        f"{100 * shares[3]:.0f} % of it inward; on face {b - 1} it is pane {outer + 1} ({shares[0]:.2f}), "
        f"which gives {100 * shares[2]:.0f} %"
    )
