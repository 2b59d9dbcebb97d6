"""Evacuated gaps: free molecules, pillars, whole units."""

from __future__ import annotations

from collections.abc import Iterator
from functools import partial

from igu.laws.rarefied import free_molecule_conductance, pillar_array_conductance
from igu.model.conditions import Conditions
from igu.model.unit import Gap, Pillars, Unit, Vacuum
from igu.ratings.iso15099 import u_of
from igu.solver.problem import assemble
from tests.validation.build import UNCOATED, pane
from tests.validation.check import Row

COLLINS = "Collins & Simko, Solar Energy 62 (1998) 189, abstract"
PILLARS = Pillars(pitch=0.025, radius=0.00025, conductivity=20.0)
MILD = Conditions("air to air", outdoor_air=283.15, indoor_air=303.15, outdoor_convection=26.0)


def rows() -> Iterator[Row]:
    """All rows of vacuum."""
    topic = "Evacuated gaps"
    yield Row(topic, "free molecules, air 293 K, accommodation 1 [W/(m²K Pa)]", "kinetic theory, Knudsen", "memory", "1.18",
              lambda: float(free_molecule_conductance(293.0, pressure=1.0, mole_mass=0.02897, gamma=1.4, accommodation=1.0)))  # fmt: skip
    yield Row(topic, "stiff pillars of radius 0.25 mm at 25 mm in glass of 1 W/(m K) [W/(m²K)]", "2 k a/p² as in Collins & Simko 1998",
              "computed", "0.80", _stiff_pillars)  # fmt: skip
    assumed = "assumed: pillars of 0.25 mm radius at 25 mm, 26 W/(m²K) outdoors, natural convection indoors"
    yield Row(topic, f"uncoated double, air to air; {assumed}", COLLINS, "seen", "3", partial(_unit, UNCOATED))
    yield Row(
        topic,
        f"two faces of emissivity 0.04 (assumed), air to air; {assumed}",
        COLLINS,
        "seen",
        "0.8",
        partial(_unit, 0.04),
    )


def _stiff_pillars() -> float:
    return float(pillar_array_conductance(pitch=0.025, radius=0.00025, height=0.0002, pillar_conductivity=1e9, glass_conductivity=1.0))  # fmt: skip


def _unit(eps: float) -> float:
    gap = Gap(0.0002, vacuum=Vacuum(0.1, accommodation=0.6), pillars=PILLARS)
    return float(u_of(assemble([Unit((pane(inn=eps), pane(out=eps)), (gap,))], [MILD]))[0])
