"""The figures of a unit as a specification declares them, by the standards' own states and rounded as they round."""

from __future__ import annotations

from dataclasses import dataclass

from igu.errors import ModelError
from igu.model.conditions import Conditions
from igu.model.unit import Unit
from igu.ratings import en673
from igu.ratings.rate import rate
from igu.ratings.result import Solar
from igu.ratings.rounding import half_up


@dataclass(frozen=True)
class Declaration:
    """U_g by EN 673 to one decimal; g, light and solar figures by EN 410 to two. None: not known, or not covered by the
    standard; `reasons` says why."""

    U_g_W_m2K: float | None
    g: float | None
    light_transmittance: float | None
    light_reflectance_out: float | None
    light_reflectance_in: float | None
    solar_transmittance: float | None
    reasons: tuple[str, ...]


def declaration(unit: Unit) -> Declaration:
    """Declared figures of a unit, in the vertical position the standards declare them for."""
    reasons: list[str] = []
    u = None
    if not en673.is_declared_case(unit):
        reasons.append("declared values belong to the vertical position")
    elif (why := en673.excluded(unit)) is not None:
        reasons.append(why)
    else:
        u = en673.declared(en673.u_value(unit))
    solar = _solar(unit, reasons) if u is not None else None
    if solar is None:
        return Declaration(u, None, None, None, None, None, tuple(reasons))
    return Declaration(
        U_g_W_m2K=u,
        g=_two(solar.g),
        light_transmittance=_two(solar.light_transmittance),
        light_reflectance_out=_two(solar.light_reflectance_out),
        light_reflectance_in=_two(solar.light_reflectance_in),
        solar_transmittance=_two(solar.transmittance),
        reasons=tuple(reasons),
    )


def _solar(unit: Unit, reasons: list[str]) -> Solar | None:
    try:
        result = rate(unit, Conditions(name="en-410", method="en-410"))
    except ModelError as error:
        reasons.append(str(error))
        return None
    reasons.extend(result.warnings)
    return result.solar


def _two(value: float | None) -> float | None:
    return None if value is None else half_up(value, 2)
