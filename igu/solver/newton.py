"""Damped Newton over blocks of stacks, and the rule for the steps of the gap law."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, BoolArray, IntArray
from igu.errors import SolveError
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

BLOCK = 4096
"""Stacks solved at once: large enough for the array operations, small enough for the processor's cache."""

ITERATIONS = 60
SMALLEST_STEP = 2.0**-12
LONGEST_STEP = 80.0
"""No face moves further in one iteration [K]."""

NEIGHBOURHOOD = 0.02
"""Relative distance from Ra = 1e4 within which a second state is looked for. The law drops by 0.54 % there, so two
states of one gap lie within 0.4 % of the step; the rest is room for gaps that move each other."""


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
    everyone = np.arange(size)
    _run(balance, _first_guess(balance, size), None, result, everyone)
    if balance.panes > 1:
        _mend_steps(balance, result)
    _conclude(balance, result)
    return result


def _first_guess(b: Balance, size: int) -> Array:
    """Solution of the balance linearised at the mean of the surroundings, with still gas in the gaps (not exact)."""
    mean = 0.5 * (b.outdoor_air + b.indoor_air)
    radiative = 4.0 * 5.67e-8 * mean**3 * np.where(b.exchange == 0.0, 0.5, b.exchange)
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
    return solve_chain(Bands(below, diagonal, above), right)


def _run(b: Balance, T: Array, piece: IntArray | None, result: Solution, places: IntArray) -> None:
    """Damped Newton from T; converged stacks leave the batch. Writes T, imbalance and iterations into the result."""
    b = b.take(places) if len(places) < result.outcome.size else b
    base, step, reach = T, np.zeros_like(T), np.ones(T.shape[1])
    lowest = np.full(T.shape[1], np.inf)
    live = np.ones(T.shape[1], bool)
    for iteration in range(ITERATIONS):
        trial = base + reach * step
        state = evaluate(trial, b, piece)
        unbalanced = residual(state, b)
        largest = np.abs(unbalanced).max(axis=0)
        better = largest < lowest * (1.0 - 1.0e-4 * reach)
        base, lowest = np.where(better, trial, base), np.where(better, largest, lowest)
        reach = np.where(better, 1.0, 0.5 * reach)
        ended = live & ((lowest <= TARGET) | (reach < SMALLEST_STEP))
        if ended.any():
            at = places[ended]
            result.T[:, at], result.imbalance[at] = base[:, ended], lowest[ended]
            result.iterations[at] += iteration
            live &= ~ended
            if not live.any():
                return
        if better.any():
            fresh = _bounded(newton_step(trial, state, unbalanced, b))
            step = np.where(better, fresh, step)
        if live.sum() < 0.7 * live.size:
            b, places = b.take(live), places[live]
            base, step, reach, lowest = base[:, live], step[:, live], reach[live], lowest[live]
            piece = piece if piece is None else piece[:, live]
            live = np.ones(len(places), bool)
    at = places[live]
    result.T[:, at], result.imbalance[at] = base[:, live], lowest[live]
    result.iterations[at] += ITERATIONS


def _bounded(step: Array) -> Array:
    longest = np.abs(step).max(axis=0)
    return np.asarray(step * (LONGEST_STEP / np.maximum(longest, LONGEST_STEP)))


def _mend_steps(b: Balance, result: Solution) -> None:
    """The rule for the steps of the gap law: where two states exist the one of lower Ra, where none exists the state
    on the step. Both are marked in the result."""
    ra, stepped = _rayleigh_of(b, result)
    first = VERTICAL_BREAKS[0]
    unclosed = (result.imbalance > ACCEPTED) & stepped.any(axis=0)
    near = stepped & (np.abs(ra - first) < NEIGHBOURHOOD * first) & ~unclosed
    _hold_pieces(b, result, np.flatnonzero(unclosed))
    above, below = near & (ra > first), near & (ra <= first)
    _try_other(b, result, above, LOW, adopt=True)
    _try_other(b, result, below & ~above.any(axis=0), MIDDLE, adopt=False)


