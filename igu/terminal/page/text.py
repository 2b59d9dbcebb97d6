"""What every report shares: its width, its wrapped lines, its caution, the words for a position."""

from __future__ import annotations

import math
import re
import textwrap
from collections.abc import Iterable

from igu.model.conditions import Conditions
from igu.model.unit import Unit

WIDTH = 80

UNITS = re.compile(r"(?<=\d) (?=(?:%|°C|K|mm|m|Pa|hPa|W/\S+|kg/m²)(?:[ ,;:.)]|$))")
"""The space between a number and its unit."""

HELD = "\N{NO-BREAK SPACE}"

CAUTION = "An estimate for design: local codes and a licensed engineer decide."

MODEL = "model, not a measurement"


def wrapped(text: str, indent: str = "") -> list[str]:
    """The text in lines of at most 80 columns, a number with its unit."""
    held = UNITS.sub(HELD, text)
    lines = textwrap.wrap(held, WIDTH, initial_indent=indent, subsequent_indent=indent, break_on_hyphens=False)
    return [line.replace(HELD, " ") for line in lines] or [""]


def is_overhead(unit: Unit) -> bool:
    """Whether a unit leans more than 15 degrees, so that it could fall on someone (common practice, no source)."""
    return not math.radians(75.0) <= unit.tilt <= math.radians(105.0)


def caution(units: Iterable[Unit], *, service: bool = False) -> str | None:
    """The caution of figures that can hurt someone: those of overhead units, and, `service`, bowing and thermal
    fracture; None of others."""
    about = ["overhead glazing"] if any(map(is_overhead, units)) else []
    about += ["bowing and thermal fracture"] if service else []
    return f"{', '.join(about).capitalize()}. {CAUTION}" if about else None


def position(unit: Unit) -> str:
    """The position of a unit in words."""
    degrees = math.degrees(unit.tilt)
    names = {90.0: "vertical", 0.0: "horizontal, outdoors on top", 180.0: "horizontal, outdoors below"}
    return names.get(round(degrees, 6), f"tilted {degrees:g}° from the horizontal")


def under(conditions: Conditions) -> str:
    """Name of conditions, with the position where they bring their own."""
    return conditions.name if conditions.tilt is None else f"{conditions.name} ({standing(conditions.tilt)})"


def standing(tilt: float) -> str:
    """A position in a word."""
    degrees = round(math.degrees(tilt), 6)
    return {90.0: "vertical", 0.0: "horizontal"}.get(degrees, f"{degrees:g}°")
