"""Dotted paths into the table of a case, and a copy of the table with another value there.

`layer.2.gap_mm`, `layer.2.gas.argon`, `unit.tilt_deg`, `conditions.cold night.wind_m_s`, `glass.my-glass.emissivity`.
Layers, plies and conditions count from 1; conditions go by their name too. The path `face` means the face that carries
the unit's coating.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from typing import Any

from igu.errors import require
from igu.model.casefile.faults import listed, nearest
from igu.model.casefile.keys import KEYS

Step = str | int


def patched(table: Mapping[str, Any], key: str, value: Any) -> dict[str, Any]:
    """A copy of the case's table with this value at this path; the table itself is left as it is.

    A share of a fill moves the other shares in proportion, so that they still sum to 1.

    Raises
    ------
    ModelError    The path leads nowhere.
    """
    if key == "face":
        return _coating_moved(table, value)
    steps = _steps(table, key)
    if "gas" in steps[:-1] and isinstance(value, int | float):
        return dict(_replaced(table, steps[:-1], _reshared(_at(table, steps[:-1]), str(steps[-1]), float(value))))
    return dict(_replaced(table, steps, value))


def _steps(table: Mapping[str, Any], key: str) -> list[Step]:
    """The path in steps, numbers counting from 0."""
    parts = key.split(".")
    if parts[0] == "conditions" and len(parts) > 2:
        parts = ["conditions", _condition(table, ".".join(parts[1:-1])), parts[-1]]
    require(len(parts) > 1 and all(parts), f"{key} leads to no key of the case")
    steps: list[Step] = []
    node: Any = table
    for depth, part in enumerate(parts):
        step: Step = _index(node, part, key) if isinstance(node, list) else part
        steps.append(step)
        last = depth == len(parts) - 1
        require(
            not (isinstance(node, str) and parts[depth - 1] == "gas"),
            f"{key}: the gas is a name there; written as shares, gas = {{ argon = 0.9, air = 0.1 }}, one can vary",
        )
        require(isinstance(node, Mapping | list), f"{key} leads to no key of the case")
        give = f"; write [{part}] first" if not depth and part in KEYS["case"] else _hint(part, node)
        require(last or isinstance(node, list) or step in node, f"{key}: the case has no {part} there{give}")
        node = None if last else node[step]
    require(isinstance(steps[-1], str), f"{key} leads to a whole table")
    return steps


def _hint(part: str, known: Iterable[Any]) -> str:
    near = nearest(part, map(str, known))
    return f", did you mean {near}" if near else ""


def _index(node: list[Any], part: str, key: str) -> int:
    require(part.isascii() and part.isdigit() and 1 <= int(part[:6]) <= len(node),
            f"{key}: {part} is none of the numbers 1 to {len(node)}")  # fmt: skip
    return int(part) - 1


def _condition(table: Mapping[str, Any], name: str) -> str:
    """Number of the conditions of this name, as text; a number stays."""
    rows = table.get("conditions")
    known = [row.get("name", row.get("set", "")) if isinstance(row, Mapping) else "" for row in rows or []]
    if name in known:
        return str(known.index(name) + 1)
    require(name.isdigit(), f"no conditions {name}: there are {listed(known)}{_hint(name, known)}")
    return name


def _at(node: Any, steps: list[Step]) -> Any:
    for step in steps:
        node = node[step]
    return node


def _replaced(node: Any, steps: list[Step], value: Any) -> Any:
    """A copy of the node along the path only."""
    if not steps:
        return value
    step, *rest = steps
    if isinstance(node, list) and isinstance(step, int):
        return [_replaced(item, rest, value) if k == step else item for k, item in enumerate(node)]
    return {**node, str(step): _replaced(node.get(step), rest, value)}


def _reshared(fill: Any, gas: str, share: float) -> dict[str, float]:
    """The fill with this share of one gas, the others scaled to the rest."""
    others = {name: part for name, part in fill.items() if name != gas} if isinstance(fill, Mapping) else {}
    require(
        bool(others) and all(isinstance(part, int | float) for part in others.values()) and sum(others.values()) > 0,
        f"the share of {gas} can be varied only where other gases of the fill take up the rest",
    )
    scale = (1.0 - share) / sum(others.values())
    return {gas: share} | {name: part * scale for name, part in others.items()}


def _coating_moved(table: Mapping[str, Any], face: Any) -> dict[str, Any]:
    """The unit's one coating on another face."""
    layers = table.get("layer")
    require(isinstance(layers, list) and all(isinstance(row, Mapping) for row in layers), "face: there are no layers")
    rows: list[dict[str, Any]] = [dict(row) for row in layers or []]
    coatings = [row.pop(key) for row in rows for key in ("coating_out", "coating_in") if key in row]
    require(len(coatings) == 1, f"face moves the one coating of a unit; this one has {len(coatings)}")
    panes = [row for row in rows if "gap_mm" not in row]
    require(isinstance(face, int) and not isinstance(face, bool) and 1 <= face <= 2 * len(panes),
            f"face {face}: a whole number from 1 to {2 * len(panes)}")  # fmt: skip
    panes[(face - 1) // 2]["coating_in" if face % 2 == 0 else "coating_out"] = coatings[0]
    return {**table, "layer": rows}
