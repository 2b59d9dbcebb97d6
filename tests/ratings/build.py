"""Units the ratings and the studies are tested with."""

from __future__ import annotations

import math
from dataclasses import replace

from igu.model.catalogue import catalogue
from igu.model.conditions import Conditions
from igu.model.unit import Gap, Pane, Unit

ARGON = (("argon", 0.9), ("air", 0.1))
WINTER = Conditions("winter", outdoor_air=255.15, indoor_air=294.15, outdoor_convection=26.0)
SUMMER = Conditions("summer", outdoor_air=305.15, indoor_air=297.15, outdoor_convection=15.0, sun=783.0)
EN673 = Conditions("en-673", method="en-673")
EN410 = Conditions("en-410", method="en-410")
UPRIGHT = math.radians(90.0)


def pane(thickness: float = 0.004, glass: str = "clear", **how) -> Pane:
    library = catalogue()
    return library.pane([library.glass_ply(glass, thickness)], **how)


def double(outer: Pane | None = None, inner: Pane | None = None, *, width=0.016, fill=ARGON, **how) -> Unit:
    return Unit((outer or pane(), inner or pane()), (Gap(width, fill),), **{"height": 1.5, "width": 1.2} | how)


def tilted(unit: Unit, degrees: float) -> Unit:
    return replace(unit, tilt=math.radians(degrees))


SOFT = double(pane(0.006, coating_in="soft-single"))
