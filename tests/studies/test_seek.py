"""Search: against brute force, counts, the front, interruption, workers."""

import itertools
from concurrent.futures import ThreadPoolExecutor
from dataclasses import replace

import numpy as np
import pytest

from igu.errors import ModelError
from igu.model.catalogue import GlassEntry, catalogue
from igu.model.makeups import MakeUps
from igu.model.optics import BroadbandOptics
from igu.model.study_tables import CaseLayer, GapChoices, PaneChoices, Seek, Targets
from igu.model.unit import Gap, Pane, Pillars, Ply, Unit, Vacuum
from igu.ratings.figures import figures
from igu.studies import seek as module
from igu.studies.seek import Limit, seek
from tests.studies.build import ARGON, EN410, EN673, SUMMER, WINTER, double, pane

PANES = PaneChoices(("clear", "green"), (0.004, 0.006))
GAPS = GapChoices((0.012, 0.016), ((("air", 1.0),), ARGON))
SPEC = Seek(
    panes=(2,),
    layers=(PANES, GAPS, PANES),
    coatings=("soft-single", "hard"),
    coatings_max=1,
    targets=Targets(U_max=1.6, g_min=0.4, light_transmittance_min=0.6, thickness_max=0.0265),
    keep=7,
)


def brute_force():
    """Every unit of the space, one object each, and its figures from one batch."""
    library = catalogue()
    units, marks = [], []
    worn = [(None,) * 4] + [
        tuple(c if f == face else None for f in range(1, 5))
        for c in ("soft-single", "hard")
        for face in range(1, 5)
        if library.may_carry(c, face, faces=4)
    ]
    for pattern, (g1, t1), (w, fill), (g2, t2) in itertools.product(
        worn,
        itertools.product(PANES.glasses, PANES.thicknesses),
        itertools.product(GAPS.widths, GAPS.fills),
        itertools.product(PANES.glasses, PANES.thicknesses),
    ):
        outer = library.pane([library.glass_ply(g1, t1)], coating_out=pattern[0], coating_in=pattern[1])
        inner = library.pane([library.glass_ply(g2, t2)], coating_out=pattern[2], coating_in=pattern[3])
        units.append(Unit((outer, inner), (Gap(w, fill),), height=1.5, width=1.2))
        marks.append(1e3 * units[-1].thickness)
    return units, figures(MakeUps.of(units), cold=WINTER, sun=SUMMER), np.array(marks)


@pytest.fixture(scope="module")
def found():
    return seek(SPEC, double(), catalogue(), cold=WINTER, sun=SUMMER)


def test_the_search_finds_what_brute_force_finds(found):
    units, f, thick = brute_force()
    good = (f.U <= 1.6) & (f.g >= 0.4) & (f.light >= 0.6) & (thick <= 26.5)
    assert found.total == found.done == len(units)
    assert found.meeting == good.sum()
    assert 0 < found.meeting < found.total
    best = np.sort(f.U[good])[: SPEC.keep]
    assert [c.values["U_W_m2K"] for c in found.best] == pytest.approx(best, rel=1e-9)
    fails = np.array([f.U > 1.6, f.g < 0.4, f.light < 0.6, thick > 26.5])
    alone = (fails & (fails.sum(axis=0) == 1)).sum(axis=1)
    assert found.excluded == tuple(alone)
    assert found.failing == tuple(fails.sum(axis=1))
    assert any(a != b for a, b in zip(found.excluded, found.failing, strict=True))


def test_no_make_up_that_meets_everything_beats_one_of_the_front(found):
    _, f, thick = brute_force()
    good = (f.U <= 1.6) & (f.g >= 0.4) & (f.light >= 0.6) & (thick <= 26.5)
    assert found.front_axes == (("U_W_m2K", True), ("solar_factor_g", False))
    assert len(found.front) > 1
    for c in found.front:
        better = good & (c.values["U_W_m2K"] - 1e-9 >= f.U) & (f.g >= c.values["solar_factor_g"] + 1e-9)
        assert not better.any()


@pytest.mark.parametrize(
    ("how", "axes"),
    [
        ({"rank_by": "solar_factor_g"}, (("solar_factor_g", True), ("U_W_m2K", True))),
        ({"rank_by": "selectivity", "minimise": False}, (("selectivity", False), ("U_W_m2K", True))),
        ({"rank_by": "thickness_mm"}, (("thickness_mm", True), ("U_W_m2K", True))),
        (
            {"rank_by": "room_face_C", "minimise": False, "targets": Targets(g_max=0.5)},
            (("room_face_C", False), ("solar_factor_g", True)),
        ),
        ({"targets": Targets()}, (("U_W_m2K", True), ("light_transmittance", False))),
    ],
)
def test_the_front_weighs_what_is_ranked(how, axes):
    result = seek(replace(SPEC, **how), double(), catalogue(), cold=WINTER, sun=SUMMER)
    assert result.front_axes == axes
    cost = [[c.values[name] * (1.0 if less else -1.0) for c in result.front] for name, less in axes]
    assert np.all(np.diff(cost[0]) > 0.0)
    assert np.all(np.diff(cost[1]) < 0.0)
    best = result.best[0].values[result.rank_by]
    assert result.front[0].values[result.rank_by] == pytest.approx(best, abs=1e-6)


