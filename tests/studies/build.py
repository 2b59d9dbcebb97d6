"""Units the studies are tested with: those of the ratings, and the laminated ones."""

from __future__ import annotations

from igu.model.catalogue import catalogue
from igu.model.unit import Pane
from tests.ratings.build import ARGON, EN410, EN673, SOFT, SUMMER, WINTER, double, pane, tilted

__all__ = ["ARGON", "EN410", "EN673", "SOFT", "SUMMER", "WINTER", "double", "laminated", "pane", "tilted"]


def laminated(*glass: tuple[str, float], interlayer: float = 0.00076, **how) -> Pane:
    """Plies of glass with polyvinyl butyral between them."""
    library = catalogue()
    plies = [library.glass_ply(*glass[0])]
    for ply in glass[1:]:
        plies += [library.interlayer_ply("pvb", interlayer), library.glass_ply(*ply)]
    return library.pane(plies, **how)
