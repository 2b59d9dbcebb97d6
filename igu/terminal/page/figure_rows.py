"""The figures of a unit as rows, a column for every condition."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Sequence

from igu.laws.constants import CELSIUS
from igu.model.unit import Unit
from igu.ratings.result import Result
from igu.terminal.page.text import WIDTH, standing
from igu.terminal.tables import head_width, heads, number

NAMES = 34
CELL = 11
"""Width of a column, wider where the name of a condition has a longer word."""

Line = tuple[str, Callable[[Result], str]]
"""A label, its last line beside the cells, and what stands in a cell."""


def figures(unit: Unit, results: Sequence[Result]) -> Iterator[str]:
    """Lines of the table; a row that says nothing under any condition beside it is not printed."""
    cell = head_width([r.conditions.name for r in results], least=CELL - 1) + 1
    abreast = max(1, (WIDTH - NAMES) // cell)
    for at in range(0, len(results), abreast):
        group = results[at : at + abreast]
        if at:
            yield ""
        for row in heads([r.conditions.name for r in group], CELL - 1):
            yield _row("", row, cell)
        for label, read in _lines(unit, results):
            cells = [read(r) for r in group]
            if any(cells):
                *above, name = label.split("\n")
                yield from above
                yield _row(name, cells, cell)


def _row(name: str, cells: Sequence[str], width: int) -> str:
    return (f"{name:<{NAMES}}" + "".join(f"{cell:>{width}}" for cell in cells)).rstrip()


def _lines(unit: Unit, results: Sequence[Result]) -> Iterator[Line]:
    panes = range(len(unit.panes))
    yield (
        f"Position (unit built at {math.degrees(unit.tilt):g}°)",
        lambda r: standing(r.tilt) if r.tilt != unit.tilt else "",
    )
    yield "Balance", lambda r: "" if r.outcome == "solved" else "not closed"
    yield "U, W/(m²K)", lambda r: _value(r.U, 2)
    yield from _environment_lines(results)
    yield "  declared", lambda r: _value(r.U_declared, 1)
    yield "Heat to the room, W/m²\n  by convection and long wave", lambda r: _value(r.flux_to_room, 1)
    yield from _angle_lines(results)
    yield "Solar factor g", lambda r: _of_sun(r, "g")
    yield "  direct, transmitted", lambda r: _of_sun(r, "transmittance")
    yield "  secondary, absorbed flowing in", lambda r: _of_sun(r, "q_i")
    yield "Sun reflected outdoors", lambda r: _of_sun(r, "reflectance_out")
    for k in panes:
        yield _absorbed_line(k)
        yield from _coating_lines(k, results)
    yield from (_given_heat_line(k) for k in panes)
    yield from (_inward_line(k) for k in panes)
    yield "Light transmitted", lambda r: _of_sun(r, "light_transmittance")
    yield "  reflected outdoors", lambda r: _of_sun(r, "light_reflectance_out")
    yield "  reflected to the room", lambda r: _of_sun(r, "light_reflectance_in")
    yield "UV transmitted", lambda r: _of_sun(r, "uv_transmittance")
    yield "Sun on the glass, W/m²", lambda r: _value(r.conditions.sun or None, 0)
    yield "What the room gains, W/m²\n  sun transmitted", lambda r: _of_budget(r, "transmitted")
    yield "  absorbed sun flowing in", lambda r: _of_budget(r, "absorbed_inward")
    yield "  by the temperature difference", lambda r: _of_budget(r, "temperature_difference")
    yield "  together", lambda r: _of_budget(r, "net")


def _environment_lines(results: Sequence[Result]) -> list[Line]:
    """The environmental temperatures U refers to, on a side where they are not the air's."""

    def line(name: str, side: str, air: str) -> list[Line]:
        pairs = [(getattr(r, side), getattr(r.conditions, air)) for r in results]
        differ = any(t is not None and abs(t - of_air) >= 0.05 for t, of_air in pairs)
        return [(f"  {name}, °C", lambda r: _celsius(getattr(r, side)))] if differ else []

    outdoors = line("environment outdoors", "environment_out", "outdoor_air")
    return outdoors + line("environment in the room", "environment_in", "indoor_air")


def _angle_lines(results: Sequence[Result]) -> list[Line]:
    """How the sun stands to the glass, where it is not normal to it under every condition."""
    lit = [r.conditions for r in results if r.solar]
    lines: list[Line] = []
    if any(c.incidence for c in lit):
        lines.append(
            ("Sun at incidence, °", lambda r: f"{math.degrees(r.conditions.incidence):.4g}" if r.solar else "")
        )
    if any(c.diffuse_share for c in lit):
        lines.append(("Diffuse share of the sun", lambda r: _value(r.conditions.diffuse_share, 2) if r.solar else ""))
    return lines


def _absorbed_line(k: int) -> Line:
    return f"Sun absorbed in pane {k + 1}", lambda r: _value(r.panes[k].solar_absorptance, 3)


def _given_heat_line(k: int) -> Line:
    return f"Heat absorbed in pane {k + 1}, W/m²", lambda r: _value((r.conditions.absorbed or {k: None})[k], 1)


def _inward_line(k: int) -> Line:
    head = "" if k else "Inward-flowing fraction (tangent)\n"
    return f"{head}  N{k + 1}, of heat absorbed in pane {k + 1}", lambda r: _value(r.panes[k].inward_fraction, 3)


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


def _celsius(kelvin: float | None) -> str:
    return "" if kelvin is None else number(kelvin - CELSIUS, 1)


def _value(value: float | None, decimals: int) -> str:
    return "" if value is None else number(value, decimals)
