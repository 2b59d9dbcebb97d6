"""Snell, Fresnel and the inside of a pane: tmm, pvlib, Brewster's angle, limits."""

from __future__ import annotations

import numpy as np
import pytest
from pvlib.iam import physical
from tmm.tmm_core import interface_R, snell

from igu.laws.fresnel import admittances, internal_transmittance, lossless_slab_reflectance, refracted_cosine
from igu.laws.layers import thick_pane
from igu.laws.thinfilm import film_optics

ANGLES = np.radians([0.0, 20.0, 40.0, 57.0, 70.0, 85.0])
ONE = np.array([0.55e-6])


@pytest.mark.parametrize("index", [1.5, 1.52 + 1e-6j, 2.4 + 0.3j, 0.055 + 3.3j])
def test_snell_and_fresnel_agree_with_tmm(index: complex) -> None:
    # source: PyPI tmm 0.2 (S. J. Byrnes, arXiv:1603.02720), computed; both are closed forms, rounding only
    for angle in ANGLES:
        inside = snell(1.0, index, angle)
        cosine = refracted_cosine(np.cos(angle), index=index)
        assert cosine == pytest.approx(np.cos(inside), abs=1e-12)
        out, inn = admittances(1.0, np.cos(angle)), admittances(index, cosine)
        face = np.abs((out - inn) / (out + inn)) ** 2
        expected = [interface_R(pol, 1.0, index, angle, inside) for pol in "sp"]
        assert face == pytest.approx(expected, abs=1e-12)


def test_brewster_angle_reflects_nothing_of_p() -> None:
    n = 1.515
    reflectance, through = film_optics(ONE, cosine=np.cos(np.arctan(n)), before=1.0, after=n)
    assert reflectance[1] == pytest.approx(0.0, abs=1e-15)
    assert through[1] == pytest.approx(1.0, abs=1e-12)
    assert reflectance[0] == pytest.approx(((n * n - 1) / (n * n + 1)) ** 2, abs=1e-12)


def test_slab_at_normal_incidence_and_grazing() -> None:
    n = 1.5
    assert lossless_slab_reflectance(1.0, index=n) == pytest.approx((n - 1) ** 2 / (n * n + 1), abs=1e-15)
    assert lossless_slab_reflectance(1e-9, index=n) == pytest.approx(1.0, abs=1e-8)
    rising = lossless_slab_reflectance(np.cos(np.radians(np.linspace(0.0, 89.9, 91))), index=n)
    assert np.all(np.diff(rising) > 0.0)


def test_inside_of_a_pane_is_exponential_in_the_path() -> None:
    tau = internal_transmittance(ONE, extinction=1e-6, thickness=np.array([[3e-3], [6e-3]]), cosine=[[1.0], [1.0]])
    assert tau[1] == pytest.approx(tau[0] ** 2, rel=1e-14)
    assert tau[0] == pytest.approx(np.exp(-4 * np.pi * 1e-6 * 3e-3 / 0.55e-6), rel=1e-14)
    oblique = internal_transmittance(ONE, extinction=1e-6, thickness=3e-3, cosine=0.5)
    assert oblique == pytest.approx(tau[1], rel=1e-14)


# pvlib's own parameters (De Soto et al. 2006): extinction coefficient K = 4 pi k / lambda [1/m], thickness L [m]
N, K, L = 1.526, 4.0, 0.002


def _entry_and_internal(degrees: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    cosine = np.cos(np.radians(degrees))
    reflectance, _ = film_optics(np.array(1.0), cosine=cosine, before=1.0, after=N)
    inside = refracted_cosine(cosine, index=N).real
    internal = internal_transmittance(1.0, extinction=K / (4 * np.pi), thickness=L, cosine=inside)
    return reflectance, internal


def test_entry_face_and_absorption_are_pvlibs_slab() -> None:
    # source: pvlib iam.physical (De Soto et al., Solar Energy 80 (2006) 78), computed. It counts the entry face and one
    # absorbed passage, with neither the exit face nor internal reflections, each polarisation: exactly these two laws.
    degrees = np.array([0.0, 15.0, 30.0, 45.0, 60.0, 75.0, 88.0])
    reflectance, internal = _entry_and_internal(degrees)
    entered = ((1.0 - reflectance) * internal).mean(axis=0)
    assert entered / entered[0] == pytest.approx(physical(degrees, n=N, K=K, L=L), abs=1e-12)


@pytest.mark.parametrize(("degrees", "band"), [(30.0, 0.001), (45.0, 0.007), (60.0, 0.04), (75.0, 0.12)])
def test_whole_slab_falls_below_pvlibs_by_the_exit_face(degrees: float, band: float) -> None:
    # same source. The whole slab reflects at its exit face too, so that its modifier is lower at every angle; to first
    # order in the face reflectance the exit face takes as much again as the entry face.
    reflectance, internal = _entry_and_internal(np.array([0.0, degrees]))
    face = (reflectance, reflectance, 1.0 - reflectance)
    through = thick_pane(outer=face, inner=face, internal=internal)[0].mean(axis=0)
    simple = physical(degrees, n=N, K=K, L=L)
    assert simple - band < through[1] / through[0] < simple
    assert (simple - through[1] / through[0]) > 0.5 * band
