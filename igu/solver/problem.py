"""N stacks of n panes as arrays: tables of distinct parts, and which part stands where in which stack."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from typing import Any

import numpy as np

from igu.arrays import Array, ArrayLike, BoolArray, IntArray
from igu.errors import require
from igu.model.conditions import Conditions
from igu.model.gases import DEGREE, fill_curve, rarefied_data
from igu.model.makeups import MakeUps
from igu.model.unit import Gap, Pane, Unit


@dataclass(frozen=True)
class PaneTable:
    """Thermal data of P distinct panes, each array (P,). Conductance [W/(m2 K)] face to face, hemispherical
    emissivities and long-wave transmittance [-], conductivity [W/(m K)] of the plies at the two faces."""

    conductance: Array
    emissivity_out: Array
    emissivity_in: Array
    transmittance: Array
    conductivity_out: Array
    conductivity_in: Array

    @classmethod
    def of(cls, panes: Sequence[Pane]) -> PaneTable:
        """Table of these panes, in their order."""
        rows = [
            (
                p.conductance,
                p.emissivity_out,
                p.emissivity_in,
                p.longwave_transmittance,
                p.plies[0].conductivity,
                p.plies[-1].conductivity,
            )
            for p in panes
        ]
        return cls(*np.array(rows, float).reshape(-1, 6).T)


@dataclass(frozen=True)
class GapTable:
    """Data of G distinct gaps. `width` (G,) [m]; `curve` (3, D, G): polynomials of conductivity, viscosity and
    specific heat in (T - 300 K)/100 K; `T_min`, `T_max` (G,) [K] their range; `mole_mass` (G,) [kg/mol]; and for
    evacuated gaps residual pressure [Pa], ratio of specific heats, accommodation and the pillars (radius 0: none)."""

    width: Array
    curve: Array
    T_min: Array
    T_max: Array
    mole_mass: Array
    evacuated: BoolArray
    vacuum_pressure: Array
    gamma: Array
    accommodation: Array
    pillar_radius: Array
    pillar_pitch: Array
    pillar_conductivity: Array

    @classmethod
    def of(cls, gaps: Sequence[Gap], *, properties: str) -> GapTable:
        """Table of these gaps, in their order, with the gas properties of this set."""
        curves = [fill_curve(_fill(g), properties=properties) for g in gaps]
        coefficients = np.array([c.coefficients for c in curves]).reshape(len(gaps), 3, DEGREE + 1)
        vacua = [(g.vacuum.pressure, *_rarefied(g), g.vacuum.accommodation) if g.vacuum else _NO_VACUUM for g in gaps]
        pillars = [
            (g.pillars.radius, g.pillars.pitch, g.pillars.conductivity) if g.pillars else (0, 1, 1) for g in gaps
        ]
        return cls(
            np.array([g.width for g in gaps], float),
            _trimmed(np.moveaxis(coefficients, 0, -1)),
            np.array([c.T_min for c in curves], float),
            np.array([c.T_max for c in curves], float),
            np.array([c.mole_mass for c in curves], float),
            np.array([g.evacuated for g in gaps], bool),
            *np.array(vacua, float).reshape(-1, 3).T,
            *np.array(pillars, float).reshape(-1, 3).T,
        )


_NO_VACUUM = (0.0, 1.4, 1.0)


def _fill(gap: Gap) -> dict[str, float]:
    return {gap.vacuum.gas: 1.0} if gap.vacuum else dict(gap.fill)


def _rarefied(gap: Gap) -> tuple[float]:
    assert gap.vacuum is not None
    return (rarefied_data(gap.vacuum.gas)[1],)


def _trimmed(curve: Array) -> Array:
    """Drop the high powers that no curve of the table uses."""
    used = np.flatnonzero(np.abs(curve).reshape(3, curve.shape[1], -1).sum(axis=(0, 2)))
    return np.ascontiguousarray(curve[:, : (used[-1] + 1 if used.size else 1)])


@dataclass(frozen=True)
class Surroundings:
    """What the stacks stand in; every array (N,) or (1,). Temperatures [K], coefficients [W/(m2 K)] (indoor NaN:
    natural convection is computed), pressure [Pa]; `air` (3, D): property polynomials of the room's air."""

    outdoor_air: Array
    indoor_air: Array
    outdoor_radiant: Array
    indoor_radiant: Array
    outdoor_convection: Array
    indoor_convection: Array
    pressure: Array
    air: Array
    air_mole_mass: float

    @classmethod
    def of(cls, conditions: Sequence[Conditions], tilts: Sequence[float]) -> Surroundings:
        """Surroundings of one stack for each pair of conditions and tilt [rad]; one gas-property set for all."""
        properties = {c.gas_properties for c in conditions}
        require(len(properties) == 1, "the conditions of one batch share one set of gas properties")
        air = fill_curve({"air": 1.0}, properties=properties.pop())
        rows = [
            (
                c.outdoor_air,
                c.indoor_air,
                c.outdoor_radiant_temperature(tilt),
                c.indoor_radiant_temperature,
                c.outdoor_convection,
                np.nan if c.indoor_convection is None else c.indoor_convection,
                c.pressure,
            )
            for c, tilt in zip(conditions, tilts, strict=True)
        ]
        values = dict(zip(_SURROUNDING_ROWS, np.array(rows, float).T, strict=True))
        return cls(air=_trimmed(air.coefficients[:, :, None])[..., 0], air_mole_mass=air.mole_mass, **values)


