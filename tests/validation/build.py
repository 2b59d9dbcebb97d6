"""Units and fills the published values belong to."""

from __future__ import annotations

from igu.model.unit import Gap, Pane, Ply, Unit

UNCOATED = 0.837
"""Emissivity of uncoated soda-lime glass in EN 673."""

Fill = tuple[tuple[str, float], ...]

AIR: Fill = (("air", 1.0),)


def with_air(gas: str, share: float = 0.9) -> Fill:
    """A fill of this gas, the rest air."""
    return ((gas, share), ("air", 1.0 - share))


ARGON, KRYPTON = with_air("argon"), with_air("krypton")


def pane(thickness: float = 0.004, out: float | None = None, inn: float | None = None, *, k: float = 1.0) -> Pane:
    """A plain pane, uncoated where no emissivity is given."""
    faces = (UNCOATED if eps is None else eps for eps in (out, inn))
    return Pane((Ply("clear", thickness, k),), *faces)


def double(width: float, fill: Fill, low: float | None = None, glass: float = 0.004) -> Unit:
    """Two panes, one face of the gap [mm] of emissivity `low`."""
    return Unit((pane(glass, inn=low), pane(glass)), (Gap(width * 1e-3, fill),))


def triple(width: float, fill: Fill, low: float | None = None) -> Unit:
    """Three panes of 4 mm, one face of each gap [mm] of emissivity `low`."""
    return Unit((pane(inn=low), pane(), pane(out=low)), (Gap(width * 1e-3, fill),) * 2)
