"""README and docs are true: their commands run, their figures are what the program prints."""

import re
import shlex
from importlib.util import find_spec
from pathlib import Path

import pytest

from igu.terminal.main import main

ROOT = Path(__file__).parents[2]
README = (ROOT / "README.md").read_text(encoding="utf-8")
DOCS = {
    p.name: p.read_text(encoding="utf-8")
    for p in [ROOT / "README.md", ROOT / "DEVELOPERS.md", *(ROOT / "docs").glob("*.md")]
}
COMMANDS = sorted({c for text in DOCS.values() for c in re.findall(r"`(igu [a-z]+ cases/[^`…]+)`", text)})


@pytest.mark.parametrize("command", COMMANDS)
def test_every_command_shown_runs(capsys, monkeypatch, command):
    monkeypatch.chdir(ROOT)
    words = shlex.split(command)[1:]
    assert main(words) == 0
    assert capsys.readouterr().out


@pytest.mark.parametrize("module", sorted({m for t in DOCS.values() for m in re.findall(r"`python -m ([\w.]+)", t)}))
def test_every_module_shown_exists(module):
    assert find_spec(module) is not None


def blocks(language):
    return re.findall(rf"```{language}\n(.*?)```", README, re.DOTALL)


def test_the_case_shown_is_the_case_shipped():
    assert blocks("toml") == [(ROOT / "cases/reading-room.toml").read_text(encoding="utf-8")]


def test_the_blocks_shown_are_what_is_printed(capsys, monkeypatch):
    monkeypatch.chdir(ROOT)
    solve, compare = blocks("text")
    main(["solve", "cases/reading-room.toml"])
    assert capsys.readouterr().out.startswith(solve.rstrip() + "\n\nNote on the calculation")
    main(["compare", "cases/reading-room.toml"])
    assert capsys.readouterr().out == compare


def test_the_two_commands_are_one_line_each_and_name_what_exists():
    install, test = blocks("sh")
    for line in (install, test):
        assert line.count("\n") == 1
        assert line.startswith("python3 -m venv .venv && .venv/bin/pip install ")
    assert install.strip().endswith(".venv/bin/igu solve cases/reading-room.toml")
    assert test.strip().endswith(".venv/bin/python -m pytest")


def test_every_document_named_exists():
    for text in DOCS.values():
        for name in re.findall(
            r"`(docs/[\w-]+\.md|DEVELOPERS\.md|cases/[\w-]+\.toml|igu/[\w/]+\.py|tests/[\w/]+\.py)`", text
        ):
            assert (ROOT / name).exists(), name
