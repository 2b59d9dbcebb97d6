"""Residual gas and pillars against closed forms and published figures."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest

from igu.laws import rarefied

AIR: dict[str, Any] = {"mole_mass": 0.02897, "gamma": 1.4, "accommodation": 1.0}
PILLARS: dict[str, Any] = {
    "pitch": 0.020,
    "radius": 0.25e-3,
    "height": 0.2e-3,
    "glass_conductivity": 1.0,
    "pillar_conductivity": 20.0,
}


def residual(pressure: Any, gap: Any = 0.2e-3) -> Any:
    return rarefied.residual_gas_conductance(293.0, pressure=pressure, conductivity=0.0258, gap=gap, **AIR)


def test_free_molecules_carry_what_kinetic_theory_counts() -> None:
    # n v/4 molecules meet the face; each brings (cv + R/2) per mole and kelvin; n v/4 = p N/sqrt(2 pi M R T)
    T, p, M, R = 300.0, 0.1, 0.039948, 8.314462618
    rate = p / np.sqrt(2 * np.pi * M * R * T)
    expected = 0.6 * rate * (3 / 2 * R + R / 2)
    h = rarefied.free_molecule_conductance(T, pressure=p, mole_mass=M, gamma=5 / 3, accommodation=0.6)
    assert h == pytest.approx(expected, rel=1e-12)


def test_colder_molecules_are_slower_but_more() -> None:
    h = rarefied.free_molecule_conductance([300.0, 75.0], pressure=1.0, **AIR)
    assert h[1] / h[0] == pytest.approx(2.0, rel=1e-14)


def test_high_vacuum_leaves_free_molecules_alone() -> None:
    p = np.array([1e-6, 1e-4])
    free = rarefied.free_molecule_conductance(293.0, pressure=p, **AIR)
    np.testing.assert_allclose(residual(p), free, rtol=2e-6)
    assert residual(1e-4, gap=0.1e-3) == pytest.approx(residual(1e-4), rel=1e-5)


def test_ordinary_pressure_leaves_conduction_alone() -> None:
    assert residual(101325.0, gap=0.01) == pytest.approx(0.0258 / 0.01, rel=3e-5)


def test_both_resistances_add() -> None:
    free = rarefied.free_molecule_conductance(293.0, pressure=50.0, **AIR)
    assert 1 / residual(50.0) == pytest.approx(1 / free + 0.2e-3 / 0.0258, rel=1e-14)


def test_no_gas_carries_nothing() -> None:
    assert residual(0.0) == 0.0


def test_conductance_grows_with_pressure() -> None:
    assert np.all(np.diff(residual(np.geomspace(1e-3, 1e5, 40))) > 0)


def test_stiff_pillars_are_limited_by_the_glass() -> None:
    # 2 k_glass a/p^2 (memory, R. E. Collins and co-workers): 2 x 1.0 x 0.25 mm/(20 mm)^2 = 1.25 W/(m2 K)
    conductance = rarefied.pillar_array_conductance(**PILLARS | {"pillar_conductivity": 1e9})
    assert conductance == pytest.approx(1.25, rel=1e-8)


def test_pillars_in_closed_form() -> None:
    area, a, h = 0.020**2, 0.25e-3, 0.2e-3
    resistance = area / (2 * 1.0 * a) + area * h / (20.0 * np.pi * a**2)
    assert 1 / rarefied.pillar_array_conductance(**PILLARS) == pytest.approx(resistance, rel=1e-14)


def test_insulating_pillars_are_limited_by_themselves() -> None:
    conductance = rarefied.pillar_array_conductance(**PILLARS | {"pillar_conductivity": 1e-9})
    alone = 1e-9 * np.pi * 0.25e-3**2 / (0.2e-3 * 0.020**2)
    assert conductance == pytest.approx(alone, rel=1e-8)


def test_unlike_panes_by_the_harmonic_mean() -> None:
    a, area, k = 0.25e-3, 0.020**2, np.array([0.8, 1.3])
    stiff = PILLARS | {"pillar_conductivity": 1e12}
    conductance = rarefied.pillar_array_conductance(**stiff | {"glass_conductivity": 2 / np.sum(1 / k)})
    assert 1 / conductance == pytest.approx(np.sum(area / (4 * k * a)), rel=1e-9)


def test_pillars_broadcast() -> None:
    conductance = rarefied.pillar_array_conductance(**PILLARS | {"pitch": np.array([0.02, 0.04])})
    assert conductance[0] / conductance[1] == pytest.approx(4.0, rel=1e-14)
