"""The fill gases by name: their property curves, mixtures, the EN 673 table, what a rarefied gas needs.

Two sets of properties describe a fill over temperature: the linear coefficients of ISO 15099 and the
reference curves; mixtures follow the same rules in both. EN 673 has its own table and its own rule.
"""

from __future__ import annotations

import math
import tomllib
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import numpy as np

from igu.arrays import Array, ArrayLike
from igu.data import data_text
from igu.errors import ModelError
from igu.laws import gas
from igu.laws.constants import ATMOSPHERE, CELSIUS, GAS_CONSTANT

GAS_PROPERTY_SETS = frozenset({"iso-15099", "reference"})
"""Names a case may give for the properties of its fills over temperature."""

DEGREE = 6
"""Degree of every property curve; the hot loop evaluates it, so it is no higher than the fits need."""

SHARE_TOLERANCE = 1e-6
"""What the shares of a fill may miss 1 by."""

COLDEST, HOTTEST, STEP = 180.0, 480.0, 10.0
"""Range and step [K] a fluid of CoolProp is tabulated over, where it allows."""
CONDENSES_ABOVE = 253.15
"""A fluid that boils above this at one atmosphere [K] is no fill gas."""
MARGIN = 10.0
"""Distance a tabulated fluid keeps from its boiling point [K]."""
FIT_LIMIT = 2e-3
"""Largest relative residual a fluid's fit may have; the transport models themselves are good to 1-5 %."""


@dataclass(frozen=True, eq=False)
class GasCurve:
    """A fill over temperature, as numbers.

    Attributes
    ----------
    mole_mass : float        [kg/mol].
    coefficients : ndarray   (3, DEGREE + 1): conductivity [W/(m K)], viscosity [Pa s] and specific heat
                             [J/(kg K)] as ascending powers of (T - 300 K)/100 K; read-only.
    T_min, T_max : float     Range the curve holds in [K].
    source : str             Where the numbers come from.
    """

    mole_mass: float
    coefficients: Array
    T_min: float
    T_max: float
    source: str

    def __post_init__(self) -> None:
        """Make the coefficients read-only: curves are cached and shared."""
        self.coefficients.setflags(write=False)

    def at(self, T: ArrayLike) -> Array:
        """Conductivity, viscosity and specific heat at T [K], shape (3, ...)."""
        trailing = (1,) * np.ndim(T)
        return gas.curve_values(T, self.coefficients.reshape(self.coefficients.shape + trailing))


@dataclass(frozen=True)
class KnownGas:
    """A shipped gas as the catalogue lists it; the figures are the reference curve's at 283.15 K."""

    name: str
    mole_mass: float
    conductivity: float
    viscosity: float
    specific_heat: float
    T_min: float
    T_max: float
    property_sets: tuple[str, ...]
    source: str


def known_gases() -> tuple[KnownGas, ...]:
    """The shipped gases with their figures and sources, for a listing."""
    return tuple(_known_gas(name) for name in _data()["gas"]["entries"])


def is_known_gas(name: str) -> bool:
    """Whether the gas is one of those shipped."""
    return name in _data()["gas"]["entries"]


def is_gas_name(name: str) -> bool:
    """Whether the name can be a fill: a shipped gas or a fluid `tabulate_fluid` accepts.

    Imports CoolProp for names that are not shipped.
    """
    if is_known_gas(name):
        return True
    try:
        tabulate_fluid(name)
    except ModelError:
        return False
    return True


def fill_curve(fractions: Mapping[str, float], *, properties: str) -> GasCurve:
    """Curve of a fill given by the mole fractions of its gases, from one property set.

    Gases outside the shipped table are looked up among the fluids of CoolProp under "reference".
    """
    if properties not in GAS_PROPERTY_SETS:
        raise ModelError(f'gas properties "{properties}": allowed are {_listed(sorted(GAS_PROPERTY_SETS))}')
    return _fill_curve(_present(fractions), properties)


def en673_properties(fractions: Mapping[str, float], temperature_C: int = 10) -> tuple[float, float, float, float]:
    """Density [kg/m3], viscosity [Pa s], conductivity [W/(m K)], specific heat [J/(kg K)] by EN 673."""
    table = _data()["en-673"]
    shares = _present(fractions)
    _require(table["entries"], [name for name, _ in shares], "the table of EN 673")
    if temperature_C not in table["temperature_C"]:
        raise ModelError(f"EN 673 gives no gas properties at {temperature_C} °C, only at "
                         f"{_listed(table['temperature_C'])} °C")  # fmt: skip
    row = table["temperature_C"].index(temperature_C)
    keys = ("density_kg_m3", "viscosity_Pa_s", "conductivity_W_mK", "specific_heat_J_kgK")
    values = np.array([[table["entries"][name][key][row] for key in keys] for name, _ in shares])
    density, viscosity, conductivity, specific_heat = gas.linear_mixture(_column(shares), values)
    return float(density), float(viscosity), float(conductivity), float(specific_heat)


