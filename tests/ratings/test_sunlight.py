"""Whole units in the sun: tmm, handbook rows, the direct combination of their panes, masks of what is not known."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
import pytest
from scipy.integrate import trapezoid
from scipy.interpolate import PchipInterpolator
from tmm import inc_absorp_in_each_layer, inc_tmm

from igu.arrays import Array
from igu.laws.layers import combine_layers
from igu.model.makeups import MakeUps
from igu.model.optics import (
    BroadbandOptics,
    FilmOptics,
    PaneDescription,
    Rays,
    SpectralOptics,
    grid,
    pane_optics,
    rays,
)
from igu.model.unit import Gap, Pane, Ply, Unit
from igu.ratings.sunlight import Bands, makeup_bands, unit_solar
from tests.model.build import tmm_layers
from tests.validation.solar import ANGLES, TABLE


def _pane(optics: PaneDescription | None) -> Pane:
    films = optics if isinstance(optics, FilmOptics) else FilmOptics(())
    return Pane(
        (Ply("glass", 4e-3, 1.0),),
        0.837,
        0.837,
        coating_out=films.coating_out,
        coating_in=films.coating_in,
        optics=optics,
    )


def _unit(*optics: PaneDescription | None) -> Unit:
    return Unit(tuple(_pane(o) for o in optics), (Gap(16e-3),) * (len(optics) - 1))


def _clear(thickness: float) -> FilmOptics:
    return FilmOptics((("clear", thickness),))


SOFT_2 = FilmOptics((("clear", 4e-3),), None, "soft-double")
SOFT_OUT = FilmOptics((("low-iron", 4e-3),), "soft-single", None)
HARD_1 = FilmOptics((("green", 6e-3),), "hard", None)
WAVES = tuple(np.linspace(0.3e-6, 2.5e-6, 23))
SPECTRUM = SpectralOptics(
    WAVES,
    tuple(0.7 - 1e5 * w for w in WAVES),
    tuple(0.1 + 8e4 * w for w in WAVES),
    tuple(0.05 + 1e5 * w for w in WAVES),
)
FLAT = BroadbandOptics(0.5, 0.25, 0.3, 0.7, 0.1, 0.12)
DARK_FLAT = BroadbandOptics(0.5, 0.25, 0.3)
PALETTE = (_clear(3e-3), _clear(10e-3), FilmOptics((("grey", 6e-3),)), SOFT_2, SOFT_OUT, HARD_1, SPECTRUM, FLAT)


# tmm


@pytest.mark.parametrize("optics", [(HARD_1,), (SOFT_2, _clear(4e-3)), (HARD_1, SOFT_OUT, SOFT_2)], ids=len)
def test_unit_at_normal_incidence_is_tmms(optics: Sequence[FilmOptics]) -> None:
    # source: PyPI tmm 0.2, inc_tmm and inc_absorp_in_each_layer wavelength by wavelength (S. J. Byrnes,
    # arXiv:1603.02720), computed. Band 5e-6: in glass tmm keeps an interference of order k, 1e-7 to 2e-5.
    expected = sum(w * _tmm(optics, k) for k, w in enumerate(grid().solar) if w > 0.0)
    solar, _ = unit_solar(_unit(*optics), incidence=0.0, diffuse_share=0.0)
    assert solar is not None
    parts = [x for own in solar.coating_absorptance for x in own]
    found = [solar.transmittance, solar.reflectance_out, *solar.absorptance, *(0.0 if x is None else x for x in parts)]
    assert found == pytest.approx(list(np.atleast_1d(expected)), abs=5e-6)


def _tmm(optics: Sequence[FilmOptics], k: int) -> Array:
    """T, R, absorptance of each pane, and of the coatings of its outer and inner face."""
    n, d, coherent, owner = [1.0 + 0j], [np.inf], ["i"], [(-1, "air")]
    for p, pane in enumerate(optics):
        for layer in tmm_layers(pane, k):
            n, d, coherent, owner = [*n, layer[0]], [*d, layer[1]], [*coherent, layer[2]], [*owner, (p, layer[3])]
        n, d, coherent, owner = [*n, 1.0], [*d, 1e-3], [*coherent, "i"], [*owner, (-1, "air")]
    d[-1] = np.inf
    data = inc_tmm("s", n, d, coherent, 0.0, grid().wavelength[k])
    absorbed = list(zip(owner, inc_absorp_in_each_layer(data), strict=True))
    panes = [sum(a for own, a in absorbed if own[0] == p) for p in range(len(optics))]
    films = [sum(a for own, a in absorbed if own == (p, f)) for p in range(len(optics)) for f in ("out", "in")]
    return np.array([data["T"], data["R"], *panes, *films])


# handbook

# The rows of the validation for two panes: quantity, thickness [m], where, handbook's figure.
CASES = [
    (quantity, 1e-3 * float(name.split(" ")[2]), where, float(figure))
    for name, quantity, *figures in (line.split(",") for line in TABLE.splitlines())
    if name.startswith("double") and quantity != "SHGC"
    for where, figure in zip(ANGLES, figures, strict=True)
]
# With the polarisations averaged pane by pane, as the handbook does, all is within 0.02, where kept apart, the better
# physics, up to 0.045 is needed; the diffuse T has 0.025, for the handbook's own row by angle, integrated, gives 0.605
# where it prints 0.60 (tested below).
AVERAGED_BAND = 0.02
DIFFUSE_BAND = 0.025


@pytest.mark.parametrize(("quantity", "thickness", "where", "value"), CASES)
def test_handbook_with_the_polarisations_averaged_pane_by_pane(
    quantity: str, thickness: float, where: str, value: float
) -> None:
    diffuse = where == ANGLES[-1]
    beams = rays(diffuse_share=1.0) if diffuse else rays(incidence=np.radians(float(where)))
    each = pane_optics(_clear(thickness), beams)[:3]
    stack = combine_layers(*(np.array([part.mean(axis=0)] * 2) for part in each))
    spectra = {"T": stack.transmittance, "A1": stack.absorbed_front[0], "A2": stack.absorbed_front[-1]}
    found = (spectra[quantity] * beams.weight[:, None] * grid().solar).sum()
    assert found == pytest.approx(value, abs=DIFFUSE_BAND if diffuse else AVERAGED_BAND)


def test_handbook_row_by_angle_integrates_to_a_little_more_than_its_diffuse_figure() -> None:
    T = [value for quantity, _, _, value in CASES if quantity == "T"]
    row = PchipInterpolator(np.radians([0, 40, 50, 60, 70, 80, 90]), [*T[:-1], 0.0])
    angles = np.linspace(0.0, np.pi / 2, 2001)
    assert trapezoid(row(angles) * np.sin(2 * angles), angles) == pytest.approx(T[-1] + 0.005, abs=0.001)


def test_keeping_polarisations_apart_lets_more_through() -> None:
    beams = rays(incidence=np.radians(70.0))
    each = pane_optics(_clear(3e-3), beams)[:3]
    apart = combine_layers(*(np.array([part] * 2) for part in each)).transmittance.mean(axis=0)
    averaged = combine_layers(*(np.array([part.mean(axis=0)] * 2) for part in each)).transmittance
    assert 0.02 < ((apart - averaged) * grid().solar).sum() < 0.04


# stacks


@pytest.mark.parametrize("count", [1, 2, 3, 4])
@pytest.mark.parametrize(("incidence", "diffuse"), [(0.0, 0.0), (0.96, 0.0), (0.5, 0.4), (0.0, 1.0)])
def test_batch_is_the_direct_combination_of_each_units_panes(count: int, incidence: float, diffuse: float) -> None:
    random = np.random.default_rng(10 * count)
    stacks = [[PALETTE[k] for k in row] for row in random.integers(0, len(PALETTE), (9, count))]
    found = makeup_bands(MakeUps.of([_unit(*stack) for stack in stacks]), incidence=incidence, diffuse_share=diffuse)
    beams = rays(incidence=incidence, diffuse_share=diffuse)
    for k, stack in enumerate(stacks):
        direct = _direct(stack, beams)
        for name, values in vars(found).items():
            assert values[..., k] == pytest.approx(getattr(direct, name), abs=1e-12)


def _spectra(stack: Sequence[PaneDescription], beams: Rays) -> tuple[Array, Array, Array, Array]:
    """T, R_out, R_in and absorbed from outdoors of a unit: the light between its panes from a linear system."""
    panes = [pane_optics(p, beams) for p in stack]
    T, out, inn = (np.array([p[part] for p in panes]) for part in range(3))
    shape, n = T.shape[1:], len(stack)
    # unknowns: f_0..f_n towards the room and b_0..b_n back, in the spaces before, between and behind the panes
    system = np.broadcast_to(np.eye(2 * (n + 1)), (*shape, 2 * (n + 1), 2 * (n + 1))).copy()
    for k in range(n):
        f, b = k + 1, n + 1 + k
        system[..., f, k], system[..., f, n + 2 + k] = -T[k], -inn[k]
        system[..., b, n + 2 + k], system[..., b, k] = -T[k], -out[k]
    light = np.zeros((*shape, 2 * (n + 1), 2))
    light[..., 0, 0] = light[..., -1, 1] = 1.0
    flux = np.moveaxis(np.linalg.solve(system, light), (-2, -1), (0, 1))
    forward, back = flux[: n + 1, 0], flux[n + 1 :, 0]
    absorbed = forward[:-1] + back[1:] - forward[1:] - back[:-1]
    return forward[-1], back[0], flux[n, 1], absorbed


def _direct(stack: Sequence[PaneDescription], beams: Rays) -> Bands:
    T, out, inn, absorbed = _spectra(stack, beams)

    def mean(values: Array, weights: Array) -> Array:
        return np.asarray((values.mean(axis=-3) * beams.weight[:, None] * weights).sum(axis=(-2, -1)))

    sun, light = grid().solar, grid().light
    return Bands(mean(T, sun), mean(out, sun), mean(absorbed, sun), mean(T, light), mean(out, light), mean(inn, light))


@pytest.mark.parametrize("count", [1, 2, 3, 4])
def test_energy_closes_at_every_wavelength_and_angle_both_ways(count: int) -> None:
    beams = rays(incidence=1.3, diffuse_share=0.5)
    random = np.random.default_rng(count)
    for row in random.integers(0, len(PALETTE), (4, count)):
        panes = [pane_optics(PALETTE[k], beams) for k in row]
        stack = combine_layers(*(np.array([p[part] for p in panes]) for part in range(3)))
        for reflected, absorbed in (
            (stack.reflectance_front, stack.absorbed_front),
            (stack.reflectance_back, stack.absorbed_back),
        ):
            assert np.abs(stack.transmittance + reflected + absorbed.sum(axis=0) - 1.0).max() < 1e-12
            assert absorbed.min() > -1e-12


@pytest.mark.parametrize("incidence", [0.0, 1.2])
def test_band_values_close_and_coatings_take_part_of_their_pane(incidence: float) -> None:
    stack = (HARD_1, SOFT_OUT, _clear(4e-3), SOFT_2)
    solar, said = unit_solar(_unit(*stack), incidence=incidence, diffuse_share=0.2)
    assert solar is not None
    assert said == ()
    assert solar.transmittance + solar.reflectance_out + sum(solar.absorptance) == pytest.approx(1.0, abs=1e-12)
    for pane, absorbed, own in zip(stack, solar.absorptance, solar.coating_absorptance, strict=True):
        for coating, share in zip((pane.coating_out, pane.coating_in), own, strict=True):
            assert (share is None) == (coating is None)
            assert share is None or 0.0 < share < absorbed


@pytest.mark.parametrize("incidence", [0.0, 1.1])
def test_glass_part_is_what_its_two_streams_lose_on_the_way_through(incidence: float) -> None:
    # absorbed in the glass alone = pane less coatings: a coating on a lossless pane leaves nothing over
    hardly = FilmOptics((("clear", 1e-12),), "soft-single", "hard")
    solar, _ = unit_solar(_unit(_clear(4e-3), hardly, _clear(6e-3)), incidence=incidence, diffuse_share=0.0)
    assert solar is not None
    outer, inner = solar.coating_absorptance[1]
    assert outer is not None
    assert inner is not None
    assert outer + inner == pytest.approx(solar.absorptance[1], abs=1e-9)
    assert min(outer, inner) > 0.01


def test_turned_units_transmit_alike() -> None:
    one = makeup_bands(MakeUps.of([_unit(SOFT_2, _clear(6e-3))]), incidence=0.7)
    turned_soft = FilmOptics(SOFT_2.plies, SOFT_2.coating_in, SOFT_2.coating_out)
    other = makeup_bands(MakeUps.of([_unit(_clear(6e-3), turned_soft)]), incidence=0.7)
    assert other.transmittance == pytest.approx(one.transmittance, abs=1e-13)
    assert other.light_reflectance_out == pytest.approx(one.light_reflectance_in, abs=1e-13)


def test_large_batches_are_cut_into_blocks_without_seams() -> None:
    random = np.random.default_rng(5)
    rows = random.integers(0, len(PALETTE), (400, 2))
    units = [_unit(*(PALETTE[k] for k in row)) for row in rows]
    whole = makeup_bands(MakeUps.of(units), incidence=0.4)
    alone = makeup_bands(MakeUps.of(units[-1:]), incidence=0.4)
    for name, values in vars(whole).items():
        assert values[..., -1] == pytest.approx(getattr(alone, name)[..., 0], abs=1e-13)


@pytest.mark.parametrize(
    ("stack", "incidence"),
    [
        ((SOFT_2, _clear(4e-3)), np.pi / 2),
        ((_clear(4e-3),) * 3, np.pi / 2),
        ((BroadbandOptics(0.0, 0.1, 1.0), BroadbandOptics(0.0, 1.0, 0.1)), 0.0),
    ],
    ids=["grazing double", "grazing triple", "facing mirrors"],
)
def test_no_light_comes_in_between_perfect_mirrors(stack: Sequence[PaneDescription], incidence: float) -> None:
    solar, _ = unit_solar(_unit(*stack), incidence=incidence, diffuse_share=0.0)
    assert solar is not None
    assert solar.transmittance == pytest.approx(0.0, abs=1e-12)
    assert solar.reflectance_out + solar.absorptance[0] == pytest.approx(1.0, abs=1e-12)
    shares = [x for own in solar.coating_absorptance for x in own if x is not None]
    assert shares == pytest.approx([0.0] * len(shares), abs=1e-12)


# what is not known


def test_unknown_panes_are_missing_only_in_their_bands_and_units() -> None:
    makeups = MakeUps.of([_unit(SOFT_2, FLAT), _unit(DARK_FLAT, SOFT_2), _unit(SOFT_2, None), _unit(FLAT, FLAT)])
    found = makeup_bands(makeups, incidence=0.3, diffuse_share=0.1)
    solar, light = [True, True, False, True], [True, False, False, True]
    for name, values in vars(found).items():
        expected = light if name.startswith("light") else solar
        assert np.isfinite(values).tolist() == ([expected] * 2 if values.ndim == 2 else expected)


def test_pane_known_in_the_sun_only_counts_like_one_as_bright_in_the_light() -> None:
    dark = BroadbandOptics(0.5, 0.25, 0.3)
    even = BroadbandOptics(0.5, 0.25, 0.3, 0.5, 0.25, 0.3)
    one, other = (makeup_bands(MakeUps.of([_unit(SOFT_2, pane)])) for pane in (dark, even))
    assert one.transmittance == pytest.approx(other.transmittance, abs=1e-15)
    assert one.absorptance == pytest.approx(other.absorptance, abs=1e-15)


def test_flat_panes_alone_give_their_own_values() -> None:
    solar, _ = unit_solar(_unit(FLAT), incidence=0.0, diffuse_share=0.0)
    assert solar is not None
    found = (solar.transmittance, solar.reflectance_out, solar.absorptance[0], solar.light_transmittance)
    assert found == pytest.approx((0.5, 0.25, 0.25, 0.7), abs=1e-12)
    assert (solar.light_reflectance_out, solar.light_reflectance_in) == pytest.approx((0.1, 0.12), abs=1e-12)
    assert solar.uv_transmittance is None
    assert solar.coating_absorptance == ((None, None),)


def test_unit_of_an_unknown_pane_has_no_solar_figures_and_says_so() -> None:
    solar, said = unit_solar(_unit(SOFT_2, None, None), incidence=0.0, diffuse_share=0.0)
    assert solar is None
    assert len(said) == 1
    assert "panes 2, 3" in said[0]


def test_uv_is_the_mean_over_its_own_wavelengths() -> None:
    solar, _ = unit_solar(_unit(_clear(3e-3), SOFT_2), incidence=0.9, diffuse_share=0.0)
    assert solar is not None
    T = _spectra((_clear(3e-3), SOFT_2), rays(incidence=0.9))[0]
    assert solar.uv_transmittance == pytest.approx((T.mean(axis=0)[0] * grid().uv).sum(), abs=1e-12)


def test_cautions_where_flat_meets_spectral_and_where_the_shape_is_a_class() -> None:
    def said(*optics: PaneDescription, incidence: float = 0.0) -> str:
        return " ".join(unit_solar(_unit(*optics), incidence=incidence, diffuse_share=0.0)[1])

    assert "band values" in said(SOFT_2, FLAT)
    assert "band values" in said(FLAT, FLAT)
    assert said(FLAT) == ""
    assert said(SOFT_2, SPECTRUM) == ""
    assert "angular shape" in said(SOFT_2, SPECTRUM, incidence=0.5)
    assert said(SOFT_2, SOFT_OUT, incidence=0.5) == ""
