"""Properties of gases and their mixtures: viscosity, conductivity, specific heat.

Mixture functions take the gases on the first axis (K, ...); their arguments broadcast against one another.
"""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike
from igu.laws.constants import GAS_CONSTANT

CURVE_CENTRE = 300.0
CURVE_SCALE = 100.0
"""A property curve is a power series in (T - CURVE_CENTRE) / CURVE_SCALE, both in kelvin."""


def curve_variable(T: ArrayLike) -> Array:
    """Variable of the property curves [-]: x = (T - 300 K) / 100 K, of the shape of T [K]."""
    return (np.asarray(T, dtype=np.float64) - CURVE_CENTRE) / CURVE_SCALE


def curve_values(T: ArrayLike, coefficients: Array) -> Array:
    """Values of several property curves at one temperature each.

        y_q = sum over p of c_qp x^p,   x = (T - 300 K) / 100 K

    Parameters
    ----------
    T : array_like           Temperatures [K], shape (...).
    coefficients : ndarray   Shape (Q, P, ...): curve, ascending power; the trailing axes broadcast against T.

    Returns
    -------
    ndarray                  Shape (Q, ...), in the unit of each curve.

    Validity: the range of temperature the curve was fitted over, which its owner carries.
    """
    x = curve_variable(T)
    values = coefficients[:, -1] + np.zeros_like(x)
    for power in range(coefficients.shape[1] - 2, -1, -1):
        values = values * x + coefficients[:, power]
    return values


def curve_slopes(T: ArrayLike, coefficients: Array) -> tuple[Array, Array]:
    """`curve_values` and their slopes per kelvin, each (Q, ...), in one pass."""
    x = curve_variable(T)
    value = coefficients[:, -1]
    slope = np.zeros_like(value)
    for power in range(coefficients.shape[1] - 2, -1, -1):
        slope = slope * x + value
        value = value * x + coefficients[:, power]
    return value, slope / CURVE_SCALE


def mixture_mole_mass(shares: ArrayLike, mole_masses: ArrayLike) -> Array:
    """Mole mass of a mixture, sum of x_i M_i [kg/mol]: fractions [-] and masses [kg/mol], (K, ...)."""
    return linear_mixture(shares, mole_masses)


def linear_mixture(shares: ArrayLike, values: ArrayLike) -> Array:
    """Property of a mixture that is linear in the share by volume, in the unit of the values.

        P = sum of x_i P_i

    Parameters
    ----------
    shares : array_like   Shares by volume, for ideal gases the mole fractions [-], (K, ...), sum 1.
    values : array_like   Property of each gas, (K, ...).

    Source: EN 673:2011, gas mixtures: every property in proportion to the volume.
    """
    return np.asarray(np.sum(np.asarray(shares) * np.asarray(values), axis=0))


def mixture_specific_heat(shares: ArrayLike, specific_heats: ArrayLike, *, mole_masses: ArrayLike) -> Array:
    """Specific heat of a mixture [J/(kg K)]: the molar heat capacities mix by mole.

        c = sum of x_i c_i M_i / sum of x_i M_i

    Parameters
    ----------
    shares : array_like           Mole fractions [-], (K, ...), sum 1.
    specific_heats : array_like   Of each gas [J/(kg K)], (K, ...).
    mole_masses : array_like      Of each gas [kg/mol], (K, ...).

    Source: ISO 15099:2003, properties of gas mixtures.
    """
    molar = np.asarray(specific_heats) * np.asarray(mole_masses)
    return linear_mixture(shares, molar) / mixture_mole_mass(shares, mole_masses)