def rarefied_data(name: str) -> tuple[float, float]:
    """Mole mass [kg/mol] and ratio of the specific heats cp/cv [-] of a residual gas."""
    if is_known_gas(name):
        entry = _data()["gas"]["entries"][name]
        return entry["mole_mass_kg_mol"], entry["cp_over_cv"]
    return _fluid_rarefied_data(name)


@lru_cache(maxsize=64)
def tabulate_fluid(name: str) -> GasCurve:
    """Curve of any other fluid CoolProp describes and that is a gas over the range.

    Raises
    ------
    ModelError   CoolProp does not know the name, has no transport model for the fluid, or it condenses.
    """
    try:
        state = _fluid_state(name)
        T = _gas_range(name, state)
        values = np.array([_state_properties(state, float(t)) for t in T]).T
        coefficients = _fit(T, values)
    except ModelError:
        raise
    except ValueError as error:
        raise ModelError(f'gas "{name}" cannot be a fill: {error}') from error
    residual = np.abs(gas.curve_values(T, coefficients[..., None]) / values - 1).max()
    if not residual <= FIT_LIMIT:
        raise ModelError(f'gas "{name}" cannot be a fill: its properties vary too sharply with temperature')
    return GasCurve(state.molar_mass(), coefficients, float(T[0]), float(T[-1]), f"CoolProp, fluid {name}")


@lru_cache(maxsize=1)
def _data() -> dict[str, Any]:
    return tomllib.loads(data_text("gases.toml"))


@lru_cache(maxsize=1)
def _reference_table() -> dict[str, Array]:
    """Temperature, conductivity, viscosity and specific heat of each gas, (4, points)."""
    text = data_text("gas_reference.csv")
    rows: dict[str, list[list[float]]] = {}
    lines = [line for line in text.splitlines() if not line.startswith("#")]
    for name, *figures in [line.split(",") for line in lines[1:]]:
        rows.setdefault(name, []).append([float(figure) for figure in figures])
    return {name: np.array(values).T for name, values in rows.items()}


def _known_gas(name: str) -> KnownGas:
    curve = _pure_curve(name, "reference")
    conductivity, viscosity, specific_heat = (float(value) for value in curve.at(283.15))
    sets = [key for key in ("iso-15099", "en-673") if name in _data()[key]["entries"]]
    return KnownGas(
        name=name,
        mole_mass=curve.mole_mass,
        conductivity=conductivity,
        viscosity=viscosity,
        specific_heat=specific_heat,
        T_min=curve.T_min,
        T_max=curve.T_max,
        property_sets=(*sets, "reference"),
        source=curve.source,
    )


def _present(fractions: Mapping[str, float]) -> tuple[tuple[str, float], ...]:
    """The shares above zero in the order of the names, scaled to the sum 1."""
    for name, share in fractions.items():
        if not (math.isfinite(share) and share >= 0):
            raise ModelError(f'share of "{name}" in the fill is {share}: a number from 0 to 1 is needed')
    total = math.fsum(fractions.values())
    if abs(total - 1) > SHARE_TOLERANCE:
        raise ModelError(f"shares of the fill sum to {total:.9g}: they must sum to 1")
    return tuple(sorted((name, share / total) for name, share in fractions.items() if share > 0))


@lru_cache(maxsize=4096)
def _fill_curve(shares: tuple[tuple[str, float], ...], properties: str) -> GasCurve:
    names = [name for name, _ in shares]
    if properties == "iso-15099":
        _require(_data()["iso-15099"]["entries"], names, "the property set iso-15099")
    curves = [_pure_curve(name, properties) for name in names]
    return curves[0] if len(curves) == 1 else _mixed_curve(curves, _column(shares))


def _mixed_curve(curves: Sequence[GasCurve], shares: Array) -> GasCurve:
    """The mixing rules at Chebyshev nodes of the common range, and the polynomial through them."""
    T_min, T_max = max(c.T_min for c in curves), min(c.T_max for c in curves)
    angle = np.pi * (2 * np.arange(DEGREE + 1) + 1) / (2 * DEGREE + 2)
    T = (T_min + T_max) / 2 + (T_max - T_min) / 2 * np.cos(angle)
    k, mu, cp = np.stack([c.at(T) for c in curves], axis=1)
    M = np.array([[c.mole_mass] for c in curves])
    values = np.array([
        gas.mixture_conductivity(shares, k, viscosities=mu, mole_masses=M),
        gas.mixture_viscosity(shares, mu, mole_masses=M),
        gas.mixture_specific_heat(shares, cp, mole_masses=M),
    ])  # fmt: skip
    sources = dict.fromkeys(c.source for c in curves)
    return GasCurve(
        mole_mass=float(gas.mixture_mole_mass(shares, M)[0]),
        coefficients=_fit(T, values),
        T_min=T_min,
        T_max=T_max,
        source="; ".join([*sources, "mixed by ISO 15099:2003"]),
    )


