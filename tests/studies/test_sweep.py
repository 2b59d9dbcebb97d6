"""Sweeps: optimum gaps computed independently, and what a case can vary."""

from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from igu.errors import CaseError
from igu.model.case import case_from_table, read_case
from igu.model.study_tables import Sweep, Vary
from igu.ratings import en673
from igu.studies.sweep import _dips, _flat_range, sweep

ROOT = Path(__file__).parents[2]


def case(layers, **more):
    table = {"title": "t", "layer": layers, "conditions": [{"set": "en-673"}], **more}
    return case_from_table(table, file="t.toml", folder=ROOT)


GLASS = {"glass": "clear", "thickness_mm": 4}
OPTIMA = [(1, "air", 15.5), (1, "argon", 14.7), (1, "krypton", 9.7), (2, "air", 19.6), (2, "argon", 18.5),
          (2, "krypton", 12.2)]  # fmt: skip
"""Gap of least U [mm] at the EN 673 state, gaps, gas; uncoated 4 mm panes [computed, outside this package]."""


@pytest.mark.parametrize(("gaps", "gas", "optimum"), OPTIMA)
def test_optimum_gap_by_gas(gaps, gas, optimum):
    layers = [GLASS, *[{"gap_mm": 12.0, "gas": gas}, GLASS] * gaps]
    keys = tuple(f"layer.{2 * k + 2}.gap_mm" for k in range(gaps))
    widths = tuple(float(w) for w in range(6, 25))
    spec = Sweep((Vary(keys, widths, ranged=True),))
    found = sweep(case(layers), spec).optima[0]
    assert found.at not in widths
    assert not found.edge
    assert found.at == pytest.approx(optimum, abs=0.1)
    assert found.low < found.at < found.high


@pytest.mark.parametrize(("first", "last", "step"), [(14, 24, 2), (4, 15, 1), (8, 23, 5)])
def test_an_optimum_beside_the_end_of_a_range_is_found_between_its_points(first, last, step):
    layers = [GLASS, {"gap_mm": 12.0, "gas": "argon"}, GLASS]
    widths = tuple(float(w) for w in range(first, last + 1, step))
    found = sweep(case(layers), Sweep((Vary(("layer.2.gap_mm",), widths, ranged=True),))).optima[0]
    assert found.at == pytest.approx(14.7, abs=0.1)
    assert found.at not in widths
    assert (found.edge, found.local) == (False, None)


ROOF = {"unit": {"height_m": 1.5, "tilt_deg": 20}, "conditions": [
    {"name": "winter", "outdoor_C": -18, "indoor_C": 21, "wind_m_s": 5},
    {"name": "mild", "outdoor_C": 5, "indoor_C": 21, "wind_m_s": 5},
]}  # fmt: skip


def roof():
    layers = [{**GLASS, "coating_in": "soft-single"}, {"gap_mm": 16, "gas": {"argon": 0.9, "air": 0.1}}, GLASS]
    return case(layers, **ROOF)


def test_a_local_least_inside_the_range_is_reported_beside_the_best_at_its_end():
    """Heat rising: conduction falls until the gas turns over (Hollands et al.), and what follows falls again."""
    widths = tuple(float(w) for w in range(4, 61, 2))
    found = sweep(roof(), Sweep((Vary(("layer.2.gap_mm",), widths, ranged=True),)))
    (o,), u = found.optima, found.quantities["U_W_m2K"]
    assert (o.at, o.edge, o.best) == (60.0, True, u[-1])
    at, best = o.local
    assert 6.0 < at < 10.0
    assert best <= u[1:4].min()
    around = Sweep((Vary(("layer.2.gap_mm",), (at - 0.2, at, at + 0.2)),))
    before, there, after = sweep(roof(), around).quantities["U_W_m2K"]
    assert there == pytest.approx(best, rel=1e-9)
    assert there < min(before, after)


def test_a_level_line_has_no_local_least():
    spec = Sweep((Vary(("unit.width_m",), tuple(0.5 + 0.1 * k for k in range(30)), ranged=True),))
    assert sweep(roof(), spec).optima[0].local is None


def test_dips_are_more_than_round_off():
    assert _dips(np.array([3.0, 1.0, 2.0, 2.0 - 1e-9, 2.0, 1.5, np.inf, 1.0])) == [1, 5]


@pytest.mark.parametrize("level", [10.0, -10.0], ids=["least", "greatest, as a negative price"])
def test_the_flat_range_ends_where_the_limit_is_first_passed(level):
    """1 % of 10 either way. A second valley as deep as the first is another range."""
    places = np.arange(0.0, 9.0)

    def price(at):
        return level + min(abs(at - 2.0), abs(at - 7.0))

    low, high = _flat_range(price, places, np.array([price(at) for at in places]), 2.0, level)
    assert (low, high) == pytest.approx((1.9, 2.1), abs=1e-3)


def test_conditions_stay_those_named_where_a_value_makes_others_colder():
    key = "conditions.winter.outdoor_C"
    found = sweep(roof(), Sweep((Vary((key,), (-18.0, 10.0, 15.0)),)))
    assert found.cold.name == "winter"
    u = found.quantities["U_W_m2K"]
    named = sweep(roof(), Sweep((Vary((key,), (10.0, 15.0)),), cold="winter")).quantities["U_W_m2K"]
    assert u[1:] == pytest.approx(named, rel=1e-12)
    assert u[1] != u[2]


