"""Thermal fracture: the worst of the conditions, where the edge comes from, the middle of an interlayer."""

from dataclasses import replace

import pytest

from igu.model.study_tables import Frame
from igu.model.unit import Gap, Unit
from igu.ratings.rate import rate
from igu.studies.fracture import fractures, interlayer_heat
from igu.studies.service_quantities import SERVICE
from tests.studies.build import ARGON, SOFT, SUMMER, WINTER, double, laminated, pane


def test_the_worst_condition_counts_for_every_pane():
    mild = replace(SUMMER, name="mild", sun=300.0)
    rows = fractures(SOFT, [rate(SOFT, mild), rate(SOFT, SUMMER), rate(SOFT, WINTER)], None)
    assert [row.pane for row in rows] == [0, 1]
    assert {row.conditions for row in rows} == {"summer"}
    lit, dark = rate(SOFT, SUMMER), rate(SOFT, replace(SUMMER, sun=0.0))
    expected = max(lit.panes[0].face_out, lit.panes[0].face_in) - 0.5 * (dark.panes[0].face_out + dark.panes[0].face_in)
    assert rows[0].difference == pytest.approx(expected)
    assert rows[0].margin == pytest.approx(rows[0].permissible - expected)


def test_an_absorbing_annealed_pane_is_told_what_would_help():
    tinted = double(pane(0.010, "grey", coating_in="soft-single"))
    noon = replace(SUMMER, sun=1000.0, outdoor_convection=6.0)
    row = fractures(tinted, [rate(tinted, noon)], None)[0]
    assert row.margin < 10.0
    assert any("toughened" in way for way in row.helps)
    hard = replace(tinted, panes=(replace(tinted.panes[0], treatment="toughened"), tinted.panes[1]))
    assert fractures(hard, [rate(hard, noon)], None)[0].margin > 100.0


def test_a_given_edge_temperature_is_taken():
    row = fractures(SOFT, [rate(SOFT, SUMMER)], Frame(edge=290.0))[0]
    assert row.edge == 290.0


def test_the_edge_of_the_conditions_goes_before_that_of_the_frame():
    """Noon has its own edge, which the frame's does not touch; the morning takes the frame's."""
    noon, morning = replace(SUMMER, name="noon", edge=300.0), replace(SUMMER, name="morning")
    found = {
        (c.name, f.edge if f else None): fractures(SOFT, [rate(SOFT, c)], f)[0]
        for c in (noon, morning)
        for f in (None, Frame(edge=290.0))
    }
    assert {key: row.edge_from for key, row in found.items()} == {
        ("noon", None): "conditions",
        ("noon", 290.0): "conditions",
        ("morning", None): "dark",
        ("morning", 290.0): "frame",
    }
    assert [found["noon", edge].edge for edge in (None, 290.0)] == [300.0, 300.0]
    row = found["noon", None]
    assert row.margin == pytest.approx(row.permissible - (row.centre - 300.0))
    margin = SERVICE["fracture_margin_K"]
    least = min(row.margin for row in fractures(SOFT, [rate(SOFT, noon)], None))
    assert margin(SOFT, None, noon, Frame(edge=290.0)) == least != margin(SOFT, None, morning, Frame(edge=290.0))


def test_no_sun_no_verdict():
    assert fractures(SOFT, [rate(SOFT, WINTER)], None) == ()


def test_middle_panes_are_judged_too():
    triple = Unit((pane(), pane(glass="green"), pane()), (Gap(0.014, ARGON),) * 2)
    rows = fractures(triple, [rate(triple, SUMMER)], None)
    assert min(rows, key=lambda row: row.margin).pane == 1


def test_the_interlayers_heat_lies_between_the_faces():
    unit = double(laminated(("clear", 0.004), ("green", 0.004)))
    result = rate(unit, SUMMER)
    (heat,) = interlayer_heat(unit, [result, rate(unit, WINTER)])
    low, high = sorted((result.panes[0].face_out, result.panes[0].face_in))
    assert heat.conditions == "summer"
    assert low <= heat.temperature <= high


def test_an_interlayer_is_as_warm_as_its_own_middle():
    """Linear over the resistances, as mm of glass of 1 W/(m K); 0.76 mm of 0.2 W/(m K) count 3.8. Of 4 + 0.76 + 4 the
    middle is halfway; of 4 + 0.76 + 8, 4 + 1.9 of 15.8 lie outside; of three plies of 4, 5.9 and 13.7 of 19.6
    [arithmetic]."""
    places = {(0.004, 0.004): [0.5], (0.004, 0.008): [5.9 / 15.8], (0.004,) * 3: [5.9 / 19.6, 13.7 / 19.6]}
    for plies, shares in places.items():
        unit = double(laminated(*(("clear", t) for t in plies)))
        result = rate(unit, WINTER)
        out, inn = result.panes[0].face_out, result.panes[0].face_in
        assert inn - out > 0.5
        found = [heat.temperature for heat in interlayer_heat(unit, [result])]
        assert found == pytest.approx([out + share * (inn - out) for share in shares], abs=1e-6)


def test_what_helps_is_said_with_less_than_ten_kelvin_to_spare():
    """Common practice, no source. Annealed glass as cut may be 30 K warmer than its edge."""
    lit = rate(SOFT, SUMMER)
    centre = max(lit.panes[0].face_out, lit.panes[0].face_in)
    for spare, told in ((9.9, True), (10.1, False)):
        row = fractures(SOFT, [lit], Frame(edge=centre - 30.0 + spare))[0]
        assert row.margin == pytest.approx(spare, abs=1e-9)
        assert bool(row.helps) is told
