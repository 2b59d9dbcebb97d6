"""Files that are no case file: a sentence each, for the case itself and for a file it uses."""

import pytest

from igu.errors import CaseError
from igu.model.case import read_case
from igu.model.casefile.files import LARGEST

CASE = """
use = ["other.toml"]
[[layer]]
glass = "clear"
thickness_mm = 4
[[conditions]]
set = "en-673"
"""

LATIN = 'title = "Straße"\n'.encode("latin-1")
UTF16 = "[unit]\nwidth_m = 1.0\n".encode("utf-16")
HUGE = b"#" * (LARGEST + 1)
DEEP = b"title = " + b"[" * 5000
DIGITS = b"[unit]\nwidth_m = " + b"9" * 5000


def faults(path):
    with pytest.raises(CaseError) as caught:
        read_case(path)
    return caught.value.faults


@pytest.mark.parametrize(
    ("content", "words"),
    [
        (LATIN, "bytes that are not UTF-8, at byte 14"),
        (UTF16, "bytes that are not UTF-8, at byte 1"),
        (HUGE, f"a file of {LARGEST + 1} bytes, more than {LARGEST}"),
        (DEEP, "tables or lists nested too deep"),
        (DIGITS, "text that is not TOML"),
        (b"", "an empty file"),
        (b"\xef\xbb\xbf", "an empty file"),
        (b"\0", "text that is not TOML"),
    ],
    ids=["latin-1", "utf-16", "huge", "deep", "digits", "empty", "mark only", "nul"],
)
def test_what_is_no_case_file_gets_one_sentence(tmp_path, content, words):
    path, other = tmp_path / "case.toml", tmp_path / "other.toml"
    other.write_bytes(content)
    path.write_text(CASE, encoding="utf-8")
    for place, wanted in ((other, other), (path, other)):
        (line,) = faults(place)
        assert line.startswith(f"{wanted}: ")
        assert words in line


def test_a_byte_order_mark_is_no_fault(tmp_path):
    path = tmp_path / "case.toml"
    path.write_bytes(b"\xef\xbb\xbf" + CASE.replace('use = ["other.toml"]', "").encode())
    assert len(read_case(path).unit.panes) == 1


@pytest.mark.parametrize("name", ["missing.toml", "a\0b.toml", "n" * 300 + ".toml", ""])
def test_names_that_lead_to_no_file(tmp_path, name):
    (line,) = faults(tmp_path / name)
    assert "; allowed a case file in TOML" in line
    assert line.isprintable()


def test_a_file_that_uses_itself_defines_nothing_twice_in_silence(tmp_path):
    path = tmp_path / "case.toml"
    path.write_text(CASE.replace("other.toml", "case.toml"), encoding="utf-8")
    lines = faults(path)
    assert {line.split(": ")[1] for line in lines} == {"use", "layer", "conditions"}
