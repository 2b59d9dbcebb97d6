"""The heat balance of every face of a block of stacks: fluxes, residual and Jacobian.

The equations are numbered in docs/equations.md; code lines carry these numbers. A stack of n panes has 2n faces and
n + 1 spaces (the outdoor side, n - 1 gaps, the room side). Temperatures stand in one array, outdoors first.
"""

from __future__ import annotations

from dataclasses import dataclass, fields, replace
from typing import NamedTuple

import numpy as np

from igu.arrays import Array, BoolArray, IntArray
from igu.laws.constants import GAS_CONSTANT
from igu.laws.convection import (
    film_temperature,
    gap_nusselt,
    heated_tilt,
    rayleigh_gap,
    room_face_nusselt,
)
from igu.laws.gas import curve_slopes
from igu.laws.longwave import emissive_power, exchange_factor, radiosities
from igu.laws.rarefied import pillar_array_conductance, residual_gas_conductance
from igu.solver.chain import Bands, solve_chain
from igu.solver.problem import Problem


@dataclass(frozen=True)
class Balance:
    """A block of stacks spread out for the solver; the last axis of every array is the stack, N or 1 wide.

    `exchange` (n + 1, N): exchange factor of each space, zero where `gains` carries the radiation. `gains`
    (2n, 2n + 2, N) or None: what each face gains of the emissive powers of the surroundings and of all faces, for
    stacks with an infrared-transparent sheet; `net` (n + 1, 2n + 2, N) or None: the net long-wave flux of each space.
    """

    conductance: Array
    exchange: Array
    width: Array
    aspect: Array
    curve: Array
    T_min: Array
    T_max: Array
    gas_factor: Array
    evacuated: BoolArray
    vacuum: Array
    pillar: Array
    height: Array
    tilt: Array
    air: Array
    air_factor: Array
    natural: BoolArray
    outdoor_convection: Array
    indoor_convection: Array
    outdoor_air: Array
    indoor_air: Array
    outdoor_radiant: Array
    indoor_radiant: Array
    source: Array
    gains: Array | None
    net: Array | None

    @property
    def panes(self) -> int:
        """Number of panes."""
        return int(self.conductance.shape[0])

    def take(self, chosen: BoolArray | IntArray) -> Balance:
        """The balance of some of the stacks."""
        values = {f.name: getattr(self, f.name) for f in fields(self)}
        cut = {k: v[..., chosen] for k, v in values.items() if v is not None and v.shape[-1] > 1}
        return replace(self, **cut)


def spread(problem: Problem) -> Balance:
    """Spread a problem out into the arrays of its balance."""
    p, g, s = problem.panes, problem.gaps, problem.surroundings
    pane, gap = _narrow(problem.pane_index), _narrow(problem.gap_index)
    emissivity = _face_rows(p.emissivity_out[pane], p.emissivity_in[pane])
    transmittance = p.transmittance[pane]
    gains, net = _radiation_matrices(emissivity, transmittance)
    exchange = _exchange(emissivity) if gains is None else np.zeros((len(pane) + 1, 1))
    width, mole_mass = g.width[gap], _per_gap(g.mole_mass, gap)
    residual_gas = (_per_gap(row, gap) for row in (g.vacuum_pressure, g.mole_mass, g.gamma, g.accommodation))
    natural = np.isnan(s.indoor_convection)
    return Balance(
        conductance=p.conductance[pane],
        exchange=exchange,
        width=width,
        aspect=problem.height / width,
        curve=_per_gap(g.curve, gap),
        T_min=g.T_min[gap],
        T_max=g.T_max[gap],
        gas_factor=problem.gap_pressure * mole_mass / GAS_CONSTANT,
        evacuated=g.evacuated[gap],
        vacuum=np.stack(np.broadcast_arrays(*residual_gas)),
        pillar=_pillars(problem, pane, gap),
        height=problem.height,
        tilt=problem.tilt,
        air=s.air[:, :, None],
        air_factor=s.pressure * s.air_mole_mass / GAS_CONSTANT,
        natural=natural,
        outdoor_convection=s.outdoor_convection,
        indoor_convection=np.where(natural, 0.0, s.indoor_convection),
        outdoor_air=s.outdoor_air,
        indoor_air=s.indoor_air,
        outdoor_radiant=emissive_power(s.outdoor_radiant),
        indoor_radiant=emissive_power(s.indoor_radiant),
        source=np.repeat(problem.absorbed / 2.0, 2, axis=0),
        gains=gains,
        net=net,
    )


