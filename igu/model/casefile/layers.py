"""[unit], [[layer]] and [sealed]: the unit as built."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from itertools import pairwise
from typing import Any

from igu.errors import ModelError
from igu.laws.atmosphere import standard_pressure
from igu.laws.constants import ATMOSPHERE, CELSIUS
from igu.model.casefile.faults import listed, nearest, shown, shown_key
from igu.model.casefile.keys import KEYS, LAYER_KINDS, LAYER_SIGNS, limit
from igu.model.casefile.names import Names
from igu.model.casefile.section import Section, as_number, quoted_near
from igu.model.catalogue import GLASS_EMISSIVITY, CoatingEntry, Library, MeasuredPane
from igu.model.gases import SHARE_TOLERANCE, is_gas_name, known_gases
from igu.model.unit import EDGE_WORKS, TREATMENTS, Gap, Pane, Pillars, Ply, Sealed, Unit, Vacuum

MOST_LAYERS = 39
"""Twenty panes; more is a slip of the pen."""

USUAL_GAPS = (3.0, 100.0)
"""Widths of a gap that holds gas [mm] beyond which a slip is likely; common practice, no source."""

LOW_EMISSIVITY = 0.2
"""Coatings of lower emissivity seldom last in the open air; hard ones, which do, come down to about 0.15. Common
practice, no source."""

Fill = tuple[tuple[str, float], ...]


@dataclass(frozen=True)
class Parts:
    """What is known of a unit in spite of its faults: the number of its panes and its tilt [rad] (None: not known), and
    those of its panes and gaps that read."""

    count: int | None
    tilt: float | None
    panes: tuple[Pane, ...]
    gaps: tuple[Gap, ...]


def read_unit(root: Section, names: Names) -> tuple[Unit | None, Parts]:
    """The unit of the case, None where its tables have faults, and what is known of it."""
    before = len(root.faults)
    size = _size(root)
    tilt = size.get("tilt", math.pi / 2.0 if len(root.faults) == before else None)
    count, layers = _layers(root, names)
    sealed = _sealed(root)
    panes = tuple(layer for layer in layers if isinstance(layer, Pane))
    gaps = tuple(layer for layer in layers if isinstance(layer, Gap))
    parts = Parts(count, tilt, panes, gaps)
    if len(root.faults) > before or not layers or None in layers:
        return None, parts
    return Unit(panes, gaps, sealed=sealed, **size), parts


def _layers(root: Section, names: Names) -> tuple[int | None, list[Pane | Gap | None]]:
    """The number of panes, None where it cannot be told; and the layers in their order, None for one with a fault."""
    rows = root.rows("layer")
    if "layer" not in root or root.table["layer"] == []:
        root.missing("layer", "tables headed [[layer]]: pane, gap, pane, gap, …, pane")
    if len(rows) > MOST_LAYERS:
        root.fault("layer", given=f"{len(rows)} layers", allowed=f"at most {MOST_LAYERS}")
        return None, []
    sections = [_layer_section(root, key, row) for key, row in rows]
    before = len(root.faults)
    _refuse_disorder(root, [key for key, _ in rows], sections)
    orderly = len(root.faults) == before and None not in sections
    last = len(sections) - 1
    layers = [
        None if section is None else _layer(section, names, first=k == 0, last=k == last)
        for k, section in enumerate(sections)
    ]
    told = bool(rows) and orderly and len(rows) == len(root.table["layer"])
    return (len(rows) + 1) // 2 if told else None, layers


def read_fill(section: Section, key: str, value: Any) -> Fill | None:
    """A fill: the name of a gas, or shares by name that sum to one."""
    if isinstance(value, str):
        return ((value, 1.0),) if _is_gas(section, key, value) else None
    if not isinstance(value, Mapping) or not value:
        section.fault(key, given=shown(value), allowed="the name of a gas, or a table of shares by gas")
        return None
    known = [_is_gas(section, f"{key}.{shown_key(gas)}", gas) for gas in value]
    shares = [_share(section, f"{key}.{shown_key(gas)}", share) for gas, share in value.items()]
    good = [share for share in shares if share is not None]
    if not all(known) or len(good) < len(shares):
        return None
    if abs(math.fsum(good) - 1.0) > SHARE_TOLERANCE:
        section.fault(key, given=f"shares that sum to {math.fsum(good):.9g}", allowed="shares that sum to 1")
        return None
    return tuple((gas, share) for gas, share in zip(value, good, strict=True) if share > 0.0)


def unit_notes(root: Section, unit: Unit, library: Library) -> list[str]:
    """In words: the defaults the unit took, and where the data of each part come from."""
    given = root.table.get("unit", {})
    notes = [
        f"{what} by default"
        for key, what in (("width_m", "width 1 m"), ("height_m", "height 1 m"), ("tilt_deg", "vertical (tilt 90°)"))
        if key not in given
    ]
    if "sealed" not in root and unit.gaps:
        notes.append("sealed at 20 °C and 101325 Pa by default")
    if any(GLASS_EMISSIVITY in (pane.emissivity_out, pane.emissivity_in) for pane in unit.panes):
        notes.append(f"bare glass: hemispherical emissivity {GLASS_EMISSIVITY} (EN 673:2011)")
    if any(ply.kind == "interlayer" for pane in unit.panes for ply in pane.plies):
        notes.append("interlayers: taken as clear and optically joined to the glass")
    parts = dict.fromkeys(part for pane in unit.panes for part in library.parts(pane))
    return [*notes, *parts]


def _size(root: Section) -> dict[str, float]:
    section = root.section("unit", "unit")
    if section is None:
        return {}
    size = {name: section.number(f"{name}_m") for name in ("width", "height")}
    tilt = section.number("tilt_deg")
    size["tilt"] = None if tilt is None else math.radians(tilt)
    return {name: value for name, value in size.items() if value is not None}


def _sealed(root: Section) -> Sealed:
    section = root.section("sealed", "sealed")
    if section is None:
        return Sealed()
    temperature = section.number("temperature_C")
    dew_point = section.number("fill_dew_point_C")
    leakage = section.number("leakage_pct_a")
    return Sealed(
        temperature=293.15 if temperature is None else temperature + CELSIUS,
        pressure=site_pressure(section),
        vented=section.flag("vented", False),
        fill_dew_point=None if dew_point is None else dew_point + CELSIUS,
        leakage=None if leakage is None else leakage / 100.0,
    )


def site_pressure(section: Section) -> float:
    """Pressure [Pa] as given, or of the altitude given, or the standard atmosphere."""
    section.exclusive("altitude_m", "pressure_Pa")
    altitude, pressure = section.number("altitude_m"), section.number("pressure_Pa")
    if altitude is not None:
        return float(standard_pressure(altitude))
    return ATMOSPHERE if pressure is None else pressure


def _layer_section(root: Section, key: str, row: Mapping[str, Any]) -> Section | None:
    """The layer read as the kind that its keys tell; None, and a fault, where they tell none or several."""
    kinds = [kind for kind in LAYER_KINDS if kind in row]
    if len(kinds) == 1:
        return root.below(row, key, f"layer.{kinds[0]}")
    if kinds:
        root.fault(key, given=f"{listed(kinds)} together", allowed=f"one of {listed(LAYER_KINDS)}")
        return None
    return _guessed_section(root, key, row)


def _guessed_section(root: Section, key: str, row: Mapping[str, Any]) -> Section | None:
    """A layer without the key that says what it is, read by a key that nearly is it or by the others it has, so that
    the rest of it is judged too."""
    if "interlayer" in row:
        allowed = "among the plies of a pane: plies = [{ glass = … }, { interlayer = … }, { glass = … }]"
        root.fault(f"{key}.interlayer", given="an interlayer as a layer", allowed=allowed)
        return None
    known = {word for kind in LAYER_KINDS for word in KEYS[f"layer.{kind}"]}
    unknown = [word for word in row if word not in known]
    for word in unknown:
        if kind := nearest(str(word), LAYER_KINDS):
            root.fault(f"{key}.{shown_key(word)}", given="an unknown key", allowed=listed(LAYER_KINDS), near=kind)
            return root.below({kind if k == word else k: v for k, v in row.items()}, key, f"layer.{kind}")
    told = next((LAYER_SIGNS[word] for word in row if word in LAYER_SIGNS), None)
    if told:
        return root.below(row, key, f"layer.{told}")
    given = f"unknown keys: {listed(map(shown_key, unknown))}" if unknown else f"none of {listed(LAYER_KINDS)}"
    root.fault(key, given=given, allowed=f"one of {listed(LAYER_KINDS)}")
    return None


def _refuse_disorder(root: Section, keys: Sequence[str], sections: Sequence[Section | None]) -> None:
    """Panes and gaps alternate, panes at both ends; a layer of unknown kind is passed over."""
    gap = [None if s is None else s.kind == "layer.gap_mm" for s in sections]
    for (before, this), key in zip(pairwise(gap), keys[1:], strict=True):
        if before is not None and before == this:
            what, other = ("gap", "pane") if this else ("pane", "gap")
            root.fault(key, given=f"a {what} after a {what}", allowed=f"a {other}: panes and gaps alternate")
    for key in dict.fromkeys(keys[k] for k in (0, -1) if gap and gap[k]):
        root.fault(key, given="a gap", allowed="a pane: a unit starts and ends with a pane")


def _layer(section: Section, names: Names, *, first: bool, last: bool) -> Pane | Gap | None:
    if section.kind == "layer.gap_mm":
        return _gap(section)
    if section.kind == "layer.sheet":
        sheet: Pane | None = _named(section, names, "sheet")
        return sheet
    if section.kind == "layer.pane":
        return _measured(section, names, first=first, last=last)
    return _glass(section, names, first=first, last=last)


def _named(section: Section, names: Names, kind: str) -> Any:
    name = names.find(section, kind, kind)
    return None if name is None else names.entries[kind][name]


def _measured(section: Section, names: Names, *, first: bool, last: bool) -> Pane | None:
    finish = _finish(section)
    coated_face = section.choice("coated_face", ("in", "out"))
    if "pane" not in section:
        section.missing("pane", "the name of a pane")
    entry: MeasuredPane | None = _named(section, names, "pane")
    if entry is None:
        return None
    if coated_face is None and entry.two_sided and "coated_face" not in section:
        section.missing("coated_face", '"in" or "out": the two sides of this pane differ')
    if entry.inside_only and ((first and coated_face == "out") or (last and coated_face == "in")):
        section.refuse("coated_face", "its coated side only facing a sealed gap")
    coated_open = {"out": first, "in": last}[coated_face or "in"]
    if coated_open and not entry.told and entry.pane.emissivity_in < LOW_EMISSIVITY:
        _warn_of_open_air(section, "coated_face", f"pane.{section.table['pane']}", entry.pane.emissivity_in)
    return entry.turned(coated_face or "in", **finish)


def _glass(section: Section, names: Names, *, first: bool, last: bool) -> Pane | None:
    plies = _plies(section, names) if section.kind == "layer.plies" else [_ply(section, names, "glass")]
    coating_out = _coating(section, names, "coating_out", open_air=first)
    coating_in = _coating(section, names, "coating_in", open_air=last)
    finish = _finish(section)
    good = [ply for ply in plies if ply is not None]
    if len(good) < len(plies) or not good:
        return None
    return names.library().pane(good, coating_out=coating_out, coating_in=coating_in, **finish)


def _finish(section: Section) -> dict[str, str]:
    return {
        "treatment": section.choice("treatment", TREATMENTS) or TREATMENTS[0],
        "edge_work": section.choice("edge_work", EDGE_WORKS) or EDGE_WORKS[0],
    }


def _coating(section: Section, names: Names, key: str, *, open_air: bool) -> str | None:
    name = names.find(section, key, "coating")
    if name is not None and open_air and names.entries["coating"][name].inside_only:
        section.refuse(key, "a coating for the open air: this one may only face a sealed gap")
        return None
    if name is not None and open_air:
        entry: CoatingEntry = names.entries["coating"][name]
        if not entry.told and entry.emissivity < LOW_EMISSIVITY:
            _warn_of_open_air(section, key, f"coating.{name}", entry.emissivity)
    return name


def _warn_of_open_air(section: Section, key: str, definition: str, emissivity: float) -> None:
    section.warn(
        key,
        f"a coating of emissivity {emissivity:g} in the open air: few last there; inside_only in [{definition}] says "
        "whether this one does (false) or not (true)",
    )


def _plies(section: Section, names: Names) -> list[Ply | None]:
    rows = section.rows("plies")
    if not rows:
        section.refuse("plies", "a list of plies, as { glass = …, thickness_mm = … }")
    kinds = ["interlayer" if "interlayer" in row else "glass" for _, row in rows]
    plies = [
        _ply(section.below(row, key, f"plies.{kind}"), names, kind)
        for (key, row), kind in zip(rows, kinds, strict=True)
    ]
    if kinds and ("interlayer" in (kinds[0], kinds[-1]) or ("glass", "glass") in pairwise(kinds)):
        section.fault("plies", given=listed(kinds), allowed="glass at both ends and interlayers between the glasses")
        return [None]
    return plies


def _ply(section: Section, names: Names, kind: str) -> Ply | None:
    thickness = section.number("thickness_mm", required=True)
    if kind not in section:
        section.missing(kind, f"the name of a {kind}")
    name = names.find(section, kind, kind)
    if thickness is None or name is None:
        return None
    entry = names.entries[kind][name]
    return Ply(name, thickness * 1e-3, entry.conductivity, kind=kind, density=entry.density)


def _gap(section: Section) -> Gap | None:
    width = section.number("gap_mm", required=True)
    section.exclusive("gas", "vacuum")
    vacuum, pillars = _vacuum(section), _pillars(section)
    if "vacuum" not in section and "pillars" in section:
        section.fault("pillars", given="in a gap that is not evacuated", allowed="with vacuum only")
    fill = read_fill(section, "gas", section.table["gas"]) if "gas" in section else None
    if "gas" not in section and "vacuum" not in section:
        section.missing("gas", "the name of a gas, or a table of shares by gas")
    if width is not None and "vacuum" not in section and not USUAL_GAPS[0] <= width <= USUAL_GAPS[1]:
        section.warn("gap_mm", f"{width:g} mm is an unusual gap; usual are {USUAL_GAPS[0]:g} to {USUAL_GAPS[1]:g} mm")
    if width is None or (fill is None and vacuum is None):
        return None
    return Gap(width * 1e-3, fill or (("air", 1.0),), vacuum, pillars)


def _vacuum(section: Section) -> Vacuum | None:
    inner = section.section("vacuum", "vacuum")
    if inner is None:
        return None
    pressure = inner.number("pressure_Pa", required=True)
    gas = inner.text("gas") or "air"
    accommodation = inner.number("accommodation")
    if not _is_gas(inner, "gas", gas) or pressure is None:
        return None
    return Vacuum(pressure, gas, 1.0 if accommodation is None else accommodation)


def _pillars(section: Section) -> Pillars | None:
    inner = section.section("pillars", "pillars")
    if inner is None:
        return None
    values = [inner.number(key, required=True) for key in KEYS["pillars"]]
    pitch, radius, conductivity = values
    if pitch is None or radius is None or conductivity is None:
        return None
    try:
        return Pillars(pitch * 1e-3, radius * 1e-3, conductivity)
    except ModelError:
        inner.refuse("pitch_mm", f"more than twice the radius, above {2 * radius:g} mm")
        return None


def _is_gas(section: Section, key: str, name: str) -> bool:
    """Whether the name can be a fill; a fault where it cannot."""
    if is_gas_name(name):
        return True
    known = [gas.name for gas in known_gases()]
    allowed = f"{listed(known)}, or a fluid of CoolProp that stays a gas"
    section.fault(key, given=shown(name), allowed=allowed, near=quoted_near(name, known))
    return False


def _share(section: Section, key: str, value: Any) -> float | None:
    share = as_number(value)
    if share is None or not limit("gap", "gas").allows(share):
        section.fault(key, given=shown(value), allowed=f"a share, {limit('gap', 'gas').words}")
        return None
    return share
