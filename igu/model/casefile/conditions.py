"""[[conditions]]: the surroundings, plain or by a named set with what departs from it."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from typing import Any

from igu.errors import ModelError
from igu.laws.constants import CELSIUS
from igu.laws.convection import EN673_TILTS, wind_convection
from igu.model.casefile.faults import Faults, listed, shown
from igu.model.casefile.keys import KEYS
from igu.model.casefile.layers import Parts, site_pressure
from igu.model.casefile.section import Section, as_number, quoted_near
from igu.model.catalogue import ConditionSet, catalogue
from igu.model.conditions import FIXED, METHODS, Conditions
from igu.model.gases import GAS_PROPERTY_SETS, en673_properties, fill_curve

ALTERNATIVES: tuple[tuple[tuple[str, ...], ...], ...] = (
    (("outdoor_convection_W_m2K",), ("wind_m_s",)),
    (("outdoor_radiant_C",), ("sky_C", "ground_C")),
    (("absorbed_W_m2",), ("sun_W_m2", "incidence_deg", "diffuse_share")),
    (("altitude_m",), ("pressure_Pa",)),
)
"""Keys that say the same thing in two ways: a table has one way only, and takes it instead of its set's."""

UNTOUCHED = ("name", "set", "method", "indoor_humidity_pct", "outdoor_humidity_pct", "tilt_deg", "edge_C")
"""Keys that may stand beside a set without an override: they take no part in its heat balance, or are no key of it."""

LEAST_HUMIDITY = 1.0
"""A humidity up to this [%] is likely a share; common practice, no source."""

UPRIGHT = "tilt_deg = 90 in these conditions gives the vertical, declared value of a unit built otherwise"

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


def read_conditions(root: Section, parts: Parts) -> tuple[list[str], tuple[Conditions, ...]]:
    """Names of all conditions, in order, and the conditions without those that have faults."""
    sections = root.sections("conditions", "conditions")
    if "conditions" not in root or root.table["conditions"] == []:
        root.missing("conditions", "one or more tables headed [[conditions]]")
    names = [_name(section, number) for number, section in enumerate(sections, 1)]
    for k, (section, name) in enumerate(zip(sections, names, strict=True)):
        if name in names[:k]:
            section.fault("name", given=f"{shown(name)} a second time", allowed='a name of its own, name = "…"')
    read = [_conditions(section, name, parts) for section, name in zip(sections, names, strict=True)]
    return names, tuple(conditions for conditions in read if conditions is not None)


def _name(section: Section, number: int) -> str:
    given = section.text("name") or section.table.get("set")
    return given if isinstance(given, str) and given.strip() else f"conditions {number}"


def _conditions(section: Section, name: str, parts: Parts) -> Conditions | None:
    before = len(section.faults)
    named = _named_set(section)
    for alternatives in ALTERNATIVES:
        section.exclusive(*alternatives)
    method = _method(section, named)
    if method in FIXED:
        _refuse_physics(section, method)
        fields: dict[str, Any] = _position(section)
    else:
        _refuse_position(section)
        fields = _surroundings(_merged(section, named), parts.count)
    if "gas_properties" in fields or "gas_properties" not in section:
        _suits(section, method, fields.get("gas_properties", "iso-15099"), parts)
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
        if key in KEYS["conditions"] and key not in ("name", "set", "method", "tilt_deg"):
            section.fault(key, given=f"under {method}", allowed="no such key: the standard fixes its reference state")


def _position(section: Section) -> dict[str, Any]:
    """The position a standard rates the unit in, where the table gives one."""
    if "tilt_deg" not in section:
        return {}
    degrees = as_number(section.table["tilt_deg"])
    if degrees is None or degrees not in EN673_TILTS:
        section.refuse("tilt_deg", "90, 45 or 0: the positions EN 673 covers")
        return {}
    return {"tilt": math.radians(degrees)}


def _refuse_position(section: Section) -> None:
    if "tilt_deg" in section and not _unknown_set(section):
        allowed = f"under {' and '.join(FIXED)} only: the tilt of the unit holds otherwise (unit.tilt_deg)"
        section.fault("tilt_deg", given=f"under {METHODS[0]}", allowed=allowed)


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
    """Keys beside a set that make other surroundings than the set has; the same said again, or in another way, is
    none."""
    own = _alone({}, named)
    keys = [key for key in section.table if key not in UNTOUCHED]
    return tuple(key for key in keys if _alone({key: section.table[key]}, named) != own)


