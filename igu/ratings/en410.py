"""Solar factor by EN 410 / ISO 9050: the standard's films and its own nodes for the absorbed heat."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from igu.arrays import Array, ArrayLike
from igu.model.makeups import MakeUps
from igu.model.unit import Unit
from igu.ratings import en673
from igu.ratings.result import Solar

EXTERNAL = 23.0
"""External heat transfer coefficient [W/(m2 K)]. EN 410:2011, 5.4.6 [memory]."""

NOTES = (
    "Solar and luminous characteristics by EN 410:2011 / ISO 9050 at normal incidence: external coefficient 23, inner "
    "3.6 + 4.4 ε/0.837 W/(m²K) [memory], gaps by EN 673; heat of the outer pane at its outer face, of a middle pane at "
    "its centre, of the inner pane at its room face.",
    "Solar weighting: ASTM G173-03 global, not the standard's own table; the difference in solar transmittance is at "
    "most about 0.003 (estimated), so no digit of a declaration is claimed. UV transmittance by the same weighting, "
    "302.5 to 380 nm, which is not the standard's UV table.",
)


def internal_coefficient(emissivity: ArrayLike) -> Array:
    """Internal heat transfer coefficient, 3.6 + 4.4 eps/0.837 [W/(m2 K)]. EN 410:2011, 5.4.6 [memory]."""
    return np.asarray(3.6 + 4.4 * np.asarray(emissivity, float) / en673.STANDARD_EMISSIVITY)


def inward_fractions(*, pane_resistance: Array, gap_conductance: Array, room_emissivity: Array) -> Array:
    """Share of the heat absorbed in each pane that flows inward, (n, N) [-].

        N_i = (resistance from outdoors to the node of pane i) / (whole resistance)

    with the node of the outer pane at its outer face, of a middle pane at its centre and of the inner pane at its room
    face; a single pane has no resistance. For two and three panes this is the standard's q_e / absorptance.

    Parameters
    ----------
    pane_resistance : (n, N)        [m2 K/W].
    gap_conductance : (n - 1, N)    At the reference state of EN 673 [W/(m2 K)].
    room_emissivity : (N,)          Of the room-side face [-].

    Source: EN 410:2011, 5.4.6.3; ISO 9050:2003, 3.5 [memory].
    """
    n, count = pane_resistance.shape
    films = 1.0 / EXTERNAL + 1.0 / internal_coefficient(room_emissivity)
    if n == 1:
        return np.broadcast_to(1.0 / EXTERNAL / films, (1, count)).copy()
    weights = np.full((n, 1), 0.5)
    weights[0] = weights[-1] = 1.0
    own = pane_resistance * weights
    between = own[:-1] + own[1:] + 1.0 / gap_conductance
    node = 1.0 / EXTERNAL + np.concatenate([np.zeros((1, count)), np.cumsum(between, axis=0)])
    return np.asarray(node / (films + between.sum(axis=0)))


def makeup_inward_fractions(makeups: MakeUps) -> Array:
    """The same for make-ups, (n, N) [-].

    Raises
    ------
    ModelError    EN 673 does not cover a make-up's gaps.
    """
    stacks = en673.reference_stacks(makeups)
    resistance = np.array([1.0 / p.conductance for p in makeups.panes])
    return inward_fractions(
        pane_resistance=resistance[makeups.pane_index],
        gap_conductance=en673.gap_conductances(stacks),
        room_emissivity=stacks.room_emissivity,
    )


def with_secondary(unit: Unit, solar: Solar) -> tuple[Solar, tuple[float, ...]]:
    """The solar figures with the standard's secondary factor q_i and g = tau_e + q_i; and its inward fractions."""
    inward = tuple(float(f) for f in makeup_inward_fractions(MakeUps.of([unit]))[:, 0])
    q_i = sum(a * f for a, f in zip(solar.absorptance, inward, strict=True))
    return replace(solar, q_i=q_i, g=solar.transmittance + q_i), inward
