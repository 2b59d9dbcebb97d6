"""The frozen answer to one unit under one set of conditions. SI units; None: not asked for, not defined, not known."""

from __future__ import annotations

from dataclasses import dataclass

from igu.model.conditions import Conditions
from igu.ratings.fogging import Fog


@dataclass(frozen=True)
class PaneResult:
    """One pane: face temperatures [K], share of the sun it absorbs [-], heat it absorbs [W/m2], and the share of a
    little more absorbed heat that flows inward, N_i [-] (the tangent at this state)."""

    face_out: float | None
    face_in: float | None
    solar_absorptance: float | None
    absorbed: float | None
    inward_fraction: float | None


@dataclass(frozen=True)
class GapResult:
    """One gap: width [m], mean temperature [K], Ra and Nu [-], coefficients [W/(m2 K)] and fluxes [W/m2] of convection
    (and conduction, or residual gas and pillars) and of long-wave radiation; whole flux positive towards the room."""

    width: float
    mean: float | None
    rayleigh: float | None
    nusselt: float | None
    convection_coefficient: float | None
    radiation_coefficient: float | None
    convection: float | None
    radiation: float | None
    flux: float | None


@dataclass(frozen=True)
class Films:
    """Coefficients of the open faces [W/(m2 K)]."""

    outdoor_convection: float | None
    outdoor_radiation: float | None
    indoor_convection: float | None
    indoor_radiation: float | None


@dataclass(frozen=True)
class Solar:
    """The unit in the sun. Band values [-]: solar transmittance, reflectance outdoors, absorptance of every pane; light
    transmittance and reflectance to both sides; UV transmittance. `g` and `q_i` None where no sun was asked for."""

    transmittance: float
    reflectance_out: float
    absorptance: tuple[float, ...]
    coating_absorptance: tuple[tuple[float | None, float | None], ...]
    light_transmittance: float | None
    light_reflectance_out: float | None
    light_reflectance_in: float | None
    uv_transmittance: float | None
    g: float | None = None
    q_i: float | None = None


@dataclass(frozen=True)
class Budget:
    """What the room gains at this instant [W/m2], positive towards the room: sun transmitted, absorbed heat flowing in
    (secant: flux with sun less flux without), heat by the temperature difference (flux without sun), and their sum."""

    transmitted: float
    absorbed_inward: float
    temperature_difference: float
    net: float


@dataclass(frozen=True)
class Result:
    """Everything one solve of one unit says. `U` [W/(m2 K)] and the environmental temperatures [K] it refers to
    belong to the dark state, other temperatures and fluxes to the state with the sun or heat of the conditions; `tilt`
    [rad] is the position they hold for; `largest_imbalance` [W/m2]."""

    conditions: Conditions
    outcome: str
    warnings: tuple[str, ...]
    notes: tuple[str, ...]
    tilt: float
    U: float | None
    U_declared: float | None
    flux_to_room: float | None
    panes: tuple[PaneResult, ...]
    gaps: tuple[GapResult, ...]
    films: Films
    solar: Solar | None
    budget: Budget | None
    fog: tuple[Fog, ...]
    environment_out: float | None
    environment_in: float | None
    largest_imbalance: float | None
    iterations: int | None
