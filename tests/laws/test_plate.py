"""Plates against a double Navier series, closed-form limits and elementary statics."""

from __future__ import annotations

import numpy as np
import pytest

from igu.arrays import Array
from igu.laws.plate import (
    DENSITY,
    bending_stress,
    centre_line,
    effective_thickness,
    flexural_rigidity,
    plate_coefficients,
)


def navier(aspect: float, poisson: float, x: Array, y: Array, *, orders: int = 61) -> tuple[Array, Array, Array, Array]:
    """Deflection over q a^4/D and moments M_x, M_y, M_xy over q a^2 on the grid x by y, in shares of the sides."""
    m = np.arange(1, orders, 2)
    n = m / aspect
    load = 16.0 / np.pi**2 / np.outer(m, m)
    w = load / (np.pi**4 * (m[:, None] ** 2 + n**2) ** 2)
    sx, sy = np.sin(np.pi * np.outer(x, m)), np.sin(np.pi * np.outer(m, y))
    cx, cy = np.cos(np.pi * np.outer(x, m)), np.cos(np.pi * np.outer(m, y))
    along, across = np.pi**2 * w * m[:, None] ** 2, np.pi**2 * w * n**2
    twist = np.pi**2 * w * np.outer(m, n)
    return (
        sx @ w @ sy,
        sx @ (along + poisson * across) @ sy,
        sx @ (across + poisson * along) @ sy,
        (1.0 - poisson) * (cx @ twist @ cy),
    )


@pytest.mark.parametrize("aspect", [1.0, 1.37, 2.5, 6.0])
def test_levys_series_is_naviers(aspect: float) -> None:
    middle = np.array([0.5])
    w, m_x, m_y, _ = (float(z[0, 0]) for z in navier(aspect, 0.23, middle, middle, orders=1201))
    found = plate_coefficients(aspect)
    assert found.centre == pytest.approx(w, rel=1e-9)
    # Navier's moments fall off as 1/m^3 only, the double sum's tail is what is left
    assert found.moment_short == pytest.approx(m_x, rel=1e-7)
    assert found.moment_long == pytest.approx(m_y, rel=1e-7)


@pytest.mark.parametrize("aspect", [1.0, 1.37, 2.5, 6.0])
def test_mean_is_the_double_series_integrated(aspect: float) -> None:
    m = np.arange(1, 801, 2)
    squares = np.outer(m, m) ** 2 * (m[:, None] ** 2 + (m / aspect) ** 2) ** 2
    assert plate_coefficients(aspect).mean == pytest.approx(64.0 / np.pi**8 * (1.0 / squares).sum(), rel=1e-10)


@pytest.mark.parametrize("aspect", [1.0, 1.5, 3.0])
def test_the_greatest_principal_moment_stands_at_the_centre(aspect: float) -> None:
    # twisting is greatest in the corners; it stays below the centre's bending
    grid = np.linspace(0.0, 1.0, 41)
    _, m_x, m_y, m_xy = navier(aspect, 0.23, grid, grid)
    greatest = 0.5 * (m_x + m_y) + np.hypot(0.5 * (m_x - m_y), m_xy)
    assert plate_coefficients(aspect).moment_short == pytest.approx(greatest.max(), rel=2e-3)


def test_long_plates_are_strips() -> None:
    # beam of span a, stiffened by D: 5/384, mean 1/120, 1/8
    found = plate_coefficients([40.0, 1e4])
    np.testing.assert_allclose(found.centre, 5.0 / 384.0, rtol=1e-12)
    np.testing.assert_allclose(found.moment_short, 1.0 / 8.0, rtol=1e-12)
    np.testing.assert_allclose(found.moment_long, 0.23 / 8.0, rtol=1e-12)
    assert found.mean[1] == pytest.approx(1.0 / 120.0, rel=1e-4)


def test_each_end_of_a_long_plate_takes_the_same_off_the_mean() -> None:
    # the ends of a plate beyond b = 5a do not feel each other: (1/120 - mean) b is one number
    lost = (1.0 / 120.0 - plate_coefficients([6.0, 12.0, 100.0]).mean) * np.array([6.0, 12.0, 100.0])
    np.testing.assert_allclose(lost, lost[0], rtol=1e-5)


def test_a_square_has_no_long_side() -> None:
    found = plate_coefficients(1.0)
    assert found.moment_short == pytest.approx(found.moment_long, rel=1e-9)


def test_turning_a_plate_changes_nothing() -> None:
    # the same plate with the sides' roles swapped: a^4 and a^2 scale, the moments change places
    upright, lying = plate_coefficients(1.7), plate_coefficients(1.0 / 1.7)
    assert lying.centre * 1.7**4 == pytest.approx(upright.centre, rel=1e-7)
    assert lying.mean * 1.7**4 == pytest.approx(upright.mean, rel=1e-7)
    assert lying.moment_short * 1.7**2 == pytest.approx(upright.moment_long, rel=1e-5)
    assert lying.moment_long * 1.7**2 == pytest.approx(upright.moment_short, rel=1e-5)


def test_deflections_do_not_depend_on_poisson_but_moments_do() -> None:
    low, high = plate_coefficients(1.3, poisson=0.0), plate_coefficients(1.3, poisson=0.3)
    assert (low.centre, low.mean) == (high.centre, high.mean)
    assert high.moment_short == pytest.approx(low.moment_short + 0.3 * low.moment_long, rel=1e-14)


def test_coefficients_grow_with_length_and_keep_the_shape_of_their_argument() -> None:
    found = plate_coefficients(np.linspace(1.0, 8.0, 60).reshape(3, 20))
    assert found.mean.shape == (3, 20)
    for rising in (found.centre, found.mean, found.moment_short):
        assert np.all(np.diff(rising.ravel()) > 0.0)


