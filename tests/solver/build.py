"""Problems the solver is tested with."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from igu.model.conditions import Conditions
from igu.model.makeups import MakeUps
from igu.model.unit import Gap, Pane, Pillars, Ply, Unit, Vacuum
from igu.solver.newton import solve
from igu.solver.problem import Problem, assemble, problem_of
from igu.solver.readout import breakdown

ARGON = (("argon", 0.9), ("air", 0.1))
WINTER = Conditions("winter", outdoor_air=255.15, indoor_air=294.15, outdoor_convection=26.0)


def pane(thickness=0.004, out=0.837, inn=0.837, **how) -> Pane:
    return Pane((Ply("clear", thickness, 1.0),), out, inn, **how)


def sheet(transmittance, emissivity=0.4) -> Pane:
    return Pane((Ply("film", 5e-5, 0.2),), emissivity, emissivity, longwave_transmittance=transmittance)


def contract_unit() -> Unit:
    return Unit((pane(0.006, inn=0.05), pane()), (Gap(0.016, ARGON),), height=1.5)


def random_problem(n: int, count: int, seed: int, *, sheets: bool) -> Problem:
    """Random stacks of n panes as the robustness target has them."""
    rng = np.random.default_rng(seed)
    panes = [pane(rng.uniform(0.002, 0.02), *rng.uniform(0.005, 0.95, 2)) for _ in range(60)]
    if sheets:
        panes += [sheet(t, e) for t, e in zip(rng.uniform(0.01, 0.6, 15), rng.uniform(0.005, 0.39, 15), strict=True)]
    gaps = [Gap(rng.uniform(0.003, 0.05), (("air", 1 - f), ("argon", f))) for f in rng.uniform(0, 1, 40)]
    gaps += [Gap(0.0002, vacuum=Vacuum(10 ** rng.uniform(-3, 2), accommodation=rng.uniform(0.3, 1.0)),
                 pillars=Pillars(0.02, 0.00025, 20.0)) for _ in range(6)]  # fmt: skip
    vertical = rng.random(count) < 0.4
    tilt = np.where(vertical, np.pi / 2, rng.uniform(0.0, np.pi, count))
    makeups = MakeUps(tuple(panes), tuple(gaps), rng.integers(0, len(panes), (n, count)),
                      rng.integers(0, len(gaps), (n - 1, count)), rng.uniform(0.3, 3.0, count), tilt)  # fmt: skip
    problem = problem_of(makeups, [WINTER] * count)
    s = problem.surroundings
    temperatures = {name: rng.uniform(213.15, 333.15, count) for name in
                    ("outdoor_air", "indoor_air", "outdoor_radiant", "indoor_radiant")}  # fmt: skip
    natural = rng.random(count) < 0.5
    pressure = rng.uniform(6e4, 1.1e5, count)
    surroundings = replace(
        s,
        **temperatures,
        outdoor_convection=rng.uniform(4.0, 40.0, count),
        indoor_convection=np.where(natural, np.nan, rng.uniform(2.0, 8.0, count)),
        pressure=pressure,
    )
    absorbed = rng.uniform(0.0, 1200.0, count) * rng.dirichlet(np.ones(n), count).T * rng.uniform(0.0, 0.7, count)
    return replace(problem, surroundings=surroundings, gap_pressure=pressure[None], absorbed=absorbed)


FILMS_GIVEN = replace(WINTER, indoor_convection=8.0)


def problem_near_step(n: int, rayleigh: float, count: int, seed: int) -> Problem:
    """Stacks of n panes whose gaps all lie within a few tenths of a per cent of a Rayleigh number."""
    rng = np.random.default_rng(seed)
    tilts = np.deg2rad(rng.choice([65.0, 75.0, 90.0, 110.0, 150.0], count))
    faces = rng.choice([1e-6, 0.05, 0.837], (count, 2 * n))
    panes = [tuple(pane(0.004, *row[2 * i : 2 * i + 2]) for i in range(n)) for row in faces]
    widths = np.full((n - 1, count), 0.015 if rayleigh < 2e4 else 0.026)

    def build() -> Problem:
        gaps = [tuple(Gap(w, ARGON) for w in column) for column in widths.T]
        units = [Unit(p, g, height=3.0, tilt=t) for p, g, t in zip(panes, gaps, tilts, strict=True)]
        return assemble(units, [FILMS_GIVEN] * count)

    for _ in range(6):
        problem = build()
        widths = widths * (rayleigh / breakdown(problem, solve(problem)).rayleigh) ** 0.3
    widths = widths * (1.0 + 0.002 * rng.normal(size=widths.shape))
    return build()
