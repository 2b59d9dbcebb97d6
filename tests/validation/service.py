"""Units in service: plates, sealed gas, strength, leakage, the atmosphere."""

from __future__ import annotations

from collections.abc import Iterator
from functools import partial

from igu.laws.atmosphere import standard_pressure
from igu.laws.leakage import remaining_share
from igu.laws.plate import flexural_rigidity, plate_coefficients
from igu.laws.sealed import insulating_unit_factor, isochoric_pressure, volume_coefficient
from igu.laws.strength import edge_stress
from igu.model.catalogue import catalogue
from igu.model.conditions import Conditions
from igu.model.strength import permissible_difference, permissible_stress
from igu.model.unit import Gap, Unit
from igu.studies.bowing import bow
from igu.studies.tolerance import FLOAT_TOLERANCE
from tests.validation.build import ARGON
from tests.validation.check import Row

TIMOSHENKO = "Timoshenko & Woinowsky-Krieger, Theory of Plates and Shells, table 8"
PLATES = """\
1.0,0.00406,0.0479,0.0479
1.1,0.00485,0.0554,0.0493
1.2,0.00564,0.0627,0.0501
1.3,0.00638,0.0694,0.0503
1.4,0.00705,0.0755,0.0502
1.5,0.00772,0.0812,0.0498
1.6,0.00830,0.0862,0.0492
1.7,0.00883,0.0908,0.0486
1.8,0.00931,0.0948,0.0479
1.9,0.00974,0.0985,0.0471
2.0,0.01013,0.1017,0.0464
3.0,0.01223,0.1189,0.0406
4.0,0.01282,0.1235,0.0384
5.0,0.01297,0.1246,0.0375"""
"""b/a; centre deflection over q a⁴/D; moments over q a², spanning the short and the long side, ν 0.3."""

PLATE_COLUMNS = ("centre deflection over q a⁴/D", "moment spanning the short side over q a², ν 0.3",
                 "moment spanning the long side over q a², ν 0.3")  # fmt: skip

OFF_THE_SERIES = {("1.1", 0): 2e-5, ("1.1", 1): 1e-4, ("1.2", 0): 1.1e-5, ("1.3", 0): 1.3e-5, ("1.4", 0): 4e-5, ("1.6", 0): 1e-5,
                  ("1.6", 2): 1e-4, ("1.7", 0): 1e-5, ("1.8", 0): 1e-5, ("5.0", 2): 2.5e-4}  # fmt: skip
"""Figures of the table that are not the rounded sum of its own series, by b/a and column."""

MEAN = {"1.0": "0.00170", "1.2": "0.00237", "1.5": "0.00327", "2.0": "0.00440", "3.0": "0.00569"}
"""b/a, mean deflection over q a⁴/D."""

CHI = {"1.0": "0.0194", "0.9": "0.0237", "0.8": "0.0288", "0.7": "0.0350", "0.6": "0.0421", "0.5": "0.0501", "0.4": "0.0587",
       "0.3": "0.0676", "0.2": "0.0767", "0.1": "0.0857"}  # fmt: skip

ATMOSPHERE = {"-1000": "1139.29", "0": "1013.25", "500": "954.61", "1000": "898.746", "2000": "794.952", "3000": "701.085",
              "4000": "616.402", "5000": "540.199", "8000": "355.998", "11000": "226.320"}  # fmt: skip

SIXTEEN = [("0.5", "0.228", "3.65", "2.35"), ("1.0", "0.0181", "0.29", "2.99")]
"""Side [m] of a square 4-16-4: φ, overpressure [kPa], centre deflection [mm] at 16 kPa."""


RESPONDEK = [(2, 12.0, "4.6"), (3, 12.0, "5")]
"""Panes, gap [mm] (the abstract: 10 to 14 for two panes), greatest rise of the heat loss [%]."""

FLOAT_PLUS_MINUS = [("3", "0.2"), ("6", "0.2"), ("8", "0.3"), ("12", "0.3"), ("15", "0.5"), ("19", "1.0")]


def rows() -> Iterator[Row]:
    """All rows of service."""
    yield from _plates()
    yield from _sealed()
    for altitude, figure in ATMOSPHERE.items():
        yield Row("Atmosphere", f"pressure at {altitude} m [hPa]", "ISO 2533:1975, geopotential altitude", "memory", figure,
                  lambda h=altitude: float(standard_pressure(float(h))) / 100.0)  # type: ignore[misc]  # fmt: skip
    yield from _bowing()
    yield from _strength()
    for thickness, figure in FLOAT_PLUS_MINUS:
        yield Row("Tolerances", f"float glass {thickness} mm, plus or minus [mm]", "EN 572-2 as quoted with EN 12150", "seen", figure,
                  partial(_float_tolerance, float(thickness)))  # fmt: skip
    yield Row("Leakage", "90 % argon after 30 years at 1 % a year of what is left [%]", "arithmetic at the limit of EN 1279-3",
              "computed", "66.6", lambda: 100.0 * float(remaining_share(0.9, rate=0.01, years=30.0)))  # fmt: skip


def _plates() -> Iterator[Row]:
    reason = "cut or misprinted: a double series summed apart from the law, in its tests, sides with ours"
    for line in PLATES.splitlines():
        aspect, *printed = line.split(",")
        for k, (what, figure) in enumerate(zip(PLATE_COLUMNS, printed, strict=True)):
            tolerance = OFF_THE_SERIES.get((aspect, k))
            yield Row("Plates", f"{what}, b/a {aspect}", TIMOSHENKO, "memory", figure, partial(_plate, float(aspect), k),
                      tolerance, reason if tolerance else "")  # fmt: skip
    for aspect, figure in MEAN.items():
        yield Row("Plates", f"mean deflection over q a⁴/D, b/a {aspect}", "Navier series, summed apart from this package", "computed",
                  figure, lambda a=float(aspect): float(plate_coefficients(a).mean))  # type: ignore[misc]  # fmt: skip


