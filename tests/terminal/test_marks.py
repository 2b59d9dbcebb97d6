"""The marks on sources are explained where they stand, and nowhere else."""

import pytest

from igu.terminal.page.marks import MARKS, marks_explained


@pytest.mark.parametrize("text", ["EN 410 [memory]", "a guide [seen]; more", "[seen; convection\n  form memory]"])
def test_marks_are_explained(text):
    assert marks_explained(text) == MARKS


@pytest.mark.parametrize("text", ["EN 410", "seen in memory", "width [mm] seen"])
def test_texts_without_marks_get_nothing(text):
    assert marks_explained(text) == ""