def _rayleigh_of(b: Balance, result: Solution) -> tuple[Array, BoolArray]:
    """Ra of every gap at the result's temperatures, and whether its law there has steps."""
    T = result.T
    ra = evaluate(T, b).gaps.rayleigh
    tilt = heated_tilt(b.tilt, difference=T[1:-1:2] - T[2::2])
    return ra, has_vertical_part(tilt) & ~b.evacuated


def _held(b: Balance, result: Solution, places: IntArray, piece: IntArray) -> tuple[Solution, Array]:
    """The chosen stacks solved with the pieces held, from the result's state; and their Ra."""
    part = b.take(places) if len(places) < result.outcome.size else b
    trial = _empty(b.panes, len(places))
    _run(part, result.T[:, places], piece, trial, np.arange(len(places)))
    trial.piece[...] = piece
    return trial, evaluate(trial.T, part, piece).gaps.rayleigh


def _adopt(result: Solution, at: IntArray, trial: Solution, chosen: BoolArray) -> None:
    result.T[:, at], result.imbalance[at] = trial.T[:, chosen], trial.imbalance[chosen]
    result.iterations[at] += trial.iterations[chosen]
    result.piece[:, at] = trial.piece[:, chosen]


def _hold_pieces(b: Balance, result: Solution, places: IntArray) -> None:
    """Stacks that found no root: hold every gap to one piece, solve, and move gaps whose Ra lies outside their
    piece to the neighbour, or onto the riser between two pieces that send each other on."""
    piece = vertical_piece(_rayleigh_of(b, result)[0][:, places])
    for _ in range(6 * b.panes):
        if not places.size:
            return
        trial, ra = _held(b, result, places, piece)
        moved = _next_piece(piece, ra)
        settled = (moved == piece).all(axis=0) & (trial.imbalance <= ACCEPTED)
        at = places[settled]
        _adopt(result, at, trial, settled)
        result.on_step[:, at] = piece[:, settled] == STEP
        places, piece = places[~settled], moved[:, ~settled]


def _next_piece(piece: IntArray, ra: Array) -> IntArray:
    """Where each gap belongs by the Ra it reached on the piece it was held to."""
    low, high = VERTICAL_BREAKS
    rules = [
        (piece == LOW) & (ra > low),
        (piece == MIDDLE) & (ra > high),
        (piece == MIDDLE) & (ra <= low),
        (piece == HIGH) & (ra <= high),
        (piece == STEP) & (ra > high * (1.0 + STEP_WIDTH)),
        (piece == STEP) & (ra < high * (1.0 - STEP_WIDTH)),
    ]
    return np.select(rules, [MIDDLE, HIGH, LOW, STEP, HIGH, MIDDLE], piece)


def _try_other(b: Balance, result: Solution, gaps: BoolArray, other: int, *, adopt: bool) -> None:
    """Hold the marked gaps to the piece on the other side of Ra = 1e4. Where a state exists there, mark the gap, and
    with `adopt` take it. A gap that does not stay on that side returns to its own piece and the rest is tried again."""
    first = VERTICAL_BREAKS[0]
    for _ in range(b.panes - 1):
        places = np.flatnonzero(gaps.any(axis=0))
        if not places.size:
            return
        held = gaps[:, places]
        trial, ra = _held(b, result, places, np.where(held, other, PUBLISHED))
        stays = ~held | ((ra <= first) if other == LOW else (ra > first))
        found = stays.all(axis=0) & (trial.imbalance <= ACCEPTED)
        result.two_states[:, places[found]] |= held[:, found]
        if adopt:
            _adopt(result, places[found], trial, found)
        gaps[:, places] = held & stays & ~found


def _conclude(b: Balance, result: Solution) -> None:
    """Outcome and flux to the room of every stack."""
    held = (result.piece != PUBLISHED).any()
    state = evaluate(result.T, b, result.piece if held else None)
    result.flux_to_room[...] = space_fluxes(state, b)[-1]
    unsettled = ~(result.imbalance <= ACCEPTED)
    outside = ~((result.T > 100.0) & (result.T < 1000.0)).all(axis=0)
    result.outcome[...] = np.where(outside, Outcome.RUNAWAY, np.where(unsettled, Outcome.UNSETTLED, Outcome.SOLVED))
