"""Which of a case's conditions a study takes for the cold and which for the sun."""

from __future__ import annotations

from igu.errors import ModelError
from igu.model.case import Case
from igu.model.conditions import Conditions


def cold_and_sun(case: Case, cold: str | None, sun: str | None) -> tuple[Conditions | None, Conditions | None]:
    """Conditions for U and the room-side face, and for everything in the sun.

    Named ones are taken as named. Otherwise the cold one is the ISO 15099 condition of the lowest outdoor temperature
    below the room's, or else one by EN 673; the sunny one is the ISO 15099 condition of the strongest sun, or else one
    by EN 410. None where the case has none of the kind.

    Raises
    ------
    ModelError    No conditions of that name, or a standard's that has nothing to say on the matter.
    """
    return (
        _coldest(case) if cold is None else _named(case, cold, "cold", wrong="en-410"),
        _sunniest(case) if sun is None else _named(case, sun, "sun", wrong="en-673"),
    )


def _named(case: Case, name: str, use: str, *, wrong: str) -> Conditions:
    allowed = [c.name for c in case.conditions if c.method != wrong]
    for c in case.conditions:
        if c.name == name and c.method != wrong:
            return c
    raise ModelError(f'{case.file}: given "{name}" for {use}; allowed {", ".join(allowed) or "none of the case"}')


def _of(case: Case, method: str) -> list[Conditions]:
    return [c for c in case.conditions if c.method == method]


def _coldest(case: Case) -> Conditions | None:
    heated = [c for c in _of(case, "iso-15099") if c.outdoor_air < c.indoor_air]
    return min(heated, key=lambda c: c.outdoor_air) if heated else next(iter(_of(case, "en-673")), None)


def _sunniest(case: Case) -> Conditions | None:
    sunny = [c for c in _of(case, "iso-15099") if c.sun > 0.0]
    return max(sunny, key=lambda c: c.sun) if sunny else next(iter(_of(case, "en-410")), None)
