"""Planck's law against its integrals; diffuse light against closed forms and fine quadrature."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.constants import c, h, k, sigma
from scipy.integrate import quad, trapezoid

from igu.laws.fresnel import lossless_slab_reflectance
from igu.laws.spectrum import DIFFUSE_NODES, PLANCK_C1, PLANCK_C2, black_body_emission, diffuse_cosines


def test_radiation_constants_are_codata() -> None:
    # source: scipy.constants (CODATA), computed; 10 printed digits
    assert pytest.approx(2 * np.pi * h * c**2, rel=1e-9) == PLANCK_C1
    assert pytest.approx(h * c / k, rel=1e-9) == PLANCK_C2


@pytest.mark.parametrize("T", [250.0, 283.0, 350.0])
def test_planck_integrates_to_stefan_boltzmann(T: float) -> None:
    wave = np.geomspace(1.0e-6, 5e-3, 4001)
    total = trapezoid(black_body_emission(wave, T) * wave, np.log(wave))
    # what lies beyond 1 um to 5 mm is below 1e-6 at these temperatures
    assert total == pytest.approx(sigma * T**4, rel=2e-6)


def test_planck_peaks_at_wiens_wavelength() -> None:
    # Wien's displacement constant 2897.77 um K (CODATA, memory)
    wave = np.linspace(9.0e-6, 11.0e-6, 20001)
    peak = wave[np.argmax(black_body_emission(wave, 283.0))]
    assert peak * 283.0 == pytest.approx(2.89777e-3, rel=2e-5)


def test_diffuse_weights_integrate_powers_of_the_cosine() -> None:
    # 2 integral of cos^(m+1) over the cosine = 2 / (m + 2); n nodes are exact to the power 2 n - 2
    cosine, weight = diffuse_cosines(6)
    assert weight.sum() == pytest.approx(1.0, abs=1e-14)
    for power in range(11):
        assert (weight * cosine**power).sum() == pytest.approx(2.0 / (power + 2), abs=1e-14)


def _hemispherical(index: float, nodes: int) -> float:
    cosine, weight = diffuse_cosines(nodes)
    return float((weight * lossless_slab_reflectance(cosine, index=index)).sum())


@pytest.mark.parametrize("index", [1.3, 1.515, 2.0])
def test_few_nodes_integrate_a_slab_like_two_hundred(index: float) -> None:
    assert _hemispherical(index, DIFFUSE_NODES) == pytest.approx(_hemispherical(index, 200), abs=1e-5)


def test_two_hundred_nodes_agree_with_an_integral_over_the_angle() -> None:
    def integrand(angle: float) -> float:
        return float(lossless_slab_reflectance(np.cos(angle), index=1.515) * np.sin(2.0 * angle))

    # source: scipy.integrate.quad (QUADPACK), computed, over the angle in place of the cosine
    expected, _ = quad(integrand, 0.0, np.pi / 2 - 1e-9, epsabs=1e-10)
    assert _hemispherical(1.515, 200) == pytest.approx(expected, abs=1e-8)
