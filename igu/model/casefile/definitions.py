"""[glass.NAME], [coating.NAME], [pane.NAME] and [sheet.NAME], of the case file or of a file it uses."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from pathlib import Path
from typing import Any

from igu.errors import ModelError
from igu.laws.emissivity import hemispherical_emissivity
from igu.model.casefile.faults import shown
from igu.model.casefile.files import read_toml
from igu.model.casefile.names import KINDS, Names
from igu.model.casefile.optics import measured_optics, sheet_optics
from igu.model.casefile.section import Section, quoted_near
from igu.model.catalogue import (
    GLASS_CONDUCTIVITY,
    GLASS_EMISSIVITY,
    CoatingEntry,
    GlassEntry,
    MeasuredPane,
    catalogue,
)
from igu.model.unit import Pane, Ply

Reader = Callable[[Section, str], Any]


def read_definitions(root: Section, names: Names) -> None:
    """Define what this file defines."""
    readers: dict[str, Reader] = {"glass": _glass, "coating": _coating, "pane": _pane, "sheet": _sheet}
    for kind in KINDS:
        for name, section in root.named(kind):
            names.define(section, kind, name, _sound(readers[kind], section, name))


def read_used_files(root: Section, names: Names, folder: Path) -> None:
    """Define what the files under `use` define."""
    for name in root.texts("use") or ():
        path = folder / name
        table = read_toml(path, root.faults, wanted=f"a file of definitions in TOML ({root.file}: use)")
        names.complete &= table is not None
        if table is not None:
            used = Section(table, kind="use", path="", file=str(path), faults=root.faults)
            used.text("title")
            read_definitions(used, names)


def _sound(reader: Reader, section: Section, name: str) -> Any:
    """What the reader makes of the table, None where that added a fault."""
    before = len(section.faults)
    entry = reader(section, name)
    return entry if len(section.faults) == before else None


def _glass(section: Section, name: str) -> GlassEntry | None:
    emissivity = _emissivity(section)
    optics = _model(section, catalogue().glasses)
    return GlassEntry(
        name,
        conductivity=section.number("conductivity_W_mK") or GLASS_CONDUCTIVITY,
        emissivity=GLASS_EMISSIVITY if emissivity is None else emissivity,
        density=section.number("density_kg_m3"),
        optics=optics,
        source=f"defined in {section.file}" + (f", optical constants of {optics}" if optics else ""),
    )


def _coating(section: Section, name: str) -> CoatingEntry | None:
    emissivity = _emissivity(section)
    optics = _model(section, catalogue().coatings)
    inside_only = section.flag("inside_only", optics is not None and catalogue().coatings[optics].inside_only)
    if emissivity is None:
        if "emissivity" not in section and "normal_emissivity" not in section:
            section.missing("emissivity", "emissivity or normal_emissivity")
        return None
    source = f"emissivity defined in {section.file}"
    if optics:
        source += f"; in the sun as {optics}: {catalogue().coatings[optics].source}"
    told = "inside_only" in section or optics is not None
    return CoatingEntry(name, emissivity, inside_only, optics, source=source, told=told)


def _model(section: Section, known: Mapping[str, Any]) -> str | None:
    """Name of the catalogue's entry whose optical data stand for this one."""
    name = section.text("optics")
    if name is not None and name not in known:
        section.refuse("optics", f"one of the catalogue: {', '.join(known)}", quoted_near(name, known))
        return None
    return name


def _emissivity(section: Section, side: str = "") -> float | None:
    """Hemispherical emissivity, given as such or by the normal one; None where neither is given."""
    key, normal_key = f"emissivity{side}", f"normal_emissivity{side}"
    section.exclusive(key, normal_key)
    given, normal = section.number(key), section.number(normal_key)
    return given if normal is None else float(hemispherical_emissivity(normal))


def _pane(section: Section, name: str) -> MeasuredPane | None:
    ply = _ply(section, name)
    sides = [_emissivity(section, side) for side in ("_coated_side", "_glass_side")]
    coated, glass = (GLASS_EMISSIVITY if value is None else value for value in sides)
    bare = _taken_as_bare(section)
    optics, alike = measured_optics(section)
    inside_only = section.flag("inside_only", False)
    if ply is None:
        return None
    pane = Pane(
        (ply,), emissivity_out=glass, emissivity_in=coated, optics=optics, name=name,
        source=f"{name}: data of {section.file}{bare}",
    )  # fmt: skip
    return MeasuredPane(pane, inside_only, two_sided=coated != glass or not alike, told="inside_only" in section)


def _taken_as_bare(section: Section) -> str:
    """What the note says of sides without an emissivity; a warning where the coated side is one."""
    without = [side for side in ("coated", "glass") if not any(
        f"{key}_{side}_side" in section for key in ("emissivity", "normal_emissivity"))]  # fmt: skip
    if not without:
        return ""
    sides = " and ".join(f"{side} side" for side in without)
    if "coated" in without:
        section.warn(
            "emissivity_coated_side",
            f"not given; {sides} taken as bare glass, {GLASS_EMISSIVITY}: U is too high if there is a coating",
        )
    return f"; emissivity of {sides} {GLASS_EMISSIVITY} by default"


def _sheet(section: Section, name: str) -> Pane | None:
    ply = _ply(section, name)
    emissivity = section.number("emissivity", required=True)
    transmittance = section.number("longwave_transmittance", required=True)
    optics = sheet_optics(section)
    if ply is None or emissivity is None or transmittance is None:
        return None
    try:
        return Pane(
            (ply,), emissivity, emissivity, transmittance, optics=optics, name=name,
            source=f"{name}: data of {section.file}",
        )  # fmt: skip
    except ModelError as error:
        section.fault("longwave_transmittance", given=shown(transmittance), allowed=str(error))
        return None


def _ply(section: Section, name: str) -> Ply | None:
    thickness = section.number("thickness_mm", required=True)
    conductivity = section.number("conductivity_W_mK", required=section.kind == "sheet")
    density = section.number("density_kg_m3")
    if thickness is None or (conductivity is None and section.kind == "sheet"):
        return None
    return Ply(name, thickness * 1e-3, conductivity or GLASS_CONDUCTIVITY, kind=section.kind, density=density)
