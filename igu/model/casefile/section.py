"""One table of a case file, read key by key; every fault goes to the collector, a faulty value reads as None."""

from __future__ import annotations

from collections.abc import Collection, Iterator, Mapping, Sequence
from typing import Any

from igu.model.casefile.faults import Faults, listed, nearest, shown, shown_key
from igu.model.casefile.keys import KEYS, limit


class Section:
    """A table with its place in the file. `kind` says which keys it may have; others are faults at once."""

    def __init__(self, table: Mapping[str, Any], *, kind: str, path: str, file: str, faults: Faults) -> None:
        self.table = table
        self.kind = kind
        self.path = path
        self.file = file
        self.faults = faults
        self._meant = {key for word in table if word not in KEYS[kind] and (key := nearest(str(word), KEYS[kind]))}
        self._refuse_unknown(KEYS[kind])

    def __contains__(self, key: str) -> bool:
        return key in self.table

    def place(self, key: str = "") -> str:
        """Path of a key of this table."""
        return ".".join(part for part in (self.path, key) if part)

    def fault(self, key: str, *, given: str, allowed: str, near: str | None = None) -> None:
        """Record a fault at a key."""
        self.faults.add(self.file, self.place(key), given=given, allowed=allowed, near=near)

    def missing(self, key: str, allowed: str) -> None:
        """Record that a key is missing, unless an unknown one already said to mean it stands here."""
        if key not in self._meant:
            self.fault(key, given="nothing", allowed=allowed)

    def refuse(self, key: str, allowed: str, near: str | None = None) -> None:
        """Record that the value of a key is not allowed."""
        self.fault(key, given=shown(self.table[key]), allowed=allowed, near=near)

    def warn(self, key: str, sentence: str) -> None:
        """Record what may be a slip at a key."""
        self.faults.warn(self.file, self.place(key), sentence)

    def exclusive(self, *alternatives: str | tuple[str, ...]) -> None:
        """Refuse keys of more than one alternative."""
        groups = [(a,) if isinstance(a, str) else a for a in alternatives]
        present = [[key for key in group if key in self.table] for group in groups]
        present = [keys for keys in present if keys]
        for keys in present[1:]:
            for key in keys:
                self.fault(key, given=f"beside {present[0][0]}", allowed="one of the two")

    def number(self, key: str, *, required: bool = False) -> float | None:
        """A finite number within the range of the key."""
        if key not in self.table:
            if required:
                self.missing(key, self._range(key))
            return None
        value = as_number(self.table[key])
        if value is None or not limit(self.kind, key).allows(value):
            self.refuse(key, self._range(key))
            return None
        return value

    def scaled(self, key: str, factor: float) -> float | None:
        """The number times a factor, from the unit of the key to the one within."""
        value = self.number(key)
        return None if value is None else value * factor

    def whole(self, key: str) -> int | None:
        """A whole number within the range of the key."""
        if key not in self.table:
            return None
        value = self.table[key]
        if not _is_whole(value) or not limit(self.kind, key).allows(as_number(value) or 0.0):
            self.refuse(key, self._range(key, "a whole number"))
            return None
        return int(value)

    def numbers(self, key: str, *, whole: bool = False) -> tuple[float, ...] | None:
        """A list of numbers, each within the range of the key; at least one."""
        if key not in self.table:
            return None
        wanted = self._range(key, "a list of whole numbers" if whole else "a list of numbers")
        given = self.table[key]
        if not isinstance(given, list) or not given:
            self.refuse(key, wanted)
            return None
        values = [as_number(item) for item in given]
        good = [v for v in values if v is not None and limit(self.kind, key).allows(v)]
        if len(good) < len(values) or (whole and not all(_is_whole(item) for item in given)):
            self.refuse(key, wanted)
            return None
        return tuple(good)

    def flag(self, key: str, default: bool) -> bool:
        """True or false."""
        value = self.table.get(key, default)
        if not isinstance(value, bool):
            self.refuse(key, "true or false")
            return default
        return value

    def text(self, key: str, *, required: str = "") -> str | None:
        """A text that is not blank; `required` says what is wanted where it may not be left out."""
        if key not in self.table:
            if required:
                self.missing(key, required)
            return None
        value = self.table[key]
        if not isinstance(value, str) or not value.strip():
            self.refuse(key, "a text")
            return None
        return value

    def texts(self, key: str) -> tuple[str, ...] | None:
        """A list of texts, at least one."""
        if key not in self.table:
            return None
        value = self.table[key]
        if not isinstance(value, list) or not value or not all(isinstance(item, str) for item in value):
            self.refuse(key, "a list of texts")
            return None
        return tuple(value)

    def choice(self, key: str, allowed: Collection[str], *, required: bool = False) -> str | None:
        """One of a closed set of words."""
        if key not in self.table:
            if required:
                self.missing(key, listed(allowed))
            return None
        value = self.table[key]
        if not isinstance(value, str) or value not in allowed:
            self.refuse(key, listed(allowed), quoted_near(value, allowed))
            return None
        return value

    def choices(self, key: str, allowed: Collection[str]) -> tuple[str, ...] | None:
        """Several of a closed set of words, each once."""
        given = self.texts(key)
        if given is None:
            return None
        for word in given:
            if word not in allowed:
                self.fault(key, given=shown(word), allowed=listed(allowed), near=quoted_near(word, allowed))
        if len(set(given)) < len(given):
            self.refuse(key, "each word once")
        return tuple(word for word in dict.fromkeys(given) if word in allowed)

    def section(self, key: str, kind: str) -> Section | None:
        """The table under a key."""
        if key not in self.table:
            return None
        if not isinstance(self.table[key], Mapping):
            self.refuse(key, f"a table of {listed(KEYS[kind])}")
            return None
        return self.below(self.table[key], key, kind)

    def rows(self, key: str) -> list[tuple[str, Mapping[str, Any]]]:
        """The tables of an array with their keys, numbered from 1; what is no table is a fault."""
        given = self.table.get(key, [])
        if not isinstance(given, list):
            self.refuse(key, f"tables, each headed [[{self.place(key)}]]")
            given = [given] if isinstance(given, Mapping) else []
        named = [(f"{key}.{number}", row) for number, row in enumerate(given, 1)]
        for name, row in named:
            if not isinstance(row, Mapping):
                self.fault(name, given=shown(row), allowed="a table")
        return [(name, row) for name, row in named if isinstance(row, Mapping)]

    def sections(self, key: str, kind: str) -> list[Section]:
        """The tables of an array, all of one kind."""
        return [self.below(row, name, kind) for name, row in self.rows(key)]

    def named(self, key: str) -> Iterator[tuple[str, Section]]:
        """The tables [key.NAME], with their names."""
        given = self.table.get(key, {})
        if not isinstance(given, Mapping):
            self.refuse(key, f"tables, each headed [{key}.NAME]")
            return
        for name, table in given.items():
            if isinstance(table, Mapping):
                yield name, self.below(table, f"{key}.{shown_key(name)}", key)
            else:
                self.fault(f"{key}.{shown_key(name)}", given=shown(table), allowed=f"a table [{key}.NAME]")

    def below(self, table: Mapping[str, Any], key: str, kind: str) -> Section:
        """A table found under a key, read as this kind."""
        return Section(table, kind=kind, path=self.place(key), file=self.file, faults=self.faults)

    def _range(self, key: str, what: str = "a number") -> str:
        return f"{what}, {limit(self.kind, key).words}"

    def _refuse_unknown(self, known: Sequence[str]) -> None:
        for key in self.table:
            if key not in known:
                self.fault(shown_key(key), given="an unknown key", allowed=listed(known), near=nearest(str(key), known))


def as_number(value: Any) -> float | None:
    """The value as a float if it is a number (true and false are not); too many digits read as infinite."""
    if isinstance(value, bool) or not isinstance(value, int | float):
        return None
    try:
        return float(value)
    except OverflowError:
        return float("inf")


def quoted_near(value: Any, known: Collection[str]) -> str | None:
    """The nearest known name in quotes, for a value that should have been one."""
    near = nearest(value, known) if isinstance(value, str) else None
    return shown(near) if near else None


def _is_whole(value: Any) -> bool:
    return isinstance(value, int) and not isinstance(value, bool)