def _alone(table: Mapping[str, Any], named: ConditionSet) -> dict[str, Any]:
    """The surroundings of a set with this table beside it, defaults filled in."""
    section = Section(table, kind="conditions", path="", file="", faults=Faults())
    return {**vars(Conditions(name=named.name)), **_surroundings(_merged(section, named), None)}


def _surroundings(section: Section, panes: int | None) -> dict[str, Any]:
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
        "incidence": section.scaled("incidence_deg", math.pi / 180.0),
        "diffuse_share": section.number("diffuse_share"),
        "absorbed": _absorbed(section, panes),
        "pressure": site_pressure(section),
        "gas_properties": section.choice("gas_properties", sorted(GAS_PROPERTY_SETS)),
        "indoor_humidity": _humidity(section, "indoor_humidity_pct"),
        "outdoor_humidity": _humidity(section, "outdoor_humidity_pct"),
        "edge": _kelvin(section.number("edge_C")),
    }
    _sky_and_ground(section)
    return {name: value for name, value in fields.items() if value is not None}


def _kelvin(value: float | None) -> float | None:
    return None if value is None else value + CELSIUS


def _unknown_set(section: Section) -> bool:
    """Whether the table names a set that nothing defines; what that would have brought is then not asked for."""
    return "set" in section and str(section.table["set"]) not in catalogue().condition_sets


def _humidity(section: Section, key: str) -> float | None:
    percent = section.number(key)
    if percent is not None and percent <= LEAST_HUMIDITY:
        section.warn(key, f"{percent:g} % is drier than any air; the number is in per cent, as 50, not 0.5")
    return None if percent is None else percent * 0.01


def _outdoor_convection(section: Section) -> float | None:
    wind, given = section.number("wind_m_s"), section.number("outdoor_convection_W_m2K")
    if "wind_m_s" not in section and "outdoor_convection_W_m2K" not in section and not _unknown_set(section):
        section.missing("outdoor_convection_W_m2K", "outdoor_convection_W_m2K or wind_m_s")
    return given if wind is None else float(wind_convection(wind))


def _sky_and_ground(section: Section) -> None:
    for key, other in (("sky_C", "ground_C"), ("ground_C", "sky_C")):
        if key in section and other not in section:
            section.missing(other, f"a temperature: {key} stands beside it")


def _absorbed(section: Section, panes: int | None) -> tuple[float, ...] | None:
    values = section.numbers("absorbed_W_m2")
    if values is not None and panes is not None and len(values) != panes:
        allowed = f"one for each of the {panes} panes" if panes > 1 else "one, for the single pane"
        section.fault("absorbed_W_m2", given=f"{len(values)} values", allowed=allowed)
    return values


def _suits(section: Section, method: str, gas_properties: str, parts: Parts) -> None:
    """Refuse a unit that the method or its gas properties do not cover."""
    key = "gas_properties" if method not in FIXED else "set" if "set" in section else "method"
    given = gas_properties if method not in FIXED else method
    for sentence in _objections(method, gas_properties, parts):
        section.fault(key, given=f"{shown(given)} for this unit", allowed=sentence)
    if method in FIXED and "tilt_deg" not in section and not _covered(parts.tilt):
        allowed = f"at a tilt of 90, 45 or 0 degrees only; {UPRIGHT}"
        section.fault(key, given=f"{shown(given)} for this unit", allowed=allowed)


def _covered(tilt: float | None) -> bool:
    """Whether EN 673 covers a unit of this tilt [rad], or it is not known."""
    return tilt is None or min(abs(math.degrees(tilt) - degrees) for degrees in EN673_TILTS) < 1e-7


def _objections(method: str, gas_properties: str, parts: Parts) -> Iterable[str]:
    fills = [dict(gap.fill) for gap in parts.gaps if not gap.evacuated]
    if method not in FIXED:
        return filter(None, (_objection(fill_curve, fill, properties=gas_properties) for fill in fills))
    checks = (
        (any(gap.evacuated for gap in parts.gaps), "for units without an evacuated gap"),
        (any(pane.is_sheet for pane in parts.panes), "for units without an infrared-transparent sheet"),
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
