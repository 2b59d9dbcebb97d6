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

_SLIPS = (
    (r"[“”„‘’«»]", 'straight quotation marks, "…"'),
    (r"=\s*[−–]", "a hyphen as the minus sign"),
    (r"=\s*([-+]?\d+),(\d+)", r"a point in place of the decimal comma: \1.\2"),
    (r"=\s*[-+]?(\.\d|\d+\.(?!\d))", "a digit before and after the decimal point"),
    (r"=\s*[-+]?0\d", "a number that does not begin with 0"),
    (r"=\s*[-+]?\d+(\.\d+)?\s*[^\W\d_]|=\s*[-+]?\d+(\.\d+)?\s*[%°]", "the number alone: its unit stands in the key"),
    (r"=\s*(True|TRUE|False|FALSE|yes|no)\b", "true or false, in small letters"),
    (r"=\s*([^\W\d][^\"'#,;{}=\[\]]*?)\s*($|[,;}\]#])", r'text in quotation marks: "\1"'),
    (r"^\s*//", "# before a comment"),
    (r"=\s*$", "a value after ="),
)
"""Slips of the pen in a line that TOML does not read, and what should stand there."""

_REMEDIES = {
    "Unclosed array": "a comma between the values and ] at the end",
    "Unclosed inline": "a comma between the entries and } at the end, on one line",
    "Unescaped '\\'": "/ in place of \\, or single quotation marks",
    "Expected ']": "[name] at the head of a table, [[name]] at the head of an entry of a list",
}
"""What should stand in such a line, by how the TOML reader's message begins."""

_LISTS = ("layer", "conditions", "vary", "layers")
"""Tables headed in double brackets, one for each entry of a list."""


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
        given, allowed = _sentence(str(error), text)
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


def _sentence(message: str, text: str) -> tuple[str, str]:
    """What was given and what is allowed, from the TOML reader's message and the line it means."""
    what = _PLACE.sub("", message)
    if any(word in what for word in ("overwrite", "twice", "mutate")):
        heads = [f"[[{name}]]" for name in _LISTS if f"'{name}'" in what]
        return (
            "a key or table a second time",
            f"each once; entries of a list are headed {heads[-1]}" if heads else "each once",
        )
    end = " at the end of the file" if message.endswith("(at end of document)") else ""
    return f"text that is not TOML{end} ({what})", _remedy(what, _meant_line(message, text))


def _meant_line(message: str, text: str) -> str:
    """The line of the text that the message means, without a comment."""
    found, lines = _PLACE.search(message), text.splitlines() or [""]
    number = int(found[1]) if found and found[1] else len(lines)
    return re.sub(r"#[^\"']*$", "", lines[min(number, len(lines)) - 1])


def _remedy(what: str, line: str) -> str:
    """What should stand in a line that TOML does not read."""
    if line.count('"') % 2:
        return "a quotation mark before and after a text"
    for beginning, words in _REMEDIES.items():
        if what.startswith(beginning):
            return words
    for pattern, words in _SLIPS:
        if found := re.search(pattern, line):
            return found.expand(words)
    return "lines of the form key = value" if what.startswith("Expected '='") else "TOML"
