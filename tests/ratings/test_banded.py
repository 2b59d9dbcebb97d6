"""Panes known by band values beside others: the errors stated are those found where the answer is known."""

from __future__ import annotations

import itertools
from collections.abc import Iterator, Sequence
from dataclasses import replace
from functools import lru_cache

import numpy as np
import pytest

from igu.arrays import Array, IntArray
from igu.model.catalogue import catalogue
from igu.model.makeups import MakeUps
from igu.model.optics import BroadbandOptics, grid, pane_optics, rays
from igu.model.unit import Gap, Pane, Unit
from igu.ratings import en410
from igu.ratings.banded import WORST, banded_caution, banded_error
from igu.ratings.declaration import declaration
from igu.ratings.sunlight import makeup_bands

TINTS = ("clear", "low-iron", "bronze", "grey", "green")
COATINGS = ("soft-single", "soft-double", "hard")


def _pane(glass: str, mm: float, *, out: str | None = None, inn: str | None = None) -> Pane:
    library = catalogue()
    return library.pane([library.glass_ply(glass, 1e-3 * mm)], coating_out=out, coating_in=inn)


BARE = tuple(_pane(glass, mm) for glass in TINTS for mm in (4, 6, 10))
OUTER = (*BARE, *(_pane(glass, 6, inn=coating) for coating in COATINGS for glass in TINTS))
INNER = (*BARE, *(_pane(glass, 6, out=coating) for coating in COATINGS for glass in TINTS))
MIDDLE = (_pane("low-iron", 4), _pane("green", 4), _pane("clear", 6, inn="soft-single"))
DOUBLES = tuple(itertools.product(OUTER, INNER))
TRIPLES = tuple(itertools.product(OUTER[::3], MIDDLE, INNER[1::3]))


@lru_cache(maxsize=256)
def banded(pane: Pane, *, lit: bool) -> Pane:
    """The pane known by its own band values."""
    assert pane.optics is not None
    found = [part[0, 0] for part in pane_optics(pane.optics, rays())[:3]]
    solar = [float(part @ grid().solar) for part in found]
    light = [float(part @ grid().light) for part in found] if lit else [None] * 3
    return replace(pane, optics=BroadbandOptics(*solar, *light), name="measured")


def _stacks(stacks: Sequence[tuple[Pane, ...]]) -> MakeUps:
    places: dict[Pane, int] = {}
    index = np.array([[places.setdefault(pane, len(places)) for pane in stack] for stack in stacks], np.intp).T
    gaps: IntArray = np.zeros((len(index) - 1, len(stacks)), np.intp)
    upright = np.array([np.pi / 2])
    return MakeUps(tuple(places), (Gap(16e-3, {"argon": 0.9, "air": 0.1}),), index, gaps, np.array([1.0]), upright)


def _figures(stacks: Sequence[tuple[Pane, ...]]) -> Array:
    """g and solar transmittance by EN 410, (2, N)."""
    makeups = _stacks(stacks)
    bands = makeup_bands(makeups)
    inward = en410.makeup_inward_fractions(makeups)
    return np.array([bands.transmittance + (bands.absorptance * inward).sum(axis=0), bands.transmittance])


def _replaced(stack: tuple[Pane, ...], *, lit: bool) -> Iterator[tuple[Pane, ...]]:
    """The stack with each choice of its panes known by band values."""
    for chosen in itertools.product((False, True), repeat=len(stack)):
        if any(chosen):
            yield tuple(banded(p, lit=lit) if measured else p for p, measured in zip(stack, chosen, strict=True))


@lru_cache(maxsize=1)
def _worst() -> dict[float, float]:
    """Greatest error found by the error stated."""
    found: dict[float, float] = {}
    for stacks, lit in itertools.product((DOUBLES, TRIPLES), (True, False)):
        pairs = [(stack, other) for stack in stacks for other in _replaced(stack, lit=lit)]
        truth = dict(zip(stacks, _figures(stacks).T, strict=True))
        off = np.abs(_figures([other for _, other in pairs]) - np.array([truth[stack] for stack, _ in pairs]).T)
        for (_, other), error in zip(pairs, off.max(axis=0), strict=True):
            stated = banded_error(Unit(other, (Gap(16e-3),) * (len(other) - 1)))
            assert stated is not None
            found[stated] = max(found.get(stated, 0.0), float(error))
    return found


@pytest.mark.parametrize("stated", WORST.values())
def test_the_error_stated_is_the_worst_found_rounded_up(stated: float) -> None:
    assert stated - 0.01 < _worst()[stated] <= stated


def test_two_bands_come_nearer_than_one() -> None:
    stacks = [stack for stack in DOUBLES if stack[0] in OUTER[15:25]]
    truth = _figures(stacks)[0]
    off = [
        np.sqrt(np.mean((_figures([(banded(a, lit=lit), b) for a, b in stacks])[0] - truth) ** 2))
        for lit in (True, False)
    ]
    assert off[0] < 0.3 * off[1]


def test_a_pane_alone_or_known_by_wavelength_costs_nothing() -> None:
    clear, coated = _pane("clear", 6), _pane("clear", 6, inn="soft-double")
    measured = banded(coated, lit=True)
    for unit in (Unit((measured,)), Unit((coated, clear), (Gap(16e-3),))):
        assert banded_error(unit) is None
        assert banded_caution(unit) is None
    for other in (clear, banded(clear, lit=True)):
        error = banded_error(Unit((measured, other), (Gap(16e-3),)))
        assert f"up to {error:g} off" in str(banded_caution(Unit((measured, other), (Gap(16e-3),))))


def test_the_declaration_carries_the_error() -> None:
    coated, clear = _pane("clear", 6, inn="soft-double"), _pane("clear", 6)
    gap = (Gap(16e-3),)
    assert declaration(Unit((coated, clear), gap)).solar_uncertainty is None
    assert declaration(Unit((banded(coated, lit=True), clear), gap)).solar_uncertainty == 0.03
