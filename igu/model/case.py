"""A case: one unit, the conditions it is solved under, and what is asked of the studies; read from a file or a
table."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any

from igu.errors import CaseError, ModelError
from igu.model.casefile.conditions import read_conditions
from igu.model.casefile.definitions import read_definitions, read_used_files
from igu.model.casefile.faults import Faults, shown
from igu.model.casefile.files import read_toml
from igu.model.casefile.layers import read_unit, unit_notes
from igu.model.casefile.names import Names
from igu.model.casefile.paths import patched
from igu.model.casefile.section import Section
from igu.model.catalogue import Library
from igu.model.conditions import Conditions
from igu.model.unit import Unit

if TYPE_CHECKING:
    from igu.model.study_tables import Compare, Frame, Loads, Seek, Sweep, Tolerance

STUDIES = ("compare", "sweep", "seek", "tolerance")
TABLES_OF_STUDIES = (*STUDIES, "frame", "loads")

MOST_TRIED = 100
"""Values of one list that are tried on the case before any solve; of a longer one, and of a range, both ends."""


@dataclass(frozen=True, eq=False)
class Case:
    """A case without faults.

    `library` is everything it can name, the catalogue and its own; `warnings` and `notes` (defaults taken, where the
    data come from) are sentences; `table` and `folder` are what a sweep needs to read it again with other values. The
    study tables are None where the file has none.
    """

    file: str
    title: str
    unit: Unit
    conditions: tuple[Conditions, ...]
    library: Library
    warnings: tuple[str, ...]
    notes: tuple[str, ...]
    table: Mapping[str, Any]
    folder: Path
    compare: Compare | None = None
    sweep: Sweep | None = None
    seek: Seek | None = None
    tolerance: Tolerance | None = None
    frame: Frame | None = None
    loads: Loads | None = None


def read_case(path: str | Path) -> Case:
    """Read and validate a case file.

    Raises
    ------
    CaseError    With every fault of the file and of the files it uses.
    """
    faults = Faults()
    table = read_toml(Path(path), faults)
    faults.raise_any()
    assert table is not None
    case, sweep, faults = _read(table, str(path), Path(path).parent)
    if sweep is not None:
        _try_sweep(sweep, table, file=str(path), folder=Path(path).parent, faults=faults)
    return _without_fault(case, faults, str(path))


def case_from_table(table: Mapping[str, Any], *, file: str, folder: Path) -> Case:
    """Validate the table of a case; `file` is what faults are named by, files under `use` are looked for in `folder`.

    Raises
    ------
    CaseError    With every fault.
    """
    case, _, faults = _read(table, file, folder)
    return _without_fault(case, faults, file)


def _without_fault(case: Case | None, faults: Faults, file: str) -> Case:
    faults.raise_any()
    if case is None:
        raise CaseError((f"{file}: given no unit; allowed layers that make one",))
    return case


def _read(table: Mapping[str, Any], file: str, folder: Path) -> tuple[Case | None, Sweep | None, Faults]:
    """The case, None where it has faults; what could be read of its sweep; and the faults."""
    faults = Faults()
    root = Section(table, kind="case", path="", file=file, faults=faults)
    names = Names()
    read_used_files(root, names, folder)
    read_definitions(root, names)
    title = root.text("title")
    unit, parts = read_unit(root, names)
    known, conditions = read_conditions(root, parts)
    studies = _studies(root, names, known, parts.count)
    if unit is None or len(faults):
        return None, studies.get("sweep"), faults
    library = names.library()
    case = Case(
        file=file,
        title=title or Path(file).stem,
        unit=unit,
        conditions=conditions,
        library=library,
        warnings=(*faults.warnings, *(f"{file}: {key} is defined and not used" for key in names.unused(file))),
        notes=tuple(unit_notes(root, unit, library)),
        table=table,
        folder=folder,
        **studies,
    )
    return case, case.sweep, faults


def _studies(root: Section, names: Names, conditions: list[str], panes: int | None) -> dict[str, Any]:
    """The study tables by name; a case without any does not pay for their reader."""
    if not any(key in root for key in TABLES_OF_STUDIES):
        return {}
    from igu.model.casefile import studies

    return {
        "compare": studies.read_compare(root, names, conditions, None if panes is None else 2 * panes),
        "sweep": studies.read_sweep(root, root.table, conditions),
        "seek": studies.read_seek(root, names, conditions, panes),
        "tolerance": studies.read_tolerance(root),
        "frame": studies.read_frame(root),
        "loads": studies.read_loads(root),
    }


def _try_sweep(sweep: Sweep, table: Mapping[str, Any], *, file: str, folder: Path, faults: Faults) -> None:
    """Refuse a sweep that the case could not follow: each quantity is tried with the first value of the other, and what
    the case says of a point, and does not say without it, is recorded once."""
    bare = {key: value for key, value in table.items() if key not in STUDIES}
    said = set(faults.lines)
    first = [vary.values[0] for vary in sweep.vary]
    for k, vary in enumerate(sweep.vary):
        ends_only = vary.ranged or len(vary.values) > MOST_TRIED
        for value in (vary.values[0], vary.values[-1]) if ends_only else vary.values:
            point = [*first[:k], value, *first[k + 1 :]]
            given = " with ".join(f"{v.keys[0]} = {shown(x)}" for v, x in zip(sweep.vary, point, strict=True))
            for reason in _reasons_against(sweep, point, bare, file, folder):
                if reason not in said:
                    words = reason.removeprefix(f"{file}: ")
                    faults.add(file, "sweep.vary", given=given, allowed=f"what the case can have; {words}")
                said.add(reason)


def _reasons_against(
    sweep: Sweep, point: list[Any], table: Mapping[str, Any], file: str, folder: Path
) -> tuple[str, ...]:
    """What the case says of these values."""
    try:
        for vary, value in zip(sweep.vary, point, strict=True):
            for key in vary.keys:
                table = patched(table, key, value)
    except ModelError as error:
        return (str(error),)
    return _read(table, file, folder)[2].lines
