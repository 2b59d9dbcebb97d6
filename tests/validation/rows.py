"""All rows, topic by topic."""

from __future__ import annotations

from tests.validation import convection, gases, humidity, service, solar, studies, textbooks, u_values, vacuum
from tests.validation.check import Row

TOPICS = (u_values, textbooks, studies, gases, convection, vacuum, solar, service, humidity)


def all_rows() -> list[Row]:
    """Every row of the validation."""
    return [row for topic in TOPICS for row in topic.rows()]
