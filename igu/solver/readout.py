"""What a solved state says: where the heat goes, and how much of absorbed heat flows inward."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array
from igu.laws.convection import PUBLISHED
from igu.laws.longwave import emissive_power
from igu.solver.balance import Balance, State, evaluate, full_jacobian, jacobian, space_fluxes, spread
from igu.solver.chain import solve_chain
from igu.solver.newton import BLOCK
from igu.solver.problem import Problem, blocks
from igu.solver.solution import Breakdown, Solution


def _state(problem: Problem, solution: Solution) -> tuple[Balance, State]:
    balance = spread(problem)
    held = (solution.piece != PUBLISHED).any()
    return balance, evaluate(solution.T, balance, solution.piece if held else None)


def breakdown(problem: Problem, solution: Solution) -> Breakdown:
    """Fluxes, coefficients and environmental temperatures of solved stacks.

    The environmental temperature of a side is (h_c T_air + h_r T_rad)/(h_c + h_r) [K], h_r the radiative coefficient
    between its face and the radiant temperature.
    """
    b, state = _state(problem, solution)
    T = np.concatenate([b.outdoor_air + 0 * solution.T[:1], solution.T, b.indoor_air + 0 * solution.T[:1]])
    coefficient = np.concatenate(
        [b.outdoor_convection + 0 * T[:1], state.gaps.coefficient, state.room.coefficient[None]]
    )
    convection = coefficient * (T[::2] - T[1::2])
    flux = space_fluxes(state, b)
    radiant_out, radiant_in = problem.surroundings.outdoor_radiant, problem.surroundings.indoor_radiant
    seen = np.concatenate([radiant_out + 0 * T[:1], solution.T, radiant_in + 0 * T[:1]])
    secant = b.exchange * _radiative_secant(seen[::2], seen[1::2])
    faces_out, faces_in = problem.panes.emissivity_out, problem.panes.emissivity_in
    h_out = faces_out[problem.pane_index[0]] * _radiative_secant(seen[0], seen[1])
    h_in = faces_in[problem.pane_index[-1]] * _radiative_secant(seen[-2], seen[-1])
    opaque = b.gains is None
    return Breakdown(
        flux=flux,
        convection=convection,
        radiation=flux - convection if opaque else None,
        convection_coefficient=coefficient,
        radiation_coefficient=secant if opaque else None,
        rayleigh=state.gaps.rayleigh,
        nusselt=state.gaps.nusselt,
        mean=0.5 * (T[2:-2:2] + T[3:-1:2]),
        width=b.width + 0 * state.gaps.rayleigh,
        environment_out=_mix(coefficient[0], T[0], h_out, seen[0]),
        environment_in=_mix(coefficient[-1], T[-1], h_in, seen[-1]),
    )


def _radiative_secant(T_a: Array, T_b: Array) -> Array:
    """sigma (T_a^4 - T_b^4)/(T_a - T_b), without the division."""
    unit = emissive_power(1.0)
    return np.asarray(unit * (T_a + T_b) * (T_a * T_a + T_b * T_b))


def _mix(h_c: Array, air: Array, h_r: Array, radiant: Array) -> Array:
    return np.asarray((h_c * air + h_r * radiant) / (h_c + h_r))


def inward_fractions(problem: Problem, solution: Solution, *, block: int = BLOCK) -> Array:
    """Share of a little more heat absorbed in each pane that reaches the room, N_i (n, N) [-].

    The tangent at the solution, by the adjoint of the balance: J^T lambda = dq_room/dT, N_i = -(lambda_out +
    lambda_in)/2, half of the heat entering at each face of the pane (docs/equations.md, eq. 14).
    """
    result = np.empty((problem.pane_count, problem.size))
    for chosen in blocks(problem, block):
        result[:, chosen] = _inward(problem.columns(chosen), solution.columns(chosen))
    return result


def _inward(problem: Problem, solution: Solution) -> Array:
    b, state = _state(problem, solution)
    faces = _room_slopes(solution.T, state, b)
    if b.gains is None:
        adjoint = solve_chain(jacobian(state, b).transposed(), faces)
    else:
        full = full_jacobian(solution.T, state, b)
        adjoint = np.asarray(np.linalg.solve(full.transpose(0, 2, 1), faces.T[..., None])[..., 0].T, float)
    return -0.5 * (adjoint[::2] + adjoint[1::2])


def _room_slopes(T: Array, state: State, b: Balance) -> Array:
    """Derivative of the flux to the room with respect to every face temperature, (2n, N) [W/(m2 K)]."""
    slopes = np.zeros_like(T)
    slopes[-1] = state.left[-1]
    if b.net is not None:
        slopes += b.net[-1, 1:-1] * 4.0 * state.powers[1:-1] / T
    return slopes
