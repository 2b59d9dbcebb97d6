"""Design strength of glass by load duration, and the stress of a warm centre against a cold edge."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike
from igu.laws.plate import YOUNG

EXPANSION = 9.0e-6
"""Thermal expansion of soda-lime glass [1/K]. GOST R 54170 [seen]."""


def duration_factor(seconds: ArrayLike) -> Array:
    """Load duration factor k_mod = 0.663 t^(-1/16) [-], t in hours, at most 1. Source: EN 16612:2019 [memory]."""
    hours = np.asarray(seconds, float) / 3600.0
    return np.minimum(0.663 * hours ** (-1.0 / 16.0), 1.0)


def design_strength(
    *,
    annealed: ArrayLike,
    characteristic: ArrayLike,
    duration: ArrayLike,
    edge: ArrayLike,
    surface: ArrayLike,
    prestress: ArrayLike,
    gamma_annealed: ArrayLike,
    gamma_prestress: ArrayLike,
) -> Array:
    """Design bending strength of glass [Pa].

        f_gd = k_e k_mod k_sp f_gk / gamma_A + k_v (f_bk - f_gk) / gamma_v

    Parameters
    ----------
    annealed, characteristic : array_like    f_gk of annealed glass and f_bk of the glass as treated [Pa].
    duration, edge, surface, prestress       k_mod (`duration_factor`), k_e, k_sp and k_v [-].
    gamma_annealed, gamma_prestress          Material factors [-].

    Validity: the fatigue of glass under lasting load is in k_mod; the characteristic strength is none.
    Source: EN 16612:2019, 8.1 [memory].
    """
    fatigue = np.asarray(edge) * np.asarray(duration) * np.asarray(surface) * np.asarray(annealed)
    locked = np.asarray(prestress) * (np.asarray(characteristic) - np.asarray(annealed))
    return np.asarray(fatigue / np.asarray(gamma_annealed) + locked / np.asarray(gamma_prestress))


def factored_load(load: ArrayLike, permanent: ArrayLike, *, variable: ArrayLike, lasting: ArrayLike) -> Array:
    """Design value of a load of which a part is permanent [Pa].

        gamma_Q (q - g) + gamma_G g,   gamma_G = 1 where the permanent part relieves the other; never less than q

    Parameters
    ----------
    load, permanent : array_like      Whole load q and its permanent part g, as given [Pa].
    variable, lasting : array_like    Partial factors gamma_Q and gamma_G, from 1 [-].

    Validity: effects that follow the load linearly. Where the variable part is the relieving one, the permanent part
    alone is worse, and is to be judged as a load of its own.
    Source: EN 1990:2002, 6.4.3.2, without combination factors [memory].
    """
    whole, part = np.asarray(load, float), np.asarray(permanent, float)
    varying = np.asarray(variable) * (whole - part)
    ways = np.array(np.broadcast_arrays(varying + np.asarray(lasting) * part, varying + part, whole))
    return np.asarray(np.take_along_axis(ways, np.abs(ways).argmax(axis=0)[None], axis=0)[0], float)


def edge_stress(difference: ArrayLike, *, young: float = YOUNG, expansion: float = EXPANSION) -> Array:
    """Tension at a cold edge under a warm centre, about E alpha dT [Pa], dT [K]; a bound for a straight narrow edge.

    Fracture is judged by differences of temperature; this is what a permissible difference means as a stress.
    Source: thermoelasticity, a free plate with a narrow cold border.
    """
    return np.asarray(young * expansion * np.asarray(difference, float))