def _narrow(index: IntArray) -> IntArray:
    """An index whose columns are all alike, as one column."""
    alike = index.shape[1] > 1 and bool((index == index[:, :1]).all())
    return index[:, :1] if alike else index


def _per_gap(values: Array, gap: IntArray) -> Array:
    """Values (..., G) of the distinct gaps where the index has them, (..., n - 1, N); one column where all are alike,
    as the gas commonly is."""
    alike = bool((values == values[..., :1]).all())
    return np.asarray(values[..., :1, None] if alike else values[..., gap])


def _face_rows(out: Array, inn: Array) -> Array:
    """Two arrays (n, N) of outer and inner faces as one (2n, N)."""
    return np.stack([out, inn], axis=1).reshape(2 * len(out), -1)


def _exchange(emissivity: Array) -> Array:
    """Exchange factor of every space of opaque stacks, the surroundings black (eq. 6)."""
    between = exchange_factor(emissivity[1:-1:2], emissivity[2::2])
    return np.concatenate([emissivity[:1], between, emissivity[-1:]])


def _radiation_matrices(emissivity: Array, transmittance: Array) -> tuple[Array | None, Array | None]:
    """Gains of the faces and net flux of the spaces by radiosity, where a sheet lets long wave through (eq. 7-8)."""
    if not transmittance.any():
        return None, None
    n = len(transmittance)
    forward, backward = radiosities(emissivity=emissivity, transmittance=transmittance)
    falling = np.stack([forward[:-1], backward[1:]], axis=1).reshape(2 * n, 2 * n + 2, -1)
    falling[np.arange(2 * n), np.arange(1, 2 * n + 1)] -= 1.0
    return emissivity[:, None] * falling, forward - backward


def _pillars(problem: Problem, pane: IntArray, gap: IntArray) -> Array:
    """Conductance of the pillars of every gap (eq. 11); the two panes' plies in series where they differ."""
    p, g = problem.panes, problem.gaps
    radius = g.pillar_radius[gap]
    if not radius.any():
        return np.zeros((len(gap), 1))
    left, right = p.conductivity_in[pane[:-1]], p.conductivity_out[pane[1:]]
    conductance = pillar_array_conductance(
        radius=np.where(radius > 0.0, radius, 1.0),
        pitch=g.pillar_pitch[gap],
        pillar_conductivity=g.pillar_conductivity[gap],
        height=g.width[gap],
        glass_conductivity=2.0 * left * right / (left + right),
    )
    return np.where(radius > 0.0, conductance, 0.0)


class Film(NamedTuple):
    """Convection across gaps or at a face: Ra, Nu, coefficient h [W/(m2 K)] and the flux's slopes with respect to the
    temperature difference and to the temperature the gas properties are taken at."""

    rayleigh: Array
    nusselt: Array
    coefficient: Array
    slope: Array
    drift: Array


class State(NamedTuple):
    """Fluxes at given face temperatures: `spaces` (n + 1, N) and `panes` (n, N), positive towards the room [W/m2],
    the slopes of `spaces` with respect to the temperatures on their two sides, and the films of gaps and room."""

    spaces: Array
    panes: Array
    left: Array
    right: Array
    powers: Array
    gaps: Film
    room: Film


