"""Six judgements: each outcome reached by a unit that earns it, and the worst of each question found."""

from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from igu.model.case import read_case
from igu.model.study_tables import Loads
from igu.studies.service import service
from igu.studies.verdicts import DOUBTFUL, FAILS, OPEN, PASSES, verdicts, worst_state
from igu.studies.verdicts import state as state_words

ROOT = Path(__file__).parents[2]
ROOM = read_case(ROOT / "cases/reading-room.toml")
ROOF = read_case(ROOT / "cases/roof-light.toml")


def outcome(case, question):
    return next(v for v in verdicts(case.unit, service(case)) if v.question == question)


def changed(case=ROOM, *, conditions=None, **unit):
    return replace(case, unit=replace(case.unit, **unit), conditions=conditions or case.conditions)


def under(**keys):
    return changed(conditions=(replace(ROOM.conditions[0], **keys), *ROOM.conditions[1:]))


def test_every_question_is_answered_once():
    questions = [v.question for v in verdicts(ROOM.unit, service(ROOM))]
    assert questions == ["fogging", "gap", "stress", "fracture", "ageing", "tolerance"]


def test_fogging_is_of_the_room_side_first():
    assert outcome(ROOM, "fogging").outcome == PASSES
    assert outcome(under(indoor_humidity=0.9), "fogging").outcome == FAILS
    assert outcome(under(indoor_humidity=None), "fogging").outcome == OPEN
    outdoors = outcome(ROOF, "fogging")
    assert (outdoors.outcome, outdoors.at) == (DOUBTFUL, 1)
    wet = replace(ROOM.unit.sealed, fill_dew_point=283.15)
    inside = outcome(changed(sealed=wet), "fogging")
    assert (inside.outcome, inside.at) == (FAILS, 2)


def test_the_gap_left_least_of_its_width():
    v, found = outcome(ROOM, "gap"), service(ROOM)
    assert v.value == min(g.centre for b in found.bowed for g in b.gaps)
    assert (v.outcome, v.at, v.under) == (DOUBTFUL, 1, "standard winter load")
    thin = changed(sealed=replace(ROOM.unit.sealed, pressure=50e3))
    assert outcome(thin, "gap").outcome == FAILS


def test_stress_is_judged_by_its_share_of_the_strength_not_by_its_size():
    """The toughened outdoor pane of the roof light bears more, the annealed laminated one is nearer its strength."""
    v, found = outcome(ROOF, "stress"), service(ROOF)
    uses = [p.use for b in found.bowed for p in b.panes]
    assert v.value / v.limit == max(uses)
    assert v.at == 2
    assert max(p.stress for b in found.bowed for p in b.panes) > v.value
    assert v.under in {state_words(b, found.bowed) for b in found.bowed}


def test_stress_fails_beyond_the_strength_and_passes_where_linear_plates_read_high():
    loaded = replace(changed(gaps=(), panes=ROOM.unit.panes[1:]), loads=Loads(wind=500.0))
    wind = outcome(replace(loaded, conditions=(ROOM.conditions[0],)), "stress")
    bent = [p.linear for b in service(replace(loaded, conditions=(ROOM.conditions[0],))).bowed for p in b.panes]
    assert not all(bent)
    assert wind.outcome == PASSES
    assert outcome(ROOM, "stress").outcome == DOUBTFUL
    strong = replace(loaded, loads=Loads(wind=3000.0), conditions=(ROOM.conditions[0],))
    assert outcome(strong, "stress").outcome == FAILS


def test_fracture_by_its_margin():
    assert outcome(ROOM, "fracture").outcome == PASSES
    noon = ROOM.conditions[1]
    hot = [changed(conditions=(ROOM.conditions[0], replace(noon, edge=noon.outdoor_air - cold))) for cold in (15, 40)]
    assert [outcome(case, "fracture").outcome for case in hot] == [DOUBTFUL, FAILS]
    assert outcome(changed(conditions=ROOM.conditions[:1]), "fracture").outcome == OPEN


@pytest.mark.parametrize(
    ("leakage", "within", "expected"),
    [(0.01, [True, True], DOUBTFUL), (0.006, [False, True], DOUBTFUL), (0.004, [False, False], PASSES)],
)
def test_ageing_by_both_lines_over_thirty_years(leakage, within, expected):
    case = changed(sealed=replace(ROOM.unit.sealed, leakage=leakage))
    found = service(case).ageing
    assert [year is not None and year <= 30 for year in (found.leaves, found.leaves_linear)] == within
    assert outcome(case, "ageing").outcome == expected


def test_a_vented_unit_is_not_said_to_keep_its_gas():
    case = changed(sealed=replace(ROOM.unit.sealed, vented=True))
    assert outcome(case, "ageing").outcome == OPEN
    assert any("vented" in text for text in service(case).gaps_in_knowledge)


def test_tolerance_by_the_share_that_holds():
    assert outcome(ROOM, "tolerance").outcome == PASSES
    highland = read_case(ROOT / "cases/highland-facade.toml")
    v = outcome(highland, "tolerance")
    assert v.outcome == DOUBTFUL
    assert 0.5 < v.value < 0.95


def test_the_state_drawn_is_the_one_judged():
    for case in (ROOM, ROOF):
        found = service(case)
        assert outcome(case, "stress").under == state_words(worst_state(found.bowed), found.bowed)
    assert worst_state(()) is None


def test_snow_that_does_not_act_is_said():
    found = service(replace(ROOM, loads=Loads(snow=1000.0)))
    assert all(b.duration != "snow" for b in found.bowed)
    assert any("snow_Pa" in text for text in found.gaps_in_knowledge)
    (lying,) = (
        b for b in service(replace(ROOF, loads=Loads(snow=1000.0))).bowed if b.duration == "snow" and b.transfer
    )
    assert lying.name == "clear calm night, dark with snow"


def test_a_face_that_hardly_stays_clear_is_doubtful():
    """Between the humidities of 1 K to spare and of none the verdict is doubtful, on either side it is not."""
    found = {h: outcome(under(indoor_humidity=h), "fogging") for h in np.linspace(0.5, 0.65, 31)}
    for v in found.values():
        assert v.outcome == (FAILS if v.value < -1e-6 else DOUBTFUL if v.value < 1.0 else PASSES)
    assert {v.outcome for v in found.values()} == {FAILS, DOUBTFUL, PASSES}


def test_a_pane_that_nothing_loads_is_not_judged():
    alone = changed(gaps=(), panes=ROOM.unit.panes[1:])
    assert outcome(alone, "stress").outcome == OPEN
    assert outcome(replace(alone, loads=Loads(wind=(500.0, -500.0))), "stress").outcome == PASSES
    lying = changed(gaps=(), panes=ROOM.unit.panes[1:], tilt=0.0)
    assert outcome(lying, "stress").outcome != OPEN
