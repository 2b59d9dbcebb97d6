"""Sealed gaps: gas pressure and bowing of the panes, in the exact and in the standards' linear form (docs/equations.md,
eq. 16 to 19)."""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from igu.arrays import Array, ArrayLike, BoolArray
from igu.errors import SolveError

PRESSURE_PER_KELVIN = 340.0
"""Isochoric pressure per kelvin of gap temperature [Pa/K]. EN 16612:2019, DIN 18008-1 [memory]."""

PRESSURE_PER_METRE = 12.0
"""Isochoric pressure per metre of altitude [Pa/m]. EN 16612:2019, DIN 18008-1 [memory]."""

REFERENCE_PRESSURE = 1.0e5
"""Air pressure in the linear form [Pa]. DIN 18008-1 [memory]."""

CLOSED = 1.0e-6
"""Largest misfit of a gap's gas law at the solution [Pa]."""

_STEPS = 60
_LARGEST_FALL = 0.7
"""A Newton step may take this share of a gap's pressure at most: below zero waits a second root without meaning."""


class Bowing(NamedTuple):
    """Gap pressures (n - 1, N) [Pa], the load on every pane (n, N) [Pa] and its mean deflection [m], both positive
    towards the room."""

    pressure: Array
    load: Array
    deflection: Array


def gap_pressures(
    *,
    width: Array,
    compliance: Array,
    amount: Array,
    outdoor: ArrayLike,
    indoor: ArrayLike,
    own_load: ArrayLike = 0.0,
    fixed: BoolArray | None = None,
    vented: BoolArray | None = None,
) -> Bowing:
    """Equilibrium of sealed gas and bowing panes, for any number of coupled gaps.

        p_k (W_k + v_k+1 - v_k) = W_k A_k,   A_k = P_0 T_k / T_0
        v_i = kappa_i (p_i-1 - p_i + s_i),    p_0 outdoors, p_n indoors

    The equations are the slope of a convex energy, so exactly one state has all pressures and volumes positive; that
    one is found. A gap of fixed width (an evacuated gap on its pillars) obeys v_k+1 = v_k instead: its two panes move
    as one, their stiffnesses add, and its "pressure" is what the pillars carry. A vented gap has p_k = A_k.

    Parameters
    ----------
    width : (n - 1, N)          Width W as sealed [m].
    compliance : (n, N)         Mean deflection per load, kappa [m/Pa]; 0 is a rigid pane, not beside a fixed gap.
    amount : (n - 1, N)         Pressure A the gas would have at its width as sealed [Pa]; of a vented gap the pressure
                                of the air it breathes.
    outdoor, indoor : (N,)      Pressures on the two sides, wind included [Pa].
    own_load : (n, N)           Load on each pane besides [Pa], its weight, positive towards the room.
    fixed, vented : (n - 1, N)  Gaps of fixed width; gaps open to the air.

    Raises
    ------
    SolveError    The equilibrium did not close to `CLOSED`.

    Validity: small deflections. Panes of linear stiffness do not feel each other: where a centre width comes out
    at or below zero they touch, and pressures and deflections are those of panes that would pass through each other.
    Source: ideal gas law; linear plates. EN 16612:2019, annex on insulating glass units, has it linearised.
    """
    count = compliance.shape[1]
    air, room = (np.broadcast_to(np.asarray(side, float), count)[None] for side in (outdoor, indoor))
    held, open_ = (np.zeros(width.shape, bool) if which is None else which for which in (fixed, vented))
    # counted from the outdoor pressure: soft panes answer to differences far below the round-off of 100 kPa
    over = np.where(held, 0.0, amount - air)
    for _ in range(_STEPS):
        chain = np.concatenate([np.zeros_like(air), over, room - air])
        load = chain[:-1] - chain[1:] + own_load
        bent = compliance * load
        gas = np.where(held, REFERENCE_PRESSURE, air + over)
        bend = np.where(open_, 0.0, gas / width)
        misfit = bend * (bent[1:] - bent[:-1]) + np.where(held, 0.0, gas - amount)
        if np.abs(misfit).max(initial=0.0) <= CLOSED:
            return Bowing(air + over, load, bent)
        step = _newton_step(bend, np.where(held, 0.0, amount / gas), compliance, misfit)
        over = over - np.where(held, step, np.minimum(step, _LARGEST_FALL * gas))
    raise SolveError(
        f"the pressure of the sealed gaps did not settle: {np.abs(misfit).max():.2g} Pa off; "
        "check the gap widths, the panes' sizes and the sealing pressure"
    )


