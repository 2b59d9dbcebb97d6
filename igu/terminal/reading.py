"""Case files of a command line: the faults of all of them at once."""

from __future__ import annotations

from collections.abc import Sequence

from igu.errors import CaseError
from igu.model.case import Case, read_case


def read_cases(paths: Sequence[str]) -> list[Case]:
    """Every case; CaseError with the faults of all files where any has one."""
    cases: list[Case] = []
    faults: list[str] = []
    for path in paths:
        try:
            cases.append(read_case(path))
        except CaseError as error:
            faults += error.faults
    if faults:
        raise CaseError(tuple(faults))
    return cases