def _plate(aspect: float, column: int) -> float:
    found = plate_coefficients(aspect, poisson=0.3)
    return float((found.centre, found.moment_short, found.moment_long)[column])


def _sealed() -> Iterator[Row]:
    topic, standard = "Sealed units", "EN 16612, DIN 18008"
    for figure, (warming, rise, climb) in (("16.0", (20.0, -2.0, 600.0)), ("-16.1", (-25.0, 4.0, -300.0))):
        yield Row(topic, f"isochoric pressure, {warming:+.0f} K, {rise:+.0f} kPa, {climb:+.0f} m [kPa]", standard, "memory", figure,
                  lambda s=(warming, rise, climb): _isochoric(*s))  # type: ignore[misc]  # fmt: skip
    for ratio, figure in CHI.items():
        yield Row(topic, f"χ at a/b {ratio}, table", standard, "memory", figure, partial(_table_chi, float(ratio)))
        yield Row(topic, f"χ at a/b {ratio}, 12 (1 - ν²) times the mean deflection of the plate, ν 0.23", standard, "memory", figure,
                  partial(_plate_chi, float(ratio)), 1e-4, "the table rounds and is somewhat above the series")  # fmt: skip
    rounded = "the printed 28.9 of a* is rounded from (E/p_a)^(1/4); the figure keeps it unrounded"
    source = "16 kPa on 4-16-4, E 70 GPa, ν 0.23"
    yield Row(topic, "a* [mm]", source, "computed", "369", lambda: _sixteen(0.5)[0], 1.0, rounded)
    for side, phi, pressure, centre in SIXTEEN:
        for k, (what, figure) in enumerate(
            (("φ", phi), ("overpressure [kPa]", pressure), ("centre deflection [mm]", centre)), 1
        ):
            yield Row(topic, f"{what}, {side} × {side} m", source, "computed", figure, lambda s=float(side), k=k: _sixteen(s)[k],
                      None if k == 1 else 0.004 * float(figure) + 0.001, "" if k == 1 else rounded)  # type: ignore[misc]  # fmt: skip


def _isochoric(warming: float, rise: float, climb: float) -> float:
    return float(isochoric_pressure(warming=warming, pressure_rise=1e3 * rise, climb=climb)) / 1e3


def _table_chi(ratio: float) -> float:
    return float(volume_coefficient(ratio))


def _plate_chi(ratio: float) -> float:
    return 12.0 * (1.0 - 0.23**2) * float(plate_coefficients(1.0 / ratio).mean)


def _sixteen(side: float) -> tuple[float, float, float, float]:
    """a* [mm], φ, overpressure [kPa], centre deflection [mm]."""
    factor, length = insulating_unit_factor(short=side, long=side, width=0.016, outer=0.004, inner=0.004)
    load = 16e3 * float(factor)
    deflection = load * float(plate_coefficients(1.0).centre) * side**4 / float(flexural_rigidity(0.004))
    return 1e3 * float(length), float(factor), load / 1e3, 1e3 * deflection


def _bowing() -> Iterator[Row]:
    reason = ("the abstract gives the greatest effect and neither size, coating nor weather: 1 × 1.5 m, low-e, argon, 0 °C, 1040 hPa "
              "are taken, and 1030 hPa or 5 °C read up to 0.7 less")  # fmt: skip
    for panes, width, figure in RESPONDEK:
        yield Row("Sealed units", f"more heat lost by bowing in mild winter, {panes} panes, {width} mm [%]",
                  "Respondek, Materials 13 (2020) 286, abstract", "seen", figure, partial(_more_heat, panes, width), 1.5, reason)  # fmt: skip


def _more_heat(panes: int, width: float) -> float:
    library = catalogue()
    ply = library.glass_ply("clear", 0.004)
    coated, bare = library.pane([ply], coating_in="soft-double"), library.pane([ply])
    unit = Unit((coated,) * (panes - 1) + (bare,), (Gap(width * 1e-3, ARGON),) * (panes - 1), width=1.0, height=1.5)
    mild = Conditions("mild", outdoor_air=273.15, indoor_air=294.15, outdoor_convection=26.0, pressure=104000.0)
    state = bow(unit, mild, None)[0]
    assert state.U is not None
    assert state.U_flat is not None
    return 100.0 * (state.U / state.U_flat - 1.0)


def _float_tolerance(thickness: float) -> float:
    return next(1e3 * plus for most, plus in FLOAT_TOLERANCE if 1e-3 * thickness <= most)


def _strength() -> Iterator[Row]:
    yield Row("Strength and fracture", "design strength of annealed glass under a lasting load [MPa]", "form and figures of EN 16612:2019",
              "memory", "7", lambda: permissible_stress("annealed", "permanent") / 1e6)  # fmt: skip
    yield Row("Strength and fracture", "edge stress per kelvin, E α, 70 GPa and 9e-6 /K [MPa/K]", "GOST R 54170 data, arithmetic", "computed",
              "0.63", lambda: float(edge_stress(1.0)) / 1e6)  # fmt: skip
    for treatment, edge, source, mark, figure in (
        ("annealed", "ground", "published guidance", "seen", "40"),
        ("heat-strengthened", "ground", "EN 1863", "memory", "100"),
        ("toughened", "ground", "published guidance", "seen", "200"),
    ):
        yield Row("Strength and fracture", f"permissible centre-to-edge difference, {treatment}, {edge} edges [K]", source, mark, figure,
                  partial(permissible_difference, treatment, edge))  # fmt: skip
