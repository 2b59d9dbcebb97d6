"""Plies in series."""

import numpy as np
import pytest

from igu.laws.conduction import series_conductance


def test_resistances_of_a_laminated_pane_add():
    """4 mm glass, 0.76 mm interlayer, 4 mm glass: 0.004 + 0.0038 + 0.004 = 0.0118 m2K/W."""
    found = series_conductance(thickness=[0.004, 0.00076, 0.004], conductivity=[1.0, 0.2, 1.0])
    assert float(found) == pytest.approx(1.0 / 0.0118)


def test_one_ply_is_k_over_d():
    assert float(series_conductance(thickness=[0.006], conductivity=[1.05])) == pytest.approx(1.05 / 0.006)


def test_the_plies_are_the_first_axis():
    thickness = np.array([[0.004, 0.006], [0.001, 0.002]])
    found = series_conductance(thickness=thickness, conductivity=[[1.0], [0.2]])
    assert found == pytest.approx([1.0 / 0.009, 1.0 / 0.016])
