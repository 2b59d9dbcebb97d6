"""Worked examples of textbooks, through the whole heat balance.

The books count radiation into their films and know still air of one conductivity. So the panes are mirrors, the films
are given, and the gap's curve is that conductivity with a gas too viscous to move.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from functools import partial

import numpy as np

from igu.laws.constants import CELSIUS
from igu.model.conditions import Conditions
from igu.model.makeups import MakeUps
from igu.model.unit import Gap, Unit
from igu.solver.newton import solve
from igu.solver.problem import Problem, problem_of
from igu.solver.solution import Solution
from tests.validation.build import pane
from tests.validation.check import Row

MIRROR = 1e-9

CENGEL = "Çengel & Ghajar, Heat and Mass Transfer, 5th ed., ch. 3"
INCROPERA = "Incropera & DeWitt, Fundamentals of Heat and Mass Transfer, problems of ch. 3"


def rows() -> Iterator[Row]:
    """All rows of textbooks."""
    topic = "Textbook windows"
    single = partial(_solved, (0.008,), 0.78, films=(40.0, 10.0), outdoor=-10.0, indoor=20.0)
    double = partial(_solved, (0.004, 0.004), 0.78, films=(40.0, 10.0), outdoor=-10.0, indoor=20.0, gap=(0.010, 0.026))
    rear = partial(_solved, (0.004,), 1.4, films=(65.0, 30.0), outdoor=-10.0, indoor=40.0)
    thermopane = partial(
        _solved, (0.007, 0.007), 1.4, films=(80.0, 10.0), outdoor=-10.0, indoor=20.0, gap=(0.007, 0.0245)
    )
    yield Row(topic, "single pane 8 mm, 1.2 m²: heat [W]", CENGEL, "memory", "266", lambda: _heat(single(), 1.2))
    yield Row(topic, "single pane 8 mm: inner face [°C]", CENGEL, "memory", "-2.2", lambda: _face(single(), -1))
    yield Row(
        topic,
        "double window, 10 mm still air, 1.2 m²: heat [W]",
        CENGEL,
        "memory",
        "69.2",
        lambda: _heat(double(), 1.2),
    )
    yield Row(
        topic, "double window, 10 mm still air: inner face [°C]", CENGEL, "memory", "14.2", lambda: _face(double(), -1)
    )
    yield Row(
        topic, "rear window of a car, 4 mm: inner face [°C]", INCROPERA, "memory", "7.7", lambda: _face(rear(), -1)
    )
    yield Row(
        topic, "rear window of a car, 4 mm: outer face [°C]", INCROPERA, "memory", "4.9", lambda: _face(rear(), 0)
    )
    yield Row(topic, "two panes and 7 mm of still air, 0.4 m²: heat [W]", INCROPERA, "memory", "29.4", lambda: _heat(thermopane(), 0.4))  # fmt: skip


def _solved(
    glass: tuple[float, ...],
    k: float,
    *,
    films: tuple[float, float],
    outdoor: float,
    indoor: float,
    gap: tuple[float, float] | None = None,
) -> Solution:
    """Panes [m] of conductivity k between films out and in [W/(m2 K)] at these temperatures [°C]; gap: width, k."""
    panes = tuple(pane(d, MIRROR, MIRROR, k=k) for d in glass)
    conditions = Conditions("book", outdoor_air=outdoor + CELSIUS, indoor_air=indoor + CELSIUS,
                            outdoor_convection=films[0], indoor_convection=films[1])  # fmt: skip
    problem = problem_of(MakeUps.of([Unit(panes, (Gap(gap[0]),) if gap else ())]), conditions)
    return solve(_still(problem, gap[1]) if gap else problem, throw=True)


def _still(problem: Problem, conductivity: float) -> Problem:
    curve = np.zeros_like(problem.gaps.curve[:, :1])
    curve[:, 0, 0] = conductivity, 1.0, 1e-9
    return replace(problem, gaps=replace(problem.gaps, curve=curve))


def _heat(solution: Solution, area: float) -> float:
    return -float(solution.flux_to_room[0]) * area


def _face(solution: Solution, face: int) -> float:
    return float(solution.T[face, 0]) - CELSIUS
