"""What the marks on sources mean, in one sentence for every report that shows them."""

from __future__ import annotations

import re

MARKS = "Marks: [memory] recalled from the source named, not checked against it; [seen] read in it."


def marks_explained(text: str) -> str:
    """The sentence on the marks where the text has any, else nothing."""
    return MARKS if re.search(r"\[[^\]]*\b(memory|seen)\b", text) else ""
