"""The quantities a study shows, ranks and limits make-ups by; each in the unit its name carries."""

from __future__ import annotations

from collections.abc import Callable, Iterable

import numpy as np

from igu.arrays import Array, ArrayLike
from igu.laws.constants import CELSIUS
from igu.laws.humidity import fogging_humidity
from igu.model.conditions import Conditions
from igu.model.makeups import MakeUps
from igu.model.study_tables import QUANTITIES
from igu.ratings.en673 import upright_u_values
from igu.ratings.figures import Figures

Reading = Callable[[MakeUps, Figures, Array], Array]


def readings(
    makeups: MakeUps, figures: Figures, *, room_air: ArrayLike, names: Iterable[str] = QUANTITIES
) -> dict[str, Array]:
    """These quantities of N make-ups, by name, (N,) each; NaN where not known. `room_air` [K] in the cold."""
    air = np.broadcast_to(np.asarray(room_air, float), makeups.size)
    return {name: _READINGS[name](makeups, figures, air) for name in names}


def room_air(cold: Conditions | None) -> float:
    """Room air temperature of the cold condition [K], NaN without one."""
    return np.nan if cold is None else cold.indoor_air


def told(cold: Conditions | None, sun: Conditions | None) -> frozenset[str]:
    """The quantities that these conditions can tell; the state of a standard has no temperatures."""
    names = ["thickness_mm", "mass_kg_m2", "U_en673_W_m2K"]
    if cold is not None:
        names += ["U_W_m2K", *(("room_face_C", "fog_humidity_pct") if cold.method == "iso-15099" else ())]
    if sun is not None:
        names += ["solar_transmittance", "light_transmittance"]
        lit = sun.method == "iso-15099" and sun.sun > 0.0
        names += ["solar_factor_g", "secondary_factor_q_i", "selectivity"] if lit or sun.method == "en-410" else []
        names += ["hottest_pane_C"] if lit else []
    return frozenset(names)


def _fog(makeups: MakeUps, figures: Figures, air: Array) -> Array:
    known = np.isfinite(figures.room_face) & np.isfinite(air)
    face = np.where(known, figures.room_face, CELSIUS)
    limit = fogging_humidity(face, air=np.where(known, air, CELSIUS))
    return np.where(known, 100.0 * np.minimum(limit, 1.0), np.nan)


def thickness(makeups: MakeUps) -> Array:
    """Whole thickness of every make-up [m], (N,)."""
    panes = np.array([p.thickness for p in makeups.panes])[makeups.pane_index].sum(axis=0)
    gaps = np.array([g.width for g in makeups.gaps])[makeups.gap_index].sum(axis=0)
    return np.asarray(panes + gaps)


def mass(makeups: MakeUps) -> Array:
    """Mass of the panes of every make-up [kg/m2], (N,), NaN where a density is not known."""
    known = [np.nan if p.mass_per_area is None else p.mass_per_area for p in makeups.panes]
    return np.asarray(np.array(known)[makeups.pane_index].sum(axis=0))


_READINGS: dict[str, Reading] = {
    "U_W_m2K": lambda m, f, air: f.U,
    "U_en673_W_m2K": lambda m, f, air: upright_u_values(m),
    "solar_factor_g": lambda m, f, air: f.g,
    "solar_transmittance": lambda m, f, air: f.direct,
    "secondary_factor_q_i": lambda m, f, air: f.secondary,
    "light_transmittance": lambda m, f, air: f.light,
    "selectivity": lambda m, f, air: f.selectivity,
    "room_face_C": lambda m, f, air: f.room_face - CELSIUS,
    "fog_humidity_pct": _fog,
    "hottest_pane_C": lambda m, f, air: f.hottest - CELSIUS,
    "thickness_mm": lambda m, f, air: 1e3 * thickness(m),
    "mass_kg_m2": lambda m, f, air: mass(m),
}
