"""The printed report: it fits 80 columns whatever the case, its labels say what a figure is, nothing is said twice."""

import math
import re
from pathlib import Path

import pytest

from igu.terminal.main import main
from igu.terminal.page.text import wrapped

ROOT = Path(__file__).parents[2]


@pytest.fixture(autouse=True)
def _at_the_top(monkeypatch):
    monkeypatch.chdir(ROOT)


def printed(capsys, *words):
    code = main(list(words))
    out, err = capsys.readouterr()
    assert (code, err) == (0, "")
    return out


NAME = "a condition with quite a long name, as in a specification (lot 7, façade north-north-west)"
SUNNY = "sun_W_m2 = 800\nincidence_deg = 47.5\ndiffuse_share = 0.15\n"
LAYERS = {
    "plain": 'glass = "clear"\nthickness_mm = 4\n',
    "coated": 'glass = "clear"\nthickness_mm = 4\ncoating_out = "soft-single"\n',
    "laminated": 'plies = [{ glass = "clear", thickness_mm = 12.123456 }, '
    '{ interlayer = "ionoplast", thickness_mm = 0.89 }, { glass = "low-iron", thickness_mm = 4 }]\n',
    "measured": 'pane = "a-pane-with-quite-a-long-name"\ncoated_face = "in"\n',
    "sheet": 'sheet = "a-sheet-with-quite-a-long-name"\n',
}  # fmt: skip
MEASURED = (
    "[pane.a-pane-with-quite-a-long-name]\nthickness_mm = 6\nemissivity_coated_side = 0.03\n"
    "emissivity_glass_side = 0.837\nsolar_transmittance = 0.4\n"
    "solar_reflectance_coated_side = 0.4\nsolar_reflectance_glass_side = 0.3\ninside_only = false\n"
)
SHEET = (
    "[sheet.a-sheet-with-quite-a-long-name]\nthickness_mm = 0.05\nconductivity_W_mK = 0.2\nemissivity = 0.5\n"
    "longwave_transmittance = 0.3\nsolar_transmittance = 0.8\nsolar_reflectance = 0.1\n"
)
GAPS = {
    "mixture": "gap_mm = 12.5\ngas = { argon = 0.333333, krypton = 0.333333, air = 0.233334, xenon = 0.1 }\n",
    "vacuum": "gap_mm = 0.2\nvacuum = { pressure_Pa = 0.1 }\n"
    "pillars = { pitch_mm = 20, radius_mm = 0.25, conductivity_W_mK = 20 }\n",
}


def odd_case(path, panes, kind, gap, tilt, conditions):
    """A case of many panes, long names and mixtures, under conditions with sky and with sun."""
    first = LAYERS["plain"] if kind in ("coated", "sheet") else LAYERS[kind]
    middle = [LAYERS[kind]] * (panes - 2)
    last = [LAYERS["plain"] if kind == "sheet" else LAYERS[kind]] * (panes > 1)
    text = f"title = {NAME!r}\n[unit]\nheight_m = 1.5\ntilt_deg = {tilt}\n[[layer]]\n"
    text += f"[[layer]]\n{GAPS[gap]}[[layer]]\n".join([first, *middle, *last])
    text += {"measured": MEASURED, "sheet": SHEET}.get(kind, "")
    for k in range(conditions):
        extra = SUNNY if k % 2 else "sky_C = -40\nground_C = -20\nindoor_humidity_pct = 45\n"
        text += f'[[conditions]]\nname = "{NAME} {k}"\noutdoor_C = {4 * k - 20}\nindoor_C = 21\nwind_m_s = 3\n{extra}'
    path.write_text(text, encoding="utf-8")
    return str(path)


@pytest.mark.parametrize("panes", [1, 3, 8])
@pytest.mark.parametrize(("kind", "gap", "tilt", "conditions"), [
    ("plain", "mixture", 0, 6), ("coated", "mixture", 45, 5), ("laminated", "mixture", 180, 4),
    ("measured", "vacuum", 90, 4), ("sheet", "mixture", 90, 4), ("coated", "vacuum", 90, 1),
])  # fmt: skip
def test_whatever_the_case_80_columns_hold_it(capsys, tmp_path, panes, kind, gap, tilt, conditions):
    kind = "plain" if panes == 1 and kind == "sheet" else kind
    path = odd_case(tmp_path / "c.toml", panes, kind, gap, tilt, conditions)
    for command in ("check", "solve", "angles"):
        out = printed(capsys, command, path)
        assert max(len(line) for line in out.splitlines()) <= 80
    assert f"A{panes}" in out
    out = printed(capsys, "solve", path)
    assert out.count("\nU, W/(m²K)") == out.count("  ROOM, air") == math.ceil(conditions / 3)
    assert out.count(" specification") > conditions  # a long word of a name stays whole over both tables
    words = " ".join(out.split())
    assert words.count("take the angular shape") == (kind in ("measured", "sheet"))  # once, of two sunny conditions
    assert words.count("known by band values stands beside") == (kind == "sheet" or (kind == "measured" and panes > 1))


