"""What a case asks of the studies: comparison, sweep, search, tolerances, frame and loads. SI inside.

Conditions are named as the case names them; None leaves the choice to the study. Layers count from 1, outdoors first.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any, NamedTuple

QUANTITIES = {
    "U_W_m2K": True,
    "U_en673_W_m2K": True,
    "solar_factor_g": True,
    "solar_transmittance": True,
    "secondary_factor_q_i": True,
    "light_transmittance": False,
    "selectivity": False,
    "room_face_C": False,
    "fog_humidity_pct": False,
    "hottest_pane_C": True,
    "thickness_mm": True,
    "mass_kg_m2": True,
}
"""Quantities a sweep or a search may judge by, and whether less is better where the case does not say."""

COLUMNS = (
    *(name for name in QUANTITIES if name not in ("thickness_mm", "mass_kg_m2")),
    "inward_flowing_fraction",
    "deflection_mm",
    "fracture_margin_K",
)
"""Columns a comparison may have."""

DISTRIBUTIONS = ("uniform", "normal")


@dataclass(frozen=True)
class Compare:
    """Coating positions: faces to try and coatings to put there (None: the unit's own), conditions, columns."""

    faces: tuple[int, ...] | None = None
    coatings: tuple[str, ...] | None = None
    cold: str | None = None
    sun: str | None = None
    columns: tuple[str, ...] | None = None


@dataclass(frozen=True)
class Vary:
    """One quantity varied: the keys that take each value together, the values as the case file has them.

    `ranged` tells a range from a list of choices; only a range can be refined between its values.
    """

    keys: tuple[str, ...]
    values: tuple[Any, ...]
    ranged: bool = False


@dataclass(frozen=True)
class Sweep:
    """One or two quantities varied; `of` lists the quantities shown, the first being the one judged by."""

    vary: tuple[Vary, ...]
    of: tuple[str, ...] = ("U_W_m2K",)
    minimise: bool = True
    cold: str | None = None
    sun: str | None = None


@dataclass(frozen=True)
class PaneChoices:
    """What may stand in the place of a pane, one sheet of it: glasses by name, thicknesses [m], and the treatment."""

    glasses: tuple[str, ...]
    thicknesses: tuple[float, ...]
    treatment: str = "annealed"


@dataclass(frozen=True)
class GapChoices:
    """What may stand in the place of a gap: widths [m], fills (mole fraction by gas name)."""

    widths: tuple[float, ...]
    fills: tuple[tuple[tuple[str, float], ...], ...]


@dataclass(frozen=True)
class CaseLayer:
    """A layer of the case, by its number, held as it is: its plies, treatment and coatings, or its gas or vacuum."""

    number: int


@dataclass(frozen=True)
class Targets:
    """What a make-up has to meet; None: no limit. SI, kelvin."""

    U_max: float | None = None
    U_en673_max: float | None = None
    g_min: float | None = None
    g_max: float | None = None
    light_transmittance_min: float | None = None
    light_transmittance_max: float | None = None
    selectivity_min: float | None = None
    room_face_min: float | None = None
    hottest_pane_max: float | None = None
    thickness_max: float | None = None
    mass_max: float | None = None


@dataclass(frozen=True)
class Seek:
    """A search. A make-up of n panes takes the first 2n - 1 of `layers`, for each n of `panes`; at most
    `coatings_max` of its faces in `faces` (None: every face where the coating may be) carry one of `coatings`, besides
    those that layers of the case bring along."""

    panes: tuple[int, ...]
    layers: tuple[PaneChoices | GapChoices | CaseLayer, ...]
    coatings: tuple[str, ...] = ()
    faces: tuple[int, ...] | None = None
    coatings_max: int = 1
    targets: Targets = field(default_factory=Targets)
    rank_by: str = "U_W_m2K"
    minimise: bool = True
    keep: int = 10
    cold: str | None = None
    sun: str | None = None


@dataclass(frozen=True)
class Tolerance:
    """Half-widths of what is uncertain. None: the study's own, by the standards' figures.

    thickness, gap [m]; fill: lower and upper deviation of the main gas's mole fraction [-]; emissivity [-];
    conductivity and films as a share of the value [-].
    """

    thickness: float | None = None
    gap: float | None = None
    fill: tuple[float, float] | None = None
    emissivity: float | None = None
    conductivity: float | None = None
    outdoor_film: float | None = None
    indoor_film: float | None = None
    samples: int | None = None
    seed: int | None = None
    distribution: str = "uniform"


@dataclass(frozen=True)
class Frame:
    """The edge: its temperature [K] where known, and the linear edge loss [W/(m K)] where given."""

    edge: float | None = None
    edge_loss: float | None = None


class Factors(NamedTuple):
    """Partial factors on variable actions (wind, snow, climate) and on permanent ones (weight, altitude); 1: the loads
    as given."""

    variable: float = 1.0
    permanent: float = 1.0


AS_GIVEN = Factors()
"""No partial factors."""


@dataclass(frozen=True)
class Loads:
    """Loads on the unit besides its own: wind pressure [Pa], positive towards the room, one or several that act each by
    itself; snow on the plan area [Pa], acting downwards on the outdoor pane; and the partial factors of all loads."""

    wind: float | tuple[float, ...] | None = None
    snow: float | None = None
    factors: Factors = AS_GIVEN

    @property
    def winds(self) -> tuple[float, ...]:
        """Every wind pressure that is not zero [Pa]."""
        given = self.wind if isinstance(self.wind, tuple) else (self.wind or 0.0,)
        return tuple(pressure for pressure in given if pressure)
