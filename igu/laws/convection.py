"""Convection in gas gaps and at open faces: published Nusselt numbers with their slopes.

Every Nusselt law returns the pair (Nu, dNu/dlnRa), because a heat balance needs both and they share their costly
powers. Tilts are in radians: pi/2 vertical, 0 horizontal and heated from below, above pi/2 heated from above; a gap
whose heat flows the other way has the mirrored tilt (see `heated_tilt`).
"""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike, BoolArray, IntArray
from igu.laws.constants import GRAVITY

VERTICAL_BREAKS = (1.0e4, 5.0e4)
"""Rayleigh numbers at which the vertical law of ISO 15099 changes its piece; the pieces do not meet there."""

PUBLISHED, LOW, MIDDLE, HIGH, STEP = -1, 0, 1, 2, 3
"""Pieces of the vertical law: the one published for the Rayleigh number at hand, the three by name, and the riser
that joins the last two."""

_VERTICAL_FACTOR = np.array([1.7596678e-10, 0.028154, 0.0673838])
_VERTICAL_POWER = np.array([2.2984755, 0.4134, 1.0 / 3.0])

STEP_WIDTH = 1.0e-6
"""Relative half width of the riser that stands for the upward step at Ra = 5e4 (see `gap_nusselt`)."""

GAP_VALIDITY = {
    "0 to 60 degrees": {"rayleigh_max": 1.0e5, "aspect_min": 20.0},
    "60 to 90 degrees": {"rayleigh_max": 2.0e7, "aspect_min": 5.0},
    "90 to 180 degrees": {"rayleigh_max": 2.0e7, "aspect_min": 5.0},
}
"""Ranges the gap laws were measured in, by the band of `gap_band`. ISO 15099:2003, 5.3.3; Hollands 1976; ElSherbiny
1982 [memory]. The vertical pieces come from data of aspects 5 to 110 and are continued beyond, without a limit: a unit
1.5 m high and 12 mm wide is beyond, and the larger the aspect the less it acts."""

_RIGHT = np.pi / 2.0
_SIXTY = np.pi / 3.0
_TINY = 1.0e-300

Pair = tuple[Array, Array]


def rayleigh_gap(
    *,
    width: ArrayLike,
    difference: ArrayLike,
    mean: ArrayLike,
    density: ArrayLike,
    viscosity: ArrayLike,
    conductivity: ArrayLike,
    heat_capacity: ArrayLike,
    gravity: float = GRAVITY,
) -> Array:
    """Rayleigh number of an ideal-gas gap [-].

        Ra = rho^2 d^3 g c_p |dT| / (T_m mu k)

    Parameters
    ----------
    width [m], difference [K], mean [K], density [kg/m3], viscosity [Pa s], conductivity [W/(m K)],
    heat_capacity [J/(kg K)] : array_like    They broadcast.

    Source: ISO 15099:2003, eq. 40-41 with beta = 1/T_m.
    """
    d, rho = np.asarray(width, float), np.asarray(density, float)
    top = gravity * d * d * d * rho * rho * np.asarray(heat_capacity, float) * np.abs(difference)
    bottom = np.asarray(mean, float) * np.asarray(viscosity, float) * np.asarray(conductivity, float)
    return np.asarray(top / bottom)


def heated_tilt(tilt: ArrayLike, *, difference: ArrayLike) -> Array:
    """Tilt of a gap as its correlation means it, by the direction of the heat [rad].

    Parameters
    ----------
    tilt : array_like          Tilt of the unit [rad], 0 horizontal with outdoors on top.
    difference : array_like    Outer minus inner face temperature [K]; positive: heat flows towards the room.

    Returns
    -------
    ndarray                    Tilt [rad], broadcast; vertical gaps, which are their own mirror image, as given.

    Source: ISO 15099:2003, 5.3.3: for heat flowing from outdoors the complement pi - tilt is used.
    """
    angle = np.asarray(tilt, float)
    if np.all(angle == _RIGHT):
        return angle
    return np.where(np.asarray(difference, float) > 0.0, np.pi - angle, angle)


def vertical_piece(rayleigh: ArrayLike) -> IntArray:
    """Index of the published piece of the vertical law a Rayleigh number lies in: LOW, MIDDLE or HIGH."""
    ra = np.asarray(rayleigh, float)
    return (ra > VERTICAL_BREAKS[0]).astype(np.intp) + (ra > VERTICAL_BREAKS[1])


def gap_band(tilt: ArrayLike) -> IntArray:
    """Which of the bands of `GAP_VALIDITY` a tilt in the correlation's sense [rad] lies in, counted from 0."""
    angle = np.asarray(tilt, float)
    return (angle >= _SIXTY).astype(np.intp) + (angle >= _RIGHT)


