"""Loss of fill gas over the years and what it does to U."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

from igu.arrays import Array
from igu.laws.leakage import LEAKAGE_LIMIT, remaining_share, remaining_share_linear
from igu.model.conditions import Conditions
from igu.model.makeups import MakeUps
from igu.model.unit import Gap, Unit
from igu.ratings import en673
from igu.ratings.iso15099 import u_of
from igu.ratings.rate import rate
from igu.ratings.rounding import half_up
from igu.solver.problem import problem_of

YEARS = (0.0, 10.0, 20.0, 30.0)
HORIZON = 100
"""Years searched for the end of the declared value."""

Law = Callable[..., Array]


@dataclass(frozen=True)
class Ageing:
    """`years`; the share of all gas but air in the fullest gap, and U [W/(m2 K)], by each law; `declared` and
    the first year in which U no longer rounds to it (None: beyond the horizon, or nothing declared)."""

    rate: float
    assumed: bool
    state: str
    years: tuple[float, ...]
    share: tuple[float, ...]
    share_linear: tuple[float, ...]
    U: tuple[float, ...]
    U_linear: tuple[float, ...]
    declared: float | None
    leaves: float | None
    leaves_linear: float | None


def ageing(unit: Unit, cold: Conditions | None, *, upright: Unit | None = None) -> Ageing | None:
    """Ageing of a unit at its leakage, by default the standard's limit; None where no gap holds anything but air, and
    of a vented unit, whose tube is no leakage.

    U by EN 673 where it covers the unit, else under the cold conditions (None without them); `upright` is the unit in
    the position its declared value belongs to, left out: the unit itself.
    """
    if unit.sealed.vented or not any(_leaks(gap) for gap in unit.gaps):
        return None
    standing = upright or unit
    covered = en673.excluded(standing) is None and en673.is_declared_case(standing)
    if not covered and (cold is None or cold.method != "iso-15099" or rate(unit, cold).U is None):
        return None
    leakage = LEAKAGE_LIMIT if unit.sealed.leakage is None else unit.sealed.leakage
    turned = ", vertical" if standing.tilt != unit.tilt else ""
    state = f"EN 673{turned}" if covered else (cold.name if cold else "")

    def values(law: Law, years: Sequence[float]) -> list[float]:
        return _u(standing, law, leakage, years, None) if covered else _u(unit, law, leakage, years, cold)

    exact, linear = values(remaining_share, YEARS), values(remaining_share_linear, YEARS)
    declared = en673.declared(exact[0]) if covered else None
    ends = [_leaves(values(law, range(HORIZON + 1)), declared) for law in (remaining_share, remaining_share_linear)]
    filled = max(sum(share for name, share in gap.fill if name != "air") for gap in unit.gaps if _leaks(gap))
    return Ageing(
        rate=leakage,
        assumed=unit.sealed.leakage is None,
        state=state,
        years=YEARS,
        share=tuple(float(remaining_share(filled, rate=leakage, years=t)) for t in YEARS),
        share_linear=tuple(float(remaining_share_linear(filled, rate=leakage, years=t)) for t in YEARS),
        U=tuple(exact),
        U_linear=tuple(linear),
        declared=declared,
        leaves=ends[0],
        leaves_linear=ends[1],
    )


def _leaks(gap: Gap) -> bool:
    return not gap.evacuated and any(name != "air" and share > 0.0 for name, share in gap.fill)


def aged(unit: Unit, law: Law, *, rate: float, years: float) -> Unit:
    """The unit after so many years: all gas but air leaks, in its own mixture, and air takes its place."""
    return replace(unit, gaps=tuple(_aged_gap(gap, law, rate, years) for gap in unit.gaps))


def _aged_gap(gap: Gap, law: Law, rate: float, years: float) -> Gap:
    if not _leaks(gap):
        return gap
    kept = {name: share for name, share in gap.fill if name != "air" and share > 0.0}
    whole = sum(kept.values())
    left = float(law(whole, rate=rate, years=years))
    fill = [(name, share * left / whole) for name, share in kept.items() if left > 0.0]
    return replace(gap, fill=(*fill, ("air", 1.0 - left)))


def _u(unit: Unit, law: Law, rate: float, years: Sequence[float], cold: Conditions | None) -> list[float]:
    makeups = MakeUps.of([aged(unit, law, rate=rate, years=t) for t in years])
    if cold is None:
        return [float(u) for u in en673.u_values(en673.reference_stacks(makeups))]
    return [float(u) for u in u_of(problem_of(makeups, cold))]


def _leaves(values: Sequence[float], declared: float | None) -> float | None:
    """First whole year in which the value no longer rounds to the declared one."""
    if declared is None:
        return None
    return next((float(year) for year, u in enumerate(values) if half_up(u, 1) != declared), None)