def test_rigidity() -> None:
    # E t^3 / 12 (1 - nu^2) of 10 mm, 70 GPa, 0.25 -> 70e9 x 1e-6 / 11.25 = 6222.2 N m
    assert flexural_rigidity(0.010, poisson=0.25) == pytest.approx(70e3 / 11.25, rel=1e-14)


def test_a_millimetre_of_glass_weighs_two_and_a_half_kilograms() -> None:
    # 2500 kg/m3, EN 572-1 (memory), GOST R 54170 (seen): 4 mm lying flat are 98 Pa
    assert pytest.approx(98.07, abs=5e-3) == DENSITY * 9.80665 * 0.004


def test_stress_of_a_strip_is_that_of_a_beam() -> None:
    # 1 m span, 6 mm, 1 kPa: M = 125 N m/m, Z = b t^2/6 = 6e-6 m3/m: 20.83 MPa
    strip = plate_coefficients(50.0)
    stress = bending_stress(1000.0 * strip.moment_short, thickness=0.006)
    assert stress == pytest.approx(125.0 / 6e-6, rel=1e-9)


def test_laminated_between_sliding_and_monolithic() -> None:
    # two plies of 4 mm, no interlayer: monolithic 8 mm; sliding plies 4 x 2^(1/3) and, for stress, 4 x 2^(1/2)
    deflection, stress = effective_thickness([0.004, 0.004], [0.0], transfer=1.0)
    assert deflection == pytest.approx(0.008, rel=1e-14)
    np.testing.assert_allclose(stress, 0.008, rtol=1e-14)
    deflection, stress = effective_thickness([0.004, 0.004], [0.00076], transfer=0.0)
    assert deflection == pytest.approx(0.004 * 2 ** (1 / 3), rel=1e-14)
    np.testing.assert_allclose(stress, 0.004 * 2**0.5, rtol=1e-14)


def test_coupled_plies_with_a_thick_interlayer_are_a_sandwich() -> None:
    # parallel-axis theorem: I = sum h^3/12 + h e^2; stress at the outer face of ply j: M (|e_j| + h_j/2) / I
    h, core = np.array([0.006, 0.004]), 0.00152
    centre = np.array([0.003, 0.006 + core + 0.002])
    lever = np.abs(centre - (h @ centre) / h.sum())
    inertia = (h**3 / 12.0 + h * lever**2).sum()
    deflection, stress = effective_thickness(h, [core], transfer=1.0)
    assert deflection**3 / 12.0 == pytest.approx(inertia, rel=1e-14)
    np.testing.assert_allclose(bending_stress(1.0, thickness=stress), (lever + h / 2.0) / inertia, rtol=1e-13)


def test_three_plies_and_the_order_of_a_pane_turned_round() -> None:
    deflection, stress = effective_thickness([0.003, 0.006, 0.004], [0.0008, 0.0015], transfer=0.4)
    turned, back = effective_thickness([0.004, 0.006, 0.003], [0.0015, 0.0008], transfer=0.4)
    assert turned == pytest.approx(deflection, rel=1e-14)
    np.testing.assert_allclose(back[::-1], stress, rtol=1e-13)


def test_laminates_by_the_batch() -> None:
    thick = np.array([[0.004, 0.006, 0.004], [0.004, 0.004, 0.008]])
    between, transfer = np.full((1, 3), 0.00076), np.array([0.0, 0.5, 1.0])
    deflection, stress = effective_thickness(thick, between, transfer=transfer)
    assert deflection.shape == (3,)
    assert stress.shape == (2, 3)
    for k in range(3):
        one, plies = effective_thickness(thick[:, k], between[:, k], transfer=transfer[k])
        assert deflection[k] == pytest.approx(one, rel=1e-13)
        np.testing.assert_allclose(stress[:, k], plies, rtol=1e-13)


def test_shear_transfer_stiffens() -> None:
    found = [effective_thickness([0.004, 0.006], [0.00076], transfer=w)[0] for w in np.linspace(0.0, 1.0, 11)]
    assert np.all(np.diff(found) > 0.0)


def test_one_ply_is_itself() -> None:
    deflection, stress = effective_thickness([0.006], [], transfer=0.3)
    assert deflection == pytest.approx(0.006, rel=1e-14)
    np.testing.assert_allclose(stress, [0.006], rtol=1e-14)


def test_the_line_through_the_centre_is_a_strips_across_a_wide_plate_and_flat_along_a_tall_one() -> None:
    # beam under uniform load: 16/5 (y - 2 y^3 + y^4); ends of a long plate are felt over about its short side
    at = np.linspace(0.0, 1.0, 41)
    np.testing.assert_allclose(centre_line(8.0, 1.0, at), 3.2 * (at - 2.0 * at**3 + at**4), atol=1e-4)
    tall = centre_line(1.0, 8.0, at)
    np.testing.assert_allclose(tall[15:26], 1.0, atol=2e-3)
    assert tall[0] == pytest.approx(0.0, abs=1e-12)


def test_the_line_through_the_centre_of_a_square_by_finite_differences() -> None:
    # D lap lap w = q, w = lap w = 0 on the edges: two Poisson problems on a grid of 40 x 40, its error some 1e-3
    n = 39
    line = 2.0 * np.eye(n) - np.eye(n, k=1) - np.eye(n, k=-1)
    laplace = np.kron(line, np.eye(n)) + np.kron(np.eye(n), line)
    bent = np.linalg.solve(laplace, np.linalg.solve(laplace, np.ones(n * n))).reshape(n, n)
    at = np.arange(1, n + 1) / (n + 1.0)
    np.testing.assert_allclose(centre_line(1.0, 1.0, at), bent[:, n // 2] / bent[n // 2, n // 2], atol=1e-3)
