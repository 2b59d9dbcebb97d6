"""Coherent films against tmm: soft and hard stacks, both sides, s and p, angles; energy and reversibility."""

from __future__ import annotations

import numpy as np
import pytest
from tmm import coh_tmm

from igu.arrays import Array
from igu.laws.thinfilm import film_optics

WAVES = np.array([0.35e-6, 0.55e-6, 1.0e-6, 2.2e-6])
ANGLES = np.radians([0.0, 35.0, 60.0, 80.0])
GLASS = 1.52

# index at each of the wavelengths, thickness [m]; round figures like those of an oxide, silver and a conductive oxide
OXIDE = np.array([3.0 + 0.07j, 2.45, 2.30, 2.27])
METAL = np.array([0.08 + 1.34j, 0.06 + 3.4j, 0.09 + 6.9j, 0.5 + 15.3j])
TCO = np.array([2.1 + 0.01j, 1.9 + 0.01j, 1.6 + 0.06j, 0.7 + 1.4j])
STACKS = {
    "bare": ((), ()),
    "single": ((OXIDE, METAL, OXIDE), (30e-9, 12e-9, 25e-9)),
    "double": ((OXIDE, METAL, OXIDE, METAL, OXIDE), (33e-9, 14e-9, 50e-9, 12e-9, 21e-9)),
    "hard": ((TCO,), (320e-9,)),
}


def _from_air(stack: str, cosine: float) -> tuple[Array, Array]:
    indices, thicknesses = STACKS[stack]
    return film_optics(
        WAVES, cosine=cosine, before=1.0, after=GLASS, indices=indices[::-1], thicknesses=thicknesses[::-1]
    )


def _from_glass(stack: str, cosine: float) -> tuple[Array, Array]:
    indices, thicknesses = STACKS[stack]
    return film_optics(WAVES, cosine=cosine, before=GLASS, after=1.0, indices=indices, thicknesses=thicknesses)


@pytest.mark.parametrize("stack", STACKS)
@pytest.mark.parametrize("angle", ANGLES)
def test_both_sides_are_tmms(stack: str, angle: float) -> None:
    # source: PyPI tmm 0.2, coh_tmm (S. J. Byrnes, arXiv:1603.02720), computed; the same physics, rounding only
    indices, thicknesses = STACKS[stack]
    inside = np.arcsin(np.sin(angle) / GLASS)
    for w, wave in enumerate(WAVES):
        n = [film[w] for film in indices]
        for p, pol in enumerate("sp"):
            air = coh_tmm(pol, [1.0, *n[::-1], GLASS], [np.inf, *thicknesses[::-1], np.inf], angle, wave)
            glass = coh_tmm(pol, [GLASS, *n, 1.0], [np.inf, *thicknesses, np.inf], inside, wave)
            ours = [part[p, w] for part in (*_from_air(stack, np.cos(angle)), *_from_glass(stack, np.cos(angle)))]
            assert ours == pytest.approx([air["R"], air["T"], glass["R"], glass["T"]], abs=1e-10)


@pytest.mark.parametrize("stack", STACKS)
def test_transmittance_is_the_same_both_ways(stack: str) -> None:
    # Helmholtz reciprocity; holds with absorption
    for angle in ANGLES:
        _, inwards = _from_air(stack, np.cos(angle))
        _, outwards = _from_glass(stack, np.cos(angle))
        assert inwards == pytest.approx(outwards, abs=1e-13)


def test_lossless_films_absorb_nothing_and_reflect_alike_both_ways() -> None:
    # Stokes' relations
    films, thicknesses = (2.4, 1.38), (57e-9, 99e-9)
    for angle in ANGLES:
        R, T = film_optics(WAVES, cosine=np.cos(angle), before=1.0, after=GLASS, indices=films, thicknesses=thicknesses)
        back, _ = film_optics(
            WAVES, cosine=np.cos(angle), before=GLASS, after=1.0, indices=films[::-1], thicknesses=thicknesses[::-1]
        )
        assert pytest.approx(np.ones_like(R), abs=1e-13) == R + T
        assert back == pytest.approx(R, abs=1e-13)


def test_quarter_wave_film_of_the_root_index_cancels_reflection() -> None:
    # Born & Wolf, Principles of Optics, 1.6.4: n_1^2 = n_0 n_2 and n_1 d = lambda / 4
    wave = np.array([0.55e-6])
    index = np.sqrt(GLASS)
    R, _ = film_optics(wave, cosine=1.0, before=1.0, after=GLASS, indices=(index,), thicknesses=(0.55e-6 / 4 / index,))
    assert pytest.approx(np.zeros((2, 1)), abs=1e-15) == R


def test_film_of_no_thickness_and_film_of_the_glass_change_nothing() -> None:
    bare = _from_air("bare", 0.6)
    for index, thickness in ((2.4 + 0.1j, 0.0), (GLASS, 200e-9)):
        same = film_optics(WAVES, cosine=0.6, before=1.0, after=GLASS, indices=(index,), thicknesses=(thickness,))
        assert np.array(same) == pytest.approx(np.array(bare), abs=1e-14)
