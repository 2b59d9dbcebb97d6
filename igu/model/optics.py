"""Panes in the sun: what is known of one, and its transmittance, reflectances and absorptances by wavelength and angle.

All panes share one grid: the middles of the solar bins, then the wavelengths of the light weighting. One computation so
serves both bands. A set of rays is a list of directions with weights; polarisations are kept apart until the end.
"""

from __future__ import annotations

import tomllib
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from typing import Any, NamedTuple

import numpy as np

from igu.arrays import Array, ArrayLike, ComplexArray
from igu.data import data_text
from igu.errors import require
from igu.laws.fresnel import face_reflectance, internal_transmittance, lossless_slab_reflectance, refracted_cosine
from igu.laws.layers import thick_pane
from igu.laws.refraction import bound_electrons, even_powers_index, film_damping, free_electrons
from igu.laws.spectrum import diffuse_cosines
from igu.laws.thinfilm import film_optics

CLASS_INDEX = 1.515
"""Index of the uncoated slab whose angular shape stands for panes known at normal incidence only [-]."""

LEAST_RANGE = (0.32e-6, 2.4e-6)
"""A measured spectrum must reach at least from and to these wavelengths [m]; its ends are held beyond."""

VISIBLE = (380e-9, 780e-9)
"""The visible range [m], as EN 410 has it."""


@dataclass(frozen=True)
class FilmOptics:
    """A pane of catalogue glasses: plies (name of the optical constants, thickness [m]), optically joined, and the film
    stacks on its outer and inner face by name."""

    plies: tuple[tuple[str, float], ...]
    coating_out: str | None = None
    coating_in: str | None = None


@dataclass(frozen=True)
class BroadbandOptics:
    """A measured pane known by band values at normal incidence [-]; light None: not known.

    Flat within each band. With light values the sun has two bands: as in the light where it is `VISIBLE`, beyond
    what makes the solar value right, as far as energy allows; without them the sun is one band.
    """

    solar_transmittance: float
    solar_reflectance_out: float
    solar_reflectance_in: float
    light_transmittance: float | None = None
    light_reflectance_out: float | None = None
    light_reflectance_in: float | None = None

    def __post_init__(self) -> None:
        solar = (self.solar_transmittance, self.solar_reflectance_out, self.solar_reflectance_in)
        _require_possible("solar", *solar)
        light = (self.light_transmittance, self.light_reflectance_out, self.light_reflectance_in)
        known = [x for x in light if x is not None]
        require(len(known) in (0, 3), "light transmittance and both light reflectances go together")
        if known:
            _require_possible("light", *known)


@dataclass(frozen=True)
class SpectralOptics:
    """A measured pane known by spectra at normal incidence: wavelengths [m] rising; transmittance and reflectances
    [-]."""

    wavelength: tuple[float, ...]
    transmittance: tuple[float, ...]
    reflectance_out: tuple[float, ...]
    reflectance_in: tuple[float, ...]

    def __post_init__(self) -> None:
        lengths = {len(x) for x in (self.transmittance, self.reflectance_out, self.reflectance_in)}
        require(lengths == {len(self.wavelength)}, "a spectrum has the same number of values in every column")
        require(len(self.wavelength) >= 2, "a spectrum has at least two wavelengths")
        rising = all(a < b for a, b in zip(self.wavelength, self.wavelength[1:], strict=False))
        require(rising, "the wavelengths of a spectrum rise")
        low, high = LEAST_RANGE
        require(
            self.wavelength[0] <= low and self.wavelength[-1] >= high,
            f"spectrum from {self.wavelength[0] * 1e9:g} to {self.wavelength[-1] * 1e9:g} nm: it must reach at least "
            f"from {low * 1e9:g} to {high * 1e9:g} nm",
        )
        for wave, *values in zip(
            self.wavelength, self.transmittance, self.reflectance_out, self.reflectance_in, strict=True
        ):
            _require_possible(f"at {wave * 1e9:g} nm", *values)


PaneDescription = FilmOptics | BroadbandOptics | SpectralOptics


def _require_possible(where: str, transmittance: float, out: float, inn: float) -> None:
    require(all(0.0 <= x <= 1.0 for x in (transmittance, out, inn)), f"{where}: transmittance and reflectances 0 to 1")
    for reflectance in (out, inn):
        require(
            transmittance + reflectance <= 1.0 + 1e-9,
            f"{where}: transmittance {transmittance:g} and reflectance {reflectance:g} sum to more than 1",
        )


