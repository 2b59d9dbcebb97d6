"""Good cases broken in every way a hand can slip: a case or one-line sentences, never anything else."""

import copy
import datetime
import random
import tomllib
from pathlib import Path

import pytest

from igu.errors import CaseError
from igu.model.case import Case, case_from_table
from igu.model.casefile.keys import KEYS

ROOT = Path(__file__).parents[2]
CASES = {path.stem: tomllib.loads(path.read_text(encoding="utf-8")) for path in sorted((ROOT / "cases").glob("*.toml"))}
WORDS = sorted({key for keys in KEYS.values() for key in keys})
NUMBERS = [0, -1, 1, 2, 3, 40, 0.5, 1e300, 5e-324, 10**400, float("nan"), float("inf"), -float("inf")]
NAMES = ["clear", "soft-single", "argon", "pvb", "en-673", "ansi-nfrc-200", "reference"]
TEXTS = ["", " ", "x\ny", "é", "\0", "\x1b[1m", "face", "layer", ".", "layer.0.gap_mm", "layer.99999999999999999999.x"]
PATHS = ["conditions.x.y", "unit.tilt_deg"]
NESTS = [[], {}, [1], ["a"], [{}], [[]], [{"a": 1}], {"a": 1}, [1, 2], [0], [True], {"argon": 0.5, "air": 0.5},
         {"argon": float("nan")}, {"argon": 1, "\n": 0}, ["unit.tilt_deg"]]  # fmt: skip
VALUES = [True, False, datetime.date(2020, 1, 1), *NUMBERS, *NAMES, *TEXTS, *PATHS, *NESTS]
MUTANTS = 300


def faults(table):
    """The lines the table is refused with, None where it reads as a case."""
    try:
        case = case_from_table(table, file="case.toml", folder=ROOT / "cases")
    except CaseError as error:
        return error.faults
    assert isinstance(case, Case)
    return None


def places(node, at=()):
    yield at
    inner = node.items() if isinstance(node, dict) else enumerate(node) if isinstance(node, list) else ()
    for step, value in inner:
        yield from places(value, (*at, step))


def at(table, path):
    for step in path:
        table = table[step]
    return table


def mutated(source, chance):
    """A copy with up to four slips: a key too many, a value of another kind, a key gone, rows in another order."""
    table = copy.deepcopy(source)
    for _ in range(chance.choice([1, 1, 2, 4])):
        path = chance.choice(list(places(table)))
        here, slip = at(table, path), chance.random()
        if isinstance(here, dict) and slip < 0.5:
            here[chance.choice(WORDS)] = copy.deepcopy(chance.choice(VALUES))
        elif path and slip < 0.8:
            at(table, path[:-1])[path[-1]] = copy.deepcopy(chance.choice(VALUES))
        elif path and isinstance(at(table, path[:-1]), dict):
            del at(table, path[:-1])[path[-1]]
        elif path:
            chance.shuffle(at(table, path[:-1]))
    return table


@pytest.mark.parametrize("name", CASES)
def test_a_broken_case_is_refused_in_single_lines(name):
    chance = random.Random(name)
    found = [faults(mutated(CASES[name], chance)) for _ in range(MUTANTS)]
    assert MUTANTS / 2 < sum(lines is not None for lines in found) < MUTANTS
    assert () not in found
    for line in {line for lines in found if lines for line in lines}:
        assert line.isprintable(), line
        assert ": given " in line, line
        assert "; allowed " in line, line


def has_fixed_keys(path, node):
    """Whether this is a table with keys of the file's own, not names or gases."""
    free = path in [("glass",), ("coating",), ("pane",), ("sheet",)]
    return isinstance(node, dict) and not free and not {"air", "argon", "krypton"} & node.keys()


@pytest.mark.parametrize("name", CASES)
def test_an_unknown_key_in_any_table_is_one_fault_at_its_path(name):
    fixed = [path for path in places(CASES[name]) if has_fixed_keys(path, at(CASES[name], path))]
    assert len(fixed) > 3
    for path in fixed:
        table = copy.deepcopy(CASES[name])
        at(table, path)["slip"] = 1
        (line,) = faults(table)
        shown = ".".join(str(step + 1) if isinstance(step, int) else step for step in (*path, "slip"))
        assert line.startswith(f"case.toml: {shown}: given an unknown key; allowed "), line


def test_every_fault_at_once_over_all_tables():
    """One slip in each table of a case gives as many lines: no table hides another."""
    table = copy.deepcopy(CASES["reading-room"])
    table["unit"] = {"tilt_deg": 200}
    table["layer"][0]["thickness_mm"] = 2000
    table["layer"][1]["gas"] = {"argon": 0.9}
    table["layer"][2]["glass"] = "grean"
    table["sealed"] = {"vented": "no"}
    table["coating"] = {"own": {"emissivity": 2}}
    table["conditions"][0]["indoor_C"] = 500
    table["conditions"][1]["set"] = "en-674"
    table["compare"] = {"faces": [9, 9.5]}
    table["tolerance"] = {"seed": -1}
    table["frame"] = {"edge_C": True}
    table["loads"] = {"wind_Pa": "1 kPa"}
    assert [line.split(": ")[1] for line in faults(table)] == [
        "coating.own.emissivity", "unit.tilt_deg", "layer.1.thickness_mm", "layer.2.gas", "layer.3.glass",
        "sealed.vented", "conditions.1.indoor_C", "conditions.2.set", "compare.faces", "tolerance.seed", "frame.edge_C",
        "loads.wind_Pa",
    ]  # fmt: skip
