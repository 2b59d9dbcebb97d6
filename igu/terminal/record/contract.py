"""Results as the JSON contract has them: unrounded, degrees Celsius and millimetres, null for what is not known."""

from __future__ import annotations

import math
from typing import Any

from igu import __version__
from igu.laws.constants import CELSIUS
from igu.model.case import Case
from igu.ratings.declaration import Declaration
from igu.ratings.fogging import Fog
from igu.ratings.result import Budget, Films, GapResult, PaneResult, Result
from igu.terminal.page.text import caution


def document(cases: list[dict[str, Any]]) -> dict[str, Any]:
    """The whole JSON object."""
    return {"igu": __version__, "cases": cases}


def solved_case(case: Case, results: tuple[Result, ...], declaration: Declaration) -> dict[str, Any]:
    """One case with its results."""
    return {
        "file": case.file,
        "title": case.title,
        "caution": caution([case.unit]),
        "results": [result_record(r) for r in results],
        "declaration": vars(declaration).copy(),
        "warnings": list(case.warnings),
        "notes": list(case.notes),
    }


def result_record(r: Result) -> dict[str, Any]:
    """One result."""
    solar = r.solar
    return {
        "conditions": r.conditions.name,
        "method": r.conditions.method,
        "outcome": r.outcome,
        "warnings": list(r.warnings),
        "U_W_m2K": r.U,
        "U_declared_W_m2K": r.U_declared,
        "flux_to_room_W_m2": r.flux_to_room,
        "solar_factor_g": solar and solar.g,
        "solar_transmittance": solar and solar.transmittance,
        "solar_reflectance_out": solar and solar.reflectance_out,
        "light_transmittance": solar and solar.light_transmittance,
        "light_reflectance_out": solar and solar.light_reflectance_out,
        "light_reflectance_in": solar and solar.light_reflectance_in,
        "uv_transmittance": solar and solar.uv_transmittance,
        "secondary_factor_q_i": solar and solar.q_i,
        "panes": [_pane(r, k) for k in range(len(r.panes))],
        "gaps": [_gap(g) for g in r.gaps],
        "films": _films(r.films),
        "budget": _budget(r.budget),
        "fogging": [fog_record(f) for f in r.fog],
        "environment_out_C": celsius(r.environment_out),
        "environment_in_C": celsius(r.environment_in),
        "largest_imbalance_W_m2": r.largest_imbalance,
        "iterations": r.iterations,
        "tilt_deg": round(math.degrees(r.tilt), 9),
        "set": r.conditions.set_name,
        "overridden": list(r.conditions.overridden),
        "defaults": list(r.conditions.defaults),
        "notes": [*r.notes, r.conditions.source],
    }


def celsius(kelvin: float | None) -> float | None:
    """Degrees Celsius of a temperature in kelvin."""
    return None if kelvin is None else kelvin - CELSIUS


def _pane(r: Result, k: int) -> dict[str, Any]:
    pane: PaneResult = r.panes[k]
    coatings = r.solar.coating_absorptance[k] if r.solar else (None, None)
    return {
        "face_out_C": celsius(pane.face_out),
        "face_in_C": celsius(pane.face_in),
        "solar_absorptance": pane.solar_absorptance,
        "coating_out_solar_absorptance": coatings[0],
        "coating_in_solar_absorptance": coatings[1],
        "absorbed_W_m2": pane.absorbed,
        "inward_flowing_fraction": pane.inward_fraction,
    }


def _gap(gap: GapResult) -> dict[str, Any]:
    return {
        "width_mm": 1e3 * gap.width,
        "mean_C": celsius(gap.mean),
        "rayleigh": gap.rayleigh,
        "nusselt": gap.nusselt,
        "convection_W_m2K": gap.convection_coefficient,
        "radiation_W_m2K": gap.radiation_coefficient,
        "flux_W_m2": gap.flux,
        "convection_W_m2": gap.convection,
        "radiation_W_m2": gap.radiation,
    }


def _films(films: Films) -> dict[str, Any]:
    return {
        "outdoor_convection_W_m2K": films.outdoor_convection,
        "outdoor_radiation_W_m2K": films.outdoor_radiation,
        "indoor_convection_W_m2K": films.indoor_convection,
        "indoor_radiation_W_m2K": films.indoor_radiation,
    }


def _budget(budget: Budget | None) -> dict[str, Any] | None:
    if budget is None:
        return None
    return {
        "transmitted_W_m2": budget.transmitted,
        "absorbed_inward_W_m2": budget.absorbed_inward,
        "temperature_difference_W_m2": budget.temperature_difference,
        "net_W_m2": budget.net,
    }


def fog_record(fog: Fog) -> dict[str, Any]:
    """One face and its fogging."""
    percent = None if fog.limit_humidity is None else 100.0 * fog.limit_humidity
    return {
        "face": fog.face,
        "where": fog.where,
        "temperature_C": celsius(fog.temperature),
        "starts_at_humidity_pct": percent,
        "humidity_pct": None if fog.humidity is None else 100.0 * fog.humidity,
        "point_C": celsius(fog.point),
        "point_kind": None if fog.point is None else ("frost" if fog.frost else "dew"),
        "margin_K": fog.margin,
    }
