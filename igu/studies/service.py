"""The whole picture of one unit in service: fogging, bowing, thermal fracture, ageing, tolerances."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from igu.laws.atmosphere import standard_altitude
from igu.model.case import Case
from igu.model.conditions import Conditions
from igu.model.study_tables import Loads
from igu.ratings.declaration import declared_unit
from igu.ratings.rate import rate
from igu.ratings.remarks import VENTED_GAS, loses_gas
from igu.ratings.result import Result
from igu.studies.ageing import Ageing, ageing
from igu.studies.bowing import Bowed, bow, permanent_load, pillared, snow_across, standard_loads
from igu.studies.conditions import cold_and_sun
from igu.studies.fracture import Fracture, InterlayerHeat, fractures, interlayer_heat
from igu.studies.tolerance import Tolerances, tolerances

CAUTION = (
    "An estimate for design: local codes and a licensed engineer decide on strength, climatic load, overhead glazing "
    "and thermal fracture."
)


@dataclass(frozen=True)
class Service:
    """What the service study found; `results` are the solves it rests on. `bowed`: the case's own conditions, with each
    of its winds where `loads.wind` is given, the coldest of them with its snow where `loads.snow` is, what lasts
    (altitude and weight), and the standards' climatic loads, by the site's own altitude where the case has it; empty
    for a unit with an infrared-transparent sheet, which is no glass plate."""

    results: tuple[Result, ...]
    bowed: tuple[Bowed, ...]
    gaps_in_knowledge: tuple[str, ...]
    fractures: tuple[Fracture, ...]
    interlayers: tuple[InterlayerHeat, ...]
    ageing: Ageing | None
    tolerances: Tolerances | None


def service(case: Case) -> Service:
    """Everything of one case.

    Raises
    ------
    SolveError    A balance or the pressure of the sealed gas did not close.
    """
    unit = case.unit
    states = [c for c in case.conditions if c.method == "iso-15099"]
    results = tuple(rate(unit, c) for c in states)
    cold, sun = cold_and_sun(case, None, None)
    return Service(
        results=results,
        bowed=() if any(pane.is_sheet for pane in unit.panes) else tuple(_bowed(case, results)),
        gaps_in_knowledge=tuple(_not_worked_out(case, results)),
        fractures=fractures(unit, results, case.frame),
        interlayers=interlayer_heat(unit, results),
        ageing=ageing(unit, cold, upright=declared_unit(unit, case.conditions)),
        tolerances=_tolerances(case, cold, sun),
    )


def _not_worked_out(case: Case, results: tuple[Result, ...]) -> list[str]:
    """What a reader could take for harmless because nothing is said of it."""
    found = []
    if any(pillared(case.unit)):
        found.append(
            "Panes beside an evacuated gap: the atmosphere bends the glass between the pillars and presses it on them "
            "for good, and a temperature difference bends a unit with bonded edges; these stresses are not worked out."
        )
    if any(pane.is_sheet for pane in case.unit.panes):
        found.append("Bowing and tolerances of a unit with an infrared-transparent sheet are not worked out.")
    if loses_gas(case.unit):
        found.append(f"{VENTED_GAS} Ageing is not worked out.")
    dark = [r.conditions.name for r in results if r.conditions.sun > 0.0 and r.solar is None]
    if dark:
        found.append(
            f"The state in the sun under {', '.join(dark)}: a pane is not known in the sun; gas pressure, bowing and "
            "fracture are worked out for the dark only."
        )
    loads = case.loads
    if loads and loads.snow and not snow_across(case.unit, loads.snow):
        found.append("loads.snow_Pa does not act: the outdoor face is vertical or looks down.")
    if loads and (loads.winds or loads.snow) and not results:
        found.append("loads are worked out under conditions by ISO 15099 only, and the case has none.")
    return found


def _bowed(case: Case, results: tuple[Result, ...]) -> list[Bowed]:
    found: list[Bowed] = []
    loads = case.loads or Loads()
    factors = loads.factors
    for r in results:
        absorptance = r.solar.absorptance if r.solar else None
        for wind in (0.0, *loads.winds):
            found += bow(case.unit, r.conditions, absorptance, wind=wind, factors=factors)
    if loads.snow and results and snow_across(case.unit, loads.snow):
        coldest = min((r.conditions for r in results), key=lambda c: c.outdoor_air)
        found += bow(case.unit, coldest, None, snow=loads.snow, factors=factors)
    for c in _sites([r.conditions for r in results]):
        found += permanent_load(case.unit, c, factors=factors)
    if not case.unit.sealed.vented and any(not gap.evacuated for gap in case.unit.gaps):
        for climb in site_climbs(case, results) or (None,):
            found += standard_loads(case.unit, climb=climb, factors=factors)
    return found


def site_climbs(case: Case, results: Sequence[Result]) -> tuple[float, ...]:
    """Altitude of every site above that of sealing [m], by the standard atmosphere; none unless the case says both."""
    rows = case.table.get("conditions", [])
    if not _says_height(case.table.get("sealed", {})) or not any(map(_says_height, rows)):
        return ()
    sealing = float(standard_altitude(case.unit.sealed.pressure))
    sites = _sites([r.conditions for r in results])
    return tuple(float(standard_altitude(c.pressure)) - sealing for c in sites)


def _says_height(table: Mapping[str, Any]) -> bool:
    return "altitude_m" in table or "pressure_Pa" in table


def _sites(conditions: list[Conditions]) -> list[Conditions]:
    """One condition for every site pressure."""
    return list({c.pressure: c for c in reversed(conditions)}.values())[::-1]


def _tolerances(case: Case, cold: Conditions | None, sun: Conditions | None) -> Tolerances | None:
    if any(pane.is_sheet for pane in case.unit.panes):
        return None
    upright = declared_unit(case.unit, case.conditions)
    return tolerances(case.unit, case.tolerance, cold=cold, sun=sun, upright=upright)