def turned(optics: PaneDescription) -> PaneDescription:
    """The same pane with its outer face turned indoors."""
    if isinstance(optics, FilmOptics):
        return FilmOptics(optics.plies[::-1], optics.coating_in, optics.coating_out)
    if isinstance(optics, BroadbandOptics):
        return replace(
            optics,
            solar_reflectance_out=optics.solar_reflectance_in,
            solar_reflectance_in=optics.solar_reflectance_out,
            light_reflectance_out=optics.light_reflectance_in,
            light_reflectance_in=optics.light_reflectance_out,
        )
    return replace(optics, reflectance_out=optics.reflectance_in, reflectance_in=optics.reflectance_out)


class Grid(NamedTuple):
    """The common grid: wavelengths [m] (W,), and weights (W,) of the solar, light and UV bands, each summing to 1."""

    wavelength: Array
    solar: Array
    light: Array
    uv: Array


@lru_cache(maxsize=1)
def grid() -> Grid:
    """The common grid. UV: the solar weights up to 380 nm, brought to a sum of 1 (the table starts at 302.5 nm)."""
    solar, light = _table("solar"), _table("light")
    wavelength = np.concatenate([solar["wavelength_um"] * 1e-6, light["wavelength_nm"] * 1e-9])
    nothing_solar, nothing_light = np.zeros(len(light["share"])), np.zeros(len(solar["share"]))
    below = np.where(solar["wavelength_um"] < 0.38, solar["share"], 0.0)
    return Grid(
        wavelength,
        np.concatenate([solar["share"] / solar["share"].sum(), nothing_solar]),
        np.concatenate([nothing_light, light["share"] / light["share"].sum()]),
        np.concatenate([below / below.sum(), nothing_solar]),
    )


def solar_range(light: float) -> tuple[float, float]:
    """Least and greatest solar transmittance (or reflectance) of anything with this one in the light [-], for the
    weights of this package.

    The least passes the wavelengths of most light per heat until its light is reached, and nothing else; what it leaves
    out is the least of the light left out, so that the greatest is 1 less the least of 1 less the light.
    """
    return _least_solar(light), 1.0 - _least_solar(1.0 - light)


def _least_solar(light: float) -> float:
    light_sum, heat_sum = _light_by_heat()
    return float(np.interp(light, light_sum, heat_sum))


@lru_cache(maxsize=1)
def _light_by_heat() -> tuple[Array, Array]:
    """Light and solar heat of the visible bins, most light per heat first, summed from zero; shares of the whole light
    and the whole heat. The light is read off between the points of its table."""
    g = grid()
    sun, lit = g.solar > 0.0, g.light > 0.0
    widths = np.gradient(g.wavelength[sun])
    light = np.interp(g.wavelength[sun], g.wavelength[lit], g.light[lit], left=0.0, right=0.0) * widths
    light, heat = light / light.sum(), g.solar[sun]
    seen = light > 0.0
    order = np.argsort(-light[seen] / heat[seen], kind="stable")
    sums = (np.concatenate([[0.0], np.cumsum(part[seen][order])]) for part in (light, heat))
    light_sum, heat_sum = sums
    return light_sum, heat_sum


class Rays(NamedTuple):
    """Directions of light: cosines of incidence (A,), their weights (A,) summing to 1, and the polarisations to
    keep."""

    cosine: Array
    weight: Array
    polarisations: int


def rays(*, incidence: float = 0.0, diffuse_share: float = 0.0) -> Rays:
    """Rays of a beam at this angle [rad] with a share of isotropic diffuse light. At normal incidence both
    polarisations are alike and one is kept."""
    cosines, weights = [np.array([np.cos(incidence)])], [np.array([1.0 - diffuse_share])]
    if diffuse_share > 0.0:
        diffuse, shares = diffuse_cosines()
        cosines, weights = [*cosines, diffuse], [*weights, diffuse_share * shares]
    normal = incidence == 0.0 and diffuse_share == 0.0
    return Rays(np.concatenate(cosines), np.concatenate(weights), 1 if normal else 2)


class PaneOptics(NamedTuple):
    """One pane over polarisation, ray and wavelength, (pol, A, W) each [-]: transmittance (the same both ways),
    reflectance and absorptance for light from outdoors and from the room, and the part of the absorptance in the
    coating of the outer and the inner face (zero where there is none; None where the pane is known as a whole)."""

    transmittance: Array
    reflectance_out: Array
    reflectance_in: Array
    coatings_from_out: tuple[Array, Array] | None
    coatings_from_in: tuple[Array, Array] | None


