"""A unit as its maker describes it: panes, gaps, how it was sealed, its size and tilt. Outdoors first."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from igu.errors import ModelError, all_of, require, require_choice, require_kind, require_number
from igu.laws.conduction import series_conductance
from igu.laws.constants import ATMOSPHERE
from igu.model.gases import SHARE_TOLERANCE
from igu.model.optics import PaneDescription

TREATMENTS = ("annealed", "heat-strengthened", "toughened")
EDGE_WORKS = ("as-cut", "ground", "polished")
KINDS = ("glass", "interlayer", "pane", "sheet")

Fill = tuple[tuple[str, float], ...]
"""Mole fraction by gas name."""


@dataclass(frozen=True)
class Ply:
    """One sheet of a pane. `material` is a glass or interlayer name; thickness [m], conductivity [W/(m K)],
    density [kg/m3] (None where not known)."""

    material: str
    thickness: float
    conductivity: float
    kind: str = "glass"
    density: float | None = None

    def __post_init__(self) -> None:
        require_number("Ply.thickness", self.thickness, 0.0, 0.1, "m", above=True)
        require_number("Ply.conductivity", self.conductivity, 0.0, 500.0, "W/(m K)", above=True)
        require_choice("Ply.kind", self.kind, KINDS)
        if self.density is not None:
            require_number("Ply.density", self.density, 0.0, 30_000.0, "kg/m3", above=True)


@dataclass(frozen=True)
class Pane:
    """A pane, laminated pane or infrared-transparent sheet as it stands in the unit.

    Emissivities are hemispherical and belong to the faces as built (coating included). `optics` is what is known of
    it in the sun, None where nothing is; `source` says where the data come from.
    """

    plies: tuple[Ply, ...]
    emissivity_out: float
    emissivity_in: float
    longwave_transmittance: float = 0.0
    coating_out: str | None = None
    coating_in: str | None = None
    optics: PaneDescription | None = None
    treatment: str = "annealed"
    edge_work: str = "as-cut"
    name: str | None = None
    source: str = ""

    def __post_init__(self) -> None:
        object.__setattr__(self, "plies", all_of("Pane.plies", self.plies, Ply))
        require(len(self.plies) > 0, "Pane.plies: given none; allowed one or more")
        require_number("Pane.longwave_transmittance", self.longwave_transmittance, 0.0, 1.0)
        for side, eps in (("out", self.emissivity_out), ("in", self.emissivity_in)):
            require_number(f"Pane.emissivity_{side}", eps, 0.0, 1.0, above=True)
            require(
                eps + self.longwave_transmittance <= 1.0,
                f"emissivity {eps:g} and longwave_transmittance {self.longwave_transmittance:g}: sum at most 1",
            )
        require_choice("Pane.treatment", self.treatment, TREATMENTS)
        require_choice("Pane.edge_work", self.edge_work, EDGE_WORKS)

    @property
    def thickness(self) -> float:
        """Whole thickness [m]."""
        return sum(ply.thickness for ply in self.plies)

    @property
    def conductance(self) -> float:
        """Conductance from face to face [W/(m2 K)]."""
        return float(
            series_conductance(
                thickness=[p.thickness for p in self.plies], conductivity=[p.conductivity for p in self.plies]
            )
        )

    @property
    def mass_per_area(self) -> float | None:
        """Mass [kg/m2]; None where a density is not known."""
        densities = [p.density for p in self.plies]
        if any(rho is None for rho in densities):
            return None
        return sum(p.thickness * (p.density or 0.0) for p in self.plies)

    @property
    def is_sheet(self) -> bool:
        """Whether long-wave radiation passes through it."""
        return self.longwave_transmittance > 0.0


COATED_BELOW = 0.7
"""A face of lower emissivity [-] carries a coating, also where none is named."""


@dataclass(frozen=True)
class Vacuum:
    """Residual gas of an evacuated gap: pressure [Pa], gas name, combined accommodation coefficient [-]."""

    pressure: float
    gas: str = "air"
    accommodation: float = 1.0

    def __post_init__(self) -> None:
        require_number("Vacuum.pressure", self.pressure, 0.0, 2000.0, "Pa")
        require_kind("Vacuum.gas", self.gas, str)
        require_number("Vacuum.accommodation", self.accommodation, 0.0, 1.0, above=True)


@dataclass(frozen=True)
class Pillars:
    """Square array of pillars: pitch [m], radius [m], conductivity [W/(m K)]; their height is the gap."""

    pitch: float
    radius: float
    conductivity: float

    def __post_init__(self) -> None:
        require_number("Pillars.radius", self.radius, 0.0, 1.0, "m", above=True)
        require_number(
            "Pillars.pitch", self.pitch, 2.0 * self.radius, 10.0, "m, more than twice the radius", above=True
        )
        require_number("Pillars.conductivity", self.conductivity, 0.0, math.inf, "W/(m K)", above=True)


@dataclass(frozen=True)
class Gap:
    """A gap: width [m], and either a fill (mole fraction by gas name; the name of a gas stands for all of it) or a
    vacuum."""

    width: float
    fill: Fill = (("air", 1.0),)
    vacuum: Vacuum | None = None
    pillars: Pillars | None = None

    if TYPE_CHECKING:

        def __init__(
            self,
            width: float,
            fill: str | Mapping[str, float] | Sequence[tuple[str, float]] = ...,
            vacuum: Vacuum | None = None,
            pillars: Pillars | None = None,
        ) -> None: ...

    def __post_init__(self) -> None:
        require_number("Gap.width", self.width, 0.0, 0.5, "m", above=True)
        object.__setattr__(self, "fill", _shares(self.fill))
        if self.vacuum is not None:
            require_kind("Gap.vacuum", self.vacuum, Vacuum)
        if self.pillars is not None:
            require_kind("Gap.pillars", self.pillars, Pillars)
            require(self.evacuated, "Gap.pillars: given in a gap that is not evacuated; allowed with vacuum only")

    @property
    def evacuated(self) -> bool:
        """Whether the gap is a vacuum."""
        return self.vacuum is not None


def _shares(fill: object) -> Fill:
    """A fill in its form: (("argon", 0.9), ("air", 0.1)), from that, a dictionary or the name of one gas."""
    if isinstance(fill, str):
        return ((fill, 1.0),)
    pairs = tuple(fill.items()) if isinstance(fill, Mapping) else fill
    try:
        shares = tuple((name, share) for name, share in pairs)  # type: ignore[attr-defined]
    except (TypeError, ValueError):
        raise ModelError(f"Gap.fill: given {fill!r:.60}; {FILLS}") from None
    for name, share in shares:
        require(isinstance(name, str), f"Gap.fill: given {name!r:.60} as a gas; {FILLS}")
        require_number(f"Gap.fill, {name}", share, 0.0, 1.0)
    total = math.fsum(share for _, share in shares)
    require(
        abs(total - 1.0) <= SHARE_TOLERANCE,
        f"Gap.fill: given shares that sum to {total:.7g}; allowed shares that sum to 1",
    )
    require(len(dict(shares)) == len(shares), "Gap.fill: given a gas twice; allowed each once")
    return shares


FILLS = 'allowed the name of a gas, or shares by gas: {"argon": 0.9, "air": 0.1}'


@dataclass(frozen=True)
class Sealed:
    """State in which the gaps were closed: temperature [K] and pressure [Pa]; vented units keep ambient pressure.

    `fill_dew_point` [K] of the gas inside, None where not known; `leakage` of the gas [1/a], None: the
    standard's limit.
    """

    temperature: float = 293.15
    pressure: float = ATMOSPHERE
    vented: bool = False
    fill_dew_point: float | None = None
    leakage: float | None = None

    def __post_init__(self) -> None:
        require_number("Sealed.temperature", self.temperature, 200.0, 400.0, "K")
        require_number("Sealed.pressure", self.pressure, 3.0e4, 1.2e5, "Pa")
        if self.fill_dew_point is not None:
            require_number("Sealed.fill_dew_point", self.fill_dew_point, 150.0, 400.0, "K")
        if self.leakage is not None:
            require_number("Sealed.leakage", self.leakage, 0.0, 1.0, "of the gas a year")


@dataclass(frozen=True)
class Unit:
    """A unit of n panes and n - 1 gaps, outdoors first; width, height [m] along the slope; tilt [rad],
    0 horizontal with outdoors on top, pi/2 vertical."""

    panes: tuple[Pane, ...]
    gaps: tuple[Gap, ...] = ()
    width: float = 1.0
    height: float = 1.0
    tilt: float = math.pi / 2.0
    sealed: Sealed = field(default_factory=Sealed)

    def __post_init__(self) -> None:
        object.__setattr__(self, "panes", all_of("Unit.panes", self.panes, Pane))
        object.__setattr__(self, "gaps", all_of("Unit.gaps", self.gaps, Gap))
        require(len(self.panes) >= 1, "Unit.panes: given none; allowed one or more")
        require(
            len(self.gaps) == len(self.panes) - 1,
            f"Unit.gaps: given {len(self.gaps)}; allowed {len(self.panes) - 1} between {len(self.panes)} panes",
        )
        require_number("Unit.width", self.width, 0.0, 20.0, "m", above=True)
        require_number("Unit.height", self.height, 0.0, 20.0, "m", above=True)
        require_number("Unit.tilt", self.tilt, 0.0, math.pi, "rad, 90° being math.pi/2")
        require_kind("Unit.sealed", self.sealed, Sealed)

    @property
    def thickness(self) -> float:
        """Whole thickness of panes and gaps [m]."""
        return sum(p.thickness for p in self.panes) + sum(g.width for g in self.gaps)

    @property
    def mass_per_area(self) -> float | None:
        """Mass of the panes [kg/m2]; None where a density is not known."""
        masses = [pane.mass_per_area for pane in self.panes]
        return None if any(m is None for m in masses) else sum(m or 0.0 for m in masses)
