"""A unit as its maker describes it: panes, gaps, how it was sealed, its size and tilt. Outdoors first."""

from __future__ import annotations

import math
from dataclasses import dataclass, field

from igu.errors import require
from igu.laws.conduction import series_conductance
from igu.model.optics import PaneDescription

TREATMENTS = ("annealed", "heat-strengthened", "toughened")
EDGE_WORKS = ("as-cut", "ground", "polished")


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
        require(0.0 < self.thickness <= 0.1, f"ply thickness {self.thickness * 1e3:g} mm: above 0 to 100 mm")
        require(0.0 < self.conductivity <= 500.0, f"conductivity {self.conductivity:g} W/(m K): above 0 to 500")


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
        require(len(self.plies) > 0, "a pane needs at least one ply")
        require(0.0 <= self.longwave_transmittance < 1.0, "longwave_transmittance: 0 to below 1")
        for side, eps in (("out", self.emissivity_out), ("in", self.emissivity_in)):
            require(0.0 < eps <= 1.0, f"emissivity {eps:g} of the {side} side: above 0 to 1")
            require(
                eps + self.longwave_transmittance <= 1.0,
                f"emissivity {eps:g} and longwave_transmittance {self.longwave_transmittance:g}: sum at most 1",
            )
        require(self.treatment in TREATMENTS, f"treatment {self.treatment!r}: one of {', '.join(TREATMENTS)}")
        require(self.edge_work in EDGE_WORKS, f"edge_work {self.edge_work!r}: one of {', '.join(EDGE_WORKS)}")

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


@dataclass(frozen=True)
class Vacuum:
    """Residual gas of an evacuated gap: pressure [Pa], gas name, combined accommodation coefficient [-]."""

    pressure: float
    gas: str = "air"
    accommodation: float = 1.0

    def __post_init__(self) -> None:
        require(0.0 <= self.pressure <= 2000.0, f"vacuum pressure {self.pressure:g} Pa: 0 to 2000")
        require(0.0 < self.accommodation <= 1.0, f"accommodation {self.accommodation:g}: above 0 to 1")


@dataclass(frozen=True)
class Pillars:
    """Square array of pillars: pitch [m], radius [m], conductivity [W/(m K)]; their height is the gap."""

    pitch: float
    radius: float
    conductivity: float

    def __post_init__(self) -> None:
        require(self.radius > 0.0, "pillar radius: above 0")
        require(self.pitch > 2.0 * self.radius, "pillar pitch: more than twice the radius")
        require(self.conductivity > 0.0, "pillar conductivity: above 0")


@dataclass(frozen=True)
class Gap:
    """A gap: width [m], and either a fill (mole fraction by gas name) or a vacuum."""

    width: float
    fill: tuple[tuple[str, float], ...] = (("air", 1.0),)
    vacuum: Vacuum | None = None
    pillars: Pillars | None = None

    def __post_init__(self) -> None:
        require(0.0 < self.width <= 0.5, f"gap {self.width * 1e3:g} mm: above 0 to 500 mm")
        shares = [share for _, share in self.fill]
        require(all(0.0 <= share <= 1.0 for share in shares), "gas shares: 0 to 1")
        require(abs(math.fsum(shares) - 1.0) <= 1e-6, f"gas shares sum to {math.fsum(shares):.7g}: must be 1")

    @property
    def evacuated(self) -> bool:
        """Whether the gap is a vacuum."""
        return self.vacuum is not None


@dataclass(frozen=True)
class Sealed:
    """State in which the gaps were closed: temperature [K] and pressure [Pa]; vented units keep ambient pressure.

    `fill_dew_point` [K] of the gas inside, None where not known; `leakage` of the gas [1/a], None: the
    standard's limit.
    """

    temperature: float = 293.15
    pressure: float = 101325.0
    vented: bool = False
    fill_dew_point: float | None = None
    leakage: float | None = None

    def __post_init__(self) -> None:
        require(200.0 <= self.temperature <= 400.0, "sealing temperature: -73 to 127 C")
        require(3.0e4 <= self.pressure <= 1.2e5, "sealing pressure: 30 to 120 kPa")


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
        require(len(self.panes) >= 1, "a unit needs at least one pane")
        require(
            len(self.gaps) == len(self.panes) - 1,
            f"{len(self.panes)} panes need {len(self.panes) - 1} gaps, not {len(self.gaps)}",
        )
        require(0.0 < self.width <= 20.0 and 0.0 < self.height <= 20.0, "width and height: above 0 to 20 m")
        require(0.0 <= self.tilt <= math.pi, "tilt: 0 to 180 degrees")

    @property
    def thickness(self) -> float:
        """Whole thickness of panes and gaps [m]."""
        return sum(p.thickness for p in self.panes) + sum(g.width for g in self.gaps)

    @property
    def mass_per_area(self) -> float | None:
        """Mass of the panes [kg/m2]; None where a density is not known."""
        masses = [pane.mass_per_area for pane in self.panes]
        return None if any(m is None for m in masses) else sum(m or 0.0 for m in masses)