def pane_optics(description: PaneDescription, beams: Rays) -> PaneOptics:
    """Optics of one pane under these rays on the common grid.

    Panes known at normal incidence only take the angular shape of an uncoated lossless slab: its transmittance over its
    value at normal incidence shapes T, that of its first face shapes A = 1 - T - R, and R is what remains; energy is
    kept at every angle. Against the film models of this package (clear and tinted 4 to 10 mm, all coatings, to 85
    degrees) T is up to 0.07 high in the sun and 0.10 in the light, A up to 0.12 low, R within 0.08.
    """
    if isinstance(description, FilmOptics):
        return _film_pane(description, beams)
    return _shaped(*_normal_values(description), beams)


def _normal_values(description: BroadbandOptics | SpectralOptics) -> tuple[Array, Array, Array]:
    """Transmittance and reflectances at normal incidence on the grid, NaN where not known."""
    if isinstance(description, SpectralOptics):
        columns = (description.transmittance, description.reflectance_out, description.reflectance_in)
        transmittance, out, inn = (np.interp(grid().wavelength, description.wavelength, column) for column in columns)
        return transmittance, out, inn
    lit = np.arange(len(grid().wavelength)) >= len(_table("solar")["share"])
    d = description
    solar = np.array([d.solar_transmittance, d.solar_reflectance_out, d.solar_reflectance_in])
    if d.light_transmittance is None or d.light_reflectance_out is None or d.light_reflectance_in is None:
        transmittance, out, inn = (np.where(lit, np.nan, whole) for whole in solar)
        return transmittance, out, inn
    light = np.array([d.light_transmittance, d.light_reflectance_out, d.light_reflectance_in])
    seen = (grid().wavelength >= VISIBLE[0]) & (grid().wavelength < VISIBLE[1])
    visible, beyond = _two_bands(solar, light, share=float(grid().solar[seen].sum()))
    transmittance, out, inn = (
        np.where(lit, of_light, np.where(seen, of_visible, of_rest))
        for of_light, of_visible, of_rest in zip(light, visible, beyond, strict=True)
    )
    return transmittance, out, inn


def _two_bands(solar: Array, light: Array, *, share: float) -> tuple[Array, Array]:
    """Transmittance and both reflectances (3,) in the visible sun, of this share of the whole, and beyond it.

    They start as the solar values, alike, and go as far towards the light values as nothing beyond the visible becomes
    negative; the two bands together keep the solar values.
    """
    apart = light - solar
    back = apart * share / (1.0 - share)
    whole, rest = _parts(solar), _parts(solar - back)
    short = rest < np.minimum(whole, 0.0)
    way = float((np.maximum(whole[short], 0.0) / (whole[short] - rest[short])).min(initial=1.0))
    return solar + way * apart, solar - way * back


def _parts(values: Array) -> Array:
    """Transmittance, reflectances and absorptances from both sides: what cannot be negative."""
    transmittance, out, inn = values
    return np.array([transmittance, out, inn, 1.0 - transmittance - out, 1.0 - transmittance - inn])


def _shaped(transmittance: Array, out: Array, inn: Array, beams: Rays) -> PaneOptics:
    through = _falling_off(lossless_slab_reflectance, beams) * transmittance
    entered = _falling_off(_mean_face_reflectance, beams)
    absorbed_out, absorbed_in = entered * (1.0 - transmittance - out), entered * (1.0 - transmittance - inn)
    return PaneOptics(through, 1.0 - through - absorbed_out, 1.0 - through - absorbed_in, None, None)


def _mean_face_reflectance(cosine: ArrayLike, *, index: float) -> Array:
    return np.asarray(face_reflectance(cosine, index=index).mean(axis=0))


def _falling_off(reflectance: Callable[..., Array], beams: Rays) -> Array:
    """What the class slab or its face lets in at these angles over what it lets in at normal incidence, (pol, A, 1)."""
    shape = (1.0 - reflectance(beams.cosine, index=CLASS_INDEX)) / (1.0 - reflectance(1.0, index=CLASS_INDEX))
    return np.ones((beams.polarisations, 1, 1)) * shape[:, None]


def _film_pane(description: FilmOptics, beams: Rays) -> PaneOptics:
    wavelength = grid().wavelength
    cosine = beams.cosine[:, None]
    index = glass_index(wavelength)
    inside = refracted_cosine(cosine, index=index).real
    internal = np.ones_like(inside)
    for glass, thickness in description.plies:
        k = glass_extinction(glass, wavelength)
        internal = internal * internal_transmittance(wavelength, extinction=k, thickness=thickness, cosine=inside)
    outer = _face(description.coating_out, wavelength, cosine, index)
    inner = _face(description.coating_in, wavelength, cosine, index)
    whole = thick_pane(outer=outer, inner=inner, internal=internal)
    T, R_out, R_in, outer_front, outer_back, inner_front, inner_back = whole
    in_outer = (1.0 - outer[0] - outer[2] + outer_front * _film_loss(outer), outer_back * _film_loss(outer))
    in_inner = (inner_front * _film_loss(inner), 1.0 - inner[0] - inner[2] + inner_back * _film_loss(inner))
    keep = slice(0, beams.polarisations)
    return PaneOptics(
        T[keep],
        R_out[keep],
        R_in[keep],
        (in_outer[0][keep], in_inner[0][keep]),
        (in_outer[1][keep], in_inner[1][keep]),
    )