@lru_cache(maxsize=64)
def _pure_curve(name: str, properties: str) -> GasCurve:
    if properties == "iso-15099":
        return _iso_curve(name)
    return _reference_curve(name) if is_known_gas(name) else tabulate_fluid(name)


def _iso_curve(name: str) -> GasCurve:
    table = _data()["iso-15099"]
    entry = table["entries"][name]
    a, b = np.array([entry[key] for key in ("conductivity_W_mK", "viscosity_Pa_s", "specific_heat_J_kgK")]).T
    coefficients = np.zeros((3, DEGREE + 1))
    coefficients[:, 0] = a + b * gas.CURVE_CENTRE
    coefficients[:, 1] = b * gas.CURVE_SCALE
    return GasCurve(entry["mole_mass_kg_mol"], coefficients, table["T_min_K"], table["T_max_K"], table["source"])


def _reference_curve(name: str) -> GasCurve:
    T, *values = _reference_table()[name]
    mole_mass = _data()["gas"]["entries"][name]["mole_mass_kg_mol"]
    source = _data()["reference"]["source"][name]
    return GasCurve(mole_mass, _fit(T, np.array(values)), float(T[0]), float(T[-1]), source)


def _fit(T: Array, values: Array) -> Array:
    """Coefficients (3, DEGREE + 1) of least relative residual through values (3, points) at T (points)."""
    powers = np.vander(gas.curve_variable(T), DEGREE + 1, increasing=True)
    target = np.ones(len(T))
    return np.array([np.linalg.lstsq(powers / row[:, None], target, rcond=None)[0] for row in values])


def _column(shares: tuple[tuple[str, float], ...]) -> Array:
    """Shares as (K, 1), to stand beside values (K, ...)."""
    return np.array([[share] for _, share in shares])


def _require(entries: Mapping[str, Any], names: Sequence[str], place: str) -> None:
    """Refuse gases that a table does not have, saying what has them."""
    for name in names:
        if name not in entries:
            where = ' ("reference" has it)' if is_known_gas(name) else ""
            raise ModelError(f'{place} has no gas "{name}"{where}, only {_listed(list(entries))}')


def _listed(items: Sequence[object]) -> str:
    return ", ".join(str(item) for item in items)


def _fluid_state(name: str) -> Any:
    """CoolProp's state object of a pure fluid; of its many notations only the plain names are taken."""
    if is_known_gas(name.casefold()):
        raise ModelError(f'gas "{name}": write "{name.casefold()}"')
    fluid = _fluid_names().get(name.casefold())
    if fluid is None:
        raise ModelError(
            f'"{name}" is not a gas known here: allowed are {_listed(list(_data()["gas"]["entries"]))}, '
            "or a fluid of CoolProp by its name there"
        )
    from CoolProp.CoolProp import AbstractState

    return AbstractState("HEOS", fluid)


@lru_cache(maxsize=1)
def _fluid_names() -> dict[str, str]:
    """Every name and alias of CoolProp's fluids, in lower case, with the fluid it stands for."""
    from CoolProp.CoolProp import get_fluid_param_string, get_global_param_string

    names: dict[str, str] = {}
    for fluid in get_global_param_string("FluidsList").split(","):
        aliases = get_fluid_param_string(fluid, "aliases").split(",")
        names.update((alias.casefold(), fluid) for alias in (fluid, *aliases) if alias)
    return names


def _gas_range(name: str, state: Any) -> Array:
    """Temperatures to tabulate a fluid at [K]: from safely above condensing to the end of its model."""
    boiling = _boiling_point(state)
    if boiling > CONDENSES_ABOVE:
        raise ModelError(f'gas "{name}" cannot be a fill: at one atmosphere it condenses at '
                         f"{boiling - CELSIUS:.0f} °C")  # fmt: skip
    lowest = math.ceil(max(COLDEST, boiling + MARGIN, state.Tmin()) / STEP) * STEP
    highest = math.floor(min(HOTTEST, state.Tmax()) / STEP) * STEP
    return np.arange(lowest, highest + STEP / 2, STEP)


def _boiling_point(state: Any) -> float:
    """Saturation temperature at one atmosphere [K]; below the triple point, where there is none, zero."""
    import CoolProp

    if state.trivial_keyed_output(CoolProp.iP_triple) > ATMOSPHERE:
        return 0.0
    state.update(CoolProp.PQ_INPUTS, ATMOSPHERE, 1.0)
    return float(state.T())


def _state_properties(state: Any, T: float) -> tuple[float, float, float]:
    import CoolProp

    state.update(CoolProp.PT_INPUTS, ATMOSPHERE, T)
    return state.conductivity(), state.viscosity(), state.cpmass()


def _fluid_rarefied_data(name: str) -> tuple[float, float]:
    """As `rarefied_data`, of a CoolProp fluid: its ideal gas at 293.15 K."""
    import CoolProp

    state = _fluid_state(name)
    state.update(CoolProp.DmolarT_INPUTS, 1e-6, 293.15)
    molar = state.cp0molar()
    return state.molar_mass(), molar / (molar - GAS_CONSTANT)
