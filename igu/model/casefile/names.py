"""The names a case can use: the catalogue's and its own; which it has used, and where each was defined."""

from __future__ import annotations

from typing import Any

from igu.model.casefile.faults import listed, shown
from igu.model.casefile.section import Section, quoted_near
from igu.model.catalogue import Library, catalogue

KINDS = ("glass", "coating", "pane", "sheet")
"""Kinds of definition a case file may have."""


class Names:
    """Entries by kind and name, None for a definition that has faults, so that its use adds no second one. Where a file
    of definitions did not read, not `complete`: a name that nothing defines may stand there and is no fault."""

    def __init__(self) -> None:
        known = catalogue()
        self.entries: dict[str, dict[str, Any]] = {
            "glass": dict(known.glasses),
            "coating": dict(known.coatings),
            "interlayer": dict(known.interlayers),
            "pane": {},
            "sheet": {},
        }
        self.complete = True
        self._files: dict[tuple[str, str], str] = {}
        self._used: set[tuple[str, str]] = set()

    def define(self, section: Section, kind: str, name: str, entry: Any) -> None:
        """Add a definition; a name of the catalogue or one defined before is a fault."""
        if name in self.entries[kind]:
            where = self._files.get((kind, name))
            given = f"a second time, first in {where}" if where else "a name of the catalogue"
            section.fault("", given=given, allowed="a name of its own")
            return
        self.entries[kind][name] = entry
        self._files[kind, name] = section.file

    def find(self, section: Section, key: str, kind: str) -> str | None:
        """The name under a key, if it is defined without fault."""
        name = section.text(key)
        return None if name is None else self.check(section, key, kind, name)

    def check(self, section: Section, key: str, kind: str, name: str) -> str | None:
        """The name, if it is defined without fault; one that nothing defines is a fault at the key."""
        known = self.entries[kind]
        self._used.add((kind, name))
        if name not in known and (self.complete or kind not in KINDS):
            article = "an" if kind == "interlayer" else "a"
            allowed = f"{article} {kind} defined here or in the catalogue: {listed(known)}"
            section.fault(key, given=shown(name), allowed=allowed, near=quoted_near(name, known))
        return name if known.get(name) is not None else None

    def unused(self, file: str) -> list[str]:
        """Key paths of what this file defines and nothing uses."""
        return [f"{kind}.{name}" for (kind, name), where in self._files.items()
                if where == file and (kind, name) not in self._used]  # fmt: skip

    def library(self) -> Library:
        """All entries as the studies use them; only of a case without faults."""
        return Library(
            glasses=self.entries["glass"],
            coatings=self.entries["coating"],
            interlayers=self.entries["interlayer"],
            panes=self.entries["pane"],
            condition_sets=catalogue().condition_sets,
        )
