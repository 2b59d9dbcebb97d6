"""EN 12898's ratio held to its table, to Fresnel's laws for a plain surface, to the film stacks of the catalogue."""

import tomllib
from pathlib import Path

import numpy as np
import pytest

from igu.laws.emissivity import hemispherical_emissivity

DATA = Path(__file__).parents[2] / "igu/data"


def test_between_the_points_the_ratio_is_linear_and_the_shape_kept():
    normal = np.array([[0.04], [0.25]])
    assert hemispherical_emissivity(normal) == pytest.approx(np.array([[0.04 * 1.20], [0.25 * 1.08]]), rel=1e-12)


def test_it_rises_with_the_normal_emissivity_and_stays_below_one():
    normal = np.linspace(0.001, 1.0, 2000)
    found = hemispherical_emissivity(normal)
    assert np.all(np.diff(found) > 0.0)
    assert found[-1] < 1.0


def plain_surface(index):
    """Hemispherical and normal emissivity of a plane face of this complex index, by Fresnel's laws [computed]."""
    x, weight = np.polynomial.legendre.leggauss(200)
    sine2 = (x + 1.0) / 2.0
    cosine, inside = np.sqrt(1.0 - sine2), np.sqrt(1.0 - sine2 / index**2 + 0j)
    s = abs((cosine - index * inside) / (cosine + index * inside)) ** 2
    p = abs((index * cosine - inside) / (index * cosine + inside)) ** 2
    return float(np.sum(weight / 2.0 * (1.0 - (s + p) / 2.0))), float(1.0 - abs((1.0 - index) / (1.0 + index)) ** 2)


@pytest.mark.parametrize("index", [1.5, 1.8, 2.0])
def test_dielectrics_by_fresnel(index):
    """Refractive indices of glasses and oxides: the ratio is physics, so the table is right within 1 %."""
    hemispherical, normal = plain_surface(index)
    assert float(hemispherical_emissivity(normal)) == pytest.approx(hemispherical, rel=0.01)


@pytest.mark.parametrize("n", [6, 9, 19, 39, 66, 200])
def test_metals_by_fresnel(n):
    """A metal in the far infrared has n = k; the standard's ratio reads low there, by no more than 7 %."""
    hemispherical, normal = plain_surface(n * (1.0 + 1.0j))
    assert 0.93 < float(hemispherical_emissivity(normal)) / hemispherical < 1.0


def test_the_catalogue_coatings_keep_their_own_pair():
    """Both emissivities of a film stack come from its optics; the rule reads up to a fifth below them, which is why the
    catalogue does not use it."""
    coatings = tomllib.loads((DATA / "coatings.toml").read_text(encoding="utf-8"))
    ratios = {name: float(hemispherical_emissivity(c["normal_emissivity"])) / c["emissivity"]
              for name, c in coatings.items()}  # fmt: skip
    assert set(ratios) == {"soft-single", "soft-double", "hard"}
    assert all(0.8 < ratio < 1.0 for ratio in ratios.values())
