"""Bowing and thermal fracture of one unit as single figures, for a comparison."""

from __future__ import annotations

import math
from collections.abc import Callable

from igu.errors import SolveError
from igu.model.conditions import Conditions
from igu.model.study_tables import Frame
from igu.model.unit import Unit
from igu.ratings.rate import rate
from igu.studies.bowing import bow
from igu.studies.fracture import fractures

Reading = Callable[[Unit, Conditions | None, Conditions | None, Frame | None], float]


def _deflection(unit: Unit, cold: Conditions | None, sun: Conditions | None, frame: Frame | None) -> float:
    """Largest centre deflection of any pane in the cold [mm], NaN without ISO 15099 conditions for the cold."""
    if cold is None or cold.method != "iso-15099":
        return math.nan
    try:
        states = bow(unit, cold, None)
    except SolveError:
        return math.nan
    return 1e3 * max(abs(pane.centre) for state in states for pane in state.panes)


def _margin(unit: Unit, cold: Conditions | None, sun: Conditions | None, frame: Frame | None) -> float:
    """Least thermal-fracture margin of any pane in the sun [K], NaN without ISO 15099 conditions for the sun."""
    if sun is None or sun.method != "iso-15099":
        return math.nan
    found = fractures(unit, [rate(unit, sun)], frame)
    return min((row.margin for row in found), default=math.nan)


SERVICE: dict[str, Reading] = {"deflection_mm": _deflection, "fracture_margin_K": _margin}
"""The quantities by name, each in the unit its name carries."""
