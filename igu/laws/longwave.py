"""Long-wave (thermal) radiation between grey, diffuse faces."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike
from igu.laws.constants import STEFAN_BOLTZMANN


def emissive_power(T: ArrayLike, *, sigma: float = STEFAN_BOLTZMANN) -> Array:
    """Black-body emissive power, sigma T^4 [W/m2], of T [K].

    Source: Stefan-Boltzmann law.
    """
    square = np.square(np.asarray(T, float))
    return np.asarray(sigma * square * square)


def exchange_factor(eps_a: ArrayLike, eps_b: ArrayLike) -> Array:
    """Exchange factor of two parallel opaque faces [-].

        F = 1 / (1/eps_a + 1/eps_b - 1),    q = F sigma (T_a^4 - T_b^4)

    Parameters
    ----------
    eps_a, eps_b : array_like    Hemispherical emissivities [-], in (0, 1]; they broadcast.

    Validity: grey, diffuse, opaque faces wide against their distance; a gas that does not absorb.
    Source: ISO 15099:2003, long-wave exchange between opaque layers; EN 673:2011, 5.2.
    """
    return np.asarray(1.0 / (1.0 / np.asarray(eps_a, float) + 1.0 / np.asarray(eps_b, float) - 1.0))


def radiant_temperature(*, sky: ArrayLike, ground: ArrayLike, tilt: ArrayLike) -> Array:
    """Black-body temperature of what an outdoor face sees [K].

        T^4 = F T_sky^4 + (1 - F) T_ground^4,    F = (1 + cos tilt) / 2

    Parameters
    ----------
    sky, ground : array_like    Radiant temperatures [K].
    tilt : array_like           Tilt [rad]: 0 horizontal with the outdoor face up, pi/2 vertical.

    Source: ISO 15099:2003, view factor of an isotropic sky for a tilted plane.
    """
    share = (1.0 + np.cos(np.asarray(tilt, float))) / 2.0
    fourth = share * np.asarray(sky, float) ** 4 + (1.0 - share) * np.asarray(ground, float) ** 4
    return np.asarray(fourth**0.25)


def radiosities(*, emissivity: Array, transmittance: Array) -> tuple[Array, Array]:
    """What travels in each space of a stack of partly transparent sheets, per unit of emissive power.

    A stack of n sheets has n + 1 spaces, the two surroundings included, and 2n + 2 emitters: the outdoor
    surroundings, faces 1 ... 2n, the indoor surroundings (both surroundings black). With the sheet i between
    the spaces i and i + 1, its faces o and i, and rho = 1 - eps - tau on each side,

        J+_(i+1) = eps_i E_i + rho_i J-_(i+1) + tau J+_i
        J-_i     = eps_o E_o + rho_o J+_i     + tau J-_(i+1)

    Parameters
    ----------
    emissivity : (2n, N)       Hemispherical emissivity of every face [-].
    transmittance : (n, N)     Long-wave transmittance of every sheet [-].

    Returns
    -------
    forward, backward : (n + 1, 2n + 2, N)
        Radiosity towards the room and towards outdoors in each space, as coefficients of the 2n + 2
        emissive powers [-].

    Validity: grey, diffuse faces; sheets wide against their distance.
    Source: net-radiation method, e.g. Siegel & Howell, Thermal Radiation Heat Transfer; ISO 15099:2003, 5.3.
    """
    n, count = transmittance.shape
    matrix, right = _radiosity_system(emissivity, transmittance)
    solved = np.linalg.solve(matrix, right)
    forward = np.moveaxis(solved[:, : n + 1, :], 0, -1)
    backward = np.moveaxis(solved[:, n + 1 :, :], 0, -1)
    assert forward.shape == (n + 1, 2 * n + 2, count)
    return np.ascontiguousarray(forward), np.ascontiguousarray(backward)


def _radiosity_system(emissivity: Array, transmittance: Array) -> tuple[Array, Array]:
    """Matrix (N, 2n + 2, 2n + 2) and right side of the radiosity balance; unknowns J+_0.., J-_0.. ."""
    n, count = transmittance.shape
    size = 2 * n + 2
    matrix = np.broadcast_to(np.eye(size), (count, size, size)).copy()
    right = np.zeros((count, size, size))
    right[:, 0, 0] = 1.0
    right[:, size - 1, size - 1] = 1.0
    for i in range(n):
        out, inn, tau = emissivity[2 * i], emissivity[2 * i + 1], transmittance[i]
        ahead, behind = i + 1, n + 1 + i
        right[:, ahead, 2 + 2 * i] = inn
        matrix[:, ahead, n + 2 + i] = -(1.0 - inn - tau)
        matrix[:, ahead, i] = -tau
        right[:, behind, 1 + 2 * i] = out
        matrix[:, behind, i] = -(1.0 - out - tau)
        matrix[:, behind, n + 2 + i] = -tau
    return matrix, right