def rows(out):
    """Label and cells of every row of figures; a label without cells goes ahead of the rows beneath it."""
    table = out.split("\n\n")[3].splitlines()
    return [(line[:34].strip(), line[34:].split()) for line in table]


def test_labels_say_what_a_figure_is(capsys):
    table = rows(printed(capsys, "solve", "cases/reading-room.toml"))
    labels = [label for label, _ in table]
    heat = labels.index("Heat to the room, W/m²")
    assert table[heat][1] == []
    assert table[heat + 1] == ("by convection and long wave", ["−57.9", "51.7"])
    inward = labels.index("Inward-flowing fraction (tangent)")
    assert [label[:2] for label in labels[inward + 1 : inward + 3]] == ["N1", "N2"]
    gains = labels.index("What the room gains, W/m²")
    parts = [float(cells[0]) for _, cells in table[gains + 1 : gains + 5]]
    assert sum(parts[:3]) == pytest.approx(parts[3], abs=0.16)
    assert parts[1] + parts[2] == pytest.approx(51.7, abs=0.11)


def test_what_u_refers_to_and_how_the_sun_stands_are_shown_where_they_matter(capsys):
    """By hand: h_c 4 + 4 V = 8, h_r the film's own, air -2, radiant -12 degrees Celsius."""
    out = printed(capsys, "solve", "cases/highland-facade.toml")
    table = dict(rows(out))
    assert table["environment outdoors, °C"] == ["−5.1", "36.0"]
    assert f"{(8.0 * -2.0 + 3.56 * -12.0) / (8.0 + 3.56):.1f}" == "-5.1"
    assert "outdoors 8.00 + 3.56" in " ".join(out.split())
    assert "environment in the room, °C" not in table
    assert table["Sun at incidence, °"] == ["0", "25", "0"]
    assert table["Diffuse share of the sun"] == ["0.00", "0.15", "0.00"]
    plain = printed(capsys, "solve", "cases/reading-room.toml")
    assert "environment" not in plain.split("Note on the calculation")[0]
    assert "incidence, °" not in plain


def test_the_note_says_everything_once_and_explains_its_marks(capsys):
    note = " ".join(printed(capsys, "solve", "cases/reading-room.toml").split("Note on the calculation")[1].split())
    assert note.count("3.6 + 4.1") == note.count("3.6 + 4.4") == note.count("ASTM G173") == 1
    assert note.count("[memory] recalled") == 1
    assert "[memory] recalled" not in printed(capsys, "solve", "cases/film-winter.toml")


def test_a_single_pane_hears_nothing_of_gaps(capsys):
    out = printed(capsys, "solve", "cases/retrofit-single.toml")
    assert "sealed" not in out
    assert "gaps without" not in out
    assert "frosts from 9 % humidity; FOGS AND FREEZES, 19.1 K below the dew point" in " ".join(out.split())


COLD = """
layer = [{ glass = "clear", thickness_mm = 4 }]
[[conditions]]
outdoor_C = -30
indoor_C = 20
wind_m_s = 4
indoor_humidity_pct = %g
"""


def test_a_face_frosts_at_its_frost_point_alone(capsys, tmp_path):
    for humidity, words in ((10, "FROSTS"), (40, "FOGS AND FREEZES")):
        path = tmp_path / f"{humidity}.toml"
        path.write_text(COLD % humidity, encoding="utf-8")
        out = " ".join(printed(capsys, "solve", str(path)).split())
        assert f"; {words}, " in out
        assert ("frost point" in out) == (words == "FROSTS")


def test_a_number_stays_with_its_unit():
    text = "a " * 38 + "5.7 K, " + "b " * 36 + "59 % of"
    lines = wrapped(text)
    assert " ".join(lines) == text
    assert all("\N{NO-BREAK SPACE}" not in line for line in lines)
    assert [line[-1].isdigit() for line in lines] == [False] * len(lines)
    assert len(lines) > 1


