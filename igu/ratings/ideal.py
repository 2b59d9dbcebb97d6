"""How far a unit is from what no glass can beat: the most selective glass of its light, and the ideal winter glass."""

from __future__ import annotations

from dataclasses import dataclass, replace

from igu.model.makeups import MakeUps
from igu.model.optics import solar_range
from igu.model.unit import Unit
from igu.ratings import en673
from igu.ratings.result import Solar


@dataclass(frozen=True)
class Bounds:
    """Selectivity tau_v/g of a unit and the greatest that any glass of its tau_v can have [-]; its g against the 1 of a
    glass that passes all the sun, and the U [W/(m2 K)] of the same gaps without any long-wave exchange (EN 673 state),
    None without gaps and where EN 673 does not cover the unit."""

    selectivity: float
    selectivity_bound: float
    g: float
    winter_U: float | None


def bounds(unit: Unit, solar: Solar) -> Bounds | None:
    """Bounds of a unit in the sun; None where its g or light transmittance is not known or not above zero."""
    if not solar.g or not solar.light_transmittance:
        return None
    return Bounds(
        selectivity=solar.light_transmittance / solar.g,
        selectivity_bound=selectivity_bound(solar.light_transmittance),
        g=solar.g,
        winter_U=_winter_u(unit),
    )


def selectivity_bound(light_transmittance: float) -> float:
    """Greatest tau_v/g of any glass of this light transmittance, for the weights of this package [-].

    The glass passes the wavelengths with most light per heat until its light transmittance is reached, reflects the
    rest and absorbs nothing, so that g is what it transmits.
    """
    return light_transmittance / solar_range(light_transmittance)[0]


def _winter_u(unit: Unit) -> float | None:
    if not unit.gaps or en673.excluded(unit) is not None:
        return None
    stacks = en673.reference_stacks(MakeUps.of([unit]))
    return float(en673.u_values(replace(stacks, exchange=0.0 * stacks.exchange))[0])
