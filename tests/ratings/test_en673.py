"""EN 673: closed forms, the difference shared over gaps against a bracketed root, what the standard covers."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from scipy.optimize import brentq

from igu.errors import ModelError
from igu.model.gases import en673_properties
from igu.model.makeups import MakeUps
from igu.model.unit import Gap, Pane, Ply, Unit, Vacuum
from igu.ratings import en673
from tests.validation.build import AIR, ARGON, KRYPTON, Fill, double, pane, triple

FILMS = 1.0 / 25.0 + 1.0 / 7.7


def conductances(unit: Unit) -> np.ndarray:
    return en673.gap_conductances(en673.reference_stacks(MakeUps.of([unit])))[:, 0]


def by_hand(width: float, fill: Fill, difference: float, low: float = 0.837) -> float:
    """Conductance of a vertical gap at a given difference, from the standard's formulas and table [W/(m2 K)]."""
    density, viscosity, k, c = en673_properties(dict(fill))
    grashof = 9.81 * width**3 * difference * density**2 / (283.0 * viscosity**2)
    nusselt = max(1.0, 0.035 * (grashof * viscosity * c / k) ** 0.38)
    return nusselt * k / width + 4.0 * 5.67e-8 * 283.0**3 / (1.0 / low + 1.0 / 0.837 - 1.0)


def test_a_single_pane_is_its_films_and_its_glass() -> None:
    for d in (0.003, 0.010):
        assert en673.u_value(Unit((pane(d),))) == pytest.approx(1.0 / (FILMS + d), rel=1e-12)


@pytest.mark.parametrize("fill", [AIR, ARGON, KRYPTON], ids=lambda fill: fill[0][0])
@pytest.mark.parametrize("width", [4.0, 12.0, 16.0, 30.0])
def test_a_double_unit_by_hand(width: float, fill: Fill) -> None:
    expected = 1.0 / (FILMS + 0.008 + 1.0 / by_hand(width * 1e-3, fill, 15.0, 0.05))
    assert en673.u_value(double(width, fill, 0.05)) == pytest.approx(expected, rel=1e-12)


def test_a_narrow_gap_conducts_and_radiates_only() -> None:
    expected = 0.02496 / 0.006 + 4.0 * 5.67e-8 * 283.0**3 / (2.0 / 0.837 - 1.0)
    assert conductances(double(6.0, AIR))[0] == pytest.approx(expected, rel=1e-12)


def test_like_gaps_share_the_difference_evenly() -> None:
    assert conductances(triple(16.0, ARGON, 0.05)) == pytest.approx([by_hand(0.016, ARGON, 7.5, 0.05)] * 2, rel=1e-9)


def test_unlike_gaps_share_it_by_their_resistances() -> None:
    """Two gaps, both convecting, against a bracketed root: h_1 dT_1 = h_2 (15 - dT_1)."""
    unit = Unit((pane(inn=0.05), pane(), pane()), (Gap(0.024, AIR), Gap(0.018, KRYPTON)))

    def misfit(first: float) -> float:
        return by_hand(0.024, AIR, first, 0.05) * first - by_hand(0.018, KRYPTON, 15.0 - first) * (15.0 - first)

    share = brentq(misfit, 1.0, 14.0, xtol=1e-13)
    expected = [by_hand(0.024, AIR, share, 0.05), by_hand(0.018, KRYPTON, 15.0 - share)]
    assert abs(share - 7.5) > 0.5
    assert conductances(unit) == pytest.approx(expected, rel=1e-9)


def test_resistances_add_to_the_inverse_of_u() -> None:
    unit = triple(12.0, ARGON, 0.05)
    assert 1.0 / en673.u_value(unit) == pytest.approx(FILMS + 0.012 + (1.0 / conductances(unit)).sum(), rel=1e-12)


def test_a_laminated_pane_counts_by_its_plies() -> None:
    laminated = Pane((Ply("clear", 0.004, 1.0), Ply("pvb", 0.00076, 0.2), Ply("clear", 0.004, 1.0)), 0.837, 0.837)
    unit = replace(double(16.0, ARGON), panes=(laminated, pane()))
    more = 1.0 / en673.u_value(unit) - 1.0 / en673.u_value(double(16.0, ARGON))
    assert more == pytest.approx(0.004 + 0.00076 / 0.2, rel=1e-9)


def test_which_face_of_the_gap_is_coated_does_not_matter() -> None:
    turned = Unit((pane(), pane(out=0.05)), (Gap(0.016, ARGON),))
    assert en673.u_value(turned) == pytest.approx(en673.u_value(double(16.0, ARGON, 0.05)), rel=1e-12)


