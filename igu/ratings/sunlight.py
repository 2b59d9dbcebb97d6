"""Band values of whole units in the sun: exact combination of their panes by wavelength, polarisation and direction."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import NamedTuple

import numpy as np

from igu.arrays import Array, BoolArray, IntArray
from igu.laws.layers import Combined, combine_layers, echo
from igu.model.makeups import MakeUps
from igu.model.optics import (
    BroadbandOptics,
    FilmOptics,
    PaneDescription,
    PaneOptics,
    Rays,
    grid,
    pane_optics,
    rays,
)
from igu.model.unit import Pane, Unit
from igu.ratings.banded import banded_caution
from igu.ratings.result import Solar

POINTS = 45_000
"""Spectral points of the stacks combined at once: a block of them fits the processor's cache."""


@dataclass(frozen=True)
class Bands:
    """Band values of N units, each (N,) or (n, N) [-]; NaN where a pane is not known in the band."""

    transmittance: Array
    reflectance_out: Array
    absorptance: Array
    light_transmittance: Array
    light_reflectance_out: Array
    light_reflectance_in: Array


Key = tuple[tuple[float, ...], tuple[float, ...], int]
"""Cosines, weights and polarisations of rays, as a key to what was computed for them."""


class _Spectra(NamedTuple):
    """P panes or stacks over all points (polarisation, ray and wavelength, one axis): (P, W'), absorbed (m, P, W')."""

    transmittance: Array
    front: Array
    back: Array
    absorbed_front: Array
    absorbed_back: Array


class _Weights(NamedTuple):
    """Weights of the points (W',) for the sun and for the light; the points of the two do not overlap."""

    solar: Array
    light: Array


def makeup_bands(makeups: MakeUps, *, incidence: float = 0.0, diffuse_share: float = 0.0) -> Bands:
    """Band values of make-ups for a beam at this angle [rad] with a share of isotropic diffuse light [-].

    Spectra of a pane are computed once, and so are stacks that differ in their gaps alone; stacks that share their
    outer panes share their combination.
    """
    beams = rays(incidence=incidence, diffuse_share=diffuse_share)
    used = np.flatnonzero(np.bincount(makeups.pane_index.ravel(), minlength=len(makeups.panes)))
    places = np.zeros(len(makeups.panes), np.intp)
    places[used] = np.arange(len(used))
    first, place = _distinct_columns(places[makeups.pane_index], len(used))
    index = places[makeups.pane_index[:, first]]
    palette = _palette([makeups.panes[i] for i in used], beams)
    weights = _point_weights(beams)
    found = _bands(_Spectra(*(np.nan_to_num(part) for part in palette)), index, weights)
    known = (_known_stacks(palette, index, band) for band in (weights.solar, weights.light))
    return Bands(*(values[..., place] for values in vars(_masked(found, *known)).values()))


def _known_stacks(palette: _Spectra, index: IntArray, weights: Array) -> BoolArray:
    """Stacks all of whose panes are known wherever the band has weight, (N,)."""
    panes = np.asarray(np.isfinite(palette.transmittance[:, weights > 0.0]).all(axis=1))
    return np.asarray(panes[index].all(axis=0))


def _masked(bands: Bands, solar: BoolArray, light: BoolArray) -> Bands:
    """NaN in the bands in which a pane of the stack is not known."""
    masks = {name: light if name.startswith("light") else solar for name in vars(bands)}
    return Bands(**{name: np.where(masks[name], values, np.nan) for name, values in vars(bands).items()})


def _point_weights(beams: Rays) -> _Weights:
    share = np.repeat(beams.weight[None] / beams.polarisations, beams.polarisations, axis=0)
    solar, light = ((share[..., None] * band).ravel() for band in (grid().solar, grid().light))
    return _Weights(solar, light)


def _palette(panes: Sequence[Pane], beams: Rays) -> _Spectra:
    rows = [_pane_spectra(pane.optics, _key(beams)) for pane in panes]
    T, front, back = (np.array([row[part] for row in rows]) for part in range(3))
    return _Spectra(T, front, back, (1.0 - T - front)[None], (1.0 - T - back)[None])


def _key(beams: Rays) -> Key:
    return tuple(beams.cosine), tuple(beams.weight), beams.polarisations


