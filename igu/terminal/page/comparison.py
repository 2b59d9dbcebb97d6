"""A comparison as a table, and in sentences: what the move from one face to another does, and why."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence

from igu.model.unit import COATED_BELOW
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
    "U_en673_W_m2K": ("U\nEN 673", 2, True),
    "solar_factor_g": ("g", 3, True),
    "solar_transmittance": ("direct", 3, None),
    "secondary_factor_q_i": ("q_i", 3, True),
    "light_transmittance": ("τ_v", 3, False),
    "selectivity": ("τ_v/g", 2, False),
    "room_face_C": ("room\nface\n°C", 1, False),
    "fog_humidity_pct": ("fogs\nat %", 0, False),
    "hottest_pane_C": ("hot\npane\n°C", 1, True),
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


def comparison_table(
    found: Comparison, labels: Mapping[Column, Sequence[Cell]], columns: Sequence[str] | None
) -> Table:
    """One row an arrangement, the `labels` first; the best of every column is marked."""
    names = [n for n in columns or DEFAULT if n != "inward_flowing_fraction"]
    inward = bool(columns) and "inward_flowing_fraction" in (columns or ())
    panes = max(len(row.inward) for row in found.rows)
    extra = [Column(f"N_{k + 1}", f"N{k + 1}", 3) for k in range(panes)] if inward else []
    hot = [Column("hottest_pane", "its\nno.", 0)] if "hottest_pane_C" in names else []
    heads = (*labels, *(quantity_column(n) for n in names), *hot, *extra)
    rows = [
        (
            *(column[r] for column in labels.values()),
            *(row.values.get(n, math.nan) for n in names),
            *((row.hottest_pane + 1 if row.hottest_pane >= 0 else None,) if hot else ()),
            *((row.inward + (math.nan,) * (panes - len(row.inward))) if inward else ()),
        )
        for r, row in enumerate(found.rows)
    ]
    return Table(heads, tuple(rows), _best(rows, names, len(labels)))


def _best(rows: Sequence[tuple[Cell, ...]], names: Sequence[str], first: int) -> frozenset[tuple[int, int]]:
    """Cells that are the best of their column as printed; none where all are alike."""
    marks = []
    for c, name in enumerate(names, first):
        _, decimals, less = _HEADS[name]
        values = [(r, round(v, decimals)) for r, row in enumerate(rows) if isinstance(v := row[c], float) and v == v]
        if less is None or len({v for _, v in values}) < 2:
            continue
        best = (min if less else max)(v for _, v in values)
        marks += [(r, c) for r, v in values if v == best]
    return frozenset(marks)


def staying(row: Arrangement) -> str:
    """Low emissivities of faces that keep theirs in every row: of measured panes that do not turn, and of sheets."""
    moved = {name for _, name in row.worn}
    faces = [
        f"face {2 * p + side} ε {eps:g} ({pane.name})"
        for p, pane in enumerate(row.unit.panes)
        for side, eps in ((1, pane.emissivity_out), (2, pane.emissivity_in))
        if pane.name is not None and pane.name not in moved and eps < COATED_BELOW
    ]
    return ", ".join(faces)


def differences(found: Comparison) -> list[str]:
    """Sentences on the moves of one coating across one gap, from its outer to its inner face, or else across a pane;
    where there are two coatings, on those from or to where the case has them."""
    rows = sorted(found.rows, key=lambda row: row.worn)
    pairs = [(one, other) for one in rows for other in rows if _moved(one, other)]
    told = [(one, other) for one, other in pairs if len(one.worn) == 1 or one.as_given or other.as_given]
    across_gaps = [(one, other) for one, other in told if _moved(one, other)[0] % 2 == 0]
    return [_move(one, other) for one, other in across_gaps or told]


def _moved(one: Arrangement, other: Arrangement) -> tuple[int, ...]:
    """The faces between which one coating moves inwards by one, where the rows differ by that alone."""
    away, there = sorted(set(one.worn) - set(other.worn)), sorted(set(other.worn) - set(one.worn))
    return (away[0][0], there[0][0]) if [(face + 1, name) for face, name in away] == there and len(away) == 1 else ()


def _move(one: Arrangement, other: Arrangement) -> str:
    """What moving a coating from a face to the next does."""
    a, b = _moved(one, other)
    name = dict(one.worn)[a]
    rest = [f"face {face}" for face, _ in set(one.worn) & set(other.worn)]
    parts = [
        _change("U", one, other, "U_W_m2K", 2),
        _change("g", one, other, "solar_factor_g", 3),
        _change("τ_v", one, other, "light_transmittance", 3),
    ]
    move = f"{name} from face {a} to face {b}, the other staying on {rest[0]}" if rest else f"From face {a} to face {b}"
    why = _why(b, one, other) if a % 2 == 0 else ""
    return f"{move}: {', '.join(p for p in parts if p)}{why}."


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
