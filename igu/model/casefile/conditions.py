"""[[conditions]]: the surroundings, plain or by a named set with what departs from it."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from typing import Any

from igu.errors import ModelError
from igu.laws.constants import CELSIUS
from igu.laws.convection import wind_convection
from igu.model.casefile.faults import listed, shown
from igu.model.casefile.keys import KEYS
from igu.model.casefile.layers import site_pressure
from igu.model.casefile.section import Section, quoted_near
from igu.model.catalogue import ConditionSet, catalogue
from igu.model.conditions import METHODS, Conditions
from igu.model.gases import GAS_PROPERTY_SETS, en673_properties, fill_curve
from igu.model.unit import Unit

ALTERNATIVES: tuple[tuple[tuple[str, ...], ...], ...] = (
    (("outdoor_convection_W_m2K",), ("wind_m_s",)),
    (("outdoor_radiant_C",), ("sky_C", "ground_C")),
    (("absorbed_W_m2",), ("sun_W_m2", "incidence_deg", "diffuse_share")),
    (("altitude_m",), ("pressure_Pa",)),
)
"""Keys that say the same thing in two ways: a table has one way only, and takes it instead of its set's."""

FIXED = ("en-673", "en-410")
"""Methods whose reference state is their own."""

UNTOUCHED = ("name", "set", "indoor_humidity_pct", "outdoor_humidity_pct")
"""Keys that may stand beside a set and leave it declared: they take no part in the heat balance."""

EN673_TILTS = (0.0, math.pi / 4.0, math.pi / 2.0)

DEFAULTS = (
    (("wind_m_s",), "outdoor convection 4 + 4 V from the wind speed (ISO 15099)", True),
    (("indoor_convection_W_m2K",), "indoor convection: natural, computed (ISO 15099)", False),
    (("outdoor_radiant_C", "sky_C"), "outdoor radiant temperature = outdoor air", False),
    (("indoor_radiant_C",), "indoor radiant temperature = indoor air", False),
    (("sun_W_m2", "absorbed_W_m2"), "no sun", False),
    (("altitude_m", "pressure_Pa"), "sea level, 101325 Pa", False),
    (("gas_properties",), "gas properties iso-15099", False),
)
"""What is said in the note: the keys, the sentence, and whether it is said where they are given or where not."""


def read_conditions(root: Section, unit: Unit | None) -> tuple[list[str], tuple[Conditions, ...]]:
    """Names of all conditions, in order, and the conditions without those that have faults."""
    sections = root.sections("conditions", "conditions")
    if "conditions" not in root or root.table["conditions"] == []:
        root.missing("conditions", "one or more tables headed [[conditions]]")
    names = [_name(section, number) for number, section in enumerate(sections, 1)]
    for k, (section, name) in enumerate(zip(sections, names, strict=True)):
        if name in names[:k]:
            section.fault("name", given=f"{shown(name)} a second time", allowed="a name of its own")
    read = [_conditions(section, name, unit) for section, name in zip(sections, names, strict=True)]
    return names, tuple(conditions for conditions in read if conditions is not None)


def _name(section: Section, number: int) -> str:
    given = section.text("name") or section.table.get("set")
    return given if isinstance(given, str) and given.strip() else f"conditions {number}"


def _conditions(section: Section, name: str, unit: Unit | None) -> Conditions | None:
    before = len(section.faults)
    named = _named_set(section)
    for alternatives in ALTERNATIVES:
        section.exclusive(*alternatives)
    method = _method(section, named)
    if method in FIXED:
        _refuse_physics(section, method)
        fields: dict[str, Any] = {}
    else:
        fields = _surroundings(_merged(section, named), unit)
    if unit is not None and ("gas_properties" in fields or "gas_properties" not in section):
        _suits(section, method, fields.get("gas_properties", "iso-15099"), unit)
    return _built(section, name, method, named, fields) if len(section.faults) == before else None


def _built(
    section: Section, name: str, method: str, named: ConditionSet | None, fields: Mapping[str, Any]
) -> Conditions | None:
    try:
        return Conditions(
            name=name,
            method=method,
            set_name=None if named is None else named.name,
            overridden=() if named is None else _departures(section, named),
            defaults=_defaults(section, method, named),
            source=f"given in {section.file}" if named is None else named.source,
            **fields,
        )
    except ModelError as error:
        section.fault("", given="conditions that do not go together", allowed=str(error))
        return None


def _named_set(section: Section) -> ConditionSet | None:
    name = section.text("set")
    sets = catalogue().condition_sets
    if name is not None and name not in sets:
        section.refuse("set", listed(sets), quoted_near(name, sets))
    return sets.get(name or "")


def _method(section: Section, named: ConditionSet | None) -> str:
    given = section.choice("method", METHODS)
    own = None if named is None else str(named.keys["method"])
    if own and given and given != own:
        section.refuse("method", f"{own}, which is the method of the set, or left out")
    return own or given or METHODS[0]


def _refuse_physics(section: Section, method: str) -> None:
    """The reference state of a standard takes no key of the surroundings."""
    for key in section.table:
        if key in KEYS["conditions"] and key not in ("name", "set", "method"):
            section.fault(key, given=f"under {method}", allowed="no such key: the standard fixes its reference state")


