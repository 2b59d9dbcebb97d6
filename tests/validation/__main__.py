"""Write docs/validation.md and say which rows do not hold."""

import sys
from pathlib import Path

from tests.validation.check import markdown
from tests.validation.rows import all_rows

if __name__ == "__main__":
    rows = all_rows()
    Path(__file__).parents[2].joinpath("docs/validation.md").write_text(markdown(rows), encoding="utf-8")
    outside = [
        f"{row.topic}: {row.what}: {row.published}, computed {row.computed:.6g}" for row in rows if not row.as_stated
    ]
    print(f"{len(rows)} rows, {len(outside)} outside their tolerance", *outside, sep="\n")
    sys.exit(bool(outside))
