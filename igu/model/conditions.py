"""The surroundings a unit is solved under, and the method they belong to."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

from igu.errors import require, require_choice, require_kind, require_number
from igu.laws.constants import ATMOSPHERE, CELSIUS
from igu.laws.longwave import radiant_temperature
from igu.model.gases import GAS_PROPERTY_SETS
from igu.model.unit import Unit

METHODS = ("iso-15099", "en-673", "en-410")

FIXED = ("en-673", "en-410")
"""Methods whose reference state is their own."""

TEMPERATURE, FILM, HUMIDITY = (150.0, 400.0, "K"), (0.0, 1000.0, "W/(m2 K)"), (0.0, 1.0, "as a share, 0.5 for 50 %")

RANGES = {
    "outdoor_air": TEMPERATURE,
    "indoor_air": TEMPERATURE,
    "outdoor_radiant": TEMPERATURE,
    "indoor_radiant": TEMPERATURE,
    "sky": TEMPERATURE,
    "ground": TEMPERATURE,
    "edge": TEMPERATURE,
    "outdoor_convection": FILM,
    "indoor_convection": FILM,
    "sun": (0.0, 1500.0, "W/m2"),
    "incidence": (0.0, math.pi / 2.0, "rad, 60° being math.pi/3"),
    "diffuse_share": (0.0, 1.0, ""),
    "pressure": (3.0e4, 1.2e5, "Pa"),
    "indoor_humidity": HUMIDITY,
    "outdoor_humidity": HUMIDITY,
    "tilt": (0.0, math.pi / 2.0, "rad"),
}
"""Range and unit of every number."""

NEEDED = ("outdoor_air", "indoor_air", "outdoor_convection", "sun", "incidence", "diffuse_share", "pressure")
"""Numbers that may not be None."""


@dataclass(frozen=True)
class Conditions:
    """One set of surroundings. Temperatures [K], coefficients [W/(m2 K)], irradiance [W/m2], angles [rad],
    pressure [Pa], humidities [-, over water].

    `indoor_convection` None: natural convection is computed. Radiant temperatures None: equal to the air's; `sky` with
    `ground` excludes `outdoor_radiant`. `absorbed` (one per pane) excludes `sun`. `tilt` is the position a fixed method
    rates the unit in, None: the unit's own. `edge` is the temperature of the panes' covered edges, None: not known.
    `set_name` is the named set the keys came from and `overridden` the keys that departed from it; `defaults` lists in
    words every default that was taken.
    """

    name: str
    method: str = "iso-15099"
    outdoor_air: float = CELSIUS
    indoor_air: float = 293.15
    outdoor_convection: float = 20.0
    indoor_convection: float | None = None
    outdoor_radiant: float | None = None
    sky: float | None = None
    ground: float | None = None
    indoor_radiant: float | None = None
    sun: float = 0.0
    incidence: float = 0.0
    diffuse_share: float = 0.0
    absorbed: tuple[float, ...] | None = None
    pressure: float = ATMOSPHERE
    gas_properties: str = "iso-15099"
    indoor_humidity: float | None = None
    outdoor_humidity: float | None = None
    tilt: float | None = None
    edge: float | None = None
    set_name: str | None = None
    overridden: tuple[str, ...] = ()
    defaults: tuple[str, ...] = ()
    source: str = ""

    def __post_init__(self) -> None:
        require_kind("Conditions.name", self.name, str)
        require_choice("Conditions.method", self.method, METHODS)
        require_choice("Conditions.gas_properties", self.gas_properties, sorted(GAS_PROPERTY_SETS))
        for name, (low, high, unit) in RANGES.items():
            value = getattr(self, name)
            if value is not None or name in NEEDED:
                require_number(f"Conditions.{name}", value, low, high, unit)
        if self.absorbed is not None:
            listed = isinstance(self.absorbed, tuple | list)
            require(
                listed, f"Conditions.absorbed: given {self.absorbed!r:.60}; allowed a tuple, a number for each pane"
            )
            object.__setattr__(self, "absorbed", tuple(self.absorbed))
            for k, heat in enumerate(self.absorbed, 1):
                require_number(f"Conditions.absorbed, pane {k}", heat, 0.0, 1500.0, "W/m2")
        require(self.absorbed is None or self.sun == 0.0, "absorbed heat and sun exclude each other")
        require(
            self.outdoor_radiant is None or self.sky is None,
            "an outdoor radiant temperature and a sky temperature exclude each other",
        )
        require((self.sky is None) == (self.ground is None), "sky and ground temperatures go together")
        require(self.tilt is None or self.method in FIXED, f"a position of its own: under {' and '.join(FIXED)} only")

    def placed(self, unit: Unit) -> Unit:
        """The unit in the position these conditions rate it in."""
        return unit if self.tilt is None else replace(unit, tilt=self.tilt)

    def outdoor_radiant_temperature(self, tilt: float) -> float:
        """What the outdoor face of a unit of this tilt [rad] sees [K]."""
        if self.sky is not None and self.ground is not None:
            return float(radiant_temperature(sky=self.sky, ground=self.ground, tilt=tilt))
        return self.outdoor_air if self.outdoor_radiant is None else self.outdoor_radiant

    @property
    def indoor_radiant_temperature(self) -> float:
        """What the room-side face sees [K]."""
        return self.indoor_air if self.indoor_radiant is None else self.indoor_radiant
