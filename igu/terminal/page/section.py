"""The unit drawn as a section, outdoors at the top, with what each condition does in it beside."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from igu.laws.constants import CELSIUS
from igu.model.unit import COATED_BELOW, Gap, Pane, Unit
from igu.ratings.result import GapResult, Result
from igu.terminal.page.text import WIDTH
from igu.terminal.tables import MISSING, head_width, heads, number

LEFT = 38
"""Width of the drawing; the columns of the conditions stand to the right of it."""

CELL = 14
"""Width of their columns, wider where the name of a condition has a longer word."""

HEAD = 10
"""Width in which the names of conditions are broken into lines, as over the figures."""


def drawing(unit: Unit, results: Sequence[Result]) -> list[str]:
    """Lines of the section, no wider than 80 columns; results without temperatures are left out of it."""
    states = [r for r in results if r.panes and r.panes[0].face_out is not None]
    if not states:
        return _sheet(unit, [], CELL)
    cell = head_width([r.conditions.name for r in states], least=CELL - 1) + 1
    abreast = max(1, (WIDTH - LEFT) // cell)
    lines: list[str] = []
    for at in range(0, len(states), abreast):
        lines += [*([""] if at else []), *_sheet(unit, states[at : at + abreast], cell)]
    return lines


def _sheet(unit: Unit, states: Sequence[Result], cell: int) -> list[str]:
    return [_row(left, cells, cell) for left, cells in _rows(unit, states)]


def _row(left: str, cells: Sequence[str], width: int) -> str:
    return (f"{left:<{LEFT}}" + "".join(f"{cell:>{width}}" for cell in cells)).rstrip()


def _rows(unit: Unit, states: Sequence[Result]) -> Iterator[tuple[str, list[str]]]:
    if states:
        yield from (("", row) for row in heads([r.conditions.name for r in states], HEAD))
    yield "  OUTDOORS, air", [_degrees(r.conditions.outdoor_air) for r in states]
    seen = [r.conditions.outdoor_radiant_temperature(unit.tilt) for r in states]
    yield from _radiant("  OUTDOORS, radiant", seen, [r.conditions.outdoor_air for r in states])
    last = len(unit.panes) - 1
    for k, pane in enumerate(unit.panes):
        yield from _pane_rows(k, pane, states)
        if k < last:
            yield from _gap_rows(unit.gaps[k], [r.gaps[k] for r in states])
    seen = [r.conditions.indoor_radiant_temperature for r in states]
    yield from _radiant("  ROOM, radiant", seen, [r.conditions.indoor_air for r in states])
    yield "  ROOM, air", [_degrees(r.conditions.indoor_air) for r in states]


def _radiant(name: str, seen: Sequence[float], air: Sequence[float]) -> Iterator[tuple[str, list[str]]]:
    """What a face exchanges radiation with, where that is not as warm as the air."""
    if list(seen) != list(air):
        yield name, [_degrees(t) for t in seen]


def _pane_rows(k: int, pane: Pane, states: Sequence[Result]) -> Iterator[tuple[str, list[str]]]:
    faces = [r.panes[k] for r in states]
    out, inn = _coverings(pane)
    yield _edge(2 * k + 1, "┌", "┐", out), [_degrees(f.face_out) for f in faces]
    for words in _plies(pane):
        yield f"     │ {words:<26} │", []
    yield _edge(2 * k + 2, "└", "┘", inn), [_degrees(f.face_in) for f in faces]


def _covering(coating: str | None, emissivity: float) -> str | None:
    """What is written on a face: its coating, or its emissivity where that alone is known."""
    return coating or (f"ε {emissivity:g}" if emissivity < COATED_BELOW else None)


def _coverings(pane: Pane) -> tuple[str | None, str | None]:
    return _covering(pane.coating_out, pane.emissivity_out), _covering(pane.coating_in, pane.emissivity_in)


def _edge(face: int, left: str, right: str, coating: str | None) -> str:
    line = f"═ {_short(coating, 22)} " if coating else ""
    return f"  {face:>2} {left}{line:{'═' if coating else '─'}<28}{right}"


def _plies(pane: Pane) -> list[str]:
    plies = [_short(f"{1e3 * ply.thickness:g} mm {ply.material}", 26) for ply in pane.plies]
    return [*plies, f"passes {100 * pane.longwave_transmittance:.0f} % long wave"] if pane.is_sheet else plies


def _gap_rows(gap: Gap, found: Sequence[GapResult]) -> Iterator[tuple[str, list[str]]]:
    for words in gap_words(gap):
        yield f"      {words}", []
    if not found:
        return
    if any(g.radiation is None for g in found):
        yield "        heat, W/m²", [number(g.flux, 1) for g in found]
        return
    yield f"        {_carrier(gap)}, W/m²", [_share(g.convection, g.flux) for g in found]
    yield "        radiation, W/m²", [_share(g.radiation, g.flux) for g in found]


def _carrier(gap: Gap) -> str:
    if gap.evacuated:
        return "pillars and gas" if gap.pillars else "residual gas"
    return "gas"


def gap_words(gap: Gap) -> list[str]:
    """A gap in words, a mixture too long for one line in several."""
    width = f"{1e3 * gap.width:g} mm"
    if gap.vacuum:
        pillars = f", pillars every {1e3 * gap.pillars.pitch:g} mm" if gap.pillars else ""
        return [f"{width} vacuum {gap.vacuum.pressure:g} Pa{pillars}"]
    if len(gap.fill) == 1:
        return [f"{width} {gap.fill[0][0]}"]
    parts = [f"{100 * share:g} % {_short(gas, 12)}" for gas, share in gap.fill]
    one = f"{width} {', '.join(parts)}"
    return [one] if len(one) <= 32 else [width, *parts]


def makeup_words(panes: Sequence[Pane], gaps: Sequence[Gap]) -> str:
    """A make-up in one line, outdoors first: thicknesses in mm, treatments, in brackets what covers a face."""
    words = []
    for k, pane in enumerate(panes):
        text = "+".join(f"{1e3 * ply.thickness:g} {ply.material}" for ply in pane.plies)
        text += "" if pane.treatment == "annealed" else f" {pane.treatment}"
        out, inn = (None, None) if pane.is_sheet else _coverings(pane)
        text = f"[{2 * k + 1} {out}] {text}" if out else text
        text += f" [{2 * k + 2} {inn}]" if inn else ""
        words.append(text)
        if k < len(gaps):
            width, *parts = gap_words(gaps[k])
            words.append(f"{width} {', '.join(parts)}".strip())
    return " | ".join(words)


def _share(part: float | None, whole: float | None) -> str:
    """Flux and its share of the whole in per cent, where both flow the same way."""
    if part is None or whole is None:
        return MISSING
    percent = 100.0 * part / whole if abs(whole) > 0.05 else -1.0
    return f"{number(part, 1)} {f'{percent:.0f} %' if -0.5 <= percent <= 100.5 else '':>5}"


def _degrees(kelvin: float | None) -> str:
    return MISSING if kelvin is None else f"{number(kelvin - CELSIUS, 1)} °C"


def _short(text: str, most: int) -> str:
    return text if len(text) <= most else text[: most - 1] + "…"
