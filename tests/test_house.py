"""The floors hold: a module imports only from below, and a common run loads nothing heavy."""

import ast
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).parent.parent
FLOORS = ["data", "laws", "model", "solver", "ratings", "studies", "terminal"]
MODULES = sorted(p for p in (ROOT / "igu").rglob("*.py") if p.parent != ROOT / "igu")


def imported(path: Path) -> set[str]:
    names = set()
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.ImportFrom) and node.module:
            names.add(node.module)
        if isinstance(node, ast.Import):
            names |= {alias.name for alias in node.names}
    return {name for name in names if name.startswith("igu.")}


@pytest.mark.parametrize("path", MODULES, ids=lambda p: str(p.relative_to(ROOT)))
def test_a_module_imports_only_from_its_own_floor_and_below(path):
    floor = FLOORS.index(path.relative_to(ROOT / "igu").parts[0])
    for name in imported(path):
        part = name.split(".")[1]
        if part in FLOORS:
            assert FLOORS.index(part) <= floor, f"{path.name} imports {name}"


@pytest.mark.parametrize("path", [p for p in MODULES if "laws" in p.parts], ids=lambda p: p.name)
def test_laws_have_no_classes_but_plain_tuples_of_results(path):
    for node in ast.parse(path.read_text(encoding="utf-8")).body:
        if isinstance(node, ast.ClassDef):
            assert [ast.unparse(base) for base in node.bases] == ["NamedTuple"]


def test_importing_the_package_imports_not_even_numpy():
    code = "import sys, igu; assert 'numpy' not in sys.modules; igu.rate; assert 'numpy' in sys.modules"
    subprocess.run([sys.executable, "-c", code], check=True, cwd=ROOT)


@pytest.mark.parametrize("command", [["solve", "cases/reading-room.toml"], ["check", "cases/reading-room.toml"]])
def test_a_common_run_loads_nothing_heavy(command):
    code = (
        "import sys; from igu.terminal.main import main; "
        f"code = main({command!r}); "
        "heavy = {'CoolProp', 'scipy', 'matplotlib', 'tabulate', 'hypothesis'} & set(sys.modules); "
        "assert not heavy, heavy; sys.exit(code)"
    )
    subprocess.run([sys.executable, "-c", code], check=True, cwd=ROOT, capture_output=True)


def test_no_file_names_a_path_of_a_machine_or_a_registry():
    words = ["/" + "home/", "/" + "root/", "/" + "work/", "pypi" + ".org", "pythonhosted" + ".org"]
    files = [p for p in ROOT.rglob("*") if p.suffix in {".py", ".md", ".toml", ".csv"} and not hidden(p)]
    assert files
    for path in files:
        text = path.read_text(encoding="utf-8", errors="replace")
        assert not [word for word in words if word in text], path


def hidden(path: Path) -> bool:
    return any(part.startswith(".") or part in {"build", "igu.egg-info"} for part in path.relative_to(ROOT).parts)
