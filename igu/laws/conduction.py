"""Heat conduction through plies in series."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike


def series_conductance(*, thickness: ArrayLike, conductivity: ArrayLike) -> Array:
    """Conductance of plies in perfect contact [W/(m2 K)].

        1/h = sum_j d_j / k_j

    Parameters
    ----------
    thickness : array_like       Ply thicknesses [m], plies along the first axis.
    conductivity : array_like    Ply conductivities [W/(m K)], the same shape.

    Returns
    -------
    ndarray                      Conductance [W/(m2 K)], the first axis summed away.

    Validity: one-dimensional conduction, no contact resistance between plies.
    Source: Fourier's law; ISO 15099:2003, laminated layers.
    """
    resistance = np.asarray(thickness, float) / np.asarray(conductivity, float)
    return np.asarray(1.0 / resistance.sum(axis=0))