def _merged(section: Section, named: ConditionSet | None) -> Section:
    """The table with the keys of its set that it does not replace."""
    if named is None:
        return section
    replaced = set(section.table) | _said_otherwise(section)
    kept = {key: value for key, value in named.keys.items() if key not in replaced}
    own = {key: value for key, value in section.table.items() if key != "method"}
    return Section({**kept, **own}, kind="conditions", path=section.path, file=section.file, faults=section.faults)


def _said_otherwise(section: Section) -> set[str]:
    """Keys of a set that this table replaces by their alternative."""
    return {
        key
        for pair in ALTERNATIVES
        for own, other in (pair, pair[::-1])
        if any(k in section for k in own)
        for key in other
    }


def _departures(section: Section, named: ConditionSet) -> tuple[str, ...]:
    return tuple(key for key, value in section.table.items() if key not in UNTOUCHED and named.keys.get(key) != value)


def _surroundings(section: Section, unit: Unit | None) -> dict[str, Any]:
    """Fields of the conditions in SI, those left out not among them."""
    fields: dict[str, Any] = {
        "outdoor_air": section.number("outdoor_C", required=not _unknown_set(section)),
        "indoor_air": section.number("indoor_C", required=not _unknown_set(section)),
        "outdoor_radiant": section.number("outdoor_radiant_C"),
        "indoor_radiant": section.number("indoor_radiant_C"),
        "sky": section.number("sky_C"),
        "ground": section.number("ground_C"),
    }
    fields = {name: None if value is None else value + CELSIUS for name, value in fields.items()}
    fields |= {
        "outdoor_convection": _outdoor_convection(section),
        "indoor_convection": section.number("indoor_convection_W_m2K"),
        "sun": section.number("sun_W_m2"),
        "incidence": _scaled(section.number("incidence_deg"), math.pi / 180.0),
        "diffuse_share": section.number("diffuse_share"),
        "absorbed": _absorbed(section, unit),
        "pressure": site_pressure(section),
        "gas_properties": section.choice("gas_properties", sorted(GAS_PROPERTY_SETS)),
        "indoor_humidity": _scaled(section.number("indoor_humidity_pct"), 0.01),
        "outdoor_humidity": _scaled(section.number("outdoor_humidity_pct"), 0.01),
    }
    _sky_and_ground(section)
    return {name: value for name, value in fields.items() if value is not None}


def _unknown_set(section: Section) -> bool:
    """Whether the table names a set that nothing defines; what that would have brought is then not asked for."""
    return "set" in section and str(section.table["set"]) not in catalogue().condition_sets


def _scaled(value: float | None, factor: float) -> float | None:
    return None if value is None else value * factor


def _outdoor_convection(section: Section) -> float | None:
    wind, given = section.number("wind_m_s"), section.number("outdoor_convection_W_m2K")
    if "wind_m_s" not in section and "outdoor_convection_W_m2K" not in section and not _unknown_set(section):
        section.missing("outdoor_convection_W_m2K", "outdoor_convection_W_m2K or wind_m_s")
    return given if wind is None else float(wind_convection(wind))


def _sky_and_ground(section: Section) -> None:
    for key, other in (("sky_C", "ground_C"), ("ground_C", "sky_C")):
        if key in section and other not in section:
            section.missing(other, f"a temperature: {key} stands beside it")


def _absorbed(section: Section, unit: Unit | None) -> tuple[float, ...] | None:
    values = section.numbers("absorbed_W_m2")
    if values is not None and unit is not None and len(values) != len(unit.panes):
        allowed = f"one for each of the {len(unit.panes)} panes"
        section.fault("absorbed_W_m2", given=f"{len(values)} values", allowed=allowed)
    return values


def _suits(section: Section, method: str, gas_properties: str, unit: Unit) -> None:
    """Refuse a unit that the method or its gas properties do not cover."""
    key = "gas_properties" if method not in FIXED else "set" if "set" in section else "method"
    given = gas_properties if method not in FIXED else method
    for sentence in _objections(method, gas_properties, unit):
        section.fault(key, given=f"{shown(given)} for this unit", allowed=sentence)


def _objections(method: str, gas_properties: str, unit: Unit) -> Iterable[str]:
    fills = [dict(gap.fill) for gap in unit.gaps if not gap.evacuated]
    if method not in FIXED:
        return filter(None, (_objection(fill_curve, fill, properties=gas_properties) for fill in fills))
    checks = (
        (any(gap.evacuated for gap in unit.gaps), "for units without an evacuated gap"),
        (any(pane.is_sheet for pane in unit.panes), "for units without an infrared-transparent sheet"),
        (min(abs(unit.tilt - tilt) for tilt in EN673_TILTS) > 1e-9, "at a tilt of 90, 45 or 0 degrees"),
    )
    sentences = [f"{sentence} only" for fails, sentence in checks if fails]
    return [*sentences, *filter(None, (_objection(en673_properties, fill) for fill in fills))]


def _objection(law: Any, fill: Mapping[str, float], **how: Any) -> str | None:
    try:
        law(fill, **how)
    except ModelError as error:
        return f"what covers it: {error}"
    return None


def _defaults(section: Section, method: str, named: ConditionSet | None) -> tuple[str, ...]:
    """Every default that was taken, in words."""
    said = [] if named or "method" in section else [f"method {METHODS[0]}"]
    if method in FIXED:
        return tuple(said)
    given = {*section.table, *(named.keys if named else ())} - (_said_otherwise(section) if named else set())
    notes = [words for keys, words, if_given in DEFAULTS if any(key in given for key in keys) == if_given]
    return (*said, *notes)