def mixture_viscosity(shares: ArrayLike, viscosities: ArrayLike, *, mole_masses: ArrayLike) -> Array:
    """Dynamic viscosity of a mixture of gases at low pressure [Pa s].

        mu = sum over i of x_i mu_i / (sum over j of x_j phi_ij)

    Parameters
    ----------
    shares : array_like        Mole fractions [-], (K, ...), sum 1.
    viscosities : array_like   Of each gas [Pa s], (K, ...).
    mole_masses : array_like   Of each gas [kg/mol], (K, ...).

    Validity: gases without strong polarity; helium or hydrogen beside a heavy gas within some per cent.
    Source: ISO 15099:2003, properties of gas mixtures; C. R. Wilke, J. Chem. Phys. 18 (1950) 517.
    """
    return _weighted(shares, viscosities, _exchange_factors(viscosities, mole_masses))


def mixture_conductivity(
    shares: ArrayLike, conductivities: ArrayLike, *, viscosities: ArrayLike, mole_masses: ArrayLike
) -> Array:
    """Thermal conductivity of a mixture of gases at low pressure [W/(m K)].

    The translational ("monatomic") part k' and the rest k'' mix apart:

        k'_i = (15/4) (R/M_i) mu_i,   k''_i = k_i - k'_i
        k'   = sum over i of x_i k'_i  / (sum over j of x_j psi_ij)
        k''  = sum over i of x_i k''_i / (sum over j of x_j phi_ij)
        psi_ij = phi_ij [1 + 2.41 (M_i - M_j)(M_i - 0.142 M_j)/(M_i + M_j)^2]

    with phi_ij the factor of the viscosity. The bracket belongs to k' alone. For a monatomic gas k'' is about
    zero, of either sign: it is not clipped, so that a share of 1 gives back the gas itself.

    Parameters
    ----------
    shares : array_like           Mole fractions [-], (K, ...), sum 1.
    conductivities : array_like   Of each gas [W/(m K)], (K, ...).
    viscosities : array_like      Of each gas [Pa s], (K, ...).
    mole_masses : array_like      Of each gas [kg/mol], (K, ...).

    Validity: as for the viscosity; pairs of noble gases within 6 % of kinetic theory at first order (computed).
    Source: ISO 15099:2003, properties of gas mixtures; E. A. Mason, S. C. Saxena, Phys. Fluids 1 (1958) 361.
    """
    monatomic = 15 / 4 * GAS_CONSTANT / np.asarray(mole_masses) * np.asarray(viscosities)
    rest = np.asarray(conductivities) - monatomic
    phi = _exchange_factors(viscosities, mole_masses)
    return _weighted(shares, monatomic, phi * _mass_factors(mole_masses)) + _weighted(shares, rest, phi)


def _weighted(shares: ArrayLike, values: ArrayLike, factors: Array) -> Array:
    """Sum of x_i P_i / (sum over j of x_j f_ij): gases (K, ...), factors (K, K, ...)."""
    x = np.asarray(shares)
    return np.asarray(np.sum(x * values / np.sum(x * factors, axis=1), axis=0))


def _exchange_factors(viscosities: ArrayLike, mole_masses: ArrayLike) -> Array:
    """Factor phi_ij of the mixing rules, (K, K, ...).

        phi_ij = [1 + (mu_i/mu_j)^(1/2) (M_j/M_i)^(1/4)]^2 / (2 sqrt 2 [1 + M_i/M_j]^(1/2))

    Written with k'_i/k'_j (M_i/M_j)^(1/4) in place of mu and M_j/M_i it is the same number, because
    k' is proportional to mu/M.
    """
    mu, M = np.asarray(viscosities), np.asarray(mole_masses)
    mass_ratio = M[:, None] / M
    root = np.sqrt(mu[:, None] / mu) * mass_ratio**-0.25
    return np.asarray((1 + root) ** 2 / np.sqrt(8 * (1 + mass_ratio)))


def _mass_factors(mole_masses: ArrayLike) -> Array:
    """Bracket 1 + 2.41 (M_i - M_j)(M_i - 0.142 M_j)/(M_i + M_j)^2 of the monatomic part, (K, K, ...)."""
    M = np.asarray(mole_masses)
    M_i = M[:, None]
    return np.asarray(1 + 2.41 * (M_i - M) * (M_i - 0.142 * M) / (M_i + M) ** 2)
