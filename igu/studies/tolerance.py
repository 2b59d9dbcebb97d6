"""What tolerances do to the declared figures: samples through the batch solver, and which tolerance matters most."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Any

import numpy as np

from igu.arrays import Array
from igu.laws.constants import CELSIUS
from igu.laws.longwave import exchange_factor
from igu.model.conditions import Conditions
from igu.model.gases import en673_properties, fill_curve
from igu.model.makeups import MakeUps
from igu.model.optics import FilmOptics
from igu.model.study_tables import Tolerance
from igu.model.unit import COATED_BELOW, Gap, Pane, Ply, Unit
from igu.ratings import en673
from igu.ratings.iso15099 import dark, gained, u_values
from igu.ratings.rounding import half_up_all
from igu.ratings.sunlight import Bands, makeup_bands
from igu.solver.newton import solve
from igu.solver.problem import Problem, problem_of

SAMPLES = 4096
SEED = 20240

FLOAT_TOLERANCE = ((6.5e-3, 0.2e-3), (12.5e-3, 0.3e-3), (15.5e-3, 0.5e-3), (np.inf, 1.0e-3))
"""Thickness tolerance of float by thickness, up to [m] and plus-minus [m]. EN 572-2 as quoted with EN 12150 [seen]."""

DEFAULTS = {
    "gap": (0.5e-3, "gap width ±0.5 mm: common practice, no source"),
    "fill": ((-0.05, 0.10), "fill −5/+10 points, each side as likely: EN 1279-3 [memory]"),
    "emissivity": (0.01, "coating emissivity ±0.01: common practice, no source"),
    "conductivity": (0.02, "glass conductivity ±2 %: common practice, no source"),
    "outdoor_film": (0.0, "outdoor film as given"),
    "indoor_film": (0.0, "indoor film as given"),
}
"""Tolerances a case leaves out, with their marks."""

OPTICS = "optical values of panes and coatings are not varied"
"""What the figures in the sun leave out; the thickness of a catalogue glass absorbs all the same."""


@dataclass(frozen=True)
class Spread:
    """One figure over the samples, in the unit its name carries: nominal, 5 %, median, 95 %; and the share of its
    variance that goes with each kind of tolerance (first order, by linear regression; the rest is what that does not
    explain)."""

    quantity: str
    nominal: float
    low: float
    median: float
    high: float
    shares: dict[str, float]


@dataclass(frozen=True)
class Tolerances:
    """Spreads of all figures known; `holds` [-] is the share of samples whose U by EN 673 rounds to the declared value
    or below; `assumed` lists the defaults that were taken."""

    samples: int
    seed: int
    distribution: str
    spreads: tuple[Spread, ...]
    declared: float | None
    holds: float | None
    assumed: tuple[str, ...]


@dataclass(frozen=True)
class _Draw:
    """Deviations of every sample, (rows, N): thickness of every glass ply, outdoors first, and gap width [m], main gas
    share [-], emissivity of every coated face [-] (2n rows, zero elsewhere), and (N,) glass conductivity and film
    factors less one [-]."""

    thickness: Array
    gap: Array
    fill: Array
    emissivity: Array
    conductivity: Array
    outdoor_film: Array
    indoor_film: Array

    def kinds(self) -> dict[str, Array]:
        """The deviations that vary, by kind, (rows, N) each."""
        rows = {name: np.atleast_2d(values) for name, values in vars(self).items()}
        return {name: v[v.std(axis=1) > 0.0] for name, v in rows.items() if (v.std(axis=1) > 0.0).any()}


def tolerances(
    unit: Unit,
    spec: Tolerance | None,
    *,
    cold: Conditions | None,
    sun: Conditions | None,
    upright: Unit | None = None,
) -> Tolerances:
    """Sample a unit within its tolerances.

    U by EN 673 where it covers the unit (`upright`: in the position its declared value belongs to), U and the room-side
    face under the cold conditions, g under the sunny ones.
    Quasi-random samples (Sobol, scrambled, scipy), uniform within the tolerances unless the case says otherwise: normal
    ones take the tolerance as two standard deviations, cut there.
    """
    given = spec or Tolerance()
    count, seed = given.samples or SAMPLES, SEED if given.seed is None else given.seed
    draw = _draw(unit, given, count, seed)
    standing = upright or unit
    figures = _figures(unit, standing, draw, cold, sun)
    declared, holds = _declared(standing, figures)
    return Tolerances(
        samples=count,
        seed=seed,
        distribution=given.distribution,
        spreads=tuple(_spread(n, values, draw) for n, values in figures.items() if np.isfinite(values).all()),
        declared=declared,
        holds=holds,
        assumed=(*_assumed(given, draw, cold, sun), *([OPTICS] if "solar_factor_g" in figures else [])),
    )


def _assumed(given: Tolerance, draw: _Draw, cold: Conditions | None, sun: Conditions | None) -> tuple[str, ...]:
    """Defaults that were taken, and tolerances that could not be applied."""
    found = ["pane thickness by EN 572-2 [seen]"] if given.thickness is None else []
    varied = draw.kinds()
    found += [words for name, (_, words) in DEFAULTS.items() if getattr(given, name) is None and name in varied]
    natural = [c.name for c in (cold, sun) if c is not None and c.method == "iso-15099" and c.indoor_convection is None]
    if given.indoor_film and natural:
        found.append(f"the indoor film is computed under {', '.join(dict.fromkeys(natural))}: no tolerance on it there")
    if (draw.gap.std(axis=1) == 0.0).any() and given.gap != 0.0:
        found.append("width and fill of an evacuated gap are not varied")
    return tuple(found)


def _draw(unit: Unit, given: Tolerance, count: int, seed: int) -> _Draw:
    """Deviations of `count` samples."""
    n, gaps, plies = len(unit.panes), len(unit.gaps), _glass_plies(unit)
    unit_cube = _cube(len(plies) + 2 * gaps + 2 * n + 3, count, seed, given.distribution)
    parts = iter(np.split(unit_cube, np.cumsum([len(plies), gaps, gaps, 2 * n, 1, 1])))
    thickness = np.array([_thickness_tolerance(ply, given) for _, _, ply in plies])[:, None]
    sealed = np.array([0.0 if g.evacuated else 1.0 for g in unit.gaps])[:, None]
    low, high = _setting(given, "fill")
    coated = np.array([_coated(pane, side) for pane in unit.panes for side in (0, 1)], float)[:, None]
    return _Draw(
        thickness=next(parts) * thickness,
        gap=next(parts) * _setting(given, "gap") * sealed,
        fill=_between(next(parts), low, high) * sealed,
        emissivity=next(parts) * _setting(given, "emissivity") * coated,
        conductivity=next(parts)[0] * _setting(given, "conductivity"),
        outdoor_film=next(parts)[0] * _setting(given, "outdoor_film"),
        indoor_film=next(parts)[0] * _setting(given, "indoor_film"),
    )


def _setting(given: Tolerance, name: str) -> Any:
    value = getattr(given, name)
    return DEFAULTS[name][0] if value is None else value


def _between(draw: Array, low: float, high: float) -> Array:
    """Draws from -1 to 1 as deviations from low to high; zero stays zero, each side in proportion."""
    return np.where(draw < 0.0, -draw * low, draw * high)


def _cube(rows: int, count: int, seed: int, distribution: str) -> Array:
    """Quasi-random numbers from -1 to 1, (rows, count)."""
    from scipy.special import ndtri
    from scipy.stats import qmc

    power = int(np.ceil(np.log2(count)))
    points = qmc.Sobol(rows, scramble=True, rng=np.random.default_rng(seed)).random_base2(power)[:count].T
    if distribution == "uniform":
        return np.asarray(2.0 * points - 1.0)
    inside = 0.0227501319 + points * (1.0 - 2.0 * 0.0227501319)
    return np.asarray(ndtri(inside) / 2.0)


def _glass_plies(unit: Unit) -> list[tuple[int, int, Ply]]:
    """Every ply of glass, outdoors first: its pane, its number among the glass of the pane, itself."""
    glass = [[ply for ply in pane.plies if ply.kind == "glass"] for pane in unit.panes]
    return [(k, number, ply) for k, plies in enumerate(glass) for number, ply in enumerate(plies)]


def _thickness_tolerance(ply: Ply, given: Tolerance) -> float:
    """Half-width [m]."""
    if given.thickness is not None:
        return given.thickness
    return next(tolerance for most, tolerance in FLOAT_TOLERANCE if ply.thickness <= most)


def _coated(pane: Pane, side: int) -> bool:
    """Whether the face carries a coating, by its emissivity: bare glass does not vary."""
    return (pane.emissivity_out, pane.emissivity_in)[side] < COATED_BELOW


def _figures(
    unit: Unit, standing: Unit, draw: _Draw, cold: Conditions | None, sun: Conditions | None
) -> dict[str, Array]:
    """Figures of every sample, the nominal unit in front, (1 + N,)."""
    nominal = _Draw(**{name: np.concatenate([0.0 * v[..., :1], v], axis=-1) for name, v in vars(draw).items()})
    found: dict[str, Array] = {}
    if en673.excluded(standing) is None:
        found["U_en673_W_m2K"] = en673.u_values(_reference(standing, nominal))
    if cold is not None and cold.method == "iso-15099":
        problem = dark(_varied(unit, nominal, cold))
        solution = solve(problem)
        found["U_W_m2K"] = u_values(problem, solution)
        found["room_face_C"] = solution.T[-1] - CELSIUS
    if sun is not None and sun.method == "iso-15099" and all(p.optics is not None for p in unit.panes):
        found |= _sunny(unit, nominal, sun)
    return found


def _sunny(unit: Unit, draw: _Draw, sun: Conditions) -> dict[str, Array]:
    bands = _bands(unit, draw, sun)
    problem = _varied(unit, draw, sun)
    gain, _, after = gained(problem, sun.sun * bands.absorptance)
    return {
        "solar_factor_g": bands.transmittance + gain / sun.sun,
        "light_transmittance": bands.light_transmittance,
        "hottest_pane_C": after.T.max(axis=0) - CELSIUS,
    }


def _bands(unit: Unit, draw: _Draw, sun: Conditions) -> Bands:
    """Band values of every sample, linear in the thickness of every glass ply; measured panes do not vary."""
    plies = _glass_plies(unit)
    steps = [unit] + [_thicker(unit, k, number, by) for k, number, _ in plies for by in (1e-4, -1e-4)]
    found = makeup_bands(MakeUps.of(steps), incidence=sun.incidence, diffuse_share=sun.diffuse_share)

    def varied(values: Array) -> Array:
        slopes = (values[..., 1::2] - values[..., 2::2]) / 2e-4
        return np.asarray(values[..., :1] + np.einsum("...k,kn->...n", slopes, draw.thickness))

    return Bands(**{name: varied(values) for name, values in vars(found).items()})


def _thicker(unit: Unit, k: int, number: int, by: float) -> Unit:
    """The unit with one glass ply of pane k thicker by so much [m], as far as its optics know of thickness."""
    optics = unit.panes[k].optics
    if not isinstance(optics, FilmOptics):
        return unit
    plies = [(name, d + by if i == number else d) for i, (name, d) in enumerate(optics.plies)]
    thicker = replace(optics, plies=tuple(plies))
    panes = [replace(pane, optics=thicker) if i == k else pane for i, pane in enumerate(unit.panes)]
    return replace(unit, panes=tuple(panes))


def _resistances(unit: Unit, draw: _Draw) -> Array:
    """Resistance of every pane, (n, N) [m2 K/W]: its glass of varied thickness and conductivity, the rest as given."""
    plies = _glass_plies(unit)
    found = np.zeros((len(unit.panes), draw.conductivity.size))
    for (k, _, ply), deviation in zip(plies, draw.thickness, strict=True):
        found[k] += (ply.thickness + deviation) / (ply.conductivity * (1.0 + draw.conductivity))
    rest = [sum(p.thickness / p.conductivity for p in pane.plies if p.kind != "glass") for pane in unit.panes]
    return np.asarray(found + np.array(rest)[:, None])


def _emissivities(unit: Unit, draw: _Draw) -> Array:
    """Emissivity of every face, (2n, N)."""
    nominal = np.array([e for p in unit.panes for e in (p.emissivity_out, p.emissivity_in)])[:, None]
    return np.clip(nominal + draw.emissivity, 1e-3, 1.0)


def _main_gas(gap: Gap) -> tuple[str, float]:
    return max(gap.fill, key=lambda pair: (pair[0] != "air", pair[1]))


def _shares(gap: Gap, deviation: Array) -> Array:
    """Share of the main gas of every sample [-]; a gap of air alone does not vary."""
    name, share = _main_gas(gap)
    return np.full(deviation.shape, share) if name == "air" else np.clip(share + deviation, 0.0, 1.0)


def _fill(gap: Gap, share: float) -> dict[str, float]:
    """The fill with this share of its main gas, the others in proportion, or air where there are none."""
    main, nominal = _main_gas(gap)
    others = {name: part for name, part in gap.fill if name != main and part > 0.0}
    if not others:
        return {main: 1.0} if main == "air" else {main: share, "air": 1.0 - share}
    rest = (1.0 - share) / (1.0 - nominal)
    return {main: share} | {name: part * rest for name, part in others.items()}


def _varied(unit: Unit, draw: _Draw, conditions: Conditions) -> Problem:
    """The problem of every sample."""
    count = draw.conductivity.size
    base = problem_of(MakeUps.of([unit]), conditions)
    n, gaps = len(unit.panes), len(unit.gaps)
    out, inn = (_emissivities(unit, draw)[side::2] for side in (0, 1))
    pane, gap = (np.repeat(index, count, axis=1).ravel() for index in (base.pane_index, base.gap_index))
    tables = {name: values[pane] for name, values in vars(base.panes).items()}
    tables |= {"conductance": 1.0 / _resistances(unit, draw).ravel()}
    tables |= {"emissivity_out": out.ravel(), "emissivity_in": inn.ravel()}
    spaces = {name: values[..., gap] for name, values in vars(base.gaps).items()}
    if gaps:
        spaces |= _gas_tables(unit, draw, conditions.gas_properties)
        spaces["width"] = (np.array([g.width for g in unit.gaps])[:, None] + draw.gap).ravel()
    s = base.surroundings
    outdoor = s.outdoor_convection * (1.0 + draw.outdoor_film)
    indoor = s.indoor_convection * (1.0 + draw.indoor_film)
    return replace(
        base,
        panes=replace(base.panes, **tables),
        gaps=replace(base.gaps, **spaces),
        pane_index=np.arange(n * count).reshape(n, count),
        gap_index=np.arange(gaps * count).reshape(gaps, count),
        surroundings=replace(s, outdoor_convection=outdoor, indoor_convection=indoor),
    )


def _gas_tables(unit: Unit, draw: _Draw, properties: str) -> dict[str, Array]:
    """Property curves and mole mass of every gap of every sample, by polynomial interpolation over the share."""
    curves, masses = [], []
    for gap, deviation in zip(unit.gaps, draw.fill, strict=True):
        share = _shares(gap, deviation)
        curve, mass = _curve_by_share(gap, share, properties)
        curves.append(curve)
        masses.append(mass)
    return {"curve": np.concatenate(curves, axis=-1), "mole_mass": np.concatenate(masses)}


def _curve_by_share(gap: Gap, share: Array, properties: str) -> tuple[Array, Array]:
    """Coefficients (3, D, N) and mole mass (N,) of a fill by the share of its main gas: exact at five Chebyshev
    nodes."""
    low, high = float(share.min()), float(share.max())
    if gap.vacuum or high - low < 1e-12:
        fill = {gap.vacuum.gas: 1.0} if gap.vacuum else dict(gap.fill)
        found = fill_curve(fill, properties=properties)
        return np.repeat(found.coefficients[..., None], share.size, axis=-1), np.full(share.size, found.mole_mass)
    nodes = 0.5 * (low + high) + 0.5 * (high - low) * np.cos(np.pi * (2 * np.arange(5) + 1) / 10)
    known = [fill_curve(_fill(gap, float(x)), properties=properties) for x in nodes]
    weights = np.array([np.prod([(share - b) / (a - b) for b in nodes if b != a], axis=0) for a in nodes])
    curve = np.einsum("kpd,kn->pdn", np.array([c.coefficients for c in known]), weights)
    return curve, np.array([c.mole_mass for c in known]) @ weights


def _reference(unit: Unit, draw: _Draw) -> en673.ReferenceStacks:
    """The EN 673 view of every sample."""
    base = en673.reference_stacks(MakeUps.of([unit]))
    faces = _emissivities(unit, draw)
    rows = np.empty((len(unit.gaps), 4, draw.conductivity.size))
    for k, gap in enumerate(unit.gaps):
        share = _shares(gap, draw.fill[k])
        ends = [np.array(en673_properties(_fill(gap, x))) for x in (0.0, 1.0)] if _main_gas(gap)[0] != "air" else []
        nominal = np.array(en673_properties(dict(gap.fill)))[:, None]
        rows[k] = ends[0][:, None] + np.outer(ends[1] - ends[0], share) if ends else nominal
    exchange = exchange_factor(faces[1:-1:2], faces[2::2])
    return replace(
        base,
        pane_resistance=_resistances(unit, draw).sum(axis=0),
        width=np.array([g.width for g in unit.gaps]).reshape(-1, 1) + draw.gap,
        density=rows[:, 0],
        viscosity=rows[:, 1],
        conductivity=rows[:, 2],
        heat_capacity=rows[:, 3],
        exchange=exchange,
        room_emissivity=faces[-1],
    )


def _spread(name: str, values: Array, draw: _Draw) -> Spread:
    nominal, samples = float(values[0]), values[1:]
    low, median, high = (float(x) for x in np.percentile(samples, [5.0, 50.0, 95.0]))
    return Spread(name, nominal, low, median, high, _variance_shares(samples, draw))


def _variance_shares(samples: Array, draw: _Draw) -> dict[str, float]:
    """Share of the variance that goes with each kind of tolerance: squared standardised coefficients of a linear fit.

    The deviations are independent, so that these add to the part a linear fit explains.
    """
    kinds = draw.kinds()
    variance = float(samples.var())
    if variance <= 1e-24 or not kinds:
        return {}
    rows = np.concatenate(list(kinds.values()))
    centred = rows - rows.mean(axis=1, keepdims=True)
    slopes = np.linalg.lstsq(centred.T, samples - samples.mean(), rcond=None)[0]
    explained = slopes**2 * rows.var(axis=1) / variance
    owners = np.repeat(list(kinds), [len(v) for v in kinds.values()])
    return {kind: float(explained[owners == kind].sum()) for kind in kinds}


def _declared(unit: Unit, figures: dict[str, Array]) -> tuple[float | None, float | None]:
    """The declared U and the share of samples that round to it or below."""
    if "U_en673_W_m2K" not in figures or not en673.is_declared_case(unit):
        return None, None
    values = figures["U_en673_W_m2K"]
    declared = en673.declared(float(values[0]))
    return declared, float((half_up_all(values[1:], 1) <= declared + 1e-9).mean())
