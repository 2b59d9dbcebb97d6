"""Remarks: both states are judged, each thing is said once, bands are those of the law, an empty U has its reason."""

from dataclasses import replace

import pytest

from igu.ratings.rate import rate
from igu.ratings.result import Result
from tests.studies.build import WINTER, double, tilted

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
