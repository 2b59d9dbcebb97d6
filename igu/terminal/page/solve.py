"""The report of one case: its section, its figures under every condition, warnings, a note on the calculation."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from pathlib import Path

from igu.laws.constants import CELSIUS
from igu.model.case import Case
from igu.model.conditions import FIXED
from igu.model.unit import Unit
from igu.ratings.declaration import Declaration
from igu.ratings.ideal import Bounds
from igu.ratings.resistances import chain_resistances, fixed_resistances, no_chain
from igu.ratings.result import Films, Result
from igu.terminal.page.figure_rows import figures
from igu.terminal.page.marks import marks_explained
from igu.terminal.page.section import drawing
from igu.terminal.page.text import HELD, MODEL, caution, is_overhead, position, standing, wrapped
from igu.terminal.tables import number


def report(case: Case, results: Sequence[Result], declared: Declaration, limits: Bounds | None) -> str:
    """The whole report, no line wider than 80 columns."""
    parts = [
        _heading(case),
        drawing(case.unit, results),
        list(figures(case.unit, results)),
        list(_resistances(case.unit, results)),
        list(_declaration(declared, results)),
        list(_bounds(limits)),
        list(fogging_lines(results)),
        list(_warnings(case, results)),
        _note(case, results),
    ]
    return "\n\n".join("\n".join(part) for part in parts if part)


def _heading(case: Case) -> list[str]:
    unit = case.unit
    size = f"{unit.width:g} m wide, {unit.height:g} m high, {position(unit)}, {1e3 * unit.thickness:.1f} mm thick"
    models = MODEL in " ".join(case.notes)
    mark = ["Generic coatings are models, not measurements."] if models else []
    overhead = wrapped(caution([unit]) or "") if is_overhead(unit) else []
    title = [] if case.title == Path(case.file).stem else wrapped(case.title)
    return [*title, *wrapped(case.file), "", *wrapped(f"{size}, {_weight(unit)}"), *mark, *overhead]


def _weight(unit: Unit) -> str:
    if unit.mass_per_area is not None:
        return f"{unit.mass_per_area:.0f} kg/m²"
    without = dict.fromkeys(ply.material for pane in unit.panes for ply in pane.plies if ply.density is None)
    return f"weight not known: no density_kg_m3 of {', '.join(without)}"


def _position_words(unit: Unit, r: Result) -> str:
    """The position of a result that is not the one the unit is built in."""
    if r.tilt == unit.tilt:
        return ""
    words = standing(r.tilt)
    declared = " (as declared)" if words == "vertical" else ""
    return f"{words}{declared}, unit built at {math.degrees(unit.tilt):g}°"


def _resistances(unit: Unit, results: Sequence[Result]) -> Iterator[str]:
    """Resistances from air to air that add to 1/U: under the first conditions that have one chain of them, or why none
    has; and in the fixed state of EN 673."""
    states = [r for r in results if r.U and r.flux_to_room]
    why = {r.conditions.name: no_chain(unit, r) for r in states}
    chain = next((r for r in states if not why[r.conditions.name]), None)
    if chain is not None:
        yield from _chain_lines(chain, chain_resistances(unit, chain))
    elif states:
        reasons = "; ".join(
            f"{', '.join(name for name, given in why.items() if given == reason)}: {reason}"
            for reason in dict.fromkeys(why.values())
        )
        yield from wrapped(f"No one chain of resistances from air to air under any conditions ({reasons})")
    fixed = next((r for r in results if r.U and r.conditions.method == "en-673"), None)
    if fixed is not None:
        yield from _chain_lines(fixed, fixed_resistances(unit, fixed))


def _chain_lines(r: Result, parts: Sequence[tuple[str, float]]) -> Iterator[str]:
    total = sum(value for _, value in parts)
    yield from wrapped(f"Resistances, m²K/W, {r.conditions.name}: 1/U = {number(1.0 / (r.U or math.nan), 4)}")
    words = [f"{name}: {value:.4f} ({100 * value / total:.0f} %)" for name, value in parts]
    yield from wrapped(" + ".join(words) + f" = {total:.4f}", "  ")


def _declaration(d: Declaration, results: Sequence[Result]) -> Iterator[str]:
    """The declared figures; what is warned of under a condition is not said again."""
    yield "For the specification (EN 673, EN 410; rounded once, from the full figures)"
    if d.U_g_W_m2K is None:
        yield from wrapped(f"no declared values: {'; '.join(d.reasons)}", "  ")
        return
    off = f" ±{d.solar_uncertainty:.2f}" if d.solar_uncertainty else ""
    figures = [
        ("U_g", d.U_g_W_m2K, 1, " W/(m²K)"),
        ("g", d.g, 2, off),
        ("τ_v", d.light_transmittance, 2, ""),
        ("ρ_v out", d.light_reflectance_out, 2, ""),
        ("ρ_v in", d.light_reflectance_in, 2, ""),
        ("τ_e", d.solar_transmittance, 2, off),
    ]
    words = [f"{name} {number(value, places)}{unit}" for name, value, places, unit in figures]
    yield from wrapped("   ".join(word.replace(" ", HELD) for word in words), "  ")
    if off:
        yield "  ±: panes known by band values beside others, see the warnings"
    said = {text for r in results for text in r.warnings}
    for reason in d.reasons:
        if reason not in said:
            yield from wrapped(reason, "  ")


def _bounds(limits: Bounds | None) -> Iterator[str]:
    if limits is None:
        return
    by_standard = "; U by EN 673" if limits.winter_U is not None else ""
    yield f"Against what no glass can beat (normal incidence, ASTM G173{by_standard})"
    yield (
        f"  sun: τ_v/g {limits.selectivity:.2f}, at most {limits.selectivity_bound:.2f} (the same light with the "
        "least heat)"
    )
    winter = f"; U without long wave in the gaps {limits.winter_U:.2f} W/(m²K)" if by_standard else ""
    yield f"  winter: g {limits.g:.2f}, at most 1.00{winter}"


def fogging_lines(results: Sequence[Result]) -> Iterator[str]:
    """Which face fogs, under every condition with temperatures."""
    lit = [(r, fog) for r in results for fog in r.fog]
    if not lit:
        return
    yield from wrapped(
        "Fogging at the centre of glass (the edge is colder and not covered); relative humidity of the air, over water"
    )
    for r, fog in lit:
        frost = fog.temperature < CELSIUS
        words = _fog_words(fog.limit_humidity, frost, fog.where)
        if fog.margin is not None and fog.point is not None:
            kind = "frost point" if fog.frost else "dew point"
            wet = "FOGS" if not frost else "FROSTS" if fog.frost else "FOGS AND FREEZES"
            state = (
                f"{number(fog.margin, 1)} K above" if fog.margin > -1e-6 else f"{wet}, {number(-fog.margin, 1)} K below"
            )
            words += f"; {state} the {kind} {number(fog.point - CELSIUS, 1)} °C"
            words += "" if fog.humidity is None else f" of {100 * fog.humidity:.0f} %"
        yield from wrapped(f"{r.conditions.name}: {fog.where} {number(fog.temperature - CELSIUS, 1)} °C{words}", "  ")


def _fog_words(limit: float | None, frost: bool, where: str) -> str:
    """When the face starts to fog, or to frost where the face itself is below zero."""
    if where.startswith("inside"):
        return ""
    if limit is None:
        return ", warmer than the air: does not fog"
    what = "frosts" if frost else "fogs"
    return f", {what} from {100 * limit:.0f} % humidity"


def _warnings(case: Case, results: Sequence[Result]) -> Iterator[str]:
    under_names: dict[str, list[str]] = {}
    for r in results:
        for text in r.warnings:
            under_names.setdefault(text, []).append(r.conditions.name)
    found = [*case.warnings, *(f"{', '.join(names)}: {text}" for text, names in under_names.items())]
    if found:
        yield "Warnings"
    for text in found:
        yield from wrapped(text, "  ")


def _note(case: Case, results: Sequence[Result]) -> list[str]:
    """How the figures came about, every sentence once."""
    said = dict.fromkeys(note for r in results for note in r.notes)
    texts = [*said, *case.notes, *filter(None, (_condition_words(case.unit, r) for r in results))]
    marks = marks_explained(" ".join(texts))
    return ["Note on the calculation", *(line for text in (*texts, marks) if text for line in wrapped(text, "  "))]


def _condition_words(unit: Unit, r: Result) -> str:
    """What a condition took and from where; the state of a standard is in the note on the standard."""
    c = r.conditions
    words = [_position_words(unit, r)]
    if c.method not in FIXED:
        words += [c.source, *c.defaults, f"gas properties {c.gas_properties}", _films(r.films), _imbalance(r)]
    said = "; ".join(dict.fromkeys(word for word in words if word))
    return f"{c.name}: {said}" if said else ""


def _films(films: Films) -> str:
    """The coefficients of the open faces in words."""
    outdoors = _coefficients(films.outdoor_convection, films.outdoor_radiation)
    room = _coefficients(films.indoor_convection, films.indoor_radiation)
    return f"convection + radiation of the films: outdoors {outdoors}, room {room} W/(m²K)" if outdoors else ""


def _coefficients(convection: float | None, radiation: float | None) -> str:
    return " + ".join(f"{h:.2f}" for h in (convection, radiation) if h is not None)


def _imbalance(r: Result) -> str:
    return "" if r.largest_imbalance is None else f"largest imbalance {r.largest_imbalance:.0e} W/m²"
