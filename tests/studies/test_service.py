"""The whole picture: every shipped case is judged, what is not worked out is said, which loads are taken."""

from dataclasses import fields, is_dataclass, replace
from pathlib import Path

import numpy as np
import pytest

from igu.model.case import read_case
from igu.model.study_tables import Loads, Tolerance
from igu.ratings import en673
from igu.ratings.rate import rate
from igu.studies.bowing import bow
from igu.studies.service import service, site_climbs
from igu.studies.tolerance import tolerances
from igu.studies.verdicts import DOUBTFUL, FAILS, OPEN, PASSES, verdicts
from tests.studies.build import SOFT, WINTER

ROOT = Path(__file__).parents[2]


def test_a_roof_light_ages_and_varies_by_its_vertical_value():
    """The declared value is that of the unit stood upright; what has conditions keeps the tilt it is built at."""
    case = read_case(ROOT / "cases/roof-light.toml")
    upright = replace(case.unit, tilt=np.pi / 2)
    found = service(case)
    assert found.ageing.state == "EN 673, vertical"
    assert found.ageing.U[0] == pytest.approx(en673.u_value(upright), rel=1e-12)
    nominal = {spread.quantity: spread.nominal for spread in found.tolerances.spreads}
    assert nominal["U_en673_W_m2K"] == pytest.approx(en673.u_value(upright), rel=1e-12)
    assert nominal["U_W_m2K"] == pytest.approx(rate(case.unit, case.conditions[0]).U, rel=1e-9)
    assert found.tolerances.declared == found.ageing.declared == en673.declared(en673.u_value(upright))


CASES = {
    "film-winter": {"gap": OPEN, "stress": OPEN, "ageing": OPEN, "tolerance": OPEN},  # a sheet is no plate, air no fill
    "highland-facade": {"fogging": PASSES, "gap": PASSES, "ageing": DOUBTFUL},  # carried up: the gap opens
    "lake-gap-widths": {"fogging": OPEN, "fracture": OPEN, "tolerance": PASSES},  # en-673 has neither faces nor sun
    "north-triple": {"fogging": PASSES, "fracture": PASSES, "tolerance": PASSES},
    "reading-room": {"fogging": PASSES, "fracture": PASSES, "tolerance": PASSES},
    "retrofit-single": {"fogging": FAILS, "gap": OPEN, "stress": OPEN, "ageing": OPEN},  # one pane at 18 below zero
    "roof-light": {"fogging": DOUBTFUL, "gap": DOUBTFUL},  # dew outdoors under a clear sky; the panes lie and bend
    "vacuum-unit": {"gap": OPEN, "stress": OPEN, "ageing": OPEN, "fracture": PASSES},  # pillars, no gas
}
"""Some outcomes of every shipped case that what it is decides."""

QUESTIONS = ["fogging", "gap", "stress", "fracture", "ageing", "tolerance"]


def figures_of(found):
    """Every number in a result, however deep."""
    if isinstance(found, float | np.ndarray):
        yield found
    elif isinstance(found, dict):
        yield from figures_of(tuple(found.values()))
    elif isinstance(found, tuple | list):
        for part in found:
            yield from figures_of(part)
    elif is_dataclass(found):
        yield from figures_of(tuple(getattr(found, part.name) for part in fields(found)))


@pytest.mark.parametrize("name", sorted(p.stem for p in (ROOT / "cases").glob("*.toml")))
def test_every_case_has_its_whole_picture(name):
    case = read_case(ROOT / f"cases/{name}.toml")
    found = service(case)
    judged = verdicts(case.unit, found)
    numbers = list(figures_of((found, judged)))
    assert len(numbers) > 30
    assert all(np.isfinite(number).all() for number in numbers)
    assert [v.question for v in judged] == QUESTIONS
    assert {v.question: v.outcome for v in judged}.items() >= CASES[name].items()
    assert all((v.value is None) == (v.limit is None) == (v.outcome == OPEN) for v in judged if v.question != "ageing")


def test_a_vacuum_unit_is_not_called_free_of_stress():
    found = service(read_case(ROOT / "cases/vacuum-unit.toml"))
    assert all(p.stress is None and p.use is None for b in found.bowed for p in b.panes)
    assert any("pillars" in text for text in found.gaps_in_knowledge)


def test_u_that_is_not_defined_is_none_and_no_figure():
    near = replace(WINTER, outdoor_air=293.65)
    assert all(b.U is None for b in bow(SOFT, near, None))
    names = {s.quantity for s in tolerances(SOFT, Tolerance(samples=64), cold=near, sun=None).spreads}
    assert "U_W_m2K" not in names


def test_sun_on_an_unknown_pane_is_said_to_be_left_out_of_the_loads():
    case = read_case(ROOT / "cases/reading-room.toml")
    dim = replace(case.unit.panes[0], optics=None)
    blind = replace(case, unit=replace(case.unit, panes=(dim, *case.unit.panes[1:])))
    assert any("July noon" in text for text in service(blind).gaps_in_knowledge)


def test_the_site_replaces_the_standards_altitude_only_where_the_case_says_both():
    """Highland: sealed and standing where the case says; the climb is that of its two altitudes."""
    case = read_case(ROOT / "cases/highland-facade.toml")
    climb = case.table["conditions"][0]["altitude_m"] - case.table["sealed"]["altitude_m"]
    found = service(case)
    assert site_climbs(case, found.results) == pytest.approx([climb], abs=0.1)
    assert any(f"site {climb:.0f} m above sealing" in b.name for b in found.bowed)
    blind = replace(case, table={**case.table, "sealed": {}})
    assert site_climbs(blind, found.results) == ()
    assert {"standard summer load", "standard winter load"} < {b.name for b in service(blind).bowed}


def test_every_wind_is_taken_under_every_condition():
    case = replace(read_case(ROOT / "cases/reading-room.toml"), loads=Loads(wind=(800.0, -600.0)))
    gusts = [b.name.rpartition(" with ")[2] for b in service(case).bowed if b.duration == "wind"]
    assert sorted(gusts) == ["suction 600 Pa"] * 3 + ["wind 800 Pa"] * 3
