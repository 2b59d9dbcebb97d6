"""Damped Newton over blocks of stacks (docs/equations.md, eq. 12), and the rule for the steps of the gap law."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, BoolArray, IntArray
from igu.errors import SolveError
from igu.laws.constants import STEFAN_BOLTZMANN
from igu.laws.convection import (
    HIGH,
    LOW,
    MIDDLE,
    PUBLISHED,
    STEP,
    STEP_WIDTH,
    VERTICAL_BREAKS,
    has_vertical_part,
    heated_tilt,
    vertical_piece,
)
from igu.solver.balance import Balance, evaluate, newton_step, residual, space_fluxes, spread
from igu.solver.chain import Bands, solve_chain
from igu.solver.outcome import Outcome
from igu.solver.problem import Problem, blocks
from igu.solver.solution import Solution

TARGET = 1.0e-9
"""Largest imbalance of any face [W/m2] at which the iteration stops."""

ACCEPTED = 1.0e-6
"""Largest imbalance [W/m2] of a solved stack, where rounding keeps it from the target."""

BLOCK = 8192
"""Stacks solved at once: large enough for the array operations, small enough for the processor's cache."""

ITERATIONS = 60
SMALLEST_STEP = 2.0**-12
LONGEST_STEP = 80.0
"""No face moves further in one iteration [K]."""

COLDEST, HOTTEST = 100.0, 1000.0
"""No temperature beyond these is tried [K], so that the laws of a lost stack stay finite; a face that ends there has
run away."""

NEIGHBOURHOOD = 0.01
"""Relative distance from Ra = 1e4 within which a second state is looked for. The law drops by 0.54 % there, and the
temperature difference of a gap by no more where it changes sides; the rest is room for gaps that move each other."""


def solve(problem: Problem, *, throw: bool = False, block: int = BLOCK) -> Solution:
    """Solve the heat balance of N stacks.

    Parameters
    ----------
    problem : Problem
    throw : bool      Raise when any stack does not end solved; otherwise read `Solution.outcome`.
    block : int       Stacks solved at once.

    Returns
    -------
    Solution          Arrays of N stacks.

    Raises
    ------
    SolveError        With `throw`, when a stack did not close; the text says which and by how much.
    """
    result = _empty(problem.pane_count, problem.size)
    for chosen in blocks(problem, block):
        _store(result, chosen, _solve_block(spread(problem.columns(chosen)), len(chosen)))
    if throw:
        _raise_unsolved(result)
    return result


def _empty(n: int, size: int) -> Solution:
    rows = max(n - 1, 0)
    return Solution(
        T=np.empty((2 * n, size)),
        flux_to_room=np.empty(size),
        imbalance=np.empty(size),
        iterations=np.zeros(size, np.intp),
        outcome=np.zeros(size, np.intp),
        piece=np.full((rows, size), PUBLISHED, np.intp),
        on_step=np.zeros((rows, size), bool),
        two_states=np.zeros((rows, size), bool),
    )


def _store(result: Solution, chosen: IntArray, part: Solution) -> None:
    for name, whole in vars(result).items():
        whole[..., chosen] = getattr(part, name)


def _raise_unsolved(solution: Solution) -> None:
    bad = np.flatnonzero(~solution.solved)
    if bad.size:
        first = bad[0]
        outcome = Outcome(solution.outcome[first])
        raise SolveError(
            f"{bad.size} of {solution.outcome.size} stacks not solved; stack {first}: {outcome.word}, "
            f"largest imbalance {solution.imbalance[first]:.3g} W/m2. {outcome.advice}"
        )


def _solve_block(balance: Balance, size: int) -> Solution:
    result = _empty(balance.panes, size)
    _run(balance, _first_guess(balance, size), result)
    rayleigh = _read(balance, result)
    if balance.panes > 1:
        _mend_steps(balance, result, rayleigh)
    result.outcome[...] = _outcomes(result)
    return result


