"""Arguments of the model as Python gives them: what is taken, and the sentence for what is not."""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import Any

import pytest

from igu import Conditions, Gap, ModelError, Pane, Pillars, Ply, Sealed, Unit, Vacuum, catalogue, rate

LIBRARY = catalogue()
PLY = LIBRARY.glass_ply("clear", 0.004)
PANE = LIBRARY.pane([PLY])
GAP = Gap(0.016)
ARGON = (("argon", 0.9), ("air", 0.1))


def conditions(**fields: Any) -> Conditions:
    return Conditions("c", **fields)


@pytest.mark.parametrize("fill", [ARGON, list(ARGON), dict(ARGON), [["argon", 0.9], ["air", 0.1]]])
def test_a_fill_is_given_by_pairs_or_a_dictionary(fill: Any) -> None:
    assert Gap(0.016, fill) == Gap(0.016, ARGON)
    assert hash(Gap(0.016, fill)) == hash(Gap(0.016, ARGON))


def test_the_name_of_a_gas_is_a_fill_of_it() -> None:
    assert Gap(0.016, "argon").fill == (("argon", 1.0),)


def test_lists_serve_as_tuples() -> None:
    unit = Unit([PANE, Pane([PLY], 0.837, 0.837)], [GAP])  # type: ignore[arg-type]
    assert (unit.panes[1].plies, unit.gaps) == ((PLY,), (GAP,))
    assert rate(unit, conditions(absorbed=[10.0, 5.0])).panes[1].absorbed == 5.0


