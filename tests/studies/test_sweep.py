"""Sweeps: optimum gaps computed independently, and what a case can vary."""

from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from igu.errors import CaseError
from igu.model.case import case_from_table, read_case
from igu.model.study_tables import Sweep, Vary
from igu.ratings import en673
from igu.studies.sweep import sweep

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
    spec = Sweep((Vary(keys, tuple(float(w) for w in range(6, 25)), ranged=True),))
    found = sweep(case(layers), spec).optima[0]
    assert found.refined
    assert not found.edge
    assert found.at == pytest.approx(optimum, abs=0.1)
    assert found.low < found.at < found.high


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
