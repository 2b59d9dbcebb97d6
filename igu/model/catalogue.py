"""What can be named: glasses, coatings, interlayers, measured panes and named sets of conditions.

`catalogue()` is what ships with the package; a case file adds its own definitions to a copy.
"""

from __future__ import annotations

import tomllib
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace
from functools import lru_cache
from typing import Any

from igu.data import data_text
from igu.errors import all_of, require, require_choice
from igu.model.optics import FilmOptics, PaneDescription, turned
from igu.model.unit import Pane, Ply

GLASS_EMISSIVITY = 0.837
"""Hemispherical emissivity of bare soda-lime glass, EN 673:2011."""
GLASS_CONDUCTIVITY = 1.0
"""W/(m K), soda-lime glass, EN 673:2011."""


@dataclass(frozen=True)
class GlassEntry:
    """A glass: conductivity [W/(m K)], hemispherical emissivity of its bare face, density [kg/m3] or None,
    and the name of the optical constants it has, None where it is not known in the sun."""

    name: str
    conductivity: float = GLASS_CONDUCTIVITY
    emissivity: float = GLASS_EMISSIVITY
    density: float | None = None
    optics: str | None = None
    label: str = ""
    source: str = ""


@dataclass(frozen=True)
class CoatingEntry:
    """A coating: hemispherical emissivity, whether only a sealed gap may hold it, and the name of the film stack
    that stands for it in the sun, None where it is not known there; `told`: whether its definition says where it may
    go, rather than leaving that out."""

    name: str
    emissivity: float
    inside_only: bool = False
    optics: str | None = None
    label: str = ""
    source: str = ""
    told: bool = True


@dataclass(frozen=True)
class InterlayerEntry:
    """An interlayer of laminated panes: conductivity [W/(m K)], density [kg/m3]."""

    name: str
    conductivity: float
    density: float | None = None
    label: str = ""
    source: str = ""


@dataclass(frozen=True)
class MeasuredPane:
    """A finished pane known by data; `pane` has its coated side turned indoors. `inside_only` says that the coated
    side may only face a sealed gap; `two_sided` that the sides differ, so that a case must say which way it stands;
    `told` as of coatings."""

    pane: Pane
    inside_only: bool = False
    two_sided: bool = True
    told: bool = True

    def turned(self, coated_face: str, *, treatment: str, edge_work: str) -> Pane:
        """The pane as built in, its coated side turned "in" or "out"."""
        p = replace(self.pane, treatment=treatment, edge_work=edge_work)
        if coated_face == "in":
            return p
        optics = None if p.optics is None else turned(p.optics)
        return replace(p, emissivity_out=p.emissivity_in, emissivity_in=p.emissivity_out, optics=optics)


@dataclass(frozen=True)
class ConditionSet:
    """A named set: the keys a [[conditions]] table would have, and where they come from."""

    name: str
    keys: Mapping[str, Any]
    label: str
    source: str


