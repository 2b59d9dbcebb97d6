"""The unit by angle of incidence, and in diffuse light."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from igu.errors import require
from igu.model.conditions import Conditions
from igu.model.makeups import MakeUps
from igu.model.unit import Unit
from igu.ratings.figures import Figures, figures
from igu.ratings.sunlight import Bands, makeup_bands

DEGREES = tuple(range(0, 90, 5))
"""Angles of incidence in the table [degrees]; diffuse light follows."""


@dataclass(frozen=True)
class ByAngle:
    """Rows by `degrees` (None: isotropic diffuse light); `bands` and `figures` have one column a row. The
    figures' g belongs to the conditions `sun`."""

    degrees: tuple[int | None, ...]
    bands: Bands
    figures: Figures
    sun: Conditions | None


def by_angle(unit: Unit, sun: Conditions | None) -> ByAngle:
    """Optics of a unit at every angle of `DEGREES` and for diffuse light, and its g under sunny conditions.

    Raises
    ------
    ModelError    A pane is not known in the sun.
    """
    unknown = [str(p + 1) for p, pane in enumerate(unit.panes) if pane.optics is None]
    require(not unknown, f"no table by angle: nothing is known of the sun in pane {' and '.join(unknown)}")
    one = MakeUps.of([unit])
    parts = [makeup_bands(one, incidence=math.radians(d)) for d in DEGREES] + [makeup_bands(one, diffuse_share=1.0)]
    bands = Bands(**{name: np.concatenate([getattr(p, name) for p in parts], axis=-1) for name in vars(parts[0])})
    many = MakeUps.of([unit] * len(parts))
    return ByAngle((*DEGREES, None), bands, figures(many, cold=None, sun=sun, bands=bands), sun)
