"""Mixing rules against closed forms, kinetic theory and the library chemicals."""

from __future__ import annotations

import numpy as np
import pytest

from igu.arrays import Array
from igu.laws import gas
from igu.laws.constants import GAS_CONSTANT

# air, argon, krypton, xenon at 283.15 K: handbook figures of the right size, any would do
MASSES = np.array([0.02897, 0.039948, 0.0838, 0.1313])
CONDUCTIVITIES = np.array([0.0251, 0.0170, 0.00915, 0.00536])
VISCOSITIES = np.array([1.77e-5, 2.17e-5, 2.43e-5, 2.21e-5])
SPECIFIC_HEATS = np.array([1006.0, 521.0, 249.0, 160.0])


def mixed(shares: Array) -> tuple[Array, Array, Array]:
    return (
        gas.mixture_conductivity(shares, CONDUCTIVITIES, viscosities=VISCOSITIES, mole_masses=MASSES),
        gas.mixture_viscosity(shares, VISCOSITIES, mole_masses=MASSES),
        gas.mixture_specific_heat(shares, SPECIFIC_HEATS, mole_masses=MASSES),
    )


@pytest.mark.parametrize("only", range(4))
def test_a_share_of_one_gives_back_the_gas(only: int) -> None:
    expected = CONDUCTIVITIES[only], VISCOSITIES[only], SPECIFIC_HEATS[only]
    np.testing.assert_allclose(mixed(np.eye(4)[only]), expected, rtol=1e-14)


def test_two_halves_of_one_gas_are_that_gas() -> None:
    pair, halves = np.zeros(2), np.full(2, 0.5)
    k = gas.mixture_conductivity(halves, pair + 0.017, viscosities=pair + 2.2e-5, mole_masses=pair + 0.04)
    mu = gas.mixture_viscosity(halves, pair + 2.2e-5, mole_masses=pair + 0.04)
    np.testing.assert_allclose([k, mu], [0.017, 2.2e-5], rtol=1e-14)


def test_the_order_of_the_gases_does_not_matter() -> None:
    shares = np.array([0.1, 0.2, 0.3, 0.4])
    order = [2, 0, 3, 1]
    swapped = gas.mixture_conductivity(
        shares[order], CONDUCTIVITIES[order], viscosities=VISCOSITIES[order], mole_masses=MASSES[order]
    )
    assert swapped == pytest.approx(mixed(shares)[0], rel=1e-14)


def test_mixtures_broadcast_over_the_axes_behind_the_gases() -> None:
    shares = np.array([[0.1, 0.5], [0.9, 0.3], [0.0, 0.1], [0.0, 0.1]])
    columns = [a[:, None] for a in (CONDUCTIVITIES, VISCOSITIES, MASSES)]
    k = gas.mixture_conductivity(shares, columns[0], viscosities=columns[1], mole_masses=columns[2])
    np.testing.assert_allclose(k, [mixed(shares[:, 0])[0], mixed(shares[:, 1])[0]], rtol=1e-14)


def swapped_psi(shares: Array) -> float:
    """The conductivity with the 2.41 bracket put on the wrong part, after ISO 15099's own symbols."""
    k1 = 15 / 4 * 8.314462618 / MASSES * VISCOSITIES
    k2 = CONDUCTIVITIES - k1
    total = 0.0
    for i in range(4):
        without = bracketed = 0.0
        for j in range(4):
            M_i, M_j = MASSES[i], MASSES[j]
            phi = (1 + (k1[i] / k1[j]) ** 0.5 * (M_i / M_j) ** 0.25) ** 2 / (8 * (1 + M_i / M_j)) ** 0.5
            without += shares[j] * phi
            bracketed += shares[j] * phi * (1 + 2.41 * (M_i - M_j) * (M_i - 0.142 * M_j) / (M_i + M_j) ** 2)
        total += shares[i] * (k1[i] / without + k2[i] / bracketed)
    return total


def test_krypton_at_ninety_per_cent_tells_which_part_has_the_bracket() -> None:
    # 2.5 %, two digits (computed, no source)
    shares = np.array([0.1, 0.0, 0.9, 0.0])
    assert swapped_psi(shares) / mixed(shares)[0] - 1 == pytest.approx(0.025, abs=0.003)


# Lennard-Jones diameter [0.1 nm] and eps/k [K]: Hirschfelder, Curtiss & Bird, Molecular Theory of Gases and
# Liquids, table I-A (memory); mole mass [g/mol].
LENNARD_JONES = {
    "helium": (2.576, 10.22, 4.0026),
    "argon": (3.418, 124.0, 39.948),
    "krypton": (3.61, 190.0, 83.80),
    "xenon": (4.055, 229.0, 131.30),
}
# The rule approximates kinetic theory's first order: helium-argon to 1.2 %, the other pairs to 6 % (computed
# here; no published figure). With the bracket left out helium in argon is 12 % and in krypton 10 % off.
KINETIC_BANDS = {
    ("helium", "argon"): 0.015,
    ("helium", "krypton"): 0.065,
    ("argon", "krypton"): 0.065,
    ("argon", "xenon"): 0.065,
    ("krypton", "xenon"): 0.065,
}