@lru_cache(maxsize=512)
def _pane_optics(optics: PaneDescription, key: Key) -> PaneOptics:
    """Optics of a pane under rays, computed once."""
    return pane_optics(optics, Rays(np.array(key[0]), np.array(key[1]), key[2]))


def _pane_spectra(optics: PaneDescription | None, key: Key) -> tuple[Array, Array, Array]:
    """Transmittance and reflectances of a pane over all points, NaN where it is not known in the sun."""
    if optics is None:
        nothing = np.full(key[2] * len(key[0]) * len(grid().wavelength), np.nan)
        return nothing, nothing, nothing
    found = _pane_optics(optics, key)
    return found.transmittance.ravel(), found.reflectance_out.ravel(), found.reflectance_in.ravel()


def _bands(palette: _Spectra, index: IntArray, weights: _Weights) -> Bands:
    outer, place = _substacks(palette, index[:-1])
    place = np.broadcast_to(place, index[-1].shape)
    block = max(1, POINTS // len(weights.solar))
    parts = [
        _joined(outer, palette, place[at : at + block], index[-1, at : at + block], weights)
        for at in range(0, index.shape[1], block)
    ]
    T, R, light, light_out, light_in, absorbed = (
        np.concatenate([part[k] for part in parts], axis=-1) for k in range(6)
    )
    return Bands(T, R, absorbed, light, light_out, light_in)


def _substacks(palette: _Spectra, index: IntArray) -> tuple[_Spectra, IntArray]:
    """The distinct stacks of these panes (m, N), combined once each, and which of them every column is.

    A stack without panes is one open layer.
    """
    if len(index) == 0:
        nothing = np.zeros((1, palette.transmittance.shape[1]))
        return _Spectra(nothing + 1.0, nothing, nothing, nothing[:0], nothing[:0]), np.zeros(1, np.intp)
    first, place = _distinct_columns(index, len(palette.transmittance))
    chosen = index[:, first]
    stack = combine_layers(palette.transmittance[chosen], palette.front[chosen], palette.back[chosen])
    return _Spectra(*stack), place


def _distinct_columns(index: IntArray, base: int) -> tuple[IntArray, IntArray]:
    """Where each distinct column of an index below `base` first stands, and which of them every column is."""
    place = np.zeros(index.shape[1], np.intp)
    for row in index:
        code = place * base + row
        order = np.argsort(code, kind="stable")
        new = np.diff(code[order], prepend=-1) > 0
        place = np.empty_like(place)
        place[order] = np.cumsum(new) - 1
    return order[new], place


def _joined(
    outer: _Spectra, palette: _Spectra, place: IntArray, last: IntArray, weights: _Weights
) -> tuple[Array, Array, Array, Array, Array, Array]:
    """Band values of the outer stacks with their last panes behind them."""
    T, back = outer.transmittance[place], outer.back[place]
    t, r = palette.transmittance[last], palette.front[last]
    passages = echo(back, r)
    passed = T * passages
    returned = passed * r
    through, turned_back = passed * t, returned * T
    inward = palette.back[last] + t * t * back * passages
    first = outer.front[place] + turned_back
    absorbed = [outer.absorbed_front[k][place] + returned * outer.absorbed_back[k][place] for k in range(len(outer[3]))]
    absorbed.append(passed * palette.absorbed_front[0][last])
    return (
        through @ weights.solar,
        first @ weights.solar,
        through @ weights.light,
        first @ weights.light,
        inward @ weights.light,
        np.array([a @ weights.solar for a in absorbed]),
    )


def unit_solar(unit: Unit, *, incidence: float, diffuse_share: float) -> tuple[Solar | None, tuple[str, ...]]:
    """The unit in the sun without g, and what is to be said of it; None where a pane is not known in the sun."""
    unknown = [str(p + 1) for p, pane in enumerate(unit.panes) if pane.optics is None]
    if unknown:
        panes = f"pane {unknown[0]} is" if len(unknown) == 1 else f"panes {', '.join(unknown)} are"
        return None, (f"Nothing is known of how {panes} in the sun: no solar or light figures.",)
    beams = rays(incidence=incidence, diffuse_share=diffuse_share)
    bands = makeup_bands(MakeUps.of([unit]), incidence=incidence, diffuse_share=diffuse_share)
    solar = Solar(
        transmittance=float(bands.transmittance[0]),
        reflectance_out=float(bands.reflectance_out[0]),
        absorptance=tuple(float(a) for a in bands.absorptance[:, 0]),
        coating_absorptance=_coating_shares(unit, beams),
        light_transmittance=_known(bands.light_transmittance[0]),
        light_reflectance_out=_known(bands.light_reflectance_out[0]),
        light_reflectance_in=_known(bands.light_reflectance_in[0]),
        uv_transmittance=_uv(unit, beams),
    )
    return solar, cautions(unit, oblique=bool(incidence or diffuse_share))


def _known(value: float) -> float | None:
    return float(value) if np.isfinite(value) else None


def _panes(unit: Unit, beams: Rays) -> list[PaneOptics]:
    """Every pane of a unit of known panes, over polarisation, ray and wavelength."""
    return [_pane_optics(pane.optics, _key(beams)) for pane in unit.panes if pane.optics is not None]


def _mean(values: Array, beams: Rays, band: Array) -> float:
    """Mean over polarisations, rays and wavelengths."""
    return float((values.mean(axis=0) * beams.weight[:, None] * band).sum())


def _uv(unit: Unit, beams: Rays) -> float | None:
    """UV transmittance; None where a pane is known by band values only, or has an interlayer, whose UV is not known."""
    banded = any(isinstance(pane.optics, BroadbandOptics) for pane in unit.panes)
    laminated = any(ply.kind == "interlayer" for pane in unit.panes for ply in pane.plies)
    if banded or laminated:
        return None
    return _mean(_combined(_panes(unit, beams)).transmittance, beams, grid().uv)


def _coating_shares(unit: Unit, beams: Rays) -> tuple[tuple[float | None, float | None], ...]:
    """Share of the sun absorbed in the coating of each pane's outer and inner face; None where there is none, or
    where the pane is known as a whole."""
    panes = _panes(unit, beams)
    return tuple(
        (
            _coating_share(panes, k, 0, beams) if pane.coating_out else None,
            _coating_share(panes, k, 1, beams) if pane.coating_in else None,
        )
        for k, pane in enumerate(unit.panes)
    )


def _coating_share(panes: Sequence[PaneOptics], k: int, face: int, beams: Rays) -> float | None:
    from_out, from_in = panes[k].coatings_from_out, panes[k].coatings_from_in
    if from_out is None or from_in is None:
        return None
    falling_out, falling_in = _falling(panes, k)
    return _mean(falling_out * from_out[face] + falling_in * from_in[face], beams, grid().solar)


def _falling(panes: Sequence[PaneOptics], k: int) -> tuple[Array, Array]:
    """Flux that falls on pane k from outdoors and from behind, per unit of sun on the unit."""
    ahead, behind = panes[:k], panes[k + 1 :]
    back = _reflectance_behind(behind, panes[k])
    front, passed = _seen_back(ahead, panes[k])
    own = panes[k]
    returned = own.transmittance * back * echo(own.reflectance_in, back)
    falling = passed * echo(front, own.reflectance_out + own.transmittance * returned)
    return falling, falling * returned


def _reflectance_behind(panes: Sequence[PaneOptics], like: PaneOptics) -> Array:
    if not panes:
        return np.zeros_like(like.transmittance)
    return _combined(panes).reflectance_front


def _seen_back(panes: Sequence[PaneOptics], like: PaneOptics) -> tuple[Array, Array]:
    """Reflectance of the panes ahead seen from behind, and their transmittance."""
    if not panes:
        return np.zeros_like(like.transmittance), np.ones_like(like.transmittance)
    stack = _combined(panes)
    return stack.reflectance_back, stack.transmittance


def _combined(panes: Sequence[PaneOptics]) -> Combined:
    return combine_layers(*(np.array([p[part] for p in panes]) for part in range(3)))


def cautions(unit: Unit, *, oblique: bool) -> tuple[str, ...]:
    """What measured panes leave uncertain, beside others and, `oblique`, in light that is not normal to them."""
    banded = banded_caution(unit)
    found = [banded] if banded else []
    if any(not isinstance(p.optics, FilmOptics) for p in unit.panes) and oblique:
        found.append(
            "Panes measured at normal incidence take the angular shape of an uncoated slab: up to about 0.07 high in "
            "solar and 0.10 in light transmittance, and 0.12 low in absorptance, at 60 to 85 degrees."
        )
    return tuple(found)