def gap_nusselt(rayleigh: ArrayLike, *, aspect: ArrayLike, tilt: ArrayLike, piece: IntArray | None = None) -> Pair:
    """Nusselt number of a gas gap and its slope dNu/dlnRa, by ISO 15099.

    Parameters
    ----------
    rayleigh : array_like    Rayleigh number on the gap width [-], >= 0.
    aspect : array_like      Height over width [-].
    tilt : array_like        Tilt in the correlation's sense [rad], 0 ... pi (see `heated_tilt`).
    piece : int array        Piece of the vertical law to use whatever the Rayleigh number: LOW, MIDDLE, HIGH,
                             or STEP, the riser at Ra = 5e4. Left out or PUBLISHED: the published piece.

    Returns
    -------
    Nu, slope : ndarray      Both of the broadcast shape [-].

    Validity: `GAP_VALIDITY`; beyond it the formula is continued. The riser rises from the value below to the value
    above the step over a relative width of 2e-6, so that a state on the step is a root like any other.
    Source: ISO 15099:2003, eq. 42-52; Hollands et al., J. Heat Transfer 98 (1976) 189 for tilts below 60 degrees;
    linear in the angle from 60 to 90 degrees; 1 + (Nu_90 - 1) sin(tilt) above 90 degrees.
    """
    ra, a, angle = np.broadcast_arrays(*(np.asarray(x, float) for x in (rayleigh, aspect, tilt)))
    ra = np.maximum(ra, _TINY)
    if np.all(angle == _RIGHT):
        return _vertical(ra, a, piece)
    return _by_band(ra, a, angle, piece)


def _by_band(ra: Array, aspect: Array, tilt: Array, piece: IntArray | None) -> Pair:
    nusselt, slope = np.ones(ra.shape), np.zeros(ra.shape)
    flat, steep, above = gap_band(tilt) == np.arange(3).reshape(3, *[1] * tilt.ndim)
    if flat.any():
        nusselt[flat], slope[flat] = _hollands(ra[flat], tilt[flat])
    if steep.any():
        part = None if piece is None else piece[steep]
        nusselt[steep], slope[steep] = _sixty_to_ninety(ra[steep], aspect[steep], tilt[steep], part)
    if above.any():
        part = None if piece is None else piece[above]
        vertical, rise = _vertical(ra[above], aspect[above], part)
        sine = np.sin(tilt[above])
        nusselt[above], slope[above] = 1.0 + (vertical - 1.0) * sine, rise * sine
    return nusselt, slope


def _larger(first: Pair, second: Pair) -> Pair:
    wins = second[0] > first[0]
    return np.where(wins, second[0], first[0]), np.where(wins, second[1], first[1])


def _vertical(ra: Array, aspect: Array, piece: IntArray | None) -> Pair:
    """ISO 15099:2003, eq. 48-52."""
    log_ra = np.log(ra)
    chosen = vertical_piece(ra) if piece is None else np.where(piece == PUBLISHED, vertical_piece(ra), piece)
    first = _vertical_first(log_ra, np.minimum(chosen, HIGH))
    if piece is not None and (on_step := piece == STEP).any():
        value, slope = _riser(ra[on_step])
        first[0][on_step], first[1][on_step] = value, slope
    second = 0.242 * np.exp(0.272 * (log_ra - np.log(aspect)))
    return _larger(first, (second, 0.272 * second))


def _vertical_first(log_ra: Array, piece: IntArray) -> Pair:
    power = _VERTICAL_POWER[piece]
    grown = _VERTICAL_FACTOR[piece] * np.exp(power * log_ra)
    return grown + (piece == LOW), power * grown


def step_values() -> tuple[float, float]:
    """Nu below and above the upward step of the vertical law at Ra = 5e4: 2.4666 and 2.4824."""
    log_ra = np.full(2, np.log(VERTICAL_BREAKS[1]))
    below, above = _vertical_first(log_ra, np.array([MIDDLE, HIGH]))[0]
    return float(below), float(above)


def _riser(ra: Array) -> Pair:
    """The step at Ra = 5e4 as a steep straight line through its middle, not bounded at its ends."""
    below, above = step_values()
    climb = (above - below) / (2.0 * STEP_WIDTH)
    return (below + above) / 2.0 + climb * (ra / VERTICAL_BREAKS[1] - 1.0), climb * ra / VERTICAL_BREAKS[1]


def _sixty_to_ninety(ra: Array, aspect: Array, tilt: Array, piece: IntArray | None) -> Pair:
    """Linear between 60 and 90 degrees."""
    low, low_slope = _sixty(ra, aspect)
    high, high_slope = _vertical(ra, aspect, piece)
    share = (tilt - _SIXTY) / (_RIGHT - _SIXTY)
    return low + share * (high - low), low_slope + share * (high_slope - low_slope)


def _sixty(ra: Array, aspect: Array) -> Pair:
    """ISO 15099:2003, eq. 44-47 (tilt 60 degrees)."""
    steep = np.exp(np.minimum(20.6 * np.log(ra / 3160.0), 600.0))
    g = 0.5 / (1.0 + steep) ** 0.1
    g_slope = -2.06 * g * steep / (1.0 + steep)
    seventh = (0.0936 * ra**0.314 / (1.0 + g)) ** 7
    first = (1.0 + seventh) ** (1.0 / 7.0)
    first_slope = first * seventh / (1.0 + seventh) * (0.314 - g_slope / (1.0 + g))
    second = (0.104 + 0.175 / aspect) * ra**0.283
    return _larger((first, first_slope), (second, 0.283 * second))


