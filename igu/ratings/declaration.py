"""The figures of a unit as a specification declares them, by the standards' own states and rounded as they round."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace

from igu.model.conditions import Conditions
from igu.model.unit import Unit
from igu.ratings import en673
from igu.ratings.banded import banded_error
from igu.ratings.rate import rate
from igu.ratings.remarks import VENTED_GAS, loses_gas
from igu.ratings.result import Solar
from igu.ratings.rounding import half_up

STANDARD_SUN = Conditions(name="en-410", method="en-410")


@dataclass(frozen=True)
class Declaration:
    """U_g by EN 673 to one decimal; g, light and solar figures by EN 410 to two. None: not known, or not covered by the
    standard; `reasons` says why, and what is to be said of the others. `solar_uncertainty` is how far g and solar
    transmittance can be off because panes are known by band values only, None where that costs nothing."""

    U_g_W_m2K: float | None
    g: float | None
    light_transmittance: float | None
    light_reflectance_out: float | None
    light_reflectance_in: float | None
    solar_transmittance: float | None
    reasons: tuple[str, ...]
    solar_uncertainty: float | None = None


def declared_unit(unit: Unit, conditions: Sequence[Conditions]) -> Unit:
    """The unit its declared figures belong to: vertical where one of the conditions asks for that, else as built."""
    placed = (c.placed(unit) for c in conditions if c.tilt is not None)
    return next((unit for unit in placed if en673.is_declared_case(unit)), unit)


def declaration(unit: Unit, conditions: Sequence[Conditions] = ()) -> Declaration:
    """Declared figures of a unit, in the vertical position the standards declare them for; of a unit built otherwise
    only where one of the conditions asks for that position."""
    upright = declared_unit(unit, conditions)
    found = _declaration(upright)
    if loses_gas(unit):
        found = replace(found, reasons=(*found.reasons, VENTED_GAS))
    if upright == unit:
        return found
    built = f"vertical position, as declared; the unit is built at {math.degrees(unit.tilt):g}°"
    return replace(found, reasons=(built, *found.reasons))


def _declaration(unit: Unit) -> Declaration:
    if not en673.is_declared_case(unit):
        return Declaration(None, None, None, None, None, None, ("declared values belong to the vertical position",))
    if (why := en673.excluded(unit)) is not None:
        return Declaration(None, None, None, None, None, None, (why,))
    u = en673.declared(en673.u_value(unit))
    result = rate(unit, STANDARD_SUN)
    solar = result.solar
    if solar is None:
        return Declaration(u, None, None, None, None, None, result.warnings)
    return Declaration(
        U_g_W_m2K=u,
        g=_two(solar.g),
        light_transmittance=_two(solar.light_transmittance),
        light_reflectance_out=_two(solar.light_reflectance_out),
        light_reflectance_in=_two(solar.light_reflectance_in),
        solar_transmittance=_two(solar.transmittance),
        reasons=result.warnings,
        solar_uncertainty=banded_error(unit),
    )


def standard_solar(unit: Unit) -> Solar | None:
    """The unit in the sun by EN 410; None where a pane is not known, or the standard does not cover the unit."""
    return None if en673.excluded(unit) else rate(unit, STANDARD_SUN).solar


def _two(value: float | None) -> float | None:
    return None if value is None else half_up(value, 2)
