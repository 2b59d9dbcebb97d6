"""The report of one case: its section, its figures under every condition, warnings, a note on the calculation."""

from __future__ import annotations

import math
import textwrap
from collections.abc import Callable, Iterator, Sequence

from igu.laws.constants import CELSIUS
from igu.model.case import Case
from igu.model.conditions import Conditions
from igu.model.unit import Unit
from igu.ratings.declaration import Declaration
from igu.ratings.ideal import Bounds
from igu.ratings.result import Films, Result
from igu.terminal.section import drawing
from igu.terminal.tables import heads, number

WIDTH = 80
NAMES = 34
CELL = 11
ABREAST = 4

Line = tuple[str, Callable[[Result], str]]

CAUTION = "An estimate for design: local codes and a licensed engineer decide."

MODEL = "model, not a measurement"


def report(case: Case, results: Sequence[Result], declared: Declaration, limits: Bounds | None) -> str:
    """The whole report, no line wider than 80 columns."""
    parts = [
        _heading(case),
        drawing(case.unit, results),
        list(_figures(case.unit, results)),
        list(_resistances(case.unit, results)),
        list(_declaration(declared)),
        list(_bounds(limits)),
        list(fogging_lines(results)),
        list(_warnings(case, results)),
        list(_note(case, results)),
    ]
    return "\n\n".join("\n".join(part) for part in parts if part)


def _heading(case: Case) -> list[str]:
    unit = case.unit
    mass = "" if unit.mass_per_area is None else f", {unit.mass_per_area:.0f} kg/m²"
    size = f"{unit.width:g} m wide, {unit.height:g} m high, {position(unit)}, {1e3 * unit.thickness:.1f} mm thick{mass}"
    models = MODEL in " ".join(case.notes)
    mark = ["Generic coatings are models, not measurements."] if models else []
    overhead = wrapped(f"Overhead glazing. {CAUTION}") if is_overhead(unit) else []
    return [*wrapped(case.title), *wrapped(case.file), "", *wrapped(size), *mark, *overhead]


def is_overhead(unit: Unit) -> bool:
    """Whether a unit leans more than 15 degrees, so that it could fall on someone (common practice, no source)."""
    return not math.radians(75.0) <= unit.tilt <= math.radians(105.0)


def position(unit: Unit) -> str:
    """The position of a unit in words."""
    degrees = math.degrees(unit.tilt)
    names = {90.0: "vertical", 0.0: "horizontal, outdoors on top", 180.0: "horizontal, outdoors below"}
    return names.get(round(degrees, 6), f"tilted {degrees:g}° from the horizontal")


def under(conditions: Conditions) -> str:
    """Name of conditions, with the position where they bring their own."""
    return conditions.name if conditions.tilt is None else f"{conditions.name} ({_standing(conditions.tilt)})"


def _standing(tilt: float) -> str:
    """A position in a word."""
    degrees = round(math.degrees(tilt), 6)
    return {90.0: "vertical", 0.0: "horizontal"}.get(degrees, f"{degrees:g}°")


def _position_words(unit: Unit, r: Result) -> str:
    """The position of a result that is not the one the unit is built in."""
    if r.tilt == unit.tilt:
        return ""
    standing = _standing(r.tilt)
    declared = " (as declared)" if standing == "vertical" else ""
    return f"{standing}{declared}, unit built at {math.degrees(unit.tilt):g}°"


def wrapped(text: str, indent: str = "") -> list[str]:
    """The text in lines of at most 80 columns."""
    return textwrap.wrap(text, WIDTH, initial_indent=indent, subsequent_indent=indent, break_on_hyphens=False) or [""]


def _figures(unit: Unit, results: Sequence[Result]) -> Iterator[str]:
    for at in range(0, len(results), ABREAST):
        group = results[at : at + ABREAST]
        if at:
            yield ""
        for row in heads([r.conditions.name for r in group], CELL - 1):
            yield (f"{'':<{NAMES}}" + "".join(f"{name:>{CELL}}" for name in row)).rstrip()
        for name, read in _lines(unit, results):
            cells = [read(r) for r in group]
            if any(cells):
                yield (f"{name:<{NAMES}}" + "".join(f"{cell:>{CELL}}" for cell in cells)).rstrip()