def _first_guess(b: Balance, size: int) -> Array:
    """Solution of the balance linearised at the mean of the surroundings, with still gas in the gaps (not exact)."""
    mean = 0.5 * (b.outdoor_air + b.indoor_air)
    radiative = 4.0 * STEFAN_BOLTZMANN * mean**3 * np.where(b.exchange == 0.0, 0.5, b.exchange)
    still = (b.curve[0, 0] + 0.0 * b.width) / b.width
    gas = np.where(b.evacuated, 0.1 + b.pillar, 1.4 * still)
    room = np.where(b.natural, 2.5, b.indoor_convection)
    films = np.concatenate(
        [np.broadcast_to(row, (len(row), size)) for row in (b.outdoor_convection[None], gas, room[None])]
    )
    spaces = films + radiative
    panes = np.broadcast_to(b.conductance, (b.panes, size))
    diagonal, below, above = np.zeros((3, 2 * b.panes, size))
    diagonal[::2], diagonal[1::2] = spaces[:-1] + panes, spaces[1:] + panes
    below[::2], below[1::2] = -spaces[:-1], -panes
    above[::2], above[1::2] = -panes, -spaces[1:]
    right = np.broadcast_to(b.source, (2 * b.panes, size)).copy()
    right[0] += spaces[0] * b.outdoor_air
    right[-1] += spaces[-1] * b.indoor_air
    return _held_in_range(solve_chain(Bands(below, diagonal, above), right))


def _held_in_range(T: Array) -> Array:
    return np.asarray(np.clip(T, COLDEST, HOTTEST, out=T))


def _run(b: Balance, T: Array, result: Solution) -> None:
    """Damped Newton from T, the pieces of the gap law as the result holds them; converged stacks leave the batch.
    Writes T, imbalance and iterations into the result."""
    places, piece = np.arange(T.shape[1]), _pieces(result)
    base, step, reach = T, np.zeros_like(T), np.ones(T.shape[1])
    lowest, live = np.full(T.shape[1], np.inf), np.ones(T.shape[1], bool)
    for iteration in range(ITERATIONS):
        trial = _held_in_range(base + reach * step)
        state = evaluate(trial, b, piece)
        unbalanced = residual(state, b)
        largest = np.abs(unbalanced).max(axis=0)
        better = largest < lowest * (1.0 - 1.0e-4 * reach)
        base, lowest = _chosen(better, trial, base), _chosen(better, largest, lowest)
        reach = np.where(better, 1.0, 0.5 * reach)
        ended = live & ((lowest <= TARGET) | (reach < SMALLEST_STEP))
        if ended.any():
            _note(result, places[ended], base[:, ended], lowest[ended], iteration)
            live &= ~ended
            if not live.any():
                return
        if better.any():
            step = _chosen(better, _bounded(newton_step(trial, state, unbalanced, b)), step)
        if live.sum() < 0.7 * live.size:
            b, places = b.take(live), places[live]
            base, step, reach, lowest = base[:, live], step[:, live], reach[live], lowest[live]
            piece = piece if piece is None else piece[:, live]
            live = np.ones(len(places), bool)
    _note(result, places[live], base[:, live], lowest[live], ITERATIONS)


def _pieces(result: Solution) -> IntArray | None:
    """The pieces of the gap law a result holds; None where it holds none."""
    return result.piece if (result.piece != PUBLISHED).any() else None


def _chosen(where: BoolArray, new: Array, old: Array) -> Array:
    return new if where.all() else np.where(where, new, old)


def _note(result: Solution, at: IntArray, T: Array, imbalance: Array, iterations: int) -> None:
    result.T[:, at], result.imbalance[at] = T, imbalance
    result.iterations[at] += iterations


def _bounded(step: Array) -> Array:
    longest = np.abs(step).max(axis=0)
    return np.asarray(step * (LONGEST_STEP / np.maximum(longest, LONGEST_STEP)))


def _read(b: Balance, result: Solution) -> Array:
    """Write the flux to the room into the result, and give the Rayleigh number of every gap."""
    state = evaluate(result.T, b, _pieces(result))
    result.flux_to_room[...] = space_fluxes(state, b)[-1]
    return state.gaps.rayleigh


def _mend_steps(b: Balance, result: Solution, rayleigh: Array) -> None:
    """The rule for the steps of the gap law: where two states exist the one of lower Ra, where none exists the state
    on the step. Both are marked in the result."""
    first = VERTICAL_BREAKS[0]
    stepped = _stepped(b, result.T)
    unclosed = np.flatnonzero((_outcomes(result) == Outcome.UNSETTLED) & stepped.any(axis=0))
    if unclosed.size:
        _hold_pieces(b, result, unclosed, stepped, rayleigh)
    near = stepped & (np.abs(rayleigh - first) < NEIGHBOURHOOD * first) & (result.imbalance <= ACCEPTED)
    if near.any():
        _try_both_sides(b, result, near, rayleigh)


def _stepped(b: Balance, T: Array) -> BoolArray:
    """Gaps whose law has steps, (n - 1, N)."""
    difference = T[1:-1:2] - T[2::2]
    stepped = has_vertical_part(heated_tilt(b.tilt, difference=difference)) & ~b.evacuated
    return np.broadcast_to(stepped, difference.shape)


