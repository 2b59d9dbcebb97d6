"""The faults of a case, one line each: file, key path, what was given, what is allowed, the nearest name."""

from __future__ import annotations

import json
import re
from collections.abc import Iterable, Mapping
from typing import Any

from igu.errors import CaseError

OTHER_WORDS = {
    "tempered": "toughened",
    "fully_tempered": "toughened",
    "thermally_toughened": "toughened",
    "heat_soaked": "toughened",
    "hst": "toughened",
    "semi_tempered": "heat-strengthened",
    "half_tempered": "heat-strengthened",
    "float": "annealed",
}
"""Other words of the trade for words of the case file, for hints only."""

LONGEST = 60
"""What a fault quotes of a value, in characters."""


class Faults:
    """Collects fault lines and warnings in the order they are found; the same line once."""

    def __init__(self) -> None:
        self._lines: dict[str, None] = {}
        self._warnings: dict[str, None] = {}

    def __len__(self) -> int:
        return len(self._lines)

    def add(self, file: str, path: str, *, given: str, allowed: str, near: str | None = None) -> None:
        """Record one fault; `path` is empty where the whole file is meant."""
        place = f"{file}: {path}" if path else file
        hint = f"; did you mean {near}?" if near else ""
        self._lines[_one_line(f"{place}: given {given}; allowed {allowed}{hint}")] = None

    def warn(self, file: str, path: str, sentence: str) -> None:
        """Record what may be a slip and is no fault."""
        self._warnings[_one_line(f"{file}: {path}: {sentence}")] = None

    @property
    def lines(self) -> tuple[str, ...]:
        """The faults."""
        return tuple(self._lines)

    @property
    def warnings(self) -> tuple[str, ...]:
        """The warnings."""
        return tuple(self._warnings)

    def raise_any(self) -> None:
        """Raise them together, if there are any."""
        if self._lines:
            raise CaseError(tuple(self._lines))


def shown(value: Any) -> str:
    """The value as TOML would have it, cut where it is long."""
    text = _toml(value)
    return text if len(text) <= LONGEST else text[: LONGEST - 1] + "…"


def shown_key(key: Any) -> str:
    """The key as TOML would have it, bare where it may be."""
    return str(key) if re.fullmatch(r"[A-Za-z0-9_-]+", str(key)) else shown(str(key))


def listed(names: Iterable[Any]) -> str:
    """Names or numbers for a sentence."""
    return ", ".join(str(name) for name in names) or "none"


def nearest(name: str, known: Iterable[str]) -> str | None:
    """The known name that this one resembles, if any does.

    A name that has its words, or whose words it has, is nearer than one spelt alike: "U" means "U_W_m2K" and "U_max"
    "U_max_W_m2K", "g" and "g-value" mean "solar_factor_g", "outdoor_temperature_C" means "outdoor_C". Small and capital
    letters are alike.
    """
    from difflib import get_close_matches

    spelt = {_words(word): word for word in reversed(list(known))}
    given = _words(name[:100])
    if (other := OTHER_WORDS.get(given)) in spelt.values():
        return other
    core = given.removesuffix("_value")
    having = [word for word in reversed(spelt) if core and f"_{core}_" in f"_{word}_"]
    begun = [word for word in having if word.startswith(core)]
    within = sorted((word for word in spelt if {*word.split("_")} < {*core.split("_")}), key=len, reverse=True)
    near = next(iter([*begun, *having, *within, *get_close_matches(given, spelt, n=1)]), None)
    return spelt[near] if near else None


def _words(name: str) -> str:
    """The name in small letters, its words apart by underscores."""
    return name.lower().replace("-", "_").replace(" ", "_").strip("_")


def _one_line(text: str) -> str:
    """The text with everything that does not print written out, so that a fault stays one line."""
    return text if text.isprintable() else "".join(c if c.isprintable() else repr(c)[1:-1] for c in text)


def _toml(value: Any, depth: int = 3) -> str:
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, str):
        return json.dumps(value[: 2 * LONGEST])
    if isinstance(value, int):
        return str(value) if abs(value) < 10**LONGEST else "a whole number of too many digits"
    if isinstance(value, Mapping):
        return _table(value, depth)
    if isinstance(value, list | tuple):
        return "[" + ", ".join(_toml(v, depth - 1) for v in value[:9]) + "]" if depth else "[…]"
    return str(value)


def _table(value: Mapping[Any, Any], depth: int) -> str:
    if not depth:
        return "{…}"
    pairs = (f"{shown_key(key)} = {_toml(item, depth - 1)}" for key, item in list(value.items())[:9])
    return "{ " + ", ".join(pairs) + " }" if value else "{ }"
