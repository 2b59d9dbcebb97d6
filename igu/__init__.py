"""Insulating glass units: heat balance, solar factor and service life of any stack of panes.

    from igu import Conditions, Gap, Unit, catalogue, rate

    glass = catalogue()
    outer = glass.pane([glass.glass_ply("clear", 0.006)], coating_in="soft-single")
    inner = glass.pane([glass.glass_ply("clear", 0.004)])
    unit = Unit((outer, inner), (Gap(0.016, {"argon": 0.9, "air": 0.1}),), height=1.5)
    result = rate(unit, Conditions("cold", outdoor_air=255.15, indoor_air=294.15, outdoor_convection=26.0))
    print(result.U)

SI units, kelvin and radians; outdoors first; a flux is positive towards the room. An argument out of its range
raises a `ModelError` that names it, what was given and what is allowed; every error of this package is an `IguError`.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from igu.errors import CaseError, IguError, ModelError, SolveError
    from igu.model.case import Case, read_case
    from igu.model.catalogue import catalogue
    from igu.model.conditions import Conditions
    from igu.model.unit import Gap, Pane, Pillars, Ply, Sealed, Unit, Vacuum
    from igu.ratings.rate import rate
    from igu.ratings.result import Result

__version__ = "0.1.0"

_PLACES = {
    "Case": "igu.model.case",
    "CaseError": "igu.errors",
    "Conditions": "igu.model.conditions",
    "Gap": "igu.model.unit",
    "IguError": "igu.errors",
    "ModelError": "igu.errors",
    "Pane": "igu.model.unit",
    "Pillars": "igu.model.unit",
    "Ply": "igu.model.unit",
    "Result": "igu.ratings.result",
    "Sealed": "igu.model.unit",
    "SolveError": "igu.errors",
    "Unit": "igu.model.unit",
    "Vacuum": "igu.model.unit",
    "catalogue": "igu.model.catalogue",
    "rate": "igu.ratings.rate",
    "read_case": "igu.model.case",
}

__all__ = [
    "Case",
    "CaseError",
    "Conditions",
    "Gap",
    "IguError",
    "ModelError",
    "Pane",
    "Pillars",
    "Ply",
    "Result",
    "Sealed",
    "SolveError",
    "Unit",
    "Vacuum",
    "catalogue",
    "rate",
    "read_case",
]


def __getattr__(name: str) -> Any:
    """Import a public name when it is first asked for, so that `import igu` stays light."""
    if name not in _PLACES:
        raise AttributeError(f"module 'igu' has no attribute {name!r}")
    return getattr(import_module(_PLACES[name]), name)
