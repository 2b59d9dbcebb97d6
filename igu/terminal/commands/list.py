"""igu list: what the catalogue offers, each entry with its figures and its source."""

from __future__ import annotations

import argparse
from collections.abc import Callable, Sequence

import numpy as np

from igu.model.catalogue import catalogue
from igu.model.gases import known_gases
from igu.model.makeups import MakeUps
from igu.model.unit import Pane, Unit
from igu.ratings.sunlight import makeup_bands
from igu.terminal.output import add_output_options, deliver, json_text
from igu.terminal.page.marks import marks_explained
from igu.terminal.page.text import wrapped
from igu.terminal.tables import Column, Table, table_of


def add_arguments(parser: argparse.ArgumentParser) -> None:
    """Arguments of the command."""
    parser.add_argument("kind", nargs="?", choices=sorted(KINDS), help="one kind only; left out: all")
    add_output_options(parser, ("json", "csv", "markdown"))


def run(args: argparse.Namespace) -> int:
    """Print one table a kind."""
    kinds = [args.kind] if args.kind else list(KINDS)
    tables = {kind: KINDS[kind]() for kind in kinds}
    if args.format == "json":
        text = json_text({kind: table.records() for kind, table in tables.items()})
    elif args.format == "plain":
        parts = [f"{kind.upper()}, in a case: {USE[kind]}\n{_with_sources(table)}" for kind, table in tables.items()]
        marks = marks_explained(" ".join(parts))
        text = "\n\n".join([*parts, *(["\n".join(wrapped(marks))] if marks else [])])
    elif args.format == "csv":
        text = table_of([{"kind": kind, **row} for kind, table in tables.items() for row in table.records()]).csv()
    else:
        text = "\n\n".join(table.markdown() for table in tables.values())
    deliver(args, text)
    return 0


LONG = {"keys": "", "property_sets": "properties by ", "source": ""}
"""Columns too long for a table on a terminal, and the word before each in the lines beneath it."""

USE = {
    "glasses": 'glass = "clear"',
    "coatings": 'coating_in = "soft-single"',
    "interlayers": 'a ply { interlayer = "pvb", thickness_mm = 0.76 }',
    "gases": "gas = { argon = 0.9, air = 0.1 }",
    "conditions": 'set = "en-673"',
}
"""How a case file names an entry of each kind."""


def _with_sources(table: Table) -> str:
    """The table without its long columns, and these as lines beneath."""
    keep = [c for c, column in enumerate(table.columns) if column.key not in LONG]
    long = [(c, LONG[column.key]) for c, column in enumerate(table.columns) if column.key in LONG]
    rest = [". ".join(f"{word}{row[c]}" for c, word in long) for row in table.rows]
    lines = [line for row, words in zip(table.rows, rest, strict=True) for line in wrapped(f"{row[0]}: {words}", "  ")]
    return "\n".join([table.only(keep).plain(), *lines])


SHOWN_MM = 6.0
"""Thickness of the panes whose figures in the sun are shown [mm]."""


def _alone(panes: Sequence[Pane]) -> list[tuple[float, float, float]]:
    """Light and solar transmittance and solar reflectance from outdoors of panes by themselves."""
    found = makeup_bands(MakeUps.of([Unit((pane,)) for pane in panes]))
    rows = np.array([found.light_transmittance, found.transmittance, found.reflectance_out]).T
    return [(float(light), float(sun), float(back)) for light, sun, back in rows]


def _glasses() -> Table:
    columns = (
        Column("name", "name"),
        Column("label", "what"),
        Column("conductivity_W_mK", "k\nW/(m K)", 2),
        Column("emissivity", "ε bare", 3),
        Column("density_kg_m3", "density\nkg/m³", 0),
        Column("thickness_mm", "in the sun\nat mm", 0),
        Column("light_transmittance", "τ_v", 2),
        Column("solar_transmittance", "τ_e", 2),
        Column("solar_reflectance", "ρ_e", 2),
        Column("source", "source"),
    )
    glasses = catalogue().glasses.values()
    shown = _alone([catalogue().pane([catalogue().glass_ply(g.name, 1e-3 * SHOWN_MM)]) for g in glasses])
    rows = [
        (g.name, g.label, g.conductivity, g.emissivity, g.density, SHOWN_MM, *sun, g.source)
        for g, sun in zip(glasses, shown, strict=True)
    ]
    return Table(columns, tuple(rows))


def _coatings() -> Table:
    columns = (
        Column("name", "name"),
        Column("emissivity", "ε hemi-\nspherical", 3),
        Column("where", "where it may go"),
        Column("light_transmittance", f"{SHOWN_MM:g} mm clear\nτ_v", 2),
        Column("solar_transmittance", "τ_e", 2),
        Column("solar_reflectance_coated_side", "ρ_e\ncoated", 2),
        Column("solar_reflectance_glass_side", "ρ_e\nglass", 2),
        Column("source", "source"),
    )
    ply = [catalogue().glass_ply("clear", 1e-3 * SHOWN_MM)]
    coatings = catalogue().coatings.values()
    outward = _alone([catalogue().pane(ply, coating_out=c.name) for c in coatings])
    inward = _alone([catalogue().pane(ply, coating_in=c.name) for c in coatings])
    rows = [
        (c.name, c.emissivity, "in a sealed gap only" if c.inside_only else "any face", *out, inn[-1], c.source)
        for c, out, inn in zip(coatings, outward, inward, strict=True)
    ]
    return Table(columns, tuple(rows))


def _interlayers() -> Table:
    columns = (
        Column("name", "name"),
        Column("label", "what"),
        Column("conductivity_W_mK", "k\nW/(m K)", 3),
        Column("density_kg_m3", "density\nkg/m³", 0),
        Column("source", "source"),
    )
    rows = [(i.name, i.label, i.conductivity, i.density, i.source) for i in catalogue().interlayers.values()]
    return Table(columns, tuple(rows))


def _gases() -> Table:
    columns = (
        Column("name", "name"),
        Column("mole_mass_g_mol", "M\ng/mol", 3),
        Column("conductivity_mW_mK", "k 10 °C\nmW/(m K)", 2),
        Column("viscosity_uPa_s", "μ 10 °C\nμPa s", 2),
        Column("heat_capacity_J_kgK", "c_p 10 °C\nJ/(kg K)", 1),
        Column("property_sets", "property sets"),
        Column("source", "source"),
    )
    rows = [
        (
            g.name,
            1e3 * g.mole_mass,
            1e3 * g.conductivity,
            1e6 * g.viscosity,
            g.specific_heat,
            ", ".join(g.property_sets),
            g.source,
        )
        for g in known_gases()
    ]
    return Table(columns, tuple(rows))


def _conditions() -> Table:
    columns = (
        Column("name", "name"),
        Column("label", "what"),
        Column("keys", "keys"),
        Column("source", "source"),
    )
    rows = [
        (s.name, s.label, "; ".join(f"{k} {v}" for k, v in s.keys.items()), s.source)
        for s in catalogue().condition_sets.values()
    ]
    return Table(columns, tuple(rows))


KINDS: dict[str, Callable[[], Table]] = {
    "glasses": _glasses,
    "coatings": _coatings,
    "interlayers": _interlayers,
    "gases": _gases,
    "conditions": _conditions,
}