def test_the_second_quantity_may_lie_in_what_the_first_chooses():
    base = case([GLASS, {"gap_mm": 16, "gas": "argon"}, GLASS])
    fills = ({"argon": 0.9, "air": 0.1}, {"krypton": 0.9, "air": 0.1})
    spec = Sweep((Vary(("layer.2.gas",), fills), Vary(("layer.2.gas.air",), (0.1, 0.3))))
    found = sweep(base, spec).quantities["U_W_m2K"]
    for i, gas in enumerate(("argon", "krypton")):
        for j, air in enumerate((0.1, 0.3)):
            unit = case([GLASS, {"gap_mm": 16, "gas": {"air": air, gas: 1.0 - air}}, GLASS]).unit
            assert found[i, j] == pytest.approx(en673.u_value(unit), rel=1e-12)


def test_u_is_one_per_cent_above_its_least_at_both_ends_of_the_flat_range():
    layers = [GLASS, {"gap_mm": 12.0, "gas": "argon"}, GLASS]
    spec = Sweep((Vary(("layer.2.gap_mm",), tuple(float(w) for w in range(6, 31)), ranged=True),))
    found = sweep(case(layers), spec).optima[0]
    ends = [en673.u_value(case([GLASS, {"gap_mm": w, "gas": "argon"}, GLASS]).unit) for w in (found.low, found.high)]
    assert ends == pytest.approx([1.01 * found.best] * 2, rel=1e-4)


def test_every_point_is_the_unit_with_that_value():
    """To 1e-13, not to the bit: a batch and a single unit go through powers of other vector widths."""
    layers = [GLASS, {"gap_mm": 12.0, "gas": "argon"}, GLASS]
    widths, gases = (8.0, 12.0, 16.0), ("air", "argon")
    spec = Sweep((Vary(("layer.2.gap_mm",), widths, True), Vary(("layer.2.gas",), gases)))
    found = sweep(case(layers), spec).quantities["U_W_m2K"]
    for i, width in enumerate(widths):
        for j, gas in enumerate(gases):
            unit = case([GLASS, {"gap_mm": width, "gas": gas}, GLASS]).unit
            assert found[i, j] == pytest.approx(en673.u_value(unit), rel=1e-13)


def test_the_coating_face_and_a_condition_can_be_swept():
    base = read_case(ROOT / "cases/reading-room.toml")
    spec = Sweep(
        (Vary(("face",), (2, 3)), Vary(("conditions.July noon.incidence_deg",), (0.0, 60.0))),
        of=("solar_factor_g", "U_W_m2K"),
    )
    found = sweep(base, spec)
    g = found.quantities["solar_factor_g"]
    assert np.all(g[1] > g[0])
    assert np.all(g[:, 1] < g[:, 0])
    assert np.ptp(found.quantities["U_W_m2K"]) < 1e-9


def test_shares_of_a_fill_follow_the_one_that_is_swept():
    base = read_case(ROOT / "cases/reading-room.toml")
    spec = Sweep((Vary(("layer.2.gas.argon",), (0.5, 0.7, 0.9), True),), cold="en-673")
    u = sweep(base, spec).quantities["U_W_m2K"]
    assert np.all(np.diff(u) < 0.0)


def test_a_share_may_be_swept_up_to_the_pure_gas(tmp_path):
    """The case of a point is not asked whether its own sweep could still follow."""
    path = tmp_path / "pure.toml"
    text = (ROOT / "cases/reading-room.toml").read_text(encoding="utf-8")
    for given in ("values = [0.5, 1.0]", "from = 0.5\nto = 1.0\ncount = 3"):
        vary = f'[sweep]\ncold = "en-673"\n[[sweep.vary]]\nkey = "layer.2.gas.argon"\n{given}\n'
        path.write_text(text + vary, encoding="utf-8")
        base = read_case(path)
        u = sweep(base, base.sweep).quantities["U_W_m2K"]
        (gap,) = base.unit.gaps
        pure = replace(base.unit, gaps=(replace(gap, fill=(("argon", 1.0),)),))
        assert u[-1] == pytest.approx(en673.u_value(pure), rel=1e-12)


def test_an_impossible_value_is_the_case_files_fault():
    base = read_case(ROOT / "cases/reading-room.toml")
    with pytest.raises(CaseError, match="thickness_mm"):
        sweep(base, Sweep((Vary(("layer.1.thickness_mm",), (4.0, 4000.0)),)))


def test_maximising_turns_the_optimum_round():
    base = read_case(ROOT / "cases/lake-gap-widths.toml")
    spec = replace(base.sweep, minimise=False)
    assert sweep(base, spec).optima[0].at == 6.0


def test_a_tilt_swept_beside_a_position_of_the_conditions():
    """The built tilt moves what is computed at it and leaves the vertical value of EN 673; the position moves that."""
    built = read_case(ROOT / "cases/roof-light.toml")
    tilts = Vary(("unit.tilt_deg",), (0.0, 30.0, 60.0), ranged=True)
    fixed = sweep(built, Sweep((tilts,), cold="en-673", sun="en-410", of=("U_W_m2K", "solar_factor_g")))
    upright = replace(built.unit, tilt=np.pi / 2)
    assert fixed.quantities["U_W_m2K"] == pytest.approx([en673.u_value(upright)] * 3, rel=1e-12)
    assert np.ptp(fixed.quantities["solar_factor_g"]) < 1e-12
    assert np.ptp(sweep(built, Sweep((tilts,), cold="clear calm night")).quantities["U_W_m2K"]) > 0.01
    moved = sweep(built, Sweep((Vary(("conditions.en-673.tilt_deg",), (90, 45, 0)),), cold="en-673"))
    expected = [en673.u_value(replace(built.unit, tilt=np.radians(t))) for t in (90.0, 45.0, 0.0)]
    assert moved.quantities["U_W_m2K"] == pytest.approx(expected, rel=1e-12)
    assert expected[0] < expected[1] < expected[2]