def _hollands(ra: Array, tilt: Array) -> Pair:
    """Hollands, Unny, Raithby & Konicek 1976; ISO 15099:2003, eq. 42."""
    ra_cos = ra * np.cos(tilt)
    onset = 1708.0 / np.maximum(ra_cos, 1708.0)
    dent = onset * np.sin(1.8 * tilt) ** 1.6
    rising = np.maximum(1.0 - onset, 0.0)
    cube = np.cbrt(ra_cos / 5830.0)
    turbulent = np.maximum(cube - 1.0, 0.0)
    nusselt = 1.0 + 1.44 * rising * (1.0 - dent) + turbulent
    slope = 1.44 * (rising > 0.0) * (onset * (1.0 - dent) + rising * dent) + (turbulent > 0.0) * cube / 3.0
    return nusselt, slope


def has_vertical_part(tilt: ArrayLike) -> BoolArray:
    """Whether the law at this tilt (correlation's sense, rad) contains the stepped vertical pieces."""
    angle = np.asarray(tilt, float)
    return np.asarray((angle > _SIXTY) & (np.sin(angle) > 1.0e-12))


def wind_convection(speed: ArrayLike) -> Array:
    """Outdoor convection coefficient by wind, h = 4 + 4 V [W/(m2 K)], V [m/s] near the face.

    Source: ISO 15099:2003, 8.3 (design value of forced convection).
    """
    return 4.0 + 4.0 * np.asarray(speed, float)


def film_temperature(surface: ArrayLike, *, air: ArrayLike) -> Array:
    """Temperature at which indoor natural convection takes its air properties, T_air + (T_s - T_air)/4 [K].

    Source: ISO 15099:2003, 5.4 (natural convection, room side).
    """
    t = np.asarray(air, float)
    return np.asarray(t + 0.25 * (np.asarray(surface, float) - t))


def room_face_nusselt(rayleigh: ArrayLike, *, tilt: ArrayLike) -> Pair:
    """Nusselt number on the height of a room-side face in natural convection, and its slope dNu/dlnRa.

    Parameters
    ----------
    rayleigh : array_like    Rayleigh number on the height of the face [-], >= 0.
    tilt : array_like        Tilt in the correlation's sense [rad]: below pi/2 the air at the face is unstable
                             (a cold face looking down, a warm one looking up), above pi/2 stable.

    Source: ISO 15099:2003, 5.4, natural convection for every tilt [memory].
    """
    ra, angle = np.maximum(np.asarray(rayleigh, float), _TINY), np.asarray(tilt, float)
    degrees = np.rad2deg(angle)
    sine = np.maximum(np.sin(angle), 1.0e-12)
    quarter = 0.56 * (ra * sine) ** 0.25
    third, fifth = 0.13 * np.cbrt(ra), 0.58 * ra**0.2
    critical = _critical_rayleigh(degrees, sine)
    beyond = third - 0.13 * np.cbrt(critical) + 0.56 * (critical * sine) ** 0.25
    turbulent = (degrees >= 15.0) & (degrees <= 90.0) & (ra > critical)
    bands = [degrees < 15.0, turbulent, degrees <= 179.0]
    return (
        np.select(bands, [third, beyond, quarter], fifth),
        np.select(bands, [third / 3.0, third / 3.0, quarter / 4.0], fifth / 5.0),
    )


def _critical_rayleigh(degrees: Array, sine: Array) -> Array:
    """Rayleigh number at which the boundary layer turns turbulent, 15 to 90 degrees."""
    bounded = np.clip(degrees, 15.0, 90.0)
    return np.asarray(2.5e5 * (np.exp(0.72 * bounded) / np.maximum(sine, np.sin(np.deg2rad(15.0)))) ** 0.2)


EN673_TILTS = {90: (0.035, 0.38), 45: (0.10, 0.31), 0: (0.16, 0.28)}
"""Factor and exponent of Nu = A (Gr Pr)^n by tilt in degrees, heat flowing upwards. EN 673:2011, 5.3 [memory]."""


def gap_nusselt_en673(rayleigh: ArrayLike, *, factor: ArrayLike, exponent: ArrayLike) -> Array:
    """Nusselt number of a gas gap by EN 673, max(1, A (Gr Pr)^n) [-].

    Parameters
    ----------
    rayleigh : array_like            Gr Pr at the standard's mean temperature [-].
    factor, exponent : array_like    A and n of `EN673_TILTS` [-].

    Source: EN 673:2011, 5.3.
    """
    power = np.asarray(factor, float) * np.asarray(rayleigh, float) ** np.asarray(exponent, float)
    return np.asarray(np.maximum(1.0, power))
