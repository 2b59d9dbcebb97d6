"""README and docs are true: their commands run, their figures are what the program prints."""

import json
import re
import shlex
import textwrap
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


def test_the_python_shown_prints_what_the_command_says(capsys, monkeypatch):
    monkeypatch.chdir(ROOT)
    main(["solve", "cases/reading-room.toml", "--json"])
    results = json.loads(capsys.readouterr().out)["cases"][0]["results"]
    (code,) = blocks("python")
    exec(compile(code, "README", "exec"), {})
    expected = [f"{r['conditions']} {r['U_W_m2K']} {r['solar_factor_g']}" for r in results]
    assert capsys.readouterr().out.splitlines() == expected


def test_the_smallest_case_of_the_help_is_sound_and_solves(capsys, tmp_path):
    assert main(["--help"]) == 0
    shown = textwrap.dedent(capsys.readouterr().out.split("docs/case-file.md and the examples in cases/):")[1])
    path = tmp_path / "first.toml"
    path.write_text(shown.split("then:")[0], encoding="utf-8")
    assert main(["solve", str(path), "--json"]) == 0
    (result,) = json.loads(capsys.readouterr().out)["cases"][0]["results"]
    assert result["U_declared_W_m2K"] == 1.2


ROOTS = {
    "angles": ["cases/reading-room.toml"],
    "compare": ["cases/reading-room.toml"],
    "sweep": ["cases/lake-gap-widths.toml"],
    "service": ["cases/reading-room.toml"],
    "list": [],
}


@pytest.mark.parametrize("command", sorted(ROOTS))
def test_the_roots_of_json_are_described(capsys, monkeypatch, command):
    monkeypatch.chdir(ROOT)
    main([command, *ROOTS[command], "--json"])
    found = json.loads(capsys.readouterr().out)
    (line,) = (line for line in DOCS["output.md"].splitlines() if line.startswith(f"| `{command}`"))
    assert ("a list" in line.split("|")[2]) == isinstance(found, list)
    keys = set(found[0] if isinstance(found, list) else found)
    assert keys == set(re.findall(r"`(\w+)`", line.split("|")[3]))


def test_every_key_of_a_result_is_described(capsys, monkeypatch):
    monkeypatch.chdir(ROOT)
    main(["solve", "cases/reading-room.toml", "--json"])
    document = json.loads(capsys.readouterr().out)
    case = document["cases"][0]
    noon = case["results"][1]
    parts = [noon[name] for name in ("films", "budget")] + [noon[name][0] for name in ("panes", "gaps", "fogging")]
    keys = {key for part in (document, case, case["declaration"], noon, *parts) for key in part}
    words = set(re.findall(r"[A-Za-z]\w*", DOCS["output.md"]))
    assert sorted(keys - words) == []


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
