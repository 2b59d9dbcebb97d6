"""Panes behind one another: tmm's partly coherent stacks, closed forms, energy, reversal."""

from __future__ import annotations

import numpy as np
import pytest
from tmm import inc_tmm

from igu.arrays import Array
from igu.laws.fresnel import internal_transmittance, lossless_slab_reflectance, refracted_cosine
from igu.laws.layers import combine_layers, thick_pane
from igu.laws.thinfilm import film_optics

WAVE = 0.9e-6
ANGLES = np.radians([0.0, 40.0, 60.0, 78.0])

Film = tuple[complex, float]
Ply = tuple[tuple[Film, ...], complex, float, tuple[Film, ...]]

SOFT: tuple[Film, ...] = ((2.31, 30e-9), (0.09 + 6.2j, 12e-9), (2.31, 28e-9))
HARD: tuple[Film, ...] = ((1.65 + 0.05j, 320e-9),)
# k below 1e-6 as of clear glass in the light, and thicknesses that make it absorb as much as tinted panes do;
# films on the outer face (outdoors first), index, thickness [m], films on the inner face
PANES: dict[str, Ply] = {
    "clear": ((), 1.515 + 4.0e-7j, 10e-3, ()),
    "dark": ((), 1.515 + 8.0e-7j, 100e-3, ()),
    "soft": ((), 1.515 + 5.0e-7j, 20e-3, SOFT),
    "hard": (HARD, 1.515 + 6.0e-7j, 30e-3, ()),
    "both": (SOFT[::-1], 1.515 + 3.0e-7j, 20e-3, HARD),
    "lossy": ((), 1.515 + 2.3e-5j, 4e-3, SOFT),
}
STACKS = (("clear",), ("both",), ("soft", "clear"), ("dark", "hard"), ("soft", "clear", "both"), ("clear", "dark") * 2)


def _pane(name: str, cosine: float) -> tuple[Array, Array, Array]:
    """T, R_out, R_in of one pane by our laws, polarisation first."""
    outer_films, index, thickness, inner_films = PANES[name]
    wave = np.array(WAVE)
    inside = refracted_cosine(cosine, index=index.real).real
    internal = internal_transmittance(wave, extinction=index.imag, thickness=thickness, cosine=inside)
    outer = _face(outer_films[::-1], index.real, cosine)
    inner = _face(inner_films, index.real, cosine)
    return thick_pane(outer=outer, inner=inner, internal=internal)[:3]


def _face(films: tuple[Film, ...], glass: float, cosine: float) -> tuple[Array, Array, Array]:
    """From the glass outwards: reflectance from the air, from the glass, transmittance."""
    wave = np.array(WAVE)
    indices, thicknesses = [n for n, _ in films], [d for _, d in films]
    from_glass, _ = film_optics(wave, cosine=cosine, before=glass, after=1.0, indices=indices, thicknesses=thicknesses)
    from_air, through = film_optics(
        wave, cosine=cosine, before=1.0, after=glass, indices=indices[::-1], thicknesses=thicknesses[::-1]
    )
    return from_air, from_glass, through


def _tmm(names: tuple[str, ...], angle: float, pol: str) -> tuple[float, float, list[float]]:
    """T, R and the share that every pane absorbs by tmm: films coherent, glass and gaps incoherent."""
    n, d, coherent, first = [1.0 + 0j], [np.inf], ["i"], []
    incoherent = 0
    for name in names:
        outer, index, thickness, inner = PANES[name]
        for film in outer:
            n, d, coherent = [*n, film[0]], [*d, film[1]], [*coherent, "c"]
        n, d, coherent = [*n, index], [*d, thickness], [*coherent, "i"]
        for film in inner:
            n, d, coherent = [*n, film[0]], [*d, film[1]], [*coherent, "c"]
        n, d, coherent = [*n, 1.0], [*d, 12e-3], [*coherent, "i"]
        first.append(incoherent)
        incoherent += 2
    d[-1] = np.inf
    found = inc_tmm(pol, n, d, coherent, angle, WAVE)
    # net power entering each gap: what enters the one before a pane less what enters the one behind stays in the pane
    entering = found["power_entering_list"]
    gaps = [1.0 - found["R"], *(entering[k] for k in range(2, len(entering), 2))]
    return found["T"], found["R"], [gaps[k] - gaps[k + 1] for k in range(len(names))]


@pytest.mark.parametrize("names", STACKS, ids="-".join)
@pytest.mark.parametrize("angle", ANGLES)
def test_whole_stacks_are_tmms(names: tuple[str, ...], angle: float) -> None:
    # source: PyPI tmm 0.2, inc_tmm (S. J. Byrnes, arXiv:1603.02720), computed. Band 1e-6: in glass that
    # absorbs, tmm keeps an interference of order k between light to and from a film, which ours leaves out.
    _compare(names, angle, band=1e-6)


@pytest.mark.parametrize("angle", ANGLES)
def test_absorbing_glass_departs_from_tmm_by_less_than_its_k(angle: float) -> None:
    # as above, with k = 2.3e-5, the most a catalogue glass has from 0.35 to 2.5 um (green, at 1.2 um)
    _compare(("lossy", "clear"), angle, band=2.3e-5)


def _compare(names: tuple[str, ...], angle: float, *, band: float) -> None:
    panes = [_pane(name, np.cos(angle)) for name in names]
    ours = combine_layers(*(np.array([pane[part] for pane in panes]) for part in range(3)))
    for p, pol in enumerate("sp"):
        T, R, absorbed = _tmm(names, angle, pol)
        assert ours.transmittance[p] == pytest.approx(T, abs=band)
        assert ours.reflectance_front[p] == pytest.approx(R, abs=band)
        assert ours.absorbed_front[:, p] == pytest.approx(absorbed, abs=band)


