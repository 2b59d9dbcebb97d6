"""Every row holds, the document is current, and rows do fail where the physics is off."""

import re
from pathlib import Path

import numpy as np
import pytest

from igu.ratings import en673
from tests.validation import u_values
from tests.validation.check import MARKS, markdown
from tests.validation.rows import all_rows

ROWS = all_rows()
DOCUMENT = Path(__file__).parents[2] / "docs/validation.md"


@pytest.mark.parametrize("row", ROWS, ids=[f"{row.topic}: {row.what}" for row in ROWS])
def test_row(row):
    assert row.holds(), f"{row.published} ({row.source}), computed {row.computed():.6g}, allowed {row.allowed:g}"


def test_rows_carry_their_mark_and_a_reason_for_any_other_tolerance():
    assert all(row.mark in MARKS and row.source for row in ROWS)
    assert all(row.reason for row in ROWS if row.tolerance is not None)
    assert len({(row.topic, row.what, row.source) for row in ROWS}) == len(ROWS)


def test_the_document_is_current():
    """The same text; figures may differ in the last printed digit, which is two beyond the source's."""
    number = re.compile(r"[+-]?\d+\.\d+|[+-]?\d+")
    shown, fresh = DOCUMENT.read_text(encoding="utf-8"), markdown(ROWS)
    assert number.sub("#", shown) == number.sub("#", fresh)
    one, other = ([float(x) for x in number.findall(text)] for text in (shown, fresh))
    assert one == pytest.approx(other, abs=2e-4, rel=1e-4)


@pytest.mark.parametrize(
    ("what", "value"), [("MEAN_TEMPERATURE", 283.15), ("STEFAN_BOLTZMANN_EN673", 5.75e-8), ("EXTERNAL", 23.0)]
)
def test_a_wrong_constant_makes_rows_fail(monkeypatch, what, value):
    monkeypatch.setattr(en673, what, value)
    assert not all(row.holds() for row in u_values.rows() if "EN 673" in row.topic)


def test_a_wrong_emissivity_makes_rows_fail():
    """Uncoated glass of 0.84 would make 12 mm of air 2.9."""
    assert en673.declared(u_values.standard(0.837, 12.0, u_values.AIR)) == 2.8
    bare = u_values.pane(out=0.84, inn=0.84)
    unit = u_values.Unit((bare, bare), (u_values.Gap(0.012),))
    assert en673.declared(en673.u_value(unit)) == 2.9


def test_a_swapped_psi_makes_krypton_fail():
    """The 2.41 term on the whole conductivity instead of its monatomic part: krypton 90 % is some 2.5 % off."""
    from igu.laws import gas

    share, k = np.array([[0.9], [0.1]]), np.array([[9.443e-4 + 2.826e-5 * 283], [2.873e-3 + 7.76e-5 * 283]])
    mu = np.array([[2.213e-6 + 7.777e-8 * 283], [3.723e-6 + 4.94e-8 * 283]])
    mass = np.array([[0.0838], [0.02897]])
    right = gas.mixture_conductivity(share, k, viscosities=mu, mole_masses=mass)
    factors = gas._exchange_factors(mu, mass)
    wrong = gas._weighted(share, k, factors)
    assert abs(float(wrong[0] / right[0]) - 1.0) > 0.01