@dataclass(frozen=True)
class Library:
    """Everything that can be named, by kind and name, and the panes made from it."""

    glasses: Mapping[str, GlassEntry] = field(default_factory=dict)
    coatings: Mapping[str, CoatingEntry] = field(default_factory=dict)
    interlayers: Mapping[str, InterlayerEntry] = field(default_factory=dict)
    panes: Mapping[str, MeasuredPane] = field(default_factory=dict)
    condition_sets: Mapping[str, ConditionSet] = field(default_factory=dict)

    def glass_ply(self, name: str, thickness: float) -> Ply:
        """A sheet of this glass, thickness [m]."""
        require_choice("glass", name, self.glasses)
        entry = self.glasses[name]
        return Ply(name, thickness, entry.conductivity, density=entry.density)

    def interlayer_ply(self, name: str, thickness: float) -> Ply:
        """A sheet of this interlayer, thickness [m]."""
        require_choice("interlayer", name, self.interlayers)
        entry = self.interlayers[name]
        return Ply(name, thickness, entry.conductivity, kind="interlayer", density=entry.density)

    def pane(
        self,
        plies: Sequence[Ply],
        *,
        coating_out: str | None = None,
        coating_in: str | None = None,
        treatment: str = "annealed",
        edge_work: str = "as-cut",
    ) -> Pane:
        """A pane of plies of this library, outdoors first, with coatings of this library on its faces."""
        plies = all_of("plies of a pane", plies, Ply)
        require(len(plies) > 0, "plies of a pane: given none; allowed one or more")
        pane = Pane(
            plies=plies,
            emissivity_out=self._emissivity(plies[0], coating_out),
            emissivity_in=self._emissivity(plies[-1], coating_in),
            coating_out=coating_out,
            coating_in=coating_in,
            optics=self._optics(plies, coating_out, coating_in),
            treatment=treatment,
            edge_work=edge_work,
        )
        return replace(pane, source="; ".join(dict.fromkeys(self.parts(pane))))

    def recoated(self, pane: Pane, *, coating_out: str | None, coating_in: str | None) -> Pane:
        """The same plies with these coatings; a pane known by its data, or a sheet, has none to change."""
        require(pane.name is None, f'"{pane.name}" is known as a whole: its coating cannot be changed')
        return self.pane(
            pane.plies,
            coating_out=coating_out,
            coating_in=coating_in,
            treatment=pane.treatment,
            edge_work=pane.edge_work,
        )

    def may_carry(self, coating: str, face: int, *, faces: int, sealed: bool = True) -> bool:
        """Whether the coating may be on this face of a unit of so many faces, with gaps sealed or vented."""
        return (sealed and 1 < face < faces) or not self.coatings[coating].inside_only

    def _emissivity(self, ply: Ply, coating: str | None) -> float:
        if coating is not None:
            require_choice("coating", coating, self.coatings)
            return self.coatings[coating].emissivity
        require(ply.kind == "glass", "the outer plies of a pane are glass")
        return self.glasses[ply.material].emissivity

    def _optics(self, plies: Sequence[Ply], out: str | None, in_: str | None) -> PaneDescription | None:
        """What is known of it in the sun: None as soon as one part is not known. Interlayers count as clear."""
        sheets = [(self.glasses[p.material].optics, p.thickness) for p in plies if p.kind == "glass"]
        films = [self.coatings[name].optics if name else "" for name in (out, in_)]
        known = tuple((glass, thickness) for glass, thickness in sheets if glass is not None)
        if len(known) < len(sheets) or None in films:
            return None
        return FilmOptics(plies=known, coating_out=films[0] or None, coating_in=films[1] or None)

    def parts(self, pane: Pane) -> tuple[str, ...]:
        """Where the data of each part of a pane come from, a sentence each."""
        if pane.name is not None:
            return (pane.source,)
        coatings = [f"coating {name}: {self.coatings[name].source}" for name in _coatings(pane)]
        return (*(f"{ply.kind} {ply.material}: {self._entry(ply).source}" for ply in pane.plies), *coatings)

    def _entry(self, ply: Ply) -> GlassEntry | InterlayerEntry:
        return self.glasses[ply.material] if ply.kind == "glass" else self.interlayers[ply.material]


def _coatings(pane: Pane) -> list[str]:
    return [name for name in (pane.coating_out, pane.coating_in) if name is not None]


@lru_cache(maxsize=1)
def catalogue() -> Library:
    """What ships with the package."""
    return Library(
        glasses={name: _glass(name, row) for name, row in _data("glasses").items()},
        coatings={name: _coating(name, row) for name, row in _data("coatings").items()},
        interlayers={name: _interlayer(name, row) for name, row in _data("interlayers").items()},
        condition_sets={name: _condition_set(name, row) for name, row in _data("conditions").items()},
    )


def _data(name: str) -> dict[str, Any]:
    return tomllib.loads(data_text(f"{name}.toml"))


def _glass(name: str, row: Mapping[str, Any]) -> GlassEntry:
    return GlassEntry(
        name,
        row["conductivity_W_mK"],
        row["emissivity"],
        row.get("density_kg_m3"),
        optics=name,
        label=row["label"],
        source=row["source"],
    )


def _coating(name: str, row: Mapping[str, Any]) -> CoatingEntry:
    return CoatingEntry(
        name, row["emissivity"], row["inside_only"], optics=name, label=row["label"], source=row["source"]
    )


def _interlayer(name: str, row: Mapping[str, Any]) -> InterlayerEntry:
    return InterlayerEntry(name, row["conductivity_W_mK"], row["density_kg_m3"], row["label"], row["source"])


def _condition_set(name: str, row: Mapping[str, Any]) -> ConditionSet:
    keys = {key: value for key, value in row.items() if key not in ("label", "source")}
    return ConditionSet(name, keys, row["label"], row["source"])
