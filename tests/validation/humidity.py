"""Humidity: saturation pressures and the dew points of a heated room."""

from __future__ import annotations

from collections.abc import Iterator
from functools import partial

from igu.laws.constants import CELSIUS
from igu.laws.humidity import dew_point, saturation_over_ice, saturation_over_water
from tests.validation.check import Row

WATER = [("0.01", "6.117"), ("10", "12.28"), ("20", "23.39"), ("30", "42.47"), ("40", "73.85"), ("50", "123.5")]
ICE = [("-10", "2.599"), ("-20", "1.0326"), ("-30", "0.3801"), ("-40", "0.1284")]
"""Temperature [°C], pressure [hPa]."""

DEW_POINTS = [("30", "1.9"), ("35", "4.1"), ("40", "6.0"), ("45", "7.7"), ("50", "9.3"), ("55", "10.7"), ("60", "12.0"),
              ("65", "13.2"), ("70", "14.4"), ("75", "15.4"), ("80", "16.4"), ("85", "17.4"), ("90", "18.3"), ("95", "19.2")]  # fmt: skip
"""Relative humidity [%], dew point [°C] of air at 20 °C."""


def rows() -> Iterator[Row]:
    """All rows of humidity."""
    topic = "Humidity"
    for t, figure in WATER:
        yield Row(
            topic,
            f"saturation over water, {t} °C [hPa]",
            "steam tables, IAPWS",
            "memory",
            figure,
            partial(_water, float(t)),
        )
    for t, figure in ICE:
        yield Row(topic, f"saturation over ice, {t} °C [hPa]", "CRC Handbook, vapour pressure of ice", "memory", figure,
                  partial(_ice, float(t)), 5e-4 * float(figure), "the handbook's formula and ours, Sonntag's, differ by 2e-4")  # fmt: skip
    for share, figure in DEW_POINTS:
        yield Row(topic, f"dew point of air at 20 °C and {share} % [°C]", "DIN 4108, table of dew points", "memory", figure,
                  partial(_dew, float(share)))  # fmt: skip


def _water(t: float) -> float:
    return float(saturation_over_water(t + CELSIUS)) / 100.0


def _ice(t: float) -> float:
    return float(saturation_over_ice(t + CELSIUS)) / 100.0


def _dew(share: float) -> float:
    return float(dew_point(share / 100.0 * saturation_over_water(20.0 + CELSIUS))) - CELSIUS
