"""What panes known by band values leave uncertain in the solar figures of a unit."""

from __future__ import annotations

from igu.model.optics import BroadbandOptics
from igu.model.unit import Pane, Unit

METAL = 0.1
"""A face of lower emissivity carries metal, which reflects the sun beyond the visible more than in it."""

WORST = {
    ("light known, one pane", False): 0.02,
    ("light known, one pane", True): 0.03,
    ("light known, several panes", False): 0.04,
    ("light known, several panes", True): 0.06,
    ("light not known", False): 0.07,
    ("light not known", True): 0.12,
}
"""Greatest error of g and of solar transmittance [-] by what is known and whether a face of the unit carries metal.

Found on double and triple units of the catalogue's glasses, 4 to 10 mm, bare and with its coatings on clear, low-iron,
bronze, grey and green 6 mm, every pane in turn and together replaced by its own band values.
"""


def banded_error(unit: Unit) -> float | None:
    """How far g and solar transmittance can be off because panes of the unit are known by band values only [-]; None
    where that costs nothing: no such pane, or one that stands alone."""
    banded = _banded(unit)
    if not banded or len(unit.panes) == 1:
        return None
    count = "one pane" if len(banded) == 1 else "several panes"
    known = f"light known, {count}" if _light_known(banded) else "light not known"
    return WORST[known, any(map(_has_metal, unit.panes))]


def _banded(unit: Unit) -> list[BroadbandOptics]:
    return [pane.optics for pane in unit.panes if isinstance(pane.optics, BroadbandOptics)]


def _light_known(banded: list[BroadbandOptics]) -> bool:
    return all(optics.light_transmittance is not None for optics in banded)


def _has_metal(pane: Pane) -> bool:
    return min(pane.emissivity_out, pane.emissivity_in) < METAL


def banded_caution(unit: Unit) -> str | None:
    """The same in words."""
    error = banded_error(unit)
    if error is None:
        return None
    how = (
        "flat in the visible and flat beyond it"
        if _light_known(_banded(unit))
        else "flat over the whole sun; light values, or better a spectrum, would halve that or more"
    )
    return (
        f"A pane known by band values stands beside others: g and solar transmittance up to {error:g} off (the worst "
        f"found on catalogue panes reduced to band values), for it is taken as {how}."
    )