def _lines(unit: Unit, results: Sequence[Result]) -> list[Line]:
    """Rows of the table of figures; a row that says nothing under any condition is not printed."""
    panes = max(len(r.panes) for r in results)
    built = f"Position (unit built at {math.degrees(unit.tilt):g}°)"
    shown: list[Line] = [
        (built, lambda r: _standing(r.tilt) if r.tilt != unit.tilt else ""),
        ("Balance", lambda r: "" if r.outcome == "solved" else "not closed"),
        ("U, W/(m²K)", lambda r: _value(r.U, 2)),
        ("  declared", lambda r: _value(r.U_declared, 1)),
        ("Heat to the room, W/m²", lambda r: _value(r.flux_to_room, 1)),
        ("Solar factor g", lambda r: _of_sun(r, "g")),
        ("  direct, transmitted", lambda r: _of_sun(r, "transmittance")),
        ("  secondary, absorbed flowing in", lambda r: _of_sun(r, "q_i")),
        ("Sun reflected", lambda r: _of_sun(r, "reflectance_out")),
        *(line for k in range(panes) for line in (_absorbed_line(k), *_coating_lines(k, results))),
        *(_given_heat_line(k) for k in range(panes)),
        *(_inward_line(k) for k in range(panes)),
        ("Light transmitted", lambda r: _of_sun(r, "light_transmittance")),
        ("  reflected outdoors", lambda r: _of_sun(r, "light_reflectance_out")),
        ("  reflected to the room", lambda r: _of_sun(r, "light_reflectance_in")),
        ("UV transmitted", lambda r: _of_sun(r, "uv_transmittance")),
        ("Sun on the glass, W/m²", lambda r: _value(r.conditions.sun or None, 0)),
        ("  room gains: transmitted", lambda r: _of_budget(r, "transmitted")),
        ("  absorbed, flowing in", lambda r: _of_budget(r, "absorbed_inward")),
        ("  by temperature difference", lambda r: _of_budget(r, "temperature_difference")),
        ("  together", lambda r: _of_budget(r, "net")),
    ]
    return shown


def _absorbed_line(k: int) -> Line:
    return f"Sun absorbed in pane {k + 1}", lambda r: _value(r.panes[k].solar_absorptance, 3)


def _given_heat_line(k: int) -> Line:
    return f"Heat absorbed in pane {k + 1}, W/m²", lambda r: _value((r.conditions.absorbed or {k: None})[k], 1)


def _inward_line(k: int) -> Line:
    return f"Absorbed flows in, N{k + 1} (tangent)", lambda r: _value(r.panes[k].inward_fraction, 3)


def _coating_lines(k: int, results: Sequence[Result]) -> list[Line]:
    """Lines for the coatings of a pane of which the absorbed share is known."""

    def line(side: int) -> Line:
        def read(r: Result) -> str:
            return _value(r.solar.coating_absorptance[k][side], 3) if r.solar else ""

        return f"  of it in the coating of face {2 * k + side + 1}", read

    lit = [r.solar for r in results if r.solar]
    return [line(side) for side in (0, 1) if any(s.coating_absorptance[k][side] is not None for s in lit)]


def _of_sun(r: Result, name: str) -> str:
    return _value(getattr(r.solar, name), 3) if r.solar else ""


def _of_budget(r: Result, name: str) -> str:
    return _value(getattr(r.budget, name), 1) if r.budget and r.conditions.sun else ""


def _value(value: float | None, decimals: int) -> str:
    return "" if value is None else number(value, decimals)


def _resistances(unit: Unit, results: Sequence[Result]) -> Iterator[str]:
    """Resistances from air to air under the dark conditions, which add to 1/U where they are in one chain."""
    dark = [r for r in results if _is_chain(unit, r)]
    for r in dark:
        parts = _resistance_parts(unit, r)
        total = sum(value for _, value in parts)
        yield f"Resistances, m²K/W, {r.conditions.name}: 1/U = {number(1.0 / (r.U or math.nan), 4)}"
        words = [f"{name} {value:.4f} ({100 * value / total:.0f} %)" for name, value in parts]
        yield from wrapped(" + ".join(words) + f" = {total:.4f}", "  ")


def _is_chain(unit: Unit, r: Result) -> bool:
    c = r.conditions
    one_outdoors = c.sky is None and c.outdoor_radiant in (None, c.outdoor_air)
    one_indoors = c.indoor_radiant in (None, c.indoor_air)
    lit = c.sun > 0.0 or any(c.absorbed or ())
    sheets = any(pane.is_sheet for pane in unit.panes)
    return bool(r.U and r.flux_to_room) and one_outdoors and one_indoors and not lit and not sheets


