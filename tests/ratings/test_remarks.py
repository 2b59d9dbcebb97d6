"""Remarks: both states are judged, each thing is said once, bands are those of the law, an empty U has its reason."""

from dataclasses import replace

import pytest

from igu.ratings.rate import rate
from igu.ratings.result import Result
from tests.ratings.build import SOFT, SUMMER, WINTER, double, tilted

AIR = (("air", 1.0),)
COLD_BELOW = replace(WINTER, outdoor_air=WINTER.indoor_air, indoor_air=WINTER.outdoor_air)


def said(result: Result, what: str) -> list[str]:
    return [text for text in result.warnings if what in text]


@pytest.mark.parametrize(("width", "what"), [(25.43e-3, "no exact state exists"), (14.766e-3, "two states exist")])
def test_a_step_of_the_dark_state_is_said_in_the_sun_too(width: float, what: str) -> None:
    unit = double(width=width, fill=AIR)
    in_the_dark, in_the_sun = (said(rate(unit, replace(WINTER, sun=sun)), what) for sun in (0.0, 400.0))
    assert len(in_the_dark) == 1
    assert in_the_sun == [f"Dark state, to which U belongs: {in_the_dark[0]}"]


def test_what_holds_for_both_states_is_said_once() -> None:
    """Both states of so wide a gap are beyond both ranges, at Rayleigh numbers of their own."""
    wide = double(width=0.2, height=0.5)
    in_the_dark, in_the_sun = (rate(wide, replace(WINTER, sun=sun)).warnings for sun in (0.0, 400.0))
    assert len(in_the_dark) == len(in_the_sun) == 2
    assert in_the_sun[0] != in_the_dark[0]
    assert in_the_sun[1] == in_the_dark[1]


@pytest.mark.parametrize(("degrees", "outside"), [(59.9, True), (60.0, False), (60.1, False), (119.9, False),
                                                  (120.0, False), (120.1, True)])  # fmt: skip
def test_the_range_is_that_of_the_band_the_law_takes(degrees: float, outside: bool) -> None:
    """Ra 1.5e5 to 2e5 and a height of 12.5 widths lie outside the range below 60 degrees, inside that from 60 on."""
    found = rate(tilted(double(width=0.04, fill=AIR, height=0.5), degrees), WINTER if degrees < 90.0 else COLD_BELOW)
    assert 1e5 < found.gaps[0].rayleigh < 2e7
    assert len(said(found, "the range of its law at 0 to 60 degrees")) == (2 if outside else 0)
    assert len(said(found, "the range of its law")) == (2 if outside else 0)


@pytest.mark.parametrize(("degrees", "least"), [(59.0, 20.0), (61.0, 5.0), (90.0, 5.0), (100.0, 5.0)])
def test_the_least_height_over_width_of_every_band(degrees: float, least: float) -> None:
    """Hollands et al. 1976 and ElSherbiny et al. 1982 [memory]."""
    low, tall = (tilted(double(height=share * least * 0.016), degrees) for share in (0.99, 1.01))
    assert len(said(rate(low, WINTER), "height over width")) == 1
    assert said(rate(tall, WINTER), "height over width") == []


@pytest.mark.parametrize(("degrees", "most"), [(59.0, 1e5), (61.0, 2e7), (90.0, 2e7), (100.0, 2e7)])
def test_the_largest_rayleigh_number_of_every_band(degrees: float, most: float) -> None:
    """Hollands et al. 1976 and ElSherbiny et al. 1982 [memory]. Ra goes with the cube of the width, or nearly so."""
    wide = tilted(double(width=0.05, height=8.0), degrees)
    width = 0.05 * (most / rate(wide, WINTER).gaps[0].rayleigh) ** (1.0 / 3.0)
    found = [rate(tilted(double(width=share * width, height=8.0), degrees), WINTER) for share in (0.97, 1.03)]
    assert found[0].gaps[0].rayleigh < most < found[1].gaps[0].rayleigh < 1.15 * most
    assert [len(said(r, "is above")) for r in found] == [0, 1]


def test_an_empty_u_has_its_reason() -> None:
    near = replace(WINTER, outdoor_air=WINTER.indoor_air - 0.5)
    assert len(said(rate(double(), near), "U is not defined: the environmental temperatures are less than 1 K")) == 1
    equal = replace(WINTER, outdoor_air=WINTER.indoor_air, indoor_convection=3.6)
    assert said(rate(double(), equal), "U is not defined") == [
        "U is not defined: the environmental temperatures are equal."
    ]
    for defined in (replace(near, indoor_convection=3.6), replace(near, outdoor_air=WINTER.indoor_air - 1.1)):
        assert rate(double(), defined).U is not None
        assert said(rate(double(), defined), "U is not defined") == []


def test_a_law_outside_its_range_is_said():
    wide = double(width=0.2, height=0.5)
    assert any("height over width" in text for text in rate(wide, WINTER).warnings)


def test_an_override_beside_a_set_is_said():
    r = rate(SOFT, replace(WINTER, set_name="ansi-nfrc-100", overridden=("wind_m_s",)))
    assert any("wind_m_s" in text for text in r.warnings)


def test_glass_beyond_service_temperatures_is_said():
    hot = replace(WINTER, outdoor_convection=4.0, outdoor_air=293.15, absorbed=(1500.0, 1500.0))
    assert any("beyond what glass" in text for text in rate(SOFT, hot).warnings)
    assert not any("beyond what glass" in text for text in rate(SOFT, SUMMER).warnings)


@pytest.mark.parametrize(("celsius", "meant"), [(-61.0, False), (-59.0, True), (99.0, True), (101.0, False)])
def test_glass_is_meant_for_60_below_to_100_degrees(celsius, meant):
    """Common practice, no source. Between equal surroundings every face is as warm as they are."""
    still = replace(WINTER, outdoor_air=273.15 + celsius, indoor_air=273.15 + celsius, indoor_convection=3.6)
    found = said(rate(SOFT, still), "beyond what glass")
    assert len(found) == (0 if meant else 2)
    assert all(f"{celsius:.0f} °C" in text for text in found)
