"""Heat across an evacuated gap: residual gas from free molecules to continuum, and the pillars."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike
from igu.laws.constants import GAS_CONSTANT


def free_molecule_conductance(
    T: ArrayLike, *, pressure: ArrayLike, mole_mass: ArrayLike, gamma: ArrayLike, accommodation: ArrayLike
) -> Array:
    """Conductance of a gas whose molecules meet only the faces [W/(m2 K)].

        h_fm = alpha (gamma + 1)/(gamma - 1) sqrt(R / (8 pi M T)) p

    Parameters
    ----------
    T : array_like               Temperature of the gas [K]; all arguments broadcast.
    pressure : array_like        Pressure of the residual gas [Pa].
    mole_mass : array_like       [kg/mol].
    gamma : array_like           Ratio of the specific heats cp/cv [-].
    accommodation : array_like   Combined accommodation coefficient of both faces [-], in (0, 1].

    Validity: mean free path much longer than the gap; small difference of temperature.
    Source: M. Knudsen; form as in R. J. Corruccini, Vacuum 7-8 (1959) 19. About 1.18 W/(m2 K) per pascal for
    air at 293 K.
    """
    speed = np.sqrt(GAS_CONSTANT / (8 * np.pi * np.asarray(mole_mass) * np.asarray(T)))
    g = np.asarray(gamma)
    return np.asarray(accommodation * (g + 1) / (g - 1) * speed * pressure)


def residual_gas_conductance(
    T: ArrayLike,
    *,
    pressure: ArrayLike,
    mole_mass: ArrayLike,
    gamma: ArrayLike,
    accommodation: ArrayLike,
    conductivity: ArrayLike,
    gap: ArrayLike,
) -> Array:
    """Conductance of the gas in an evacuated gap, at any pressure [W/(m2 K)].

        1/h = 1/h_fm + d/k

    Parameters
    ----------
    T, pressure, mole_mass, gamma, accommodation   As in `free_molecule_conductance`.
    conductivity : array_like   Of the gas at ordinary pressure [W/(m K)].
    gap : array_like            Width d of the gap [m].

    Validity: joins the two limits, exact in both; no convection. A pressure of zero gives zero.
    Source: interpolation between the limits after F. S. Sherman, Proc. 3rd Int. Symp. Rarefied Gas Dynamics,
    vol. 2 (1963) 228.
    """
    free = free_molecule_conductance(
        T, pressure=pressure, mole_mass=mole_mass, gamma=gamma, accommodation=accommodation
    )
    return _in_series(free, np.asarray(conductivity) / np.asarray(gap))


def pillar_array_conductance(
    *,
    pitch: ArrayLike,
    radius: ArrayLike,
    height: ArrayLike,
    pillar_conductivity: ArrayLike,
    glass_conductivity: ArrayLike,
) -> Array:
    """Conductance of a square array of cylindrical pillars between two panes [W/(m2 K)].

        1/C = p^2/(2 k_glass a) + p^2 h/(k_pillar pi a^2)

    The first term is the spreading in the glass, 1/(4 k a) on either side, and so covers both panes; the
    second is the pillar itself.

    Parameters
    ----------
    pitch : array_like                 Distance p of neighbouring pillars [m]; all arguments broadcast.
    radius : array_like                Radius a of a pillar [m].
    height : array_like                Height h of a pillar, the width of the gap [m].
    pillar_conductivity : array_like   [W/(m K)].
    glass_conductivity : array_like    [W/(m K)]; of unlike panes the harmonic mean, which is exact here.

    Validity: radius much smaller than pitch and glass thickness.
    Source: spreading term as in R. E. Collins, T. M. Simko, Solar Energy 62 (1998) 189; disc on a half space,
    closed form.
    """
    a, area = np.asarray(radius), np.asarray(pitch) ** 2
    spreading = 2 * np.asarray(glass_conductivity) * a / area
    pillar = np.asarray(pillar_conductivity) * np.pi * a**2 / (np.asarray(height) * area)
    return _in_series(spreading, pillar)


def _in_series(conductance: Array, following: Array) -> Array:
    """Two conductances in series; the first may be zero."""
    return np.asarray(conductance * following / (conductance + following))
