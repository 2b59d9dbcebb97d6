"""The surroundings a unit is solved under, and the method they belong to."""

from __future__ import annotations

from dataclasses import dataclass, replace

from igu.errors import require
from igu.laws.longwave import radiant_temperature
from igu.model.unit import Unit

METHODS = ("iso-15099", "en-673", "en-410")

FIXED = ("en-673", "en-410")
"""Methods whose reference state is their own."""


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
    outdoor_air: float = 273.15
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
    pressure: float = 101325.0
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
        require(self.method in METHODS, f"method {self.method!r}: one of {', '.join(METHODS)}")
        for label, value in (("outdoor", self.outdoor_air), ("indoor", self.indoor_air)):
            require(150.0 <= value <= 400.0, f"{label} air temperature {value - 273.15:g} C: -123 to 127 C")
        require(self.absorbed is None or self.sun == 0.0, "absorbed heat and sun exclude each other")
        require(
            self.outdoor_radiant is None or self.sky is None,
            "an outdoor radiant temperature and a sky temperature exclude each other",
        )
        require((self.sky is None) == (self.ground is None), "sky and ground temperatures go together")
        require(0.0 <= self.diffuse_share <= 1.0, "diffuse share: 0 to 1")
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
