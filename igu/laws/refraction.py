"""Refractive index and permittivity by the wavelength: dispersion of glass, bound and free electrons."""

from __future__ import annotations

import numpy as np

from igu.arrays import Array, ArrayLike, ComplexArray
from igu.laws.constants import PHOTON_ENERGY


def even_powers_index(wavelength: ArrayLike, *, constant: float, square: float, inverse_square: float) -> Array:
    """Refractive index of a clear medium away from its absorption [-].

        n = a + b L^2 + c / L^2,   L the wavelength in micrometres

    Parameters
    ----------
    wavelength : array_like              [m].
    constant, square, inverse_square     a [-], b [1/um2] and c [um2].

    Source: the form of M. Rubin, Solar Energy Materials 12 (1985) 275, for soda-lime glass, 0.3 to 4.6 um.
    """
    micron = np.square(np.asarray(wavelength, float) * 1e6)
    return np.asarray(constant + square * micron + inverse_square / micron)


def bound_electrons(wavelength: ArrayLike, *, strength: float, resonance: float) -> Array:
    """Permittivity of electrons bound at one resonance, 1 + S / (1 - (L0 / L)^2) [-].

    Parameters
    ----------
    wavelength : array_like    L [m].
    strength : float           S [-].
    resonance : float          Wavelength L0 of the resonance [m].

    Validity: wavelengths well above the resonance.
    Source: Sellmeier's equation with one term; Born & Wolf, Principles of Optics.
    """
    ratio = np.square(resonance / np.asarray(wavelength, float))
    return np.asarray(1.0 + strength / (1.0 - ratio))


def free_electrons(wavelength: ArrayLike, *, plasma: float, damping: float) -> ComplexArray:
    """What free electrons add to the permittivity, -E_p^2 / (E^2 + i E G) [-], E the energy of the photon.

    Parameters
    ----------
    wavelength : array_like    [m].
    plasma, damping : float    Plasma energy E_p and damping G [eV].

    Source: P. Drude's model of a metal; Born & Wolf, Principles of Optics.
    """
    energy = PHOTON_ENERGY / np.asarray(wavelength, float)
    return np.asarray(-(plasma**2) / (energy * energy + 1j * energy * damping))


def film_damping(damping: float, *, thickness: float, fermi: float, scattering: float) -> float:
    """Damping of the free electrons in a film [eV], raised by their collisions with its faces, G + A h v_F / (2 pi d).

    Parameters
    ----------
    damping : float       Of the metal in bulk, G [eV].
    thickness : float     Of the film, d [m].
    fermi : float         Fermi velocity times Planck's constant over 2 pi [eV m].
    scattering : float    A, the share of collisions that scatter [-]; about 0.2 to 1.

    Source: U. Kreibig & M. Vollmer, Optical Properties of Metal Clusters (1995), free path limited by size [memory].
    """
    return damping + scattering * fermi / thickness
