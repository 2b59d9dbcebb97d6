"""Resistances from air to air that add to 1/U."""

from __future__ import annotations

import math

import numpy as np

from igu.model.unit import Unit
from igu.ratings import en673
from igu.ratings.result import Result


def no_chain(unit: Unit, r: Result) -> str:
    """Why the resistances of a result are not in one chain, nothing where they are."""
    c = r.conditions
    if any(pane.is_sheet for pane in unit.panes):
        return "radiation passes by a sheet"
    if c.sun > 0.0 or any(c.absorbed or ()):
        return "heat is absorbed in the panes"
    if c.sky is not None or c.outdoor_radiant not in (None, c.outdoor_air):
        return "outdoors radiates at another temperature than its air"
    if c.indoor_radiant not in (None, c.indoor_air):
        return "the room radiates at another temperature than its air"
    return ""


def _names(unit: Unit) -> list[str]:
    """The parts, outdoors first."""
    names = ["outdoor film"]
    for k in range(len(unit.panes)):
        names += [f"pane {k + 1}", f"gap {k + 1}" if k < len(unit.gaps) else "room film"]
    return names


def chain_resistances(unit: Unit, r: Result) -> list[tuple[str, float]]:
    """Name and resistance [m2 K/W] of every film, pane and gap, by the temperatures on its two sides."""
    faces = [t for pane in r.panes for t in (pane.face_out, pane.face_in) if t is not None]
    chain = [r.conditions.outdoor_air, *faces, r.conditions.indoor_air]
    flux = r.flux_to_room or math.nan
    return [(name, (a - b) / flux) for name, a, b in zip(_names(unit), chain, chain[1:], strict=False)]


def fixed_resistances(unit: Unit, r: Result) -> list[tuple[str, float]]:
    """Name and resistance [m2 K/W] of the terms of EN 673: 1/h_e, d/λ of the panes, 1/h_s of the gaps, 1/h_i."""
    values = [1.0 / en673.EXTERNAL]
    for k, pane in enumerate(unit.panes):
        values.append(1.0 / pane.conductance)
        if k < len(r.gaps):
            values.append(1.0 / ((r.gaps[k].convection_coefficient or 0.0) + (r.gaps[k].radiation_coefficient or 0.0)))
    values.append(1.0 / float(en673.internal_coefficient(np.array(unit.panes[-1].emissivity_in))))
    return list(zip(_names(unit), values, strict=True))
