"""Catalogue panes as the package tmm takes them."""

from __future__ import annotations

from igu.arrays import Array
from igu.model.optics import FilmOptics, film_index, film_stack, glass_extinction, glass_index, grid


def tmm_layers(pane: FilmOptics, k: int) -> list[tuple[complex, float, str, str]]:
    """Index, thickness, coherence and place of the layers of a pane of one ply, outdoors first, at wavelength k."""
    wave = grid().wavelength[k : k + 1]
    glass = complex(glass_index(wave)[0] + 1j * glass_extinction(pane.plies[0][0], wave)[0])
    outer, inner = (_films(name, wave) for name in (pane.coating_out, pane.coating_in))
    return [
        *((n, d, "c", "out") for n, d in outer[::-1]),
        (glass, pane.plies[0][1], "i", "glass"),
        *((n, d, "c", "in") for n, d in inner),
    ]


def _films(coating: str | None, wave: Array) -> list[tuple[complex, float]]:
    names, thicknesses = film_stack(coating)
    return [(complex(film_index(name, wave, d)[0]), d) for name, d in zip(names, thicknesses, strict=True)]
