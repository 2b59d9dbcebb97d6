"""Write what the reader says of every invalid case beside it; to be read, not believed: `python -m
tests.regenerate.invalid_cases`."""

import os
from pathlib import Path

from igu.errors import CaseError
from igu.model.case import read_case

if __name__ == "__main__":
    os.chdir(Path(__file__).parents[1] / "invalid")
    for path in sorted(Path().glob("*.toml")):
        try:
            read_case(path)
        except CaseError as error:
            path.with_suffix(".expected.txt").write_text("\n".join(error.faults) + "\n", encoding="utf-8")
