"""The declaration: every figure in its place, rounded as the standards round, in the position they declare it for."""

from dataclasses import replace

import pytest

from igu.model.unit import Gap, Pillars, Unit, Vacuum
from igu.ratings import en673
from igu.ratings.declaration import declaration, standard_solar
from igu.ratings.rate import rate
from igu.ratings.rounding import half_up
from tests.ratings.build import EN410, EN673, SOFT, UPRIGHT, WINTER, double, pane, tilted


def test_the_declaration_rounds_as_the_standards_round():
    d = declaration(SOFT)
    standard = rate(SOFT, EN410).solar
    assert half_up(en673.u_value(SOFT), 1) == d.U_g_W_m2K == 1.2
    assert d.g == half_up(standard.g, 2)
    assert d.light_transmittance == half_up(standard.light_transmittance, 2)
    assert d.reasons == ()


def test_nothing_is_declared_off_the_vertical_or_for_a_vacuum():
    assert declaration(tilted(SOFT, 45.0)).U_g_W_m2K is None
    assert rate(tilted(SOFT, 45.0), EN673).U_declared is None
    assert rate(tilted(SOFT, 45.0), EN673).U > rate(SOFT, EN673).U
    gap = Gap(0.0002, vacuum=Vacuum(0.1), pillars=Pillars(0.02, 0.00025, 20.0))
    d = declaration(Unit((pane(), pane()), (gap,)))
    assert d.g is None
    assert "evacuated" in d.reasons[0]


def test_a_tilted_unit_is_declared_where_its_conditions_ask_for_the_vertical():
    built = tilted(SOFT, 30.0)
    found, vertical = declaration(built, [WINTER, replace(EN673, tilt=UPRIGHT)]), declaration(SOFT)
    assert replace(found, reasons=()) == vertical
    assert "built at 30" in found.reasons[0]
    assert declaration(built, [replace(EN673, tilt=0.0)]).U_g_W_m2K is None
    assert declaration(SOFT, [replace(EN673, tilt=UPRIGHT)]) == vertical


GREEN = double(pane(0.006, "green", coating_in="soft-double"))
GREEN_TURNED = double(pane(), pane(0.006, "green", coating_out="soft-double"))


@pytest.mark.parametrize("unit", [GREEN, GREEN_TURNED], ids=["green outside", "green inside"])
def test_every_declared_figure_is_the_standards_own_in_its_place(unit):
    """A unit whose two sides reflect unlike: no figure can stand for another."""
    d, solar = declaration(unit), rate(unit, EN410).solar
    found = (d.g, d.light_transmittance, d.light_reflectance_out, d.light_reflectance_in, d.solar_transmittance)
    figures = (
        solar.g,
        solar.light_transmittance,
        solar.light_reflectance_out,
        solar.light_reflectance_in,
        solar.transmittance,
    )
    assert found == tuple(half_up(x, 2) for x in figures)
    assert len(set(found)) == 5
    assert d.U_g_W_m2K == half_up(en673.u_value(unit), 1)
    assert standard_solar(unit) == solar


def test_a_turned_unit_reflects_outdoors_what_it_did_to_the_room():
    """Light comes through a stack alike both ways and is thrown back by the side it meets."""
    one, other = declaration(GREEN), declaration(GREEN_TURNED)
    assert (one.light_reflectance_out, one.light_reflectance_in) == (
        other.light_reflectance_in,
        other.light_reflectance_out,
    )
    assert one.light_transmittance == other.light_transmittance
    assert one.light_reflectance_in != one.light_reflectance_out
