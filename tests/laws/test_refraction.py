"""Dispersion by formula: limits in closed form and the optics of a free electron gas."""

import numpy as np
import pytest

from igu.laws.constants import PHOTON_ENERGY
from igu.laws.refraction import bound_electrons, even_powers_index, film_damping, free_electrons


def test_an_index_in_even_powers_at_one_and_two_micrometres() -> None:
    found = even_powers_index([1e-6, 2e-6], constant=1.5, square=-0.01, inverse_square=0.02)
    assert found == pytest.approx([1.51, 1.465])


def test_bound_electrons_far_above_and_twice_above_their_resonance() -> None:
    found = bound_electrons([1.0, 2e-7], strength=3.0, resonance=1e-7)
    assert found == pytest.approx([4.0, 1.0 + 3.0 / 0.75])


def test_photons_carry_the_energy_of_h_and_c() -> None:
    """h c / e from the exact constants of the SI."""
    assert pytest.approx(6.62607015e-34 * 299792458.0 / 1.602176634e-19, rel=1e-8) == PHOTON_ENERGY


def test_free_electrons_turn_transparent_at_the_plasma_energy_and_absorb_by_their_damping() -> None:
    """Without damping 1 - (E_p/E)^2, zero where the photon has the plasma energy. At low energy the imaginary part is
    that of a static conductivity, E_p^2/(G E)."""
    at_plasma, at_half = free_electrons([PHOTON_ENERGY / 9.0, PHOTON_ENERGY / 4.5], plasma=9.0, damping=0.0)
    assert 1.0 + at_plasma == pytest.approx(0.0, abs=1e-12)
    assert at_half == pytest.approx(-4.0)
    low = complex(free_electrons(PHOTON_ENERGY / 1e-5, plasma=9.0, damping=0.1))
    assert low.imag == pytest.approx(81.0 / (0.1 * 1e-5), rel=1e-6)
    assert low.real == pytest.approx(-81.0 / 0.1**2, rel=1e-6)


def test_a_thinner_film_damps_in_proportion_to_what_its_faces_add() -> None:
    thick, thin = (film_damping(0.04, thickness=d, fermi=1e-9, scattering=0.5) for d in (1e-8, 5e-9))
    assert (thick, thin) == pytest.approx((0.09, 0.14))
    assert np.isclose(film_damping(0.04, thickness=1.0, fermi=1e-9, scattering=0.5), 0.04)