def evaluate(T: Array, balance: Balance, piece: IntArray | None = None) -> State:
    """Fluxes and slopes at face temperatures T (2n, N) [K]; `piece` (n - 1, N) holds pieces of the gap law fixed."""
    b = balance
    gaps = _gap_films(T[1:-1:2], T[2::2], b, piece)
    room = _room_film(T[-1], b)
    powers = emissive_power(T)
    emitted = np.concatenate([b.outdoor_radiant + 0 * powers[:1], powers, b.indoor_radiant + 0 * powers[:1]])
    spaces, left, right = np.empty((3, b.panes + 1, T.shape[1]))
    outside = T[0] - b.outdoor_air
    spaces[0] = -b.outdoor_convection * outside  # eq. 3
    left[0], right[0] = 0.0, -b.outdoor_convection
    between = T[1:-1:2] - T[2::2]
    spaces[1:-1] = gaps.coefficient * between  # eq. 4
    left[1:-1], right[1:-1] = gaps.drift * 0.5 + gaps.slope, gaps.drift * 0.5 - gaps.slope
    inside = T[-1] - b.indoor_air
    spaces[-1] = room.coefficient * inside  # eq. 5
    left[-1], right[-1] = room.slope + 0.25 * room.drift, 0.0
    if b.gains is None:
        spaces += b.exchange * (emitted[::2] - emitted[1::2])  # eq. 6
        steep = 4.0 * b.exchange
        right -= steep * _with_end(powers[::2] / T[::2], last=True)
        left += steep * _with_end(powers[1::2] / T[1::2], last=False)
    panes = b.conductance * (T[::2] - T[1::2])  # eq. 2
    return State(spaces, panes, left, right, emitted, gaps, room)


def _with_end(rows: Array, *, last: bool) -> Array:
    zero = np.zeros_like(rows[:1])
    return np.concatenate([rows, zero] if last else [zero, rows])


def residual(state: State, balance: Balance) -> Array:
    """Heat that every face gains and does not pass on, (2n, N) [W/m2] (eq. 1); zero at the solution."""
    n = balance.panes
    unbalanced = np.empty((2 * n, state.panes.shape[1]))
    unbalanced[::2] = state.spaces[:-1] - state.panes
    unbalanced[1::2] = state.panes - state.spaces[1:]
    unbalanced += balance.source
    if balance.gains is not None:
        unbalanced += _weigh(balance.gains, state.powers)
    return unbalanced


def space_fluxes(state: State, balance: Balance) -> Array:
    """Whole flux of every space, convection and long wave, (n + 1, N) [W/m2]."""
    if balance.net is None:
        return state.spaces
    return state.spaces + _weigh(balance.net, state.powers)


def _weigh(matrix: Array, powers: Array) -> Array:
    """Rows of the matrix (rows, 2n + 2, N or 1) times the emissive powers (2n + 2, N)."""
    return np.asarray((matrix * powers).sum(axis=1))


def jacobian(state: State, balance: Balance) -> Bands:
    """Derivative of the residual with respect to the face temperatures, without the radiation of `gains`."""
    n = balance.panes
    diagonal, below, above = np.empty((3, 2 * n, state.panes.shape[1]))
    diagonal[::2] = state.right[:-1] - balance.conductance
    diagonal[1::2] = -state.left[1:] - balance.conductance
    below[::2], below[1::2] = state.left[:-1], balance.conductance
    above[::2], above[1::2] = balance.conductance, -state.right[1:]
    return Bands(below, diagonal, above)


def full_jacobian(T: Array, state: State, balance: Balance) -> Array:
    """The whole derivative, radiation through sheets included, (N, 2n, 2n)."""
    full = jacobian(state, balance).dense()
    if balance.gains is not None:
        steep = 4.0 * state.powers[1:-1] / T
        full += np.moveaxis(balance.gains[:, 1:-1] * steep, -1, 0)
    return full


