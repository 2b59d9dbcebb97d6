"""The service study as tables: one a question, for CSV, Markdown and, where they fit, the report."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from igu.model.case import Case
from igu.ratings.result import Result
from igu.studies.ageing import Ageing
from igu.studies.bowing import Bowed
from igu.studies.fracture import Fracture, InterlayerHeat
from igu.studies.service import Service
from igu.studies.tolerance import Tolerances
from igu.studies.verdicts import Verdict, shear
from igu.terminal.record.contract import celsius, fog_record
from igu.terminal.tables import Cell, Column, Table, table_of


def service_tables(case: Case, found: Service, judged: Sequence[tuple[Verdict, str]]) -> dict[str, Table]:
    """Every table that has rows, by what it is about; `judged` are the verdicts with their words."""
    made = {
        "verdicts": verdict_table(judged),
        "fogging": fogging_table(found.results),
        "bowing": bowing_table(found.bowed),
        "thermal fracture": fracture_table(case, found.fractures),
        "interlayers": interlayer_table(found.interlayers),
        "ageing": ageing_table(found.ageing),
        "tolerances": tolerance_table(found.tolerances),
    }
    return {name: table for name, table in made.items() if table.rows}


def verdict_table(judged: Sequence[tuple[Verdict, str]]) -> Table:
    """One row a question."""
    columns = (Column("question", "question"), Column("verdict", "verdict"), Column("because", "because"))
    return Table(columns, tuple((v.question, v.outcome, words) for v, words in judged))


def fogging_table(results: Sequence[Result]) -> Table:
    """One row a face and condition."""
    columns = (
        Column("conditions", "conditions"),
        Column("where", "where"),
        Column("face", "face", 0),
        Column("temperature_C", "face\n°C", 1),
        Column("starts_at_humidity_pct", "starts at\n% r.h.", 0),
        Column("humidity_pct", "given\n% r.h.", 0),
        Column("point_C", "point\n°C", 1),
        Column("point_kind", "dew or\nfrost point"),
        Column("margin_K", "margin\nK", 1),
    )
    records = [{"conditions": r.conditions.name, **fog_record(fog)} for r in results for fog in r.fog]
    return Table(columns, tuple(tuple(record[c.key] for c in columns) for record in records))


def bowing_table(bowed: Sequence[Bowed]) -> Table:
    """One row a pane or gap of every state, panes and gaps by their number."""
    columns = (
        Column("state", "state"),
        Column("load_duration", "duration"),
        Column("plies", "plies"),
        Column("part", "part"),
        Column("load_Pa", "load\nPa", 0),
        Column("centre_mm", "centre\nmm", 2),
        Column("mean_mm", "mean\nmm", 2),
        Column("stress_MPa", "stress\nMPa", 1),
        Column("design_strength_MPa", "strength\nMPa", 1),
        Column("used_pct", "used\n%", 0),
        Column("small_deflection", "small\ndeflection"),
        Column("U_W_m2K", "U\nW/(m²K)", 3),
        Column("U_flat_W_m2K", "U flat\nW/(m²K)", 3),
    )
    rows: list[tuple[Cell, ...]] = []
    for b in bowed:
        for part, figures in parts(b):
            small = None if part.startswith("gap") else "yes" if b.panes[int(part.split()[1]) - 1].linear else "no"
            rows.append((b.name, b.duration, shear(b), part, *figures, small, b.U, b.U_flat))
    return Table(columns, tuple(rows))


def parts(b: Bowed) -> Iterator[tuple[str, list[float | None]]]:
    """Panes and gaps of a state, outdoors first: load or overpressure [Pa], deflection or width at the centre and on
    average [mm], stress and design strength [MPa], share of it used [%]."""
    for k, pane in enumerate(b.panes):
        megapascals = [None if value is None else 1e-6 * value for value in (pane.stress, pane.strength)]
        used = None if pane.use is None else 100.0 * pane.use
        yield f"pane {k + 1}", [pane.load, 1e3 * pane.centre, 1e3 * pane.mean, *megapascals, used]
        if k < len(b.gaps):
            gap = b.gaps[k]
            yield f"gap {k + 1}", [gap.overpressure, 1e3 * gap.centre, 1e3 * gap.mean, None, None, None]


def fracture_table(case: Case, rows: Sequence[Fracture]) -> Table:
    """One row a pane."""
    columns = (
        Column("pane", "pane", 0),
        Column("treatment", "glass"),
        Column("edge_work", "edges"),
        Column("conditions", "conditions"),
        Column("centre_C", "centre\n°C", 1),
        Column("edge_C", "edge\n°C", 1),
        Column("edge_from", "edge from"),
        Column("difference_K", "difference\nK", 1),
        Column("permissible_K", "limit\nK", 0),
        Column("margin_K", "margin\nK", 1),
        Column("helps", "what would help"),
    )
    return Table(columns, tuple(_fracture_row(case, f) for f in rows))


def _fracture_row(case: Case, f: Fracture) -> tuple[Cell, ...]:
    pane = case.unit.panes[f.pane]
    return (
        f.pane + 1,
        pane.treatment,
        pane.edge_work,
        f.conditions,
        celsius(f.centre),
        celsius(f.edge),
        f.edge_from,
        f.difference,
        f.permissible,
        f.margin,
        "; ".join(f.helps),
    )


def interlayer_table(rows: Sequence[InterlayerHeat]) -> Table:
    """One row an interlayer."""
    columns = (
        Column("pane", "pane", 0),
        Column("material", "interlayer"),
        Column("conditions", "conditions"),
        Column("hottest_C", "hottest\n°C", 1),
    )
    return Table(columns, tuple((h.pane + 1, h.material, h.conditions, celsius(h.temperature)) for h in rows))


def ageing_table(a: Ageing | None) -> Table:
    """One row a year."""
    columns = (
        Column("year", "year", 0),
        Column("share_pct", "gas\n%", 1),
        Column("U_W_m2K", "U\nW/(m²K)", 3),
        Column("share_linear_pct", "gas, % of\nthe whole", 1),
        Column("U_linear_W_m2K", "U\nW/(m²K)", 3),
    )
    years = [] if a is None else zip(a.years, a.share, a.U, a.share_linear, a.U_linear, strict=True)
    return Table(columns, tuple((t, 100.0 * x, u, 100.0 * y, v) for t, x, u, y, v in years))


def tolerance_table(t: Tolerances | None) -> Table:
    """One row a figure, with the share of its variance by kind of tolerance [%]."""
    if t is None or not t.spreads:
        return table_of([])
    kinds = dict.fromkeys(kind for s in t.spreads for kind in s.shares)
    columns = (
        Column("quantity", "quantity"),
        Column("nominal", "nominal", 3),
        Column("low", "5 %", 3),
        Column("median", "median", 3),
        Column("high", "95 %", 3),
        *(Column(f"{kind}_variance_pct", f"{kind}\n% of variance", 0) for kind in kinds),
    )
    rows = [
        (s.quantity, s.nominal, s.low, s.median, s.high, *(_percent(s.shares.get(kind)) for kind in kinds))
        for s in t.spreads
    ]
    return Table(columns, tuple(rows))


def _percent(share: float | None) -> float | None:
    return None if share is None else 100.0 * share