def _resistance_parts(unit: Unit, r: Result) -> list[tuple[str, float]]:
    faces = [t for pane in r.panes for t in (pane.face_out, pane.face_in) if t is not None]
    chain = [r.conditions.outdoor_air, *faces, r.conditions.indoor_air]
    names = ["outdoor film"]
    for k in range(len(unit.panes)):
        names += [f"pane {k + 1}", f"gap {k + 1}" if k < len(unit.gaps) else "room film"]
    flux = r.flux_to_room or math.nan
    return [(name, (a - b) / flux) for name, a, b in zip(names, chain, chain[1:], strict=False)]


def _declaration(d: Declaration) -> Iterator[str]:
    yield "For the specification (EN 673, EN 410; rounded as the standards round)"
    if d.U_g_W_m2K is None:
        yield from wrapped(f"no declared values: {'; '.join(d.reasons)}", "  ")
        return
    figures = [
        ("U_g", d.U_g_W_m2K, 1, " W/(m²K)"),
        ("g", d.g, 2, ""),
        ("τ_v", d.light_transmittance, 2, ""),
        ("ρ_v out", d.light_reflectance_out, 2, ""),
        ("ρ_v in", d.light_reflectance_in, 2, ""),
        ("τ_e", d.solar_transmittance, 2, ""),
    ]
    yield "  " + "   ".join(f"{name} {number(value, places)}{unit}" for name, value, places, unit in figures)
    for reason in d.reasons:
        yield from wrapped(reason, "  ")


def _bounds(limits: Bounds | None) -> Iterator[str]:
    if limits is None:
        return
    yield "Against what no glass can beat, at normal incidence (solar weighting ASTM G173)"
    yield from wrapped(
        f"τ_v/g {limits.selectivity:.2f}; a glass of this τ_v that passes the wavelengths of most light per heat and "
        f"absorbs nothing: {limits.selectivity_bound:.2f}",
        "  ",
    )
    winter = "" if limits.winter_U is None else f", and its U without long wave {limits.winter_U:.2f} W/(m²K)"
    yield from wrapped(
        f"g {limits.g:.2f}; a winter glass that passes all the sun and sends back the long wave: 1.00{winter}", "  "
    )


def fogging_lines(results: Sequence[Result]) -> Iterator[str]:
    """Which face fogs, under every condition with temperatures."""
    lit = [(r, fog) for r in results for fog in r.fog]
    if not lit:
        return
    yield "Fogging, at the centre of glass (the edge is colder and not covered)"
    for r, fog in lit:
        words = _fog_words(fog.limit_humidity, fog.temperature < CELSIUS, fog.where)
        if fog.margin is not None and fog.point is not None:
            kind = "frost point" if fog.frost else "dew point"
            state = (
                f"{number(fog.margin, 1)} K above" if fog.margin > -1e-6 else f"FOGS, {number(-fog.margin, 1)} K below"
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
    return f", {what} from {100 * limit:.0f} % relative humidity (over water)"


def _warnings(case: Case, results: Sequence[Result]) -> Iterator[str]:
    found = [*case.warnings, *(f"{r.conditions.name}: {text}" for r in results for text in r.warnings)]
    if found:
        yield "Warnings"
    for text in found:
        yield from wrapped(text, "  ")


def _note(case: Case, results: Sequence[Result]) -> Iterator[str]:
    yield "Note on the calculation"
    said = dict.fromkeys(note for r in results for note in r.notes)
    for text in (*said, *case.notes):
        yield from wrapped(text, "  ")
    for r in results:
        c = r.conditions
        words = [_position_words(case.unit, r), c.source, *c.defaults]
        if c.method == "iso-15099":
            words += [f"gas properties {c.gas_properties}", _films(r.films), _imbalance(r)]
        yield from wrapped(f"{c.name}: " + "; ".join(dict.fromkeys(word for word in words if word)), "  ")


def _films(films: Films) -> str:
    """The coefficients of the open faces in words."""
    outdoors = _coefficients(films.outdoor_convection, films.outdoor_radiation)
    room = _coefficients(films.indoor_convection, films.indoor_radiation)
    return f"convection + radiation of the films: outdoors {outdoors}, room {room} W/(m²K)" if outdoors else ""


def _coefficients(convection: float | None, radiation: float | None) -> str:
    return " + ".join(f"{h:.2f}" for h in (convection, radiation) if h is not None)


def _imbalance(r: Result) -> str:
    return "" if r.largest_imbalance is None else f"largest imbalance {r.largest_imbalance:.0e} W/m²"