def _film_loss(face: tuple[Array, Array, Array]) -> Array:
    """Share of light from the glass that the face's film absorbs."""
    return 1.0 - face[1] - face[2]


def _face(coating: str | None, wavelength: Array, cosine: Array, glass: Array) -> tuple[Array, Array, Array]:
    """Reflectance from the air and from the glass, and transmittance, of a face with its films."""
    names, thicknesses = film_stack(coating)
    indices = [film_index(name, wavelength, d) for name, d in zip(names, thicknesses, strict=True)]
    air_side, through = film_optics(
        wavelength, cosine=cosine, before=1.0, after=glass, indices=indices[::-1], thicknesses=thicknesses[::-1]
    )
    glass_side, _ = film_optics(
        wavelength, cosine=cosine, before=glass, after=1.0, indices=indices, thicknesses=thicknesses
    )
    return air_side, glass_side, through


def film_stack(coating: str | None) -> tuple[tuple[str, ...], tuple[float, ...]]:
    """Materials and thicknesses [m] of a coating's films from the glass outwards; none for a bare face."""
    if coating is None:
        return (), ()
    films = _film_stacks()[coating]
    return tuple(name for name, _ in films), tuple(d * 1e-9 for _, d in films)


@lru_cache(maxsize=1)
def _film_stacks() -> Mapping[str, Sequence[tuple[str, float]]]:
    return {name: row["films"] for name, row in tomllib.loads(data_text("coatings.toml")).items()}


@lru_cache(maxsize=1)
def _formulas() -> dict[str, Any]:
    """Parameters of the media that have a formula, by name."""
    return tomllib.loads(data_text("films.toml"))


def glass_index(wavelength: Array) -> Array:
    """Refractive index of soda-lime glass in the solar range [-]; wavelength [m], 0.3 to 4.6 um. Source: Rubin 1985."""
    data = _formulas()["soda-lime"]
    return even_powers_index(wavelength, **{key: data[key] for key in ("constant", "square", "inverse_square")})


def glass_extinction(glass: str, wavelength: Array) -> Array:
    """Extinction coefficient k of a catalogue glass [-], linear between the table's points, its ends held."""
    table = _table("sodalime_k")
    known = np.isfinite(table[glass])
    return np.interp(wavelength * 1e6, table["wavelength_um"][known], table[glass][known])


def glass_longwave_index(wavelength: Array) -> ComplexArray:
    """Complex index of soda-lime glass in the long wave [-]; wavelength [m], 5 to 300 um. Source: Rubin 1985."""
    return _interpolated("sodalime_ir", wavelength)


def film_index(material: str, wavelength: Array, thickness: float) -> ComplexArray:
    """Complex index n + ik of a film [-]; wavelength [m], 0.3 to 50 um; thickness [m] (thin silver is more lossy)."""
    if material == "titania":
        return _interpolated("titania", wavelength)
    data = _formulas()[material]
    plasma, damping = data["plasma"], data["damping"]
    free = free_electrons(wavelength, plasma=plasma, damping=damping)
    if material == "conductive-oxide":
        bound = bound_electrons(wavelength, strength=data["strength"], resonance=data["resonance"])
        return np.asarray(np.sqrt(bound + free))
    bulk = np.where(wavelength <= data["table_ends_at"], _interpolated("silver", wavelength) ** 2, 1.0 + free)
    film = data["film"]
    raised = film_damping(damping, thickness=thickness, fermi=film["fermi"], scattering=film["scattering"])
    return np.asarray(np.sqrt(bulk - free + free_electrons(wavelength, plasma=plasma, damping=raised)))


def _interpolated(name: str, wavelength: Array) -> ComplexArray:
    table = _table(name)
    micron = wavelength * 1e6
    n, k = (np.interp(micron, table["wavelength_um"], table[part]) for part in ("n", "k"))
    return np.asarray(n + 1j * k)


@lru_cache(maxsize=8)
def _table(name: str) -> dict[str, Array]:
    """Columns of a data file by their heads; empty cells NaN."""
    text = data_text(f"{name}.csv")
    heads, *rows = (line.split(",") for line in text.splitlines() if not line.startswith("#"))
    values = np.array([[float(cell) if cell else np.nan for cell in row] for row in rows])
    return dict(zip(heads, values.T, strict=True))
