"""All rows, topic by topic."""

from __future__ import annotations

from tests.validation import gases, service, solar, u_values
from tests.validation.check import Row


def all_rows() -> list[Row]:
    """Every row of the validation."""
    return [row for topic in (u_values, gases, solar, service) for row in topic.rows()]