def measured_case(path, *, keys="", conditions='[[conditions]]\nset = "en-410"\n', glass="clear"):
    """A measured pane, its coated side in, before a sheet of glass; untitled."""
    path.write_text(
        '[[layer]]\npane = "sun"\ncoated_face = "in"\n[[layer]]\ngap_mm = 16\ngas = "argon"\n'
        f'[[layer]]\nglass = "{glass}"\nthickness_mm = 6\n[pane.sun]\nthickness_mm = 8\n{keys}'
        "solar_transmittance = 0.42\nsolar_reflectance_coated_side = 0.36\nsolar_reflectance_glass_side = 0.22\n"
        "light_transmittance = 0.74\nlight_reflectance_coated_side = 0.06\nlight_reflectance_glass_side = 0.08\n"
        f"{conditions}",
        encoding="utf-8",
    )
    return str(path)


LOW = "emissivity_coated_side = 0.03\nemissivity_glass_side = 0.837\n"


def test_the_declared_figures_of_a_banded_pane_carry_what_that_costs(capsys, tmp_path):
    path = measured_case(tmp_path / "c.toml", keys=LOW)
    out = printed(capsys, "solve", path)
    (line,) = (line for line in out.splitlines() if line.startswith("  U_g"))
    assert re.search(r"   g 0\.\d\d ±0\.03   ", line)
    assert "up to 0.03 off" in " ".join(out.split())
    plain = printed(capsys, "solve", "cases/reading-room.toml")
    assert "±" not in plain.split("For the specification")[1].split("Against")[0]


def test_a_weight_not_known_names_the_key_and_the_pane(capsys, tmp_path):
    path = measured_case(tmp_path / "c.toml", keys=LOW)
    assert "weight not known: no density_kg_m3 of sun" in " ".join(printed(capsys, "solve", path).split())
    path = measured_case(tmp_path / "c.toml", keys=f"{LOW}density_kg_m3 = 2500\n")
    assert "35 kg/m²" in printed(capsys, "solve", path)


def test_an_untitled_case_has_one_name(capsys, tmp_path):
    path = measured_case(tmp_path / "untitled.toml", keys=LOW)
    head = printed(capsys, "solve", path).split("\n\n")[0]
    assert head.replace("\n", "") == path


def test_check_shows_which_face_of_a_measured_pane_is_covered(capsys, tmp_path):
    path = measured_case(tmp_path / "c.toml", keys=LOW)
    assert "8 sun [2 ε 0.03] | 16 mm argon" in printed(capsys, "check", path)


SKY = "outdoor_C = -5\nindoor_C = 20\nwind_m_s = 4\nsky_C = -15\nground_C = -5\n"


def test_resistances_are_given_under_the_first_conditions_that_have_them_or_it_is_said_why_not(capsys, tmp_path):
    sky = f'[[conditions]]\nname = "clear night"\n{SKY}'
    plain = '[[conditions]]\nname = "dull day"\noutdoor_C = 0\nindoor_C = 20\nwind_m_s = 4\n'
    path = measured_case(tmp_path / "c.toml", keys=LOW, conditions=sky)
    assert "(clear night: outdoors radiates at another temperature" in " ".join(printed(capsys, "solve", path).split())
    path = measured_case(tmp_path / "c.toml", keys=LOW, conditions=sky + plain + plain.replace("dull", "other"))
    out = printed(capsys, "solve", path)
    assert "Resistances, m²K/W, dull day: 1/U" in out
    assert out.count("Resistances") == 1
    assert "radiates at another" not in out


def test_resistances_of_en_673_are_the_terms_of_its_formula(capsys, tmp_path):
    # EN 673:2011, formula of U: 1/h_e + d/lambda + 1/h_s + 1/h_i with h_e 25, h_i 3.6 + 4.1 = 7.7, lambda 1
    path = measured_case(tmp_path / "c.toml", keys=LOW, conditions='[[conditions]]\nset = "en-673"\n')
    words = " ".join(printed(capsys, "solve", path).split("Resistances")[1].split("\n\n")[0].split())
    terms = [float(part.split()[0]) for part in words.split(": ")[2:]]
    assert [terms[k] for k in (0, 1, 3, 4)] == [0.04, 0.008, 0.006, round(1.0 / 7.7, 4)]
    one_over_u = float(words.split("1/U = ")[1].split()[0])
    assert sum(terms) == pytest.approx(one_over_u, abs=3e-4)
    assert words.endswith(f"= {one_over_u:.4f}")
