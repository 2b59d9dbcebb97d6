"""The figures a study compares, for N make-ups at once: one dark solve in the cold, one dark and one lit in the sun."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from igu.arrays import Array, BoolArray, IntArray
from igu.model.conditions import Conditions
from igu.model.makeups import MakeUps
from igu.ratings import en410, en673
from igu.ratings.iso15099 import dark, gained, u_values
from igu.ratings.sunlight import Bands, makeup_bands
from igu.solver.newton import solve
from igu.solver.problem import Problem, problem_of
from igu.solver.readout import inward_fractions

Given = Conditions | Sequence[Conditions]


@dataclass(frozen=True)
class Figures:
    """Figures of N make-ups, each (N,), NaN where not known or not defined.

    In the cold (without sun): `U` [W/(m2 K)] and the room-side face temperature `room_face` [K]. In the sun: `g` and
    its parts `direct` and `secondary` [-], the hottest face `hottest` [K] and its pane `hottest_pane` (from 0),
    `absorptance` and `inward` fractions (n, N) of the panes [-]. `light` transmittance [-].
    `solved`: all balances closed.
    """

    U: Array
    room_face: Array
    g: Array
    direct: Array
    secondary: Array
    hottest: Array
    hottest_pane: IntArray
    absorptance: Array
    inward: Array
    light: Array
    solved: BoolArray

    @property
    def selectivity(self) -> Array:
        """Light transmittance over solar factor [-]."""
        return np.asarray(self.light / self.g)


def figures(makeups: MakeUps, *, cold: Given | None, sun: Given | None, bands: Bands | None = None) -> Figures:
    """Figures of make-ups in cold and sunny conditions, each one set for all or one set for each make-up.

    Parameters
    ----------
    makeups : MakeUps
    cold : conditions or None    Left out: U and room-side face are NaN.
    sun : conditions or None     With an irradiance, or method en-410. Left out: g and temperatures in the sun are NaN.
    bands : Bands or None        Optics of the make-ups where they are at hand already.

    Raises
    ------
    ModelError    A method that does not cover one of the make-ups.
    """
    result = _unknown(makeups)
    if cold is not None:
        result = _in_the_cold(result, makeups, cold)
    if sun is not None:
        result = _in_the_sun(result, makeups, sun, bands)
    return result


def _unknown(makeups: MakeUps) -> Figures:
    nothing = np.full(makeups.size, np.nan)
    each_pane = np.full((makeups.pane_count, makeups.size), np.nan)
    return Figures(
        *(nothing,) * 6,
        hottest_pane=np.full(makeups.size, -1),
        absorptance=each_pane,
        inward=each_pane,
        light=nothing,
        solved=np.ones(makeups.size, bool),
    )


def _method(given: Given) -> str:
    return given.method if isinstance(given, Conditions) else given[0].method


def _placed(makeups: MakeUps, given: Given) -> MakeUps:
    """The make-ups in the positions that the conditions rate them in."""
    asked = np.array([c.tilt for c in ([given] if isinstance(given, Conditions) else given)], float)
    return replace(makeups, tilt=np.where(np.isnan(asked), makeups.tilt, asked))


def _in_the_cold(result: Figures, makeups: MakeUps, cold: Given) -> Figures:
    if _method(cold) == "en-673":
        return replace(result, U=en673.u_values(en673.reference_stacks(_placed(makeups, cold))))
    problem = dark(problem_of(makeups, cold))
    solution = solve(problem)
    room_face = np.where(solution.solved, solution.T[-1], np.nan)
    return replace(result, U=u_values(problem, solution), room_face=room_face, solved=result.solved & solution.solved)


def _in_the_sun(result: Figures, makeups: MakeUps, sun: Given, bands: Bands | None) -> Figures:
    first = sun if isinstance(sun, Conditions) else sun[0]
    bands = bands or makeup_bands(makeups, incidence=first.incidence, diffuse_share=first.diffuse_share)
    result = replace(
        result,
        direct=bands.transmittance,
        absorptance=bands.absorptance,
        light=bands.light_transmittance,
    )
    if first.method == "en-410":
        inward = en410.makeup_inward_fractions(_placed(makeups, sun))
        return _with_secondary(result, (inward * bands.absorptance).sum(axis=0), inward)
    return _lit(result, problem_of(makeups, sun), bands.absorptance, _irradiance(sun))


def _irradiance(sun: Given) -> Array:
    return np.array([c.sun for c in ([sun] if isinstance(sun, Conditions) else sun)])


def _lit(result: Figures, problem: Problem, absorptance: Array, sun: Array) -> Figures:
    """Secants of the flux to the room between the dark and the lit state; panes of unknown optics stay dark."""
    known = np.isfinite(absorptance).all(axis=0) & (sun > 0.0)
    heat = np.where(known, absorptance * sun, 0.0)
    gain, before, after = gained(problem, heat)
    good = known & before.solved & after.solved
    q_i = np.where(good, gain / np.where(sun > 0.0, sun, 1.0), np.nan)
    inward = inward_fractions(problem.with_absorbed(heat), after)
    result = _with_secondary(result, q_i, np.where(good, inward, np.nan))
    return replace(
        result,
        hottest=np.where(good, after.T.max(axis=0), np.nan),
        hottest_pane=np.where(good, after.T.argmax(axis=0) // 2, -1),
        solved=result.solved & before.solved & after.solved,
    )


def _with_secondary(result: Figures, q_i: Array, inward: Array) -> Figures:
    return replace(result, secondary=q_i, g=result.direct + q_i, inward=inward)
