"""What the files and the panes of a study leave to be said, each sentence once."""

from __future__ import annotations

from collections.abc import Iterable

from igu.model.case import Case
from igu.model.conditions import Conditions
from igu.model.unit import Unit
from igu.ratings.sunlight import cautions
from igu.terminal.page.text import MODEL, under

GENERIC = "Generic coatings are models, not measurements."


def judged_under(cold: Conditions | None, sun: Conditions | None) -> str:
    """Under which conditions a comparison or a search judges; the state of a standard has no temperatures."""
    room = " and room face" if cold is not None and cold.method == "iso-15099" else ""
    hottest = " and hottest pane" if sun is not None and sun.method == "iso-15099" else ""
    in_the_cold = f"U{room} under {under(cold)}" if cold else "no cold conditions in the case"
    in_the_sun = f"g{hottest} under {under(sun)}" if sun else "no sunny conditions in the case"
    return f"{in_the_cold}; {in_the_sun}"


def remarks_on(units: Iterable[Unit], sun: Conditions | None) -> list[str]:
    """That coatings are models, where one is; and what measured panes leave uncertain in this sun."""
    units = list(units)
    models = any(MODEL in pane.source for unit in units for pane in unit.panes)
    return [*([GENERIC] if models else []), *measured(units, sun)]


def measured(units: Iterable[Unit], sun: Conditions | None) -> list[str]:
    """What measured panes leave uncertain in this sun, each sentence once."""
    if sun is None:
        return []
    oblique = bool(sun.incidence or sun.diffuse_share)
    return list(dict.fromkeys(text for unit in units for text in cautions(unit, oblique=oblique)))


def warnings_of(cases: Iterable[Case]) -> list[str]:
    """Warnings of the case files."""
    return [text for case in cases for text in case.warnings]


def warned(cases: Iterable[Case]) -> list[str]:
    """The same, as a report has them."""
    return [f"WARNING {text}" for text in warnings_of(cases)]
