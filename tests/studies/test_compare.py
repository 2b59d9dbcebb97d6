"""Coating positions: the direction of every effect, and published pairs."""

from dataclasses import replace

import numpy as np
import pytest

from igu.errors import ModelError
from igu.model.catalogue import catalogue
from igu.model.makeups import MakeUps
from igu.model.study_tables import Compare
from igu.model.unit import Sealed
from igu.ratings.en410 import makeup_inward_fractions
from igu.studies.compare import compare, compare_units
from tests.studies.build import EN410, EN673, SUMMER, WINTER, double, pane, tilted


def by_faces(found):
    return {tuple(face for face, _ in row.worn): row for row in found.rows}


@pytest.fixture(scope="module")
def soft():
    unit = double(pane(coating_in="soft-single"))
    return by_faces(compare(unit, catalogue(), Compare(), cold=WINTER, sun=SUMMER))


def test_a_soft_coat_is_tried_inside_the_sealed_gap_only_and_left_out_once(soft):
    assert set(soft) == {(), (2,), (3,)}
    assert [faces for faces, row in soft.items() if row.as_given] == [(2,)]


def test_of_a_vented_unit_a_soft_coat_is_tried_on_its_own_face_alone(soft):
    unit = double(pane(coating_in="soft-single"), sealed=Sealed(vented=True))
    found = by_faces(compare(unit, catalogue(), Compare(), cold=WINTER, sun=SUMMER))
    assert set(found) == {(), (2,)}
    assert found[(2,)].values == pytest.approx(soft[(2,)].values, rel=1e-13)
    other = by_faces(compare(unit, catalogue(), Compare(coatings=("soft-double",)), cold=WINTER, sun=SUMMER))
    assert set(other) == {()}
    hard = by_faces(compare(unit, catalogue(), Compare(coatings=("hard",)), cold=WINTER, sun=SUMMER))
    assert set(hard) == {(), (1,), (2,), (3,), (4,)}


def test_a_hard_coat_is_tried_on_every_face():
    unit = double(pane(coating_in="hard"))
    found = by_faces(compare(unit, catalogue(), Compare(), cold=WINTER, sun=SUMMER))
    assert set(found) == {(), (1,), (2,), (3,), (4,)}


def test_two_coatings_are_tried_in_every_allowed_pair():
    unit = double(pane(coating_in="soft-single"), pane(coating_in="hard"))
    found = compare(unit, catalogue(), Compare(), cold=WINTER, sun=SUMMER)
    worn = {row.worn for row in found.rows}
    assert len(worn) == len(found.rows) == 1 + 2 * 3
    assert ((2, "soft-single"), (4, "hard")) in worn
    assert not any(name == "soft-single" and face in (1, 4) for row in worn for face, name in row)


def test_like_coatings_swapped_are_one_arrangement():
    unit = double(pane(coating_in="soft-single"), pane(coating_out="soft-single"))
    assert set(by_faces(compare(unit, catalogue(), Compare(), cold=WINTER, sun=SUMMER))) == {(), (2, 3)}


def test_moving_the_coating_across_the_gap_leaves_u_and_raises_g(soft):
    assert soft[2,].values["U_W_m2K"] == pytest.approx(soft[3,].values["U_W_m2K"], rel=1e-9)
    assert soft[3,].values["solar_factor_g"] > soft[2,].values["solar_factor_g"] + 0.01
    assert soft[3,].values["solar_transmittance"] == pytest.approx(soft[2,].values["solar_transmittance"], abs=1e-9)
    assert soft[3,].inward[1] > 3.0 * soft[2,].inward[0]


def test_a_coating_lowers_u_warms_the_room_face_and_raises_the_fogging_humidity(soft):
    assert soft[2,].values["U_W_m2K"] < soft[()].values["U_W_m2K"] - 0.8
    assert soft[2,].values["room_face_C"] > soft[()].values["room_face_C"] + 4.0
    assert soft[2,].values["fog_humidity_pct"] > soft[()].values["fog_humidity_pct"]


def test_a_coating_on_the_room_face_cools_it():
    unit = double(pane(), pane(coating_in="hard"))
    found = by_faces(compare(unit, catalogue(), Compare(), cold=WINTER, sun=SUMMER))
    assert found[4,].values["U_W_m2K"] < found[()].values["U_W_m2K"]
    assert found[4,].values["room_face_C"] < found[()].values["room_face_C"]


def test_en410_moves_the_same_way():
    units = [double(pane(coating_in="soft-single")), double(pane(), pane(coating_out="soft-single"))]
    fractions = makeup_inward_fractions(MakeUps.of(units))
    assert np.all(fractions[1] > 5.0 * fractions[0])


def test_several_units_side_by_side_keep_their_pane_counts():
    single, other = replace(double(), panes=(pane(),), gaps=()), double()
    rows = compare_units([single, other], Compare(), cold=EN673, sun=None).rows
    assert rows[0].values["U_W_m2K"] > 2 * rows[1].values["U_W_m2K"]


def test_bowing_and_fracture_columns_come_on_request():
    unit = double(pane(coating_in="soft-single"))
    spec = Compare(columns=("U_W_m2K", "deflection_mm", "fracture_margin_K"))
    rows = compare(unit, catalogue(), spec, cold=WINTER, sun=SUMMER).rows
    assert all(row.values["deflection_mm"] > 0.5 for row in rows)
    assert all(10.0 < row.values["fracture_margin_K"] < 30.0 for row in rows)


def test_a_unit_without_a_coating_is_refused():
    with pytest.raises(ModelError, match="no coating to move"):
        compare(double(), catalogue(), Compare(), cold=WINTER, sun=SUMMER)


def test_a_tilted_unit_is_compared_in_the_position_of_its_conditions():
    """Every arrangement of a unit built at 30 degrees has the U and g of the vertical one."""
    unit = double(pane(coating_in="soft-single"))
    upright = {"cold": replace(EN673, tilt=np.pi / 2), "sun": replace(EN410, tilt=np.pi / 2)}
    built = compare(tilted(unit, 30.0), catalogue(), Compare(), **upright)
    vertical = compare(unit, catalogue(), Compare(), cold=EN673, sun=EN410)
    for name in ("U_W_m2K", "solar_factor_g"):
        assert [r.values[name] for r in built.rows] == [r.values[name] for r in vertical.rows]
