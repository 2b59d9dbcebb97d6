"""Strength figures by name: treatment, edge work, load duration, from the data file with its marks."""

from __future__ import annotations

import tomllib
from functools import lru_cache
from typing import Any

from igu.data import data_text
from igu.laws.strength import design_strength, duration_factor


@lru_cache(maxsize=1)
def _data() -> dict[str, Any]:
    return tomllib.loads(data_text("strength.toml"))


def permissible_stress(treatment: str, duration: str) -> float:
    """Design bending strength [Pa] of a glass, supported on four edges, under a load of this named duration."""
    figures = _data()["annealed_strength"]
    return float(
        design_strength(
            annealed=1e6 * figures["f_gk"],
            characteristic=1e6 * _data()["characteristic_strength"][treatment],
            duration=duration_factor(_data()["load_duration_s"][duration]),
            edge=figures["k_e"],
            surface=figures["k_sp"],
            prestress=figures["k_v"],
            gamma_annealed=figures["gamma_A"],
            gamma_prestress=figures["gamma_v"],
        )
    )


def permissible_difference(treatment: str, edge_work: str) -> float:
    """Difference between hottest centre and edge [K] that a glass of this treatment and edge work may have."""
    return float(_data()["fracture_difference_K"][treatment][edge_work])


def strength_source() -> str:
    """Where the design strengths come from."""
    return str(_data()["annealed_strength"]["source"])


def difference_source(treatment: str) -> str:
    """Where the permissible difference of a treatment comes from."""
    return str(_data()["fracture_source"][treatment])


def duration_words(duration: str) -> str:
    """What a named load duration stands for."""
    return str(_data()["load_duration_words"][duration])