def newton_step(T: Array, state: State, unbalanced: Array, balance: Balance) -> Array:
    """Solution of J dT = -r, by chain elimination, or densely where radiation passes through sheets."""
    if balance.gains is None:
        return solve_chain(jacobian(state, balance), -unbalanced)
    full = full_jacobian(T, state, balance)
    return np.asarray(np.linalg.solve(full, -unbalanced.T[..., None])[..., 0].T, float)


def _gap_films(T_a: Array, T_b: Array, b: Balance, piece: IntArray | None) -> Film:
    """Convection, or residual gas and pillars of an evacuated gap, in every gap (eq. 9-11)."""
    mean, difference = 0.5 * (T_a + T_b), T_a - T_b
    inside = np.clip(mean, b.T_min, b.T_max)
    values, slopes = curve_slopes(inside, b.curve)
    slopes = slopes * (inside == mean)
    tilt = heated_tilt(b.tilt, difference=difference)
    ra = _rayleigh(values, difference, mean, b.width, b.gas_factor)
    numbers = gap_nusselt(ra, aspect=b.aspect, tilt=tilt, piece=piece)
    film = _film(ra, numbers, values, slopes, difference, mean, b.width)
    if b.evacuated.any():
        film = _evacuate(film, values[0], slopes[0], difference, mean, b)
    return film


def _room_film(T: Array, b: Balance) -> Film:
    """Convection at the room-side face: given, or natural by the height of the face (eq. 5)."""
    difference = T - b.indoor_air
    given = b.indoor_convection + 0.0 * T
    if not b.natural.any():
        return Film(0.0 * T, 0.0 * T, given, given, 0.0 * T)
    at = film_temperature(T, air=b.indoor_air)
    values, slopes = curve_slopes(at, b.air)
    ra = _rayleigh(values, difference, at, b.height, b.air_factor)
    numbers = room_face_nusselt(ra, tilt=heated_tilt(b.tilt, difference=difference))
    film = _film(ra, numbers, values, slopes, difference, at, b.height)
    if b.natural.all():
        return film
    fixed = Film(0.0 * T, 0.0 * T, given, given, 0.0 * T)
    return Film(*(np.where(b.natural, x, y) for x, y in zip(film, fixed, strict=True)))


def _rayleigh(values: Array, difference: Array, mean: Array, length: Array, gas_factor: Array) -> Array:
    return rayleigh_gap(
        width=length,
        difference=difference,
        mean=mean,
        density=gas_factor / mean,
        viscosity=values[1],
        conductivity=values[0],
        heat_capacity=values[2],
    )


def _film(
    ra: Array,
    numbers: tuple[Array, Array],
    values: Array,
    slopes: Array,
    difference: Array,
    mean: Array,
    length: Array,
) -> Film:
    """Coefficient Nu k / length and the slopes of its flux; Ra falls with the mean temperature as T^-3 cp/(mu k)."""
    nusselt, rise = numbers
    conduction = values[0] / length
    coefficient, rise = conduction * nusselt, conduction * rise
    relative = slopes / values
    fall = relative[2] - relative[1] - relative[0] - 3.0 / mean
    drift = difference * (coefficient * relative[0] + rise * fall)
    return Film(ra, nusselt, coefficient, coefficient + rise, drift)


def _evacuate(film: Film, k: Array, k_slope: Array, difference: Array, mean: Array, b: Balance) -> Film:
    """The film with its evacuated gaps replaced by residual gas and pillars."""
    pressure, mole_mass, gamma, accommodation = b.vacuum
    gas = residual_gas_conductance(
        mean,
        pressure=pressure,
        mole_mass=mole_mass,
        gamma=gamma,
        accommodation=accommodation,
        conductivity=k,
        gap=b.width,
    )
    share = gas * b.width / k
    gas_slope = share * share * k_slope / b.width - (1.0 - share) * gas / (2.0 * mean)
    total = gas + b.pillar
    empty = Film(0.0 * gas, 1.0 + 0.0 * gas, total, total, difference * gas_slope)
    return Film(*(np.where(b.evacuated, x, y) for x, y in zip(empty, film, strict=True)))