@pytest.mark.parametrize("block", [7, 4096])
@pytest.mark.parametrize("keep", [1, 7, 50])
def test_make_ups_that_tie_with_the_last_are_counted(block, keep, monkeypatch):
    """Thickness has few values, so that most of a list ties with what follows it."""
    monkeypatch.setattr(module, "BLOCK", block)
    spec = replace(SPEC, rank_by="thickness_mm", targets=Targets(U_max=1.6), keep=keep)
    result = seek(spec, double(), catalogue(), cold=WINTER, sun=SUMMER)
    _, f, thick = brute_force()
    thick = np.sort(np.round(thick[f.U <= 1.6], 6))
    assert result.tied == np.sum(thick <= thick[keep - 1]) - keep
    assert result.tied > 0 or keep == 50
    assert [c.values["thickness_mm"] for c in result.best] == pytest.approx(thick[:keep])
    u = [c.values["U_W_m2K"] for c in result.best if c.values["thickness_mm"] < thick[0] + 1e-6]
    assert u == sorted(u), "ties stand in the order of the other axis of the front"


def test_mirror_images_tie_in_u():
    spec = Seek((2,), (PANES, GAPS, PANES), ("soft-single",), faces=(2, 3), targets=Targets(U_max=1.6), keep=1)
    assert seek(spec, double(), catalogue(), cold=EN673, sun=SUMMER).tied >= 1


def test_what_cannot_be_judged_is_counted_apart():
    """A glass not known in the sun has no g to be limited by; without such a limit it is as good as any."""
    library = catalogue()
    library = replace(library, glasses={**library.glasses, "new": GlassEntry("new", density=2500.0)})
    layers = (PaneChoices(("clear", "new"), (0.004,)), GAPS, PaneChoices(("clear",), (0.004,)))
    for targets, unknown in ((Targets(g_min=0.99), 4), (Targets(U_max=0.1), 0)):
        result = seek(Seek((2,), layers, targets=targets), double(), library, cold=WINTER, sun=SUMMER)
        assert (result.total, result.meeting, result.unknown) == (8, 0, unknown)
        assert result.failing == result.excluded == (8 - unknown,)


@pytest.mark.parametrize(
    ("how", "cold", "sun"),
    [
        ({}, None, SUMMER),
        ({}, WINTER, None),
        ({"targets": Targets(room_face_min=285.0)}, EN673, SUMMER),
        ({"targets": Targets(hottest_pane_max=320.0)}, WINTER, EN410),
        ({"rank_by": "selectivity"}, WINTER, WINTER),
    ],
)
def test_a_quantity_that_the_conditions_do_not_tell_is_refused(how, cold, sun):
    with pytest.raises(ModelError, match="not told by the conditions"):
        seek(replace(SPEC, **how), double(), catalogue(), cold=cold, sun=sun)


def test_a_miss_of_a_temperature_does_not_hang_on_its_zero():
    values = np.array([-5.0, 5.0])
    for bound in (0.0, 10.0):
        assert Limit("room_face_C", bound, False).excess(values) == pytest.approx((bound - values) / 20.0)


def test_the_best_make_up_is_made_of_the_choices(found):
    c = found.best[0]
    assert {ply.material for p in c.panes for ply in p.plies} <= {"clear", "green"}
    assert sum(bool(p.coating_out) + bool(p.coating_in) for p in c.panes) <= 1


def test_blocks_and_executors_change_nothing(found, monkeypatch):
    monkeypatch.setattr(module, "BLOCK", 50)
    with ThreadPoolExecutor(2) as executor:
        again = seek(SPEC, double(), catalogue(), cold=WINTER, sun=SUMMER, executor=executor, workers=2)
    assert again.meeting == found.meeting
    assert again.excluded == found.excluded
    assert [c.values for c in again.best] == [pytest.approx(c.values, nan_ok=True) for c in found.best]
    assert len(again.front) == len(found.front)


def test_impossible_targets_are_answered_with_the_nearest_miss():
    spec = Seek(panes=(2,), layers=SPEC.layers, coatings=("soft-single",), targets=Targets(U_max=0.5))
    found = seek(spec, double(), catalogue(), cold=WINTER, sun=SUMMER)
    assert found.meeting == 0
    assert found.best == found.front == ()
    _, f, _ = brute_force()
    assert found.nearest.values["U_W_m2K"] == pytest.approx(f.U.min())
    assert found.misses[0] == pytest.approx(f.U.min() / 0.5 - 1.0)


def test_an_interrupt_hands_back_what_was_found(monkeypatch):
    monkeypatch.setattr(module, "BLOCK", 64)
    seen = []

    def interrupt(done, total):
        seen.append((done, total))
        if len(seen) == 2:
            raise KeyboardInterrupt

    found = seek(SPEC, double(), catalogue(), cold=WINTER, sun=SUMMER, progress=interrupt)
    assert found.partial
    assert found.done == 128 < found.total