WRONG: list[tuple[Callable[[], Any], str]] = [
    (lambda: Gap(16), "Gap.width: given 16; allowed above 0 to 0.5 m"),
    (lambda: Gap("0.016"), "Gap.width: given '0.016'; allowed above 0 to 0.5 m"),  # type: ignore[arg-type]
    (lambda: Gap(math.nan), "Gap.width: given nan; allowed above 0 to 0.5 m"),
    (lambda: Gap(True), "Gap.width: given True; allowed above 0 to 0.5 m"),
    (lambda: Gap(0.0), "Gap.width: given 0.0; allowed above 0 to 0.5 m"),
    (
        lambda: Gap(0.01, ("argon", 1.0)),
        'Gap.fill: given (\'argon\', 1.0); allowed the name of a gas, or shares by gas: {"argon": 0.9, "air": 0.1}',
    ),
    (lambda: Gap(0.01, 0.9), "Gap.fill: given 0.9; allowed the name of a gas"),  # type: ignore[arg-type]
    (lambda: Gap(0.01, {"argon": 90, "air": 10}), "Gap.fill, argon: given 90; allowed 0 to 1"),
    (lambda: Gap(0.01, {"argon": 0.9}), "Gap.fill: given shares that sum to 0.9; allowed shares that sum to 1"),
    (lambda: Gap(0.01, ()), "Gap.fill: given shares that sum to 0; allowed"),
    (lambda: Gap(0.01, (("air", 0.5), ("air", 0.5))), "Gap.fill: given a gas twice"),
    (lambda: Gap(2e-4, vacuum=0.1), "Gap.vacuum: given 0.1; allowed a Vacuum"),  # type: ignore[arg-type]
    (lambda: Gap(0.01, pillars=Pillars(0.02, 2e-4, 20.0)), "Gap.pillars: given in a gap that is not evacuated"),
    (lambda: Vacuum(-1.0), "Vacuum.pressure: given -1.0; allowed 0 to 2000 Pa"),
    (lambda: Vacuum(0.1, accommodation=0.0), "Vacuum.accommodation: given 0.0; allowed above 0 to 1"),
    (lambda: Pillars(2e-4, 2e-4, 20.0), "Pillars.pitch: given 0.0002; allowed above 0.0004 to 10 m"),
    (lambda: Sealed(temperature=20.0), "Sealed.temperature: given 20.0; allowed 200 to 400 K"),
    (lambda: Sealed(pressure=1013.0), "Sealed.pressure: given 1013.0; allowed 30000 to 120000 Pa"),
    (lambda: Unit(PANE), "Unit.panes: given a Pane; allowed a tuple of Pane"),  # type: ignore[arg-type]
    (lambda: Unit((PANE, GAP, PANE)), "Unit.panes: given a Gap; allowed a tuple of Pane"),  # type: ignore[arg-type]
    (lambda: Unit(("clear",)), "Unit.panes: given 'clear'; allowed a tuple of Pane"),  # type: ignore[arg-type]
    (lambda: Unit((PANE, PANE), GAP), "Unit.gaps: given a Gap; allowed a tuple of Gap"),  # type: ignore[arg-type]
    (lambda: Unit((PANE, PANE)), "Unit.gaps: given 0; allowed 1 between 2 panes"),
    (lambda: Unit(()), "Unit.panes: given none; allowed one or more"),
    (lambda: Unit((PANE,), tilt=90), "Unit.tilt: given 90; allowed 0 to 3.14159 rad, 90° being math.pi/2"),
    (lambda: Unit((PANE,), height=1500), "Unit.height: given 1500; allowed above 0 to 20 m"),
    (
        lambda: LIBRARY.glass_ply("cleer", 0.004),
        "glass: given 'cleer'; allowed clear, low-iron, bronze, grey, green; did you mean \"clear\"?",
    ),
    (lambda: LIBRARY.glass_ply("clear", 4), "Ply.thickness: given 4; allowed above 0 to 0.1 m"),
    (
        lambda: LIBRARY.interlayer_ply("pbv", 0.001),
        "interlayer: given 'pbv'; allowed pvb, eva, ionoplast; did you mean \"pvb\"?",
    ),
    (lambda: LIBRARY.pane(PLY), "plies of a pane: given a Ply; allowed a tuple of Ply"),  # type: ignore[arg-type]
    (lambda: LIBRARY.pane([]), "plies of a pane: given none"),
    (lambda: LIBRARY.pane([PLY], coating_in="soft-singel"), "coating: given 'soft-singel'; allowed soft-single"),
    (lambda: LIBRARY.pane([PLY], treatment="tempered"), "Pane.treatment: given 'tempered'; allowed annealed"),
    (lambda: Pane((PLY,), 0.837, 1.2), "Pane.emissivity_in: given 1.2; allowed above 0 to 1"),
    (
        lambda: Pane((PLY,), 0.8, 0.8, longwave_transmittance=0.3),
        "emissivity 0.8 and longwave_transmittance 0.3: sum at most 1",
    ),
    (lambda: Ply("clear", 0.004, 1.0, density=-1.0), "Ply.density: given -1.0; allowed above 0 to 30000 kg/m3"),
    (lambda: Ply("clear", 0.004, 1.0, kind="metal"), "Ply.kind: given 'metal'; allowed glass, interlayer, pane, sheet"),
    (lambda: conditions(outdoor_air=-18), "Conditions.outdoor_air: given -18; allowed 150 to 400 K"),
    (lambda: conditions(sky=-18, ground=0), "Conditions.sky: given -18; allowed 150 to 400 K"),
    (
        lambda: conditions(outdoor_convection=None),
        "Conditions.outdoor_convection: given None; allowed 0 to 1000 W/(m2 K)",
    ),
    (
        lambda: conditions(indoor_convection=-1.0),
        "Conditions.indoor_convection: given -1.0; allowed 0 to 1000 W/(m2 K)",
    ),
    (lambda: conditions(sun=-100.0), "Conditions.sun: given -100.0; allowed 0 to 1500 W/m2"),
    (lambda: conditions(incidence=60), "Conditions.incidence: given 60; allowed 0 to 1.5708 rad, 60° being math.pi/3"),
    (lambda: conditions(pressure=1013), "Conditions.pressure: given 1013; allowed 30000 to 120000 Pa"),
    (
        lambda: conditions(indoor_humidity=50),
        "Conditions.indoor_humidity: given 50; allowed 0 to 1 as a share, 0.5 for 50 %",
    ),
    (
        lambda: conditions(method="en673"),
        "Conditions.method: given 'en673'; allowed iso-15099, en-673, en-410; did you mean \"en-673\"?",
    ),
    (
        lambda: conditions(gas_properties="handbook"),
        "Conditions.gas_properties: given 'handbook'; allowed iso-15099, reference",
    ),
    (lambda: conditions(absorbed=10.0), "Conditions.absorbed: given 10.0; allowed a tuple, a number for each pane"),
    (lambda: conditions(absorbed=(1.0, math.nan)), "Conditions.absorbed, pane 2: given nan; allowed 0 to 1500 W/m2"),
    (
        lambda: rate(Unit((PANE,)), conditions(absorbed=(1.0, 2.0))),
        "Conditions.absorbed: given 2; allowed one for each of 1 pane",
    ),
    (lambda: rate(conditions(), Unit((PANE,))), "unit to rate: given a Conditions; allowed a Unit"),  # type: ignore[arg-type]
    (lambda: rate(Unit((PANE,)), "en-673"), "conditions to rate it under: given 'en-673'; allowed a Conditions"),  # type: ignore[arg-type]
]


@pytest.mark.parametrize(("make", "sentence"), WRONG, ids=[sentence.split(";")[0] for _, sentence in WRONG])
def test_a_wrong_argument_is_named_with_what_is_allowed(make: Callable[[], Any], sentence: str) -> None:
    with pytest.raises(ModelError) as raised:
        make()
    assert str(raised.value).startswith(sentence)
