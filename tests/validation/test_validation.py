"""Every row holds, the document is current, and rows do fail where the physics or the data are off."""

from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from igu.laws import convection as laws
from igu.laws import gas, plate, rarefied
from igu.laws.constants import GAS_CONSTANT
from igu.ratings import en410, en673
from tests.validation import build, convection, gases, service, solar, studies, textbooks, u_values, vacuum
from tests.validation.check import MARKS, Row, markdown
from tests.validation.rows import all_rows

DOCUMENT = Path(__file__).parents[2] / "docs/validation.md"
ROWS = all_rows()
SWAPPED = next(found.what for found in ROWS if found.topic == "Gas mixtures")


@pytest.mark.parametrize("row", ROWS, ids=[f"{row.topic}: {row.what}" for row in ROWS])
def test_row(row: Row) -> None:
    assert row.as_stated, f"{row.published} ({row.source}), computed {row.computed:.6g}, allowed {row.allowed:g}"


def test_the_document_is_current() -> None:
    assert DOCUMENT.read_text(encoding="utf-8") == markdown(ROWS), "python -m tests.validation rewrites it"


def test_rows_carry_their_mark_their_source_and_the_reason_for_any_other_tolerance() -> None:
    assert all(row.mark in MARKS and row.source for row in ROWS)
    assert all(bool(row.reason) == (row.tolerance is not None or not row.follows) for row in ROWS)
    assert len({(row.topic, row.what, row.source) for row in ROWS}) == len(ROWS)


def test_no_stated_tolerance_is_wider_than_half_the_figure() -> None:
    stated = [row for row in ROWS if row.tolerance is not None]
    assert all(0.0 < row.allowed <= 0.5 * abs(float(row.published)) for row in stated)


def test_a_figure_said_not_to_follow_fails_once_it_does() -> None:
    apart = [found for found in ROWS if not found.follows]
    assert {found.what for found in apart} == set(u_values.DOUBTFUL)
    for found in apart:
        assert found.tolerance is None
        assert not replace(found, ours=lambda found=found: float(found.published)).as_stated


def row(published: str, value: float, tolerance: float | None = None) -> Row:
    return Row("", "", "", "seen", published, lambda: value, tolerance)


@pytest.mark.parametrize("value", [2.4499, 2.5501, float("nan")])
def test_a_row_fails_outside_its_printed_digit(value: float) -> None:
    assert row("2.5", 2.4501).holds
    assert row("2.5", 2.5499).holds
    assert not row("2.5", value).holds


def test_printed_zeros_count_and_a_stated_tolerance_takes_their_place() -> None:
    assert not row("2.50", 2.46).holds
    assert row("2.50", 2.46, 0.05).holds
    assert not row("5", 5.6).holds


def bracket_on_the_rest(shares: Any, conductivities: Any, *, viscosities: Any, mole_masses: Any) -> Any:
    """Mason and Saxena's rule with psi and phi exchanged."""
    monatomic = 15 / 4 * GAS_CONSTANT / np.asarray(mole_masses) * np.asarray(viscosities)
    phi = gas._exchange_factors(viscosities, mole_masses)
    psi = phi * gas._mass_factors(mole_masses)
    return gas._weighted(shares, monatomic, phi) + gas._weighted(shares, np.asarray(conductivities) - monatomic, psi)


def longer(aspect: Any, **how: Any) -> Any:
    """Coefficients of a plate 2 % longer than it is."""
    return plate.plate_coefficients(1.02 * np.asarray(aspect), **how)


PURE = (("krypton", 1.0),)
PIECES = np.array([1.7596678e-10, 0.0282, 0.0673838])

PERTURBED: list[tuple[Any, str, Any, Any, str]] = [
    (en673, "MEAN_TEMPERATURE", 283.15, u_values, "4-12-4 air, declared"),
    (build, "UNCOATED", 0.84, u_values, "4-12-4 air, declared"),
    (en673, "EXTERNAL", 23.0, u_values, "single pane, 4 mm"),
    (en673, "GAP_DIFFERENCE", 20.0, u_values, "double, 20 mm air"),
    (u_values, "hemispherical_emissivity", lambda normal: normal, u_values, "4-12-4 argon, ε_n 0.2"),
    (u_values, "KRYPTON", PURE, u_values, "4-8-4 krypton, ε_n 0.1"),
    (u_values, "HANDBOOK_EPS", 0.75, u_values, "double 3 mm, 12.7 mm air, ε 0.60"),
    (u_values, "WINTER", replace(u_values.WINTER, outdoor_convection=22.0), u_values, "single 3 mm"),
    (en673, "EN673_TILTS", {90: (0.036, 0.38)}, studies, "double, air [mm]"),
    (textbooks, "MIRROR", 1e-2, textbooks, "double window, 10 mm still air, 1.2 m²: heat [W]"),
    (gas, "mixture_conductivity", bracket_on_the_rest, gases, SWAPPED),
    (laws, "_VERTICAL_FACTOR", PIECES, convection, "Nu, vertical, Ra 1e4, middle piece"),
    (rarefied, "GAS_CONSTANT", 8.0, vacuum, "free molecules, air 293 K, accommodation 1 [W/(m²K Pa)]"),
    (en410, "EXTERNAL", 25.0, solar, "q_i of two panes absorbing 0.3 and 0.1"),
    (service, "plate_coefficients", longer, service, "moment spanning the short side over q a², ν 0.3, b/a 1.5"),
]


@pytest.mark.parametrize(("module", "name", "value", "topic", "what"), PERTURBED)
def test_a_wrong_law_or_datum_makes_its_row_fail(
    monkeypatch: pytest.MonkeyPatch, module: Any, name: str, value: Any, topic: Any, what: str
) -> None:
    """Each would go unseen if the tolerances were loose: 283.15 K and 0.84 make 12 mm of air 2.9 instead of 2.8."""
    assert next(found for found in topic.rows() if found.what == what).holds
    monkeypatch.setattr(module, name, value)
    assert not next(found for found in topic.rows() if found.what == what).holds


SHUFFLED = [("clear 3 mm, T,", "clear 6 mm, T,"), ("single clear 3 mm, SHGC", "double clear 3 mm, SHGC"), ("A1", "A2")]


@pytest.mark.parametrize(("one", "other"), SHUFFLED)
def test_the_bands_of_the_sun_tell_units_and_panes_apart(one: str, other: str) -> None:
    """Held to the figures of the other, rows fail."""
    printed = {found.what: found for found in solar.rows()}
    swapped = [replace(found, published=printed[found.what.replace(one, other)].published)
               for found in printed.values() if one in found.what and found.what.replace(one, other) in printed]  # fmt: skip
    assert len(swapped) >= 7
    assert sum(not found.holds for found in swapped) >= 3