@dataclass(frozen=True)
class Problem:
    """N stacks of n panes, outdoors first.

    `pane_index` (n, N) and `gap_index` (n - 1, N) point into them. `tilt` [rad] and `height` [m] are (N,) or (1,);
    `absorbed` (n, N) or (n, 1) is the heat each pane absorbs [W/m2]; `gap_pressure` (n - 1, N) or (1, 1) [Pa]
    is the pressure of each sealed gas.
    """

    panes: PaneTable
    gaps: GapTable
    pane_index: IntArray
    gap_index: IntArray
    surroundings: Surroundings
    tilt: Array
    height: Array
    absorbed: Array
    gap_pressure: Array

    @property
    def pane_count(self) -> int:
        """Number of panes of every stack."""
        return int(self.pane_index.shape[0])

    @property
    def size(self) -> int:
        """Number of stacks."""
        return int(self.pane_index.shape[1])

    def with_absorbed(self, absorbed: ArrayLike) -> Problem:
        """The same stacks absorbing this heat, (n,), (n, 1) or (n, N) [W/m2]."""
        heat = np.asarray(absorbed, float)
        return replace(self, absorbed=heat[:, None] if heat.ndim == 1 else heat)

    def with_gaps(self, *, width: Array, pressure: Array) -> Problem:
        """The same stacks with each gap's own width [m] and gas pressure [Pa], (n - 1, N) both."""
        rows, count = self.gap_index.shape
        taken = {name: array[..., self.gap_index.ravel()] for name, array in vars(self.gaps).items()}
        gaps = GapTable(**(taken | {"width": np.asarray(width, float).ravel()}))
        return replace(self, gaps=gaps, gap_index=np.arange(rows * count).reshape(rows, count), gap_pressure=pressure)

    def columns(self, chosen: slice | IntArray | BoolArray) -> Problem:
        """The problem of some of the stacks."""
        s = self.surroundings
        around: dict[str, Any] = {f: _cut(getattr(s, f), chosen) for f in _SURROUNDING_ROWS}
        own: dict[str, Any] = {f: _cut(getattr(self, f), chosen) for f in _STACK_ROWS}
        return replace(
            self,
            pane_index=self.pane_index[:, chosen],
            gap_index=self.gap_index[:, chosen],
            surroundings=replace(s, **around),
            **own,
        )


_STACK_ROWS = ("tilt", "height", "absorbed", "gap_pressure")

_SURROUNDING_ROWS = (
    "outdoor_air",
    "indoor_air",
    "outdoor_radiant",
    "indoor_radiant",
    "outdoor_convection",
    "indoor_convection",
    "pressure",
)


def _cut(array: Array, chosen: slice | IntArray | BoolArray) -> Array:
    return array if array.shape[-1] == 1 else array[..., chosen]


def problem_of(makeups: MakeUps, conditions: Conditions | Sequence[Conditions]) -> Problem:
    """Problem of make-ups under one set of conditions for all or one for each; heat absorbed as they give it.

    Raises
    ------
    ModelError    Conditions with different gas properties.
    """
    each = [conditions] if isinstance(conditions, Conditions) else list(conditions)
    n, count = makeups.pane_count, max(len(each), makeups.tilt.size)
    tilts = np.broadcast_to(makeups.tilt, count)
    per_stack = [each[0]] * count if len(each) == 1 else each
    if len(each) == 1 and (makeups.tilt == makeups.tilt[0]).all():
        per_stack, tilts = each, tilts[:1]
    surroundings = Surroundings.of(per_stack, [float(t) for t in tilts])
    return Problem(
        panes=PaneTable.of(makeups.panes),
        gaps=GapTable.of(makeups.gaps, properties=each[0].gas_properties),
        pane_index=makeups.pane_index,
        gap_index=makeups.gap_index,
        surroundings=surroundings,
        tilt=makeups.tilt,
        height=makeups.height,
        absorbed=np.array([c.absorbed or (0.0,) * n for c in per_stack], float).T,
        gap_pressure=surroundings.pressure[None, :],
    )


def assemble(units: Sequence[Unit], conditions: Sequence[Conditions]) -> Problem:
    """Problem of units under conditions, one stack for each pair; heat absorbed as the conditions give it, else none.

    Parameters
    ----------
    units : sequence of Unit             All with the same number of panes.
    conditions : sequence of Conditions  As many as units, all with one set of gas properties.

    Raises
    ------
    ModelError    Different pane counts, or different gas properties.
    """
    require(len(units) == len(conditions), "as many conditions as units")
    return problem_of(MakeUps.of(units), conditions)


def blocks(problem: Problem, size: int) -> Iterator[IntArray]:
    """Places of the stacks in blocks of at most this size, opaque stacks and stacks with a sheet apart."""
    transparent = (problem.panes.transmittance[problem.pane_index] > 0.0).any(axis=0)
    for group in (~transparent, transparent):
        places = np.flatnonzero(group)
        for start in range(0, len(places), size):
            yield places[start : start + size]
