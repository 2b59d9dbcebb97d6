"""Long-wave exchange: limits in closed form, closure, the opaque case to round-off."""

import numpy as np
import pytest

from igu.laws.longwave import emissive_power, exchange_factor, radiant_temperature, radiosities

RNG = np.random.default_rng(3)


def test_black_body_at_room_temperature():
    """sigma T^4 at 300 K is 459.3 W/m2 (CODATA sigma)."""
    assert float(emissive_power(300.0)) == pytest.approx(459.30, abs=0.01)


def test_exchange_limits():
    assert float(exchange_factor(1.0, 1.0)) == 1.0
    assert float(exchange_factor(0.3, 1.0)) == pytest.approx(0.3)
    assert exchange_factor(0.05, 0.8) == exchange_factor(0.8, 0.05)


def test_what_a_tilted_face_sees():
    assert float(radiant_temperature(sky=250.0, ground=280.0, tilt=0.0)) == pytest.approx(250.0)
    assert float(radiant_temperature(sky=250.0, ground=280.0, tilt=np.pi)) == pytest.approx(280.0)
    half = (0.5 * 250.0**4 + 0.5 * 280.0**4) ** 0.25
    assert float(radiant_temperature(sky=250.0, ground=280.0, tilt=np.pi / 2)) == pytest.approx(half)


def stack(n, count=50, transparent=True):
    eps = RNG.uniform(0.02, 0.6, (2 * n, count))
    tau = RNG.uniform(0.0, 0.4, (n, count)) if transparent else np.zeros((n, count))
    return eps, tau


@pytest.mark.parametrize("n", [1, 2, 4])
def test_in_an_isothermal_enclosure_every_radiosity_is_black(n):
    eps, tau = stack(n)
    forward, backward = radiosities(emissivity=eps, transmittance=tau)
    assert forward.sum(axis=1) == pytest.approx(1.0, abs=1e-12)
    assert backward.sum(axis=1) == pytest.approx(1.0, abs=1e-12)


@pytest.mark.parametrize("n", [2, 3])
def test_opaque_stacks_exchange_as_parallel_plates(n):
    eps, tau = stack(n, transparent=False)
    forward, backward = radiosities(emissivity=eps, transmittance=tau)
    powers = RNG.uniform(200.0, 600.0, (2 * n + 2, eps.shape[1]))
    net = ((forward - backward) * powers).sum(axis=1)
    for k in range(1, n):
        factor = exchange_factor(eps[2 * k - 1], eps[2 * k])
        assert net[k] == pytest.approx(factor * (powers[2 * k] - powers[2 * k + 1]), rel=1e-12, abs=1e-11)
    assert net[0] == pytest.approx(eps[0] * (powers[0] - powers[1]), rel=1e-12, abs=1e-11)


def test_one_sheet_between_two_black_rooms_in_closed_form():
    """What passes: tau E_out + eps E_sheet - E_in + rho E_in towards the room."""
    eps, tau = np.array([[0.5], [0.3]]), np.array([[0.2]])
    forward, backward = radiosities(emissivity=eps, transmittance=tau)
    powers = np.array([400.0, 430.0, 431.0, 470.0])[:, None]
    net = ((forward - backward) * powers).sum(axis=1)[:, 0]
    assert net[1] == pytest.approx(0.2 * 400.0 + 0.3 * 431.0 + (1 - 0.3 - 0.2) * 470.0 - 470.0)
    assert net[0] == pytest.approx(400.0 - 0.2 * 470.0 - 0.5 * 430.0 - (1 - 0.5 - 0.2) * 400.0)