@pytest.mark.parametrize("names", STACKS, ids="-".join)
def test_the_back_is_the_front_of_the_reversed_stack(names: tuple[str, ...]) -> None:
    panes = [_pane(name, 0.6) for name in names]
    T, out, inn = (np.array([pane[part] for pane in panes]) for part in range(3))
    one, other = combine_layers(T, out, inn), combine_layers(T[::-1], inn[::-1], out[::-1])
    assert other.transmittance == pytest.approx(one.transmittance, abs=1e-14)
    assert other.reflectance_front == pytest.approx(one.reflectance_back, abs=1e-14)
    assert other.absorbed_front[::-1] == pytest.approx(one.absorbed_back, abs=1e-14)


@pytest.mark.parametrize("count", [1, 2, 3, 6])
def test_identical_lossless_plates_in_closed_form(count: int) -> None:
    # Stokes 1862: n plates of two faces each transmit (1 - r) / (1 + (2 n - 1) r), r the reflectance of one face
    cosine = np.cos(ANGLES)
    plate = lossless_slab_reflectance(cosine, index=1.515)
    reflectance, _ = film_optics(np.array(WAVE), cosine=cosine, before=1.0, after=1.515)
    each = 2.0 * reflectance / (1.0 + reflectance)
    assert plate == pytest.approx(each.mean(axis=0), abs=1e-14)
    layers = np.broadcast_to(each, (count, *each.shape))
    found = combine_layers(1.0 - layers, layers, layers)
    assert found.transmittance == pytest.approx((1 - reflectance) / (1 + (2 * count - 1) * reflectance), abs=1e-13)
    assert found.absorbed_front == pytest.approx(np.zeros_like(layers), abs=1e-13)


@pytest.mark.parametrize("count", [1, 2, 3, 5])
def test_energy_closes_for_any_layers_both_ways(count: int) -> None:
    random = np.random.default_rng(count)
    T, out, inn = random.dirichlet(np.ones(4), size=(count, 500)).T[:3].swapaxes(1, 2)
    found = combine_layers(T, out, inn)
    for reflected, absorbed in (
        (found.reflectance_front, found.absorbed_front),
        (found.reflectance_back, found.absorbed_back),
    ):
        assert found.transmittance + reflected + absorbed.sum(axis=0) == pytest.approx(np.ones(500), abs=1e-12)
        assert absorbed.min() >= 0.0


@pytest.mark.parametrize("count", [2, 3, 5])
@pytest.mark.parametrize("through", [0.0, 1e-16, 1e-12, 1e-6])
def test_mirrors_that_face_each_other_send_all_light_back(count: int, through: float) -> None:
    T = np.full((count, 1), through)
    found = combine_layers(T, 1.0 - T, 1.0 - T)
    assert found.reflectance_front == pytest.approx(1.0 - found.transmittance, abs=1e-12)
    assert found.transmittance[0] <= through
    assert np.abs(found.absorbed_front).max() < 1e-15


def test_facing_mirrors_absorb_only_the_light_that_falls_on_their_outer_sides() -> None:
    found = combine_layers(np.zeros((2, 1)), np.array([[0.1], [1.0]]), np.array([[1.0], [0.2]]))
    assert found.absorbed_front[:, 0] == pytest.approx([0.9, 0.0], abs=1e-15)
    assert found.absorbed_back[:, 0] == pytest.approx([0.0, 0.8], abs=1e-15)


def test_two_layers_by_hand() -> None:
    # EN 410:2011, 5.2, double glazing: tau = tau_1 tau_2 / (1 - rho'_1 rho_2); alpha_1 and alpha_2 likewise (memory)
    (t1, r1, s1), (t2, r2, s2) = (0.6, 0.25, 0.15), (0.8, 0.08, 0.07)
    found = combine_layers(np.array([[t1], [t2]]), np.array([[r1], [r2]]), np.array([[s1], [s2]]))
    echo = 1.0 / (1.0 - s1 * r2)
    assert found.transmittance == pytest.approx(t1 * t2 * echo, abs=1e-15)
    assert found.reflectance_front == pytest.approx(r1 + t1 * t1 * r2 * echo, abs=1e-15)
    assert found.reflectance_back == pytest.approx(s2 + t2 * t2 * s1 * echo, abs=1e-15)
    expected = [1 - t1 - r1 + (1 - t1 - s1) * t1 * r2 * echo, (1 - t2 - r2) * t1 * echo]
    assert found.absorbed_front[:, 0] == pytest.approx(expected, abs=1e-15)


def test_what_falls_on_the_faces_of_a_thick_pane_carries_the_energy() -> None:
    # film losses and the loss inside, each from the light that falls on it, make up all that is not sent back
    outer, inner, internal = (0.10, 0.12, 0.80), (0.30, 0.25, 0.50), 0.9
    T, front, back, outer_front, outer_back, inner_front, inner_back = thick_pane(
        outer=tuple(map(np.array, outer)), inner=tuple(map(np.array, inner)), internal=np.array(internal)
    )
    lost_out, lost_in = 1 - outer[1] - outer[2], 1 - inner[1] - inner[2]
    inside = (1 - internal) / internal
    # light that has crossed the glass falls on the far face: before crossing it was 1/internal times as much
    from_front = 1 - outer[0] - outer[2] + outer_front * lost_out + inner_front * lost_in
    from_front = from_front + (inner_front + outer_front) * inside
    from_back = 1 - inner[0] - inner[2] + inner_back * lost_in + outer_back * lost_out
    from_back = from_back + (inner_back + outer_back) * inside
    assert T + front + from_front == pytest.approx(1.0, abs=1e-14)
    assert T + back + from_back == pytest.approx(1.0, abs=1e-14)
