"""Panes behind one another: exact sum of all reflections between them, without interference."""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from igu.arrays import Array, ArrayLike

ROUNDING = float(np.finfo(float).eps)
"""1 - R R' is held at or above this [-]: smaller differences are rounding only."""


class Combined(NamedTuple):
    """A stack of n layers: transmittance, reflectances to the front and the back, and the share every layer absorbs of
    light from the front and from the back, (n, ...)."""

    transmittance: Array
    reflectance_front: Array
    reflectance_back: Array
    absorbed_front: Array
    absorbed_back: Array


def echo(one: ArrayLike, other: ArrayLike) -> Array:
    """Sum of all passages between two faces that see each other, 1 / (1 - R R') [-].

    Two perfect mirrors (grazing light on any pane) let no light in between them: the difference is held at ROUNDING,
    so that nothing times the sum stays nothing.

    Source: sum of a geometric series (Stokes 1862).
    """
    return np.asarray(1.0 / np.maximum(1.0 - np.multiply(one, other), ROUNDING))


def thick_pane(
    *, outer: tuple[Array, Array, Array], inner: tuple[Array, Array, Array], internal: Array
) -> tuple[Array, Array, Array, Array, Array, Array, Array]:
    """A thick pane between two faces, internal reflections summed without interference.

    Parameters
    ----------
    outer, inner : (R_air, R_glass, T)    Of the outer and inner face with their films: reflectance for light from the
                                          air and from the glass, transmittance (equal both ways) [-].
    internal : ndarray                    Transmittance of the inside of the pane [-].

    Returns
    -------
    T, R_front, R_back                    Of the pane, front being the outer face [-].
    outer_front, outer_back, inner_front, inner_back
        What reaches the inner side of the two films per unit of light from the front or the back: light falling from
        the glass on the outer film for light from front and back, and on the inner film likewise [-].

    Source: sum of geometric series (Stokes 1862); energy of incoherent light.
    """
    out_air, out_glass, out_through = outer
    in_air, in_glass, in_through = inner
    passages = echo(internal * out_glass, internal * in_glass)
    inner_front = out_through * internal * passages
    outer_front = inner_front * in_glass * internal
    outer_back = in_through * internal * passages
    inner_back = outer_back * out_glass * internal
    return (
        inner_front * in_through,
        out_air + outer_front * out_through,
        in_air + inner_back * in_through,
        outer_front,
        outer_back,
        inner_front,
        inner_back,
    )


def combine_layers(transmittance: Array, reflectance_front: Array, reflectance_back: Array) -> Combined:
    """Optics of n layers behind one another, outdoors first.

        R_k.. = R_k + T_k^2 R_k+1.. / (1 - R'_k R_k+1..)
        forward flux behind layer k: F_k = F_k-1 T_k / (1 - R'_k R_k+1..), backward: F_k R_k+1..
        absorbed in k: F_k-1 (1 - T_k - R_k) + F_k R_k+1.. (1 - T_k - R'_k)

    Parameters
    ----------
    transmittance, reflectance_front, reflectance_back : (n, ...)    Of every layer alone [-].

    Returns
    -------
    Combined    Exact for layers that keep polarisation and direction; apply per wavelength and polarisation.

    Source: net-radiation (adding) method; ISO 9050:2003, 3; EN 410:2011, 5.
    """
    through, absorbed_front, front = _one_way(transmittance, reflectance_front, reflectance_back)
    _, absorbed_back, back = _one_way(transmittance[::-1], reflectance_back[::-1], reflectance_front[::-1])
    return Combined(through, front, back, absorbed_front, absorbed_back[::-1])


def _one_way(T: Array, R_front: Array, R_back: Array) -> tuple[Array, Array, Array]:
    """Transmittance, absorbed shares and reflectance for light from the front."""
    n = len(T)
    behind = np.zeros_like(T)
    for k in range(n - 2, -1, -1):
        behind[k] = R_front[k + 1] + T[k + 1] ** 2 * behind[k + 1] * echo(R_back[k + 1], behind[k + 1])
    flux = np.ones_like(T[0])
    absorbed = np.empty_like(T)
    for k in range(n):
        passed = flux * T[k] * echo(R_back[k], behind[k])
        absorbed[k] = flux * (1.0 - T[k] - R_front[k]) + passed * behind[k] * (1.0 - T[k] - R_back[k])
        flux = passed
    reflected = R_front[0] + T[0] ** 2 * behind[0] * echo(R_back[0], behind[0])
    return flux, absorbed, reflected