def _newton_step(bend: Array, own: Array, compliance: Array, misfit: Array) -> Array:
    """Pressures dp (n - 1, N) of the linearised balance, bend_k (dv_k+1 - dv_k) + own_k dp_k = misfit_k.

    With own_k = A_k / p_k in place of the volume ratio this is Newton on the convex energy, which finds its way from
    afar; the two agree at the solution.
    """
    gaps, count = misfit.shape
    matrix = np.zeros((count, gaps, gaps))
    for k in range(gaps):
        matrix[:, k, k] = bend[k] * (compliance[k] + compliance[k + 1]) + own[k]
        if k > 0:
            matrix[:, k, k - 1] = -bend[k] * compliance[k]
        if k + 1 < gaps:
            matrix[:, k, k + 1] = -bend[k] * compliance[k + 1]
    return np.asarray(np.linalg.solve(matrix, misfit.T[..., None])[..., 0].T, float)


def isochoric_pressure(*, warming: ArrayLike, pressure_rise: ArrayLike, climb: ArrayLike) -> Array:
    """Pressure difference of a gap that cannot change its volume [Pa], in the standards' linear form.

        p0 = 340 Pa/K dT - dp_met + 12 Pa/m dH

    Parameters
    ----------
    warming : array_like          Gap temperature less temperature at sealing, dT [K].
    pressure_rise : array_like    Meteorological pressure less that at sealing, dp_met [Pa].
    climb : array_like            Altitude of the site less that of sealing, dH [m].

    Source: EN 16612:2019; DIN 18008-1 [memory].
    """
    return np.asarray(
        PRESSURE_PER_KELVIN * np.asarray(warming, float)
        - np.asarray(pressure_rise, float)
        + PRESSURE_PER_METRE * np.asarray(climb, float)
    )


_CHI = (0.0857, 0.0767, 0.0676, 0.0587, 0.0501, 0.0421, 0.0350, 0.0288, 0.0237, 0.0194)


def volume_coefficient(aspect: ArrayLike) -> Array:
    """Volume coefficient chi by short over long side, linear between the table's points 0.1, 0.2 ... 1.0 [-].

    Validity: 0.1 to 1.0. The table has no more: longer plates get its last value, up to 10 % below an endless strip's.
    Source: EN 16612:2019, DIN 18008, table of chi [memory; a Navier series with nu 0.23 agrees].
    """
    return np.asarray(np.interp(np.asarray(aspect, float), np.arange(1, 11) / 10.0, _CHI))


def insulating_unit_factor(
    *, short: ArrayLike, long: ArrayLike, width: ArrayLike, outer: ArrayLike, inner: ArrayLike
) -> tuple[Array, Array]:
    """Insulating-unit factor phi [-] of a double unit and its characteristic length a* [m].

        phi = 1 / (1 + (a/a*)^4),   a* = 28.9 [s d1^3 d2^3 / ((d1^3 + d2^3) chi)]^(1/4)   (lengths in mm)

    Parameters
    ----------
    short, long : array_like           Sides of the plate [m].
    width, outer, inner : array_like   Gap and glass thicknesses [m].

    Source: EN 16612:2019, DIN 18008 [memory].
    """
    a, s = 1e3 * np.asarray(short, float), 1e3 * np.asarray(width, float)
    d1, d2 = ((1e3 * np.asarray(t, float)) ** 3 for t in (outer, inner))
    chi = volume_coefficient(np.asarray(short, float) / np.asarray(long, float))
    star = 28.9 * (s * d1 * d2 / ((d1 + d2) * chi)) ** 0.25
    return np.asarray(1.0 / (1.0 + (a / star) ** 4)), np.asarray(star * 1e-3)


def linear_gap_pressures(
    *, width: Array, compliance: Array, isochoric: Array, own_load: ArrayLike = 0.0, fixed: BoolArray | None = None
) -> Array:
    """Overpressure of every gap (n - 1, N) [Pa] in the standards' linear form, any number of gaps coupled.

        p_k + P_a (v_k+1 - v_k) / W_k = p0_k,   v_i = kappa_i (p_i-1 - p_i + s_i),   P_a = 100 kPa

    Parameters
    ----------
    width, isochoric : (n - 1, N)    Width [m] and isochoric pressure [Pa] of every gap; one gap gives phi p0.
    compliance : (n, N)              Mean deflection per load [m/Pa].
    own_load : (n, N)                Load on each pane besides [Pa], its weight, positive towards the room.
    fixed : (n - 1, N) bool          Gaps of fixed width; they carry no gas.
    """
    held = np.zeros(width.shape, bool) if fixed is None else fixed
    own, bend = np.where(held, 0.0, 1.0), REFERENCE_PRESSURE / width
    bent = compliance * np.asarray(own_load, float)
    return _newton_step(bend, own, compliance, own * isochoric - bend * (bent[1:] - bent[:-1]))
