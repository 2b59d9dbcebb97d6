"""Units in service: plates, sealed gas, strength, leakage, the atmosphere."""

from __future__ import annotations

from collections.abc import Iterator

from igu.laws.atmosphere import standard_pressure
from igu.laws.leakage import remaining_share
from igu.laws.plate import flexural_rigidity, plate_coefficients
from igu.laws.sealed import insulating_unit_factor, isochoric_pressure
from igu.model.strength import permissible_stress
from tests.validation.check import Row

TIMOSHENKO = "Timoshenko & Woinowsky-Krieger, table 8"
PLATES = [(1.0, "0.00406", "0.00170"), (1.2, "0.00564", "0.00237"), (1.5, "0.00772", "0.00327"), (2.0, "0.01013", "0.00440"),
          (3.0, "0.01223", "0.00569")]  # fmt: skip
SIXTEEN = [(0.5, "369", "0.228", "3.65", "2.35"), (1.0, "369", "0.0181", "0.29", "2.99")]


def rows() -> Iterator[Row]:
    """All rows of service."""
    for aspect, centre, mean in PLATES:
        loose = (
            {"tolerance": 1.1e-5, "reason": "the printed table is cut, the series gives 0.005651"}
            if aspect == 1.2
            else {}
        )
        yield Row("Plates", f"centre deflection over q a⁴/D, b/a = {aspect}", TIMOSHENKO, "memory", centre,
                  lambda a=aspect: float(plate_coefficients(a).centre), **loose)  # type: ignore[misc]  # fmt: skip
        yield Row("Plates", f"mean deflection over q a⁴/D, b/a = {aspect}", "series", "computed", mean,
                  lambda a=aspect: float(plate_coefficients(a).mean))  # type: ignore[misc]  # fmt: skip
    for value, sums in (("16.0", (20.0, -2000.0, 600.0)), ("-16.1", (-25.0, 4000.0, -300.0))):
        yield Row("Sealed units", f"isochoric pressure, {sums[0]:+.0f} K, {sums[1] / 1e3:+.0f} kPa, {sums[2]:+.0f} m [kPa]",
                  "DIN 18008-1, EN 16612", "memory", value,
                  lambda s=sums: float(isochoric_pressure(warming=s[0], pressure_rise=s[1], climb=s[2])) / 1e3)  # type: ignore[misc]  # fmt: skip
    for side, star, phi, pressure, bow in SIXTEEN:
        yield from _sixteen(side, star, phi, pressure, bow)
    for altitude, printed in ((1000.0, "89874.6"), (2000.0, "79495.2"), (5000.0, "54019.9")):
        yield Row("Atmosphere", f"pressure at {altitude:.0f} m [Pa]", "ISO 2533:1975 (geopotential altitude)", "memory", printed,
                  lambda h=altitude: float(standard_pressure(h)))  # type: ignore[misc]  # fmt: skip
    yield Row("Strength", "design strength of annealed glass under a lasting load [MPa]", "EN 16612 form", "memory", "7",
              lambda: permissible_stress("annealed", "permanent") / 1e6)  # fmt: skip
    yield Row("Leakage", "90 % argon after 30 years at 1 % a year [%]", "EN 1279-3 limit, geometric", "computed", "66.6",
              lambda: 100 * float(remaining_share(0.9, rate=0.01, years=30.0)))  # fmt: skip


def _sixteen(side: float, star: str, phi: str, pressure: str, bow: str) -> Iterator[Row]:
    source = "16 kPa on 4-16-4, E 70 GPa, ν 0.23"
    factor, length = insulating_unit_factor(short=side, long=side, width=0.016, outer=0.004, inner=0.004)
    load = 16e3 * float(factor)
    deflection = load * float(plate_coefficients(1.0).centre) * side**4 / float(flexural_rigidity(0.004))
    rounded = "the printed 28.9 of a* is rounded; the figure comes from E/p_a unrounded"
    yield Row(
        "Sealed units",
        f"a* of {side} × {side} m [mm]",
        source,
        "computed",
        star,
        lambda: 1e3 * float(length),
        1.0,
        rounded,
    )
    yield Row("Sealed units", f"φ of {side} × {side} m", source, "computed", phi, lambda: float(factor))
    yield Row("Sealed units", f"overpressure of {side} × {side} m [kPa]", source, "computed", pressure, lambda: load / 1e3,
              0.011, rounded)  # fmt: skip
    yield Row("Sealed units", f"centre deflection of {side} × {side} m [mm]", source, "computed", bow, lambda: 1e3 * deflection,
              0.012, rounded)  # fmt: skip
