"""A case: one unit, the conditions it is solved under, and what is asked of the studies; read from a file or a
table."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from igu.errors import CaseError, ModelError
from igu.model.casefile.conditions import read_conditions
from igu.model.casefile.definitions import read_definitions, read_used_files
from igu.model.casefile.faults import Faults, shown
from igu.model.casefile.files import read_toml
from igu.model.casefile.layers import read_unit, unit_notes
from igu.model.casefile.names import Names
from igu.model.casefile.paths import patched
from igu.model.casefile.section import Section
from igu.model.casefile.studies import (
    read_compare,
    read_frame,
    read_loads,
    read_seek,
    read_sweep,
    read_tolerance,
)
from igu.model.catalogue import Library
from igu.model.conditions import Conditions
from igu.model.study_tables import Compare, Frame, Loads, Seek, Sweep, Tolerance, Vary
from igu.model.unit import Unit


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
    case = case_from_table(table, file=str(path), folder=Path(path).parent)
    _try_sweep(case)
    return case


def case_from_table(table: Mapping[str, Any], *, file: str, folder: Path) -> Case:
    """Validate the table of a case; `file` is what faults are named by, files under `use` are looked for in `folder`.

    Raises
    ------
    CaseError    With every fault.
    """
    faults = Faults()
    root = Section(table, kind="case", path="", file=file, faults=faults)
    names = Names()
    read_used_files(root, names, folder)
    read_definitions(root, names)
    title = root.text("title")
    unit = read_unit(root, names)
    known, conditions = read_conditions(root, unit)
    studies: dict[str, Any] = {
        "compare": read_compare(root, names, known, None if unit is None else 2 * len(unit.panes)),
        "sweep": read_sweep(root, table, known),
        "seek": read_seek(root, names, known),
        "tolerance": read_tolerance(root),
        "frame": read_frame(root),
        "loads": read_loads(root),
    }
    faults.raise_any()
    if unit is None:
        raise CaseError((f"{file}: given no unit; allowed layers that make one",))
    library = names.library()
    return Case(
        file=file,
        title=title or Path(file).stem,
        unit=unit,
        conditions=conditions,
        library=library,
        warnings=tuple(f"{file}: {key} is defined and not used" for key in names.unused(file)),
        notes=tuple(unit_notes(root, unit, library)),
        table=table,
        folder=folder,
        **studies,
    )


def _try_sweep(case: Case) -> None:
    """Refuse a sweep that the case could not follow: every choice of a list is tried on it, both ends of a range."""
    faults = Faults()
    plain = {key: value for key, value in case.table.items() if key not in ("compare", "sweep", "seek", "tolerance")}
    for number, vary in enumerate(case.sweep.vary if case.sweep else (), 1):
        for value in (vary.values[0], vary.values[-1]) if vary.ranged else vary.values:
            _try_value(case, plain, vary, value, place=f"sweep.vary.{number}", faults=faults)
    faults.raise_any()


def _try_value(case: Case, plain: Mapping[str, Any], vary: Vary, value: Any, *, place: str, faults: Faults) -> None:
    try:
        for key in vary.keys:
            plain = patched(plain, key, value)
        case_from_table(plain, file=case.file, folder=case.folder)
    except ModelError as error:
        faults.add(case.file, f"{place}.values", given=shown(value), allowed=f"a value for this path: {error}")
    except CaseError as error:
        for line in error.faults:
            reason = line.removeprefix(f"{case.file}: ")
            faults.add(case.file, place, given=f"the value {shown(value)}", allowed=f"what the case can have; {reason}")