def test_a_coat_on_the_room_face_changes_the_internal_coefficient() -> None:
    """3.6 + 4.1 eps/0.837, nothing else."""
    coated = Unit((pane(), pane(inn=0.2)), (Gap(0.016),))
    more = 1.0 / en673.u_value(coated) - 1.0 / en673.u_value(double(16.0, AIR))
    assert more == pytest.approx(1.0 / (3.6 + 4.1 * 0.2 / 0.837) - 1.0 / 7.7, rel=1e-9)


def test_the_outdoor_face_has_no_part_in_it() -> None:
    coated = Unit((pane(out=0.2), pane()), (Gap(0.016),))
    assert en673.u_value(coated) == pytest.approx(en673.u_value(double(16.0, AIR)), rel=1e-12)


def test_least_u_is_a_kink_where_convection_sets_in() -> None:
    """Below it U falls with the width; above it U rises, and slowly."""
    widths = np.arange(8.0, 24.0, 0.5)
    u = np.array([en673.u_value(double(w, AIR)) for w in widths])
    least = int(u.argmin())
    assert np.all(np.diff(u[: least + 1]) < 0.0)
    assert np.all(np.diff(u[least:]) > 0.0)
    assert u[-1] - u[least] < 0.3 * (u[0] - u[least])


def test_mixtures_are_linear_in_the_share() -> None:
    pure, air = (np.array(en673_properties({gas: 1.0})) for gas in ("argon", "air"))
    assert en673_properties({"argon": 0.9, "air": 0.1}) == pytest.approx(0.9 * pure + 0.1 * air, rel=1e-12)


@pytest.mark.parametrize(("degrees", "factor", "exponent"), [(45.0, 0.10, 0.31), (0.0, 0.16, 0.28)])
def test_inclined_units_take_the_standards_other_constants(degrees: float, factor: float, exponent: float) -> None:
    unit = replace(double(16.0, AIR), tilt=math.radians(degrees))
    density, viscosity, k, c = en673_properties(dict(AIR))
    rayleigh = 9.81 * 0.016**3 * 15.0 * density**2 * c / (283.0 * viscosity * k)
    radiative = en673.radiative_conductances(en673.reference_stacks(MakeUps.of([unit])))[0, 0]
    assert conductances(unit)[0] - radiative == pytest.approx(factor * rayleigh**exponent * k / 0.016, rel=1e-9)
    assert not en673.is_declared_case(unit)
    assert en673.u_value(unit) > en673.u_value(double(16.0, AIR))


@pytest.mark.parametrize("degrees", [30.0, 60.0, 89.0, 135.0, 180.0])
def test_other_tilts_are_refused_with_those_it_has(degrees: float) -> None:
    unit = replace(double(16.0, AIR), tilt=math.radians(degrees))
    with pytest.raises(ModelError, match="90, 45 and 0 degrees"):
        en673.u_value(unit)
    assert f"not for {degrees:g}" in str(en673.excluded(unit))


def test_evacuated_gaps_sheets_and_gases_without_a_row_are_refused() -> None:
    sheet = Pane((Ply("film", 5e-5, 0.2),), 0.4, 0.4, longwave_transmittance=0.3)
    vacuum = Unit((pane(), pane()), (Gap(0.0002, vacuum=Vacuum(0.1)),))
    film = Unit((pane(), sheet, pane()), (Gap(0.012), Gap(0.012)))
    helium = double(12.0, (("helium", 1.0),))
    for unit, word in ((vacuum, "evacuated"), (film, "long-wave"), (helium, "helium")):
        assert word in str(en673.excluded(unit))
        with pytest.raises(ModelError):
            en673.u_value(unit)
    assert en673.excluded(double(12.0, AIR)) is None


def test_a_batch_is_its_single_units() -> None:
    units = [triple(w, fill, low) for w in (6.0, 14.0, 25.0) for fill in (AIR, KRYPTON) for low in (None, 0.03)]
    together = en673.u_values(en673.reference_stacks(MakeUps.of(units)))
    assert together == pytest.approx([en673.u_value(unit) for unit in units], rel=1e-12)


def test_an_upright_batch_leaves_unknown_what_the_standard_does_not_cover() -> None:
    """Each make-up of a mixed batch is its own unit stood upright, and NaN where the unit alone is refused."""
    vacuum = Gap(0.0003, vacuum=Vacuum(pressure=0.1))
    gaps = [Gap(0.016, (("argon", 1.0),)), vacuum, Gap(0.012, (("helium", 1.0),)), Gap(0.012, (("air", 1.0),))]
    units = [replace(double(16.0, AIR), gaps=(gap,), tilt=0.3) for gap in gaps]
    found = en673.upright_u_values(MakeUps.of(units))
    assert list(np.isnan(found)) == [False, True, True, False]
    for k in (0, 3):
        assert found[k] == pytest.approx(en673.u_value(replace(units[k], tilt=math.pi / 2.0)), rel=1e-13)