def _held(b: Balance, result: Solution, places: IntArray, piece: IntArray) -> tuple[Solution, Array]:
    """The chosen stacks solved with the pieces held, from the result's state; and their Ra."""
    part = b.take(places) if len(places) < result.outcome.size else b
    trial = _empty(b.panes, len(places))
    trial.piece[...] = piece
    _run(part, result.T[:, places], trial)
    return trial, _read(part, trial)


def _adopt(result: Solution, at: IntArray, trial: Solution, chosen: BoolArray) -> None:
    for name in ("T", "flux_to_room", "imbalance", "piece"):
        getattr(result, name)[..., at] = getattr(trial, name)[..., chosen]
    result.iterations[at] += trial.iterations[chosen]


def _hold_pieces(b: Balance, result: Solution, places: IntArray, stepped: BoolArray, rayleigh: Array) -> None:
    """Stacks that found no root: hold every gap to one piece, solve, and move a gap whose Ra lies outside its piece
    to the neighbouring piece, the riser being the one between MIDDLE and HIGH."""
    piece = np.where(stepped[:, places], vertical_piece(rayleigh[:, places]), PUBLISHED)
    for _ in range(12 * b.panes):
        if not places.size:
            return
        trial, ra = _held(b, result, places, piece)
        moved = _next_piece(piece, ra)
        stays = (moved == piece).all(axis=0)
        settled = stays & (trial.imbalance <= ACCEPTED)
        at = places[settled]
        _adopt(result, at, trial, settled)
        rayleigh[:, at] = ra[:, settled]
        result.on_step[:, at] = piece[:, settled] == STEP
        places, piece = places[~stays], moved[:, ~stays]


def _next_piece(piece: IntArray, ra: Array) -> IntArray:
    """The pieces to hold next by the Ra reached on these: the first gap outside its piece moves. One at a time, since
    gaps moved together can send each other round in circles (the least-index rule of complementarity problems,
    Murty 1974)."""
    low, high = VERTICAL_BREAKS
    rules = [
        (piece == LOW) & (ra > low),
        (piece == MIDDLE) & (ra > high),
        (piece == MIDDLE) & (ra <= low),
        (piece == HIGH) & (ra <= high),
        (piece == STEP) & (ra > high * (1.0 + STEP_WIDTH)),
        (piece == STEP) & (ra < high * (1.0 - STEP_WIDTH)),
    ]
    wanted = np.select(rules, [MIDDLE, STEP, LOW, STEP, HIGH, MIDDLE], piece)
    outside = wanted != piece
    return np.where(outside & (np.cumsum(outside, axis=0) == 1), wanted, piece)


def _try_both_sides(b: Balance, result: Solution, near: BoolArray, rayleigh: Array) -> None:
    """Stacks with gaps near Ra = 1e4: solve with these gaps on every other choice of sides. Gaps that stand on
    different sides in two states are marked. The state with the fewest gaps beyond the step is taken, which is the one
    of lower Ra where a single gap decides; of equals the one whose Ra add to least."""
    bit = np.where(near, 1 << (np.cumsum(near, axis=0) - near), 0)
    every, own = bit.sum(axis=0), (bit * (rayleigh > VERTICAL_BREAKS[0])).sum(axis=0)
    lowest = _height(near, rayleigh)
    for code in range(int(every.max()) + 1):
        places = np.flatnonzero((code <= every) & (code != own) & (every > 0))
        if not places.size:
            continue
        gaps, bits = near[:, places], bit[:, places]
        piece = np.where(gaps, np.where(bits & code, MIDDLE, LOW), result.piece[:, places])
        trial, ra = _held(b, result, places, piece)
        found = (trial.imbalance <= ACCEPTED) & (_next_piece(piece, ra) == piece).all(axis=0)
        result.two_states[:, places] |= found & ((bits & (code ^ own[places])) > 0)
        height = _height(gaps, ra)
        lower = found & (height < lowest[places])
        _adopt(result, places[lower], trial, lower)
        lowest[places[lower]] = height[lower]


def _height(near: BoolArray, ra: Array) -> Array:
    """Order of states: how many of the gaps stand beyond Ra = 1e4, then the sum of their Ra, (N,)."""
    first = VERTICAL_BREAKS[0]
    return np.asarray((near * ((ra > first) + 1e-3 * ra / first)).sum(axis=0))


def _outcomes(result: Solution) -> IntArray:
    unsettled = ~(result.imbalance <= ACCEPTED)
    outside = ~((result.T > COLDEST) & (result.T < HOTTEST)).all(axis=0)
    return np.where(outside, Outcome.RUNAWAY, np.where(unsettled, Outcome.UNSETTLED, Outcome.SOLVED))
