"""What stands for a character that the terminal cannot show: its like in ASCII, so that no sign is lost."""

from __future__ import annotations

import codecs
import sys
from typing import Any

LIKE = dict(zip("−–—‐’°²³·×…≤≥≈─│┌┐└┘═ετρσμ", "----' 23.x.<>~-|++++=etrsu", strict=True)) | {"±": "+-", "φ": "phi"}
"""One character for one, so that columns stay in line; two for a sign that stands in sentences only."""


def _like(error: UnicodeError) -> tuple[str, int]:
    if not isinstance(error, UnicodeEncodeError):
        raise error
    return "".join(map(_nearest, error.object[error.start : error.end])), error.end


def _nearest(character: str) -> str:
    """Its like, or the letter without its accent, or a question mark."""
    import unicodedata

    bare = unicodedata.normalize("NFKD", character)[0]
    return LIKE.get(character) or (bare if bare.isascii() else "?")


HANDLER = "igu.plain"
codecs.register_error(HANDLER, _like)


def tolerate_narrow_encodings() -> None:
    """Characters that the terminal cannot show are replaced by their like instead of ending the run."""
    for stream in (sys.stdout, sys.stderr):
        reconfigure: Any = getattr(stream, "reconfigure", None)
        if reconfigure is not None:
            reconfigure(errors=HANDLER)
