"""Write docs/validation.md."""

from pathlib import Path

from tests.validation.check import markdown
from tests.validation.rows import all_rows

if __name__ == "__main__":
    Path(__file__).parents[2].joinpath("docs/validation.md").write_text(markdown(all_rows()), encoding="utf-8")
