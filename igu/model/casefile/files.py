"""Files in, tables out: whatever is wrong with a file becomes a sentence."""

from __future__ import annotations

import os
import re
import tomllib
from pathlib import Path
from typing import Any

from igu.model.casefile.faults import Faults

LARGEST = 1_000_000
"""Bytes; no case file of use comes near, and a file of another kind is refused before it is parsed."""

_PLACE = re.compile(r"\s*\(at (?:line (\d+), column (\d+)|end of document)\)$")


def read_text(path: Path, faults: Faults, *, wanted: str, largest: int = LARGEST) -> str | None:
    """Text of a UTF-8 file; None, and a fault, where there is none to be had."""
    try:
        return _text(path, largest)
    except FileNotFoundError:
        given = "no file of this name"
    except UnicodeDecodeError as error:
        given = f"bytes that are not UTF-8, at byte {error.start + 1}"
    except (OSError, ValueError) as error:
        given = getattr(error, "strerror", None) or str(error)
    faults.add(str(path), "", given=given, allowed=wanted)
    return None


def read_toml(path: Path, faults: Faults, *, wanted: str = "a case file in TOML") -> dict[str, Any] | None:
    """Table of a TOML file; None, and a fault, where it does not read."""
    text = read_text(path, faults, wanted=wanted)
    return None if text is None else parse_toml(text, str(path), faults, wanted=wanted)


def parse_toml(text: str, file: str, faults: Faults, *, wanted: str = "a case file in TOML") -> dict[str, Any] | None:
    """Table of a TOML text; None, and a fault, where it does not read."""
    try:
        table = tomllib.loads(text)
    except RecursionError:
        faults.add(file, "", given="tables or lists nested too deep", allowed=wanted)
    except ValueError as error:
        given, allowed = _sentence(str(error))
        faults.add(file, _line(str(error)), given=given, allowed=allowed)
    else:
        if table:
            return table
        faults.add(file, "", given="an empty file", allowed=wanted)
    return None


def _text(path: Path, largest: int) -> str:
    if path.is_dir():
        raise ValueError("a directory")
    if path.exists() and not path.is_file():
        raise ValueError("something that is no ordinary file")
    if os.path.getsize(path) > largest:
        raise ValueError(f"a file of {os.path.getsize(path)} bytes, more than {largest}")
    return path.read_bytes().decode("utf-8-sig")


def _line(message: str) -> str:
    found = _PLACE.search(message)
    return f"line {found[1]}" if found and found[1] else ""


def _sentence(message: str) -> tuple[str, str]:
    """What was given and what is allowed, from the TOML reader's message."""
    what = _PLACE.sub("", message)
    if any(word in what for word in ("overwrite", "twice", "mutate")):
        return "a key or table a second time", "each once"
    end = " at the end of the file" if "end of document" in message else ""
    return f"text that is not TOML{end} ({what})", "TOML"
