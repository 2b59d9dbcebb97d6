"""What ships can be named, says where it comes from, and makes panes."""

import pytest

from igu.errors import ModelError
from igu.model.casefile.keys import KEYS
from igu.model.catalogue import CoatingEntry, GlassEntry, Library, catalogue
from igu.model.conditions import METHODS
from igu.model.optics import FilmOptics

SHIPPED = catalogue()
KINDS = [("glass", SHIPPED.glasses), ("coating", SHIPPED.coatings), ("interlayer", SHIPPED.interlayers),
         ("set", SHIPPED.condition_sets)]  # fmt: skip


def test_it_is_read_once():
    assert catalogue() is SHIPPED


def test_the_names_the_documents_promise():
    assert set(SHIPPED.glasses) == {"clear", "low-iron", "bronze", "grey", "green"}
    assert set(SHIPPED.coatings) == {"soft-single", "soft-double", "hard"}
    iso, ansi = {"iso-15099-8.2-winter", "iso-15099-8.2-summer"}, {"ansi-nfrc-100", "ansi-nfrc-200"}
    assert set(SHIPPED.condition_sets) == {"en-673", "en-410"} | iso | ansi


@pytest.mark.parametrize(("kind", "name", "entry"), [(k, n, e) for k, entries in KINDS for n, e in entries.items()])
def test_every_entry_has_its_label_and_its_source(kind, name, entry):
    assert entry.name == name
    assert entry.label
    assert entry.source


def test_generic_coatings_are_called_models():
    for coating in SHIPPED.coatings.values():
        assert "model, not a measurement" in coating.source
        assert coating.inside_only == coating.name.startswith("soft")


def test_sets_have_a_method_and_no_key_of_their_own():
    for one in SHIPPED.condition_sets.values():
        assert one.keys["method"] in METHODS
        assert set(one.keys) <= set(KEYS["conditions"])


def test_the_order_of_emissivities():
    """A double-silver coat emits less than a single one, that less than a conductive oxide, that less than glass."""
    values = [SHIPPED.coatings[name].emissivity for name in ("soft-double", "soft-single", "hard")]
    assert values == sorted(values)
    assert values[-1] < SHIPPED.glasses["clear"].emissivity == 0.837


def test_a_pane_takes_its_faces_from_glass_and_coating():
    pane = SHIPPED.pane([SHIPPED.glass_ply("green", 0.006)], coating_in="hard")
    assert (pane.emissivity_out, pane.emissivity_in) == (0.837, SHIPPED.coatings["hard"].emissivity)
    assert pane.optics == FilmOptics(plies=(("green", 0.006),), coating_out=None, coating_in="hard")
    assert SHIPPED.coatings["hard"].source in pane.source
    assert pane.mass_per_area == pytest.approx(15.0)


def test_recoating_is_undone_by_recoating():
    bare = SHIPPED.pane([SHIPPED.glass_ply("clear", 0.004)], treatment="toughened")
    coated = SHIPPED.recoated(bare, coating_out="soft-double", coating_in=None)
    assert coated.emissivity_out == SHIPPED.coatings["soft-double"].emissivity
    assert coated.treatment == "toughened"
    assert SHIPPED.recoated(coated, coating_out=None, coating_in=None) == bare


def test_where_a_coating_may_be():
    assert [face for face in range(1, 7) if SHIPPED.may_carry("soft-single", face, faces=6)] == [2, 3, 4, 5]
    assert [face for face in range(1, 3) if SHIPPED.may_carry("soft-single", face, faces=2)] == []
    assert all(SHIPPED.may_carry("hard", face, faces=2) for face in (1, 2))


def test_one_part_unknown_in_the_sun_leaves_the_pane_unknown():
    library = Library(glasses={"own": GlassEntry("own")}, coatings={"own": CoatingEntry("own", 0.05)})
    assert library.pane([library.glass_ply("own", 0.004)]).optics is None
    mixed = Library(glasses=SHIPPED.glasses, coatings={"own": CoatingEntry("own", 0.05)})
    assert mixed.pane([mixed.glass_ply("clear", 0.004)], coating_in="own").optics is None
    assert mixed.pane([mixed.glass_ply("clear", 0.004)]).optics is not None


def test_an_interlayer_is_no_face():
    with pytest.raises(ModelError, match="outer plies"):
        SHIPPED.pane([SHIPPED.interlayer_ply("pvb", 0.00076)])