def kinetic_theory(pair: tuple[str, str], share: Array, T: float) -> tuple[Array, Array]:
    """Conductivities [W/(m K)] of two monatomic gases (2,) and of their mixture, Chapman-Enskog first order.

    Source: Hirschfelder, Curtiss & Bird, eq. 8.2-36 (memory); collision integrals of Neufeld, Janzen & Aziz
    1972 from the library chemicals.
    """
    from chemicals import collision_integral_Neufeld_Janzen_Aziz as omega

    def conductivity(sigma: float, eps: float, mass: float) -> float:
        return 8.3224e-2 * np.sqrt(T / mass) / (sigma**2 * omega(T / eps, 2, 2))

    (s1, e1, M1), (s2, e2, M2) = (LENNARD_JONES[name] for name in pair)
    k1, k2 = conductivity(s1, e1, M1), conductivity(s2, e2, M2)
    k12 = conductivity((s1 + s2) / 2, np.sqrt(e1 * e2), 2 * M1 * M2 / (M1 + M2))
    t = T / np.sqrt(e1 * e2)
    A = omega(t, 2, 2) / omega(t, 1, 1)
    B = (5 * omega(t, 1, 2) - 4 * omega(t, 1, 3)) / omega(t, 1, 1)
    c, d, m = (12 / 5 * B + 1) / 12, (M1 - M2) ** 2 / (M1 * M2), (M1 + M2) ** 2 / (4 * M1 * M2)
    U1, U2 = (4 / 15 * A - c * ratio + d / 2 for ratio in (M1 / M2, M2 / M1))
    UY = 4 / 15 * A * m * k12**2 / (k1 * k2) - c - 5 / (32 * A) * (12 / 5 * B - 5) * d
    UZ = 4 / 15 * A * (m * (k12 / k1 + k12 / k2) - 1) - c
    a, b, ab = share**2, (1 - share) ** 2, 2 * share * (1 - share)
    X = a / k1 + ab / k12 + b / k2
    Y = a / k1 * U1 + ab / k12 * UY + b / k2 * U2
    Z = a * U1 + ab * UZ + b * U2
    return np.array([k1, k2]), (1 + Z) / (X + Y)


@pytest.mark.parametrize("pair", KINETIC_BANDS)
def test_monatomic_mixtures_follow_kinetic_theory(pair: tuple[str, str]) -> None:
    share = np.array([0.1, 0.25, 0.5, 0.75, 0.9])
    pure, expected = kinetic_theory(pair, share, 300.0)
    masses = np.array([[LENNARD_JONES[name][2] / 1000] for name in pair])
    conductivities = pure[:, None]
    viscosities = conductivities * masses / (15 / 4 * GAS_CONSTANT)
    shares = np.array([share, 1 - share])
    k = gas.mixture_conductivity(shares, conductivities, viscosities=viscosities, mole_masses=masses)
    np.testing.assert_allclose(k, expected, rtol=KINETIC_BANDS[pair])


def test_viscosity_is_wilkes_as_chemicals_has_it() -> None:
    from chemicals import Wilke

    shares = [0.1, 0.2, 0.3, 0.4]
    expected = Wilke(shares, VISCOSITIES.tolist(), (MASSES * 1000).tolist())
    assert mixed(np.array(shares))[1] == pytest.approx(expected, rel=1e-12)


def test_specific_heat_mixes_by_mole() -> None:
    # the heat a mole takes up is the sum of what its parts take up
    shares = np.array([0.25, 0.0, 0.75, 0.0])
    molar = 0.25 * 1006 * 0.02897 + 0.75 * 249 * 0.0838
    assert mixed(shares)[2] * gas.mixture_mole_mass(shares, MASSES) == pytest.approx(molar, rel=1e-14)


def test_linear_mixture_is_the_weighted_mean() -> None:
    values = np.array([[1.0, 10.0], [3.0, 30.0]])
    np.testing.assert_allclose(gas.linear_mixture([[0.25], [0.75]], values), [2.5, 25.0], rtol=1e-13)


def test_curve_values_against_the_power_series() -> None:
    T = np.array([[250.0, 300.0, 420.0]])
    coefficients = np.arange(1.0, 9.0).reshape(2, 4)
    x = (T - 300) / 100
    expected = [sum(c * x**p for p, c in enumerate(row)) for row in coefficients]
    np.testing.assert_allclose(gas.curve_values(T, coefficients[..., None, None]), expected, rtol=1e-14)


def test_curve_slopes_against_the_power_series() -> None:
    T = np.array([250.0, 300.0, 420.0])
    coefficients = np.arange(1.0, 9.0).reshape(2, 4, 1)
    x = (T - 300) / 100
    expected = [sum(p * float(c[0]) * x ** (p - 1) for p, c in enumerate(row) if p) / 100 for row in coefficients]
    values, slopes = gas.curve_slopes(T, coefficients)
    np.testing.assert_allclose(slopes, expected, rtol=1e-14)
    np.testing.assert_allclose(values, gas.curve_values(T, coefficients), rtol=1e-14)
