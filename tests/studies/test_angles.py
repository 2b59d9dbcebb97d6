"""The table by angle."""

import numpy as np
import pytest

from igu.studies.angles import DEGREES, by_angle
from tests.studies.build import SUMMER, double


def test_the_diffuse_row_is_the_mean_of_the_rows_by_angle_over_the_hemisphere() -> None:
    """Isotropic light falls on a plane with the weight sin 2a: integrated by Simpson's rule over 0 to 90 degrees, where
    nothing passes. Half diffuse light would be 4 % off."""
    found = by_angle(double(), SUMMER)
    assert found.degrees == (*DEGREES, None)
    direct = np.append(found.bands.transmittance[:-1], 0.0)
    angle = np.radians([*DEGREES, 90])
    weight = np.array([1, *[4, 2] * 8, 4, 1]) * np.radians(5.0) / 3.0
    assert found.bands.transmittance[-1] == pytest.approx((weight * direct * np.sin(2 * angle)).sum(), rel=2e-3)