def test_double_and_triple_units_in_one_search():
    layers = (PANES, GapChoices((0.012,), (ARGON,))) * 2 + (PANES,)
    spec = Seek(panes=(2, 3), layers=layers, targets=Targets(thickness_max=0.040), keep=400)
    found = seek(spec, double(), catalogue(), cold=WINTER, sun=None)
    assert found.total == 4 * 4 + 4 * 4 * 4
    assert {len(c.panes) for c in found.best} == {2, 3}
    assert all(c.values["thickness_mm"] <= 40.0 for c in found.best)


LAMINATED = ("clear", 0.004), ("pvb", 0.00076), ("clear", 0.004)


def laminated(**how):
    library = catalogue()
    plies = [(library.interlayer_ply if m == "pvb" else library.glass_ply)(m, t) for m, t in LAMINATED]
    return library.pane(plies, treatment="toughened", **how)


@pytest.mark.parametrize("given", [None, "soft-single"])
def test_a_laminated_pane_of_the_case_is_held_as_brute_force_has_it(given):
    """Bare it may be coated by the search, coated it keeps its coating; plies enter mass, thickness, U and optics."""
    library = catalogue()
    spec = Seek((2,), (PANES, GAPS, CaseLayer(3)), ("soft-single", "hard"), keep=1000)
    case = double(inner=laminated(coating_out=given))
    found = seek(spec, case, library, cold=WINTER, sun=SUMMER)
    units = []
    for coating, face in [(None, 0), ("soft-single", 2), ("soft-single", 3), *[("hard", k) for k in (1, 2, 3, 4)]]:
        if face == 3 and given:
            continue
        worn = [coating if k == face else None for k in range(5)]
        inner = laminated(coating_out=given or worn[3], coating_in=worn[4])
        for g, t, w, fill in itertools.product(PANES.glasses, PANES.thicknesses, GAPS.widths, GAPS.fills):
            outer = library.pane([library.glass_ply(g, t)], coating_out=worn[1], coating_in=worn[2])
            units.append(Unit((outer, inner), (Gap(w, fill),), height=1.5, width=1.2))
    f = figures(MakeUps.of(units), cold=WINTER, sun=SUMMER)
    assert found.total == found.meeting == len(units)
    for name, values in {
        "U_W_m2K": f.U,
        "solar_factor_g": f.g,
        "light_transmittance": f.light,
        "thickness_mm": [1e3 * u.thickness for u in units],
        "mass_kg_m2": [u.mass_per_area for u in units],
    }.items():
        assert sorted(c.values[name] for c in found.best) == pytest.approx(sorted(values), rel=1e-9), name
    assert {c.panes[1].treatment for c in found.best} == {"toughened"}
    assert len({c.panes[1].coating_out for c in found.best}) == (1 if given else 3)


def test_a_vacuum_gap_is_held_and_a_treatment_worn():
    vacuum = Gap(0.0002, vacuum=Vacuum(0.1), pillars=Pillars(0.02, 0.00025, 20.0))
    case = Unit((pane(), pane()), (vacuum,))
    panes = PaneChoices(("clear",), (0.004, 0.005), "heat-strengthened")
    found = seek(Seek((2,), (panes, CaseLayer(2), panes)), case, catalogue(), cold=WINTER, sun=None)
    assert found.total == len(found.best) == 4
    assert {c.gaps for c in found.best} == {(vacuum,)}
    assert {p.treatment for c in found.best for p in c.panes} == {"heat-strengthened"}


def test_a_measured_pane_is_held_and_never_coated():
    sun = BroadbandOptics(0.4, 0.3, 0.4, 0.6, 0.1, 0.1)
    measured = Pane((Ply("sun", 0.006, 1.0, kind="pane", density=2500.0),), 0.837, 0.03, optics=sun, name="sun")
    case = double(outer=measured)
    spec = Seek((2,), (CaseLayer(1), GAPS, PANES), ("hard",), keep=100)
    found = seek(spec, case, catalogue(), cold=WINTER, sun=SUMMER)
    assert found.total == len(found.best) == 3 * 4 * 4
    assert {c.panes[0] for c in found.best} == {measured}
    assert {bool(c.panes[1].coating_out) + 2 * bool(c.panes[1].coating_in) for c in found.best} == {0, 1, 2}


@pytest.mark.parametrize("layers", [(CaseLayer(2), GAPS, PANES), (PANES, CaseLayer(4), PANES), (PANES, PANES, PANES)])
def test_a_layer_in_the_wrong_place_is_refused(layers):
    with pytest.raises(ModelError, match=r"cannot stand there|in the place of"):
        seek(Seek((2,), layers), double(), catalogue(), cold=WINTER, sun=None)


def test_a_search_that_allows_nothing_is_refused():
    spec = Seek(panes=(2,), layers=(PaneChoices((), ()), GAPS, PANES))
    with pytest.raises(ModelError, match="no make-up"):
        seek(spec, double(), catalogue(), cold=WINTER, sun=None)
