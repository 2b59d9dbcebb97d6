"""[compare], [sweep], [seek], [tolerance], [frame] and [loads]: what the case asks of the studies."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from typing import Any

from igu.errors import ModelError
from igu.laws.constants import CELSIUS
from igu.model.casefile.faults import listed, shown
from igu.model.casefile.layers import Fill, read_fill
from igu.model.casefile.names import Names
from igu.model.casefile.paths import patched
from igu.model.casefile.section import Section, as_number, quoted_near
from igu.model.study_tables import (
    COLUMNS,
    DISTRIBUTIONS,
    QUANTITIES,
    CaseLayer,
    Compare,
    Factors,
    Frame,
    GapChoices,
    Loads,
    PaneChoices,
    Seek,
    Sweep,
    Targets,
    Tolerance,
    Vary,
)
from igu.model.unit import TREATMENTS

MOST_POINTS = 100_000
"""Points of one sweep; more is a slip of the pen."""


def read_compare(root: Section, names: Names, conditions: Sequence[str], faces: int | None) -> Compare | None:
    """[compare], None where there is none."""
    section = root.section("compare", "compare")
    if section is None:
        return None
    return Compare(
        faces=_faces(section, faces),
        coatings=_names(section, "coatings", "coating", names),
        cold=_condition(section, "cold", conditions),
        sun=_condition(section, "sun", conditions),
        columns=section.choices("columns", COLUMNS),
    )


def read_sweep(root: Section, table: Mapping[str, Any], conditions: Sequence[str]) -> Sweep | None:
    """[sweep] with one or two [[sweep.vary]], None where there is none."""
    section = root.section("sweep", "sweep")
    if section is None:
        return None
    rows = section.sections("vary", "vary")
    if not 1 <= len(rows) <= 2:
        section.fault("vary", given=f"{len(rows)} quantities", allowed="one or two tables headed [[sweep.vary]]")
    vary: list[Vary] = []
    for row in rows:
        found = _vary(row, table)
        if found is not None:
            vary.append(found)
            table = _set(table, found.keys, found.values[0])
    if math.prod(len(v.values) for v in vary) > MOST_POINTS:
        section.fault(
            "vary", given=f"{math.prod(len(v.values) for v in vary)} points", allowed=f"at most {MOST_POINTS}"
        )
    of = _quantities(section)
    return Sweep(
        tuple(vary),
        of=of,
        minimise=section.flag("minimise", QUANTITIES[of[0]]),
        cold=_condition(section, "cold", conditions),
        sun=_condition(section, "sun", conditions),
    )


def _quantities(section: Section) -> tuple[str, ...]:
    """What is shown: one quantity, or a list of them."""
    if isinstance(section.table.get("of"), str):
        return (section.choice("of", tuple(QUANTITIES)) or "U_W_m2K",)
    return section.choices("of", tuple(QUANTITIES)) or ("U_W_m2K",)


def _vary(section: Section, table: Mapping[str, Any]) -> Vary | None:
    keys = _keys(section)
    section.exclusive("values", ("from", "to", "step", "count"))
    values, ranged = (_listed_values(section), False) if "values" in section else (_range(section), True)
    if not keys or not values:
        return None
    before = len(section.faults)
    for key in keys:
        try:
            table = patched(table, key, values[0])
        except ModelError as error:
            section.fault("key", given=shown(key), allowed=f"a path in this case, as layer.2.gap_mm: {error}")
    return Vary(keys, values, ranged) if len(section.faults) == before else None


def _set(table: Mapping[str, Any], keys: Sequence[str], value: Any) -> Mapping[str, Any]:
    """The case with this value: the next quantity may lie in what this one sets."""
    for key in keys:
        table = patched(table, key, value)
    return table


def _keys(section: Section) -> tuple[str, ...]:
    """The key, or the keys that vary together."""
    given = section.table.get("key")
    if isinstance(given, list):
        return section.texts("key") or ()
    key = section.text("key", required="the path of a key, as layer.2.gap_mm")
    return (key,) if key else ()


def _listed_values(section: Section) -> tuple[Any, ...]:
    values = section.table["values"]
    if not isinstance(values, list) or not values:
        section.refuse("values", "a list with at least one value")
        return ()
    return tuple(values)


def _range(section: Section) -> tuple[float, ...]:
    low, high = section.number("from", required=True), section.number("to", required=True)
    section.exclusive("step", "count")
    step, count = section.number("step"), section.whole("count")
    if step is None and count is None and "step" not in section and "count" not in section:
        section.missing("step", "step or count")
    if low is None or high is None or (step is None and count is None):
        return ()
    if high <= low:
        section.refuse("to", f"above from, {low:g}")
        return ()
    width = (high - low) / (count - 1) if count else step or math.inf
    if not 1.0 - 1e-9 <= (high - low) / width < MOST_POINTS:
        section.refuse("step", f"a step that makes 2 to {MOST_POINTS} values")
        return ()
    count = count or math.floor((high - low) / width + 1e-9) + 1
    return tuple(round(low + k * width, 12) for k in range(count))


def read_seek(root: Section, names: Names, conditions: Sequence[str], case_panes: int | None) -> Seek | None:
    """[seek], None where there is none; `case_panes` is the number of panes of the case's own unit."""
    section = root.section("seek", "seek")
    if section is None:
        return None
    rows = section.sections("layers", "layers")
    panes = _pane_counts(section, rows)
    rank_by = section.choice("rank_by", tuple(QUANTITIES)) or "U_W_m2K"
    keep, most = section.whole("keep"), section.whole("coatings_max")
    return Seek(
        panes=panes,
        layers=tuple(_choices(section, rows, k, names, case_panes) for k in range(2 * max(panes) - 1)),
        coatings=_names(section, "coatings", "coating", names) or (),
        faces=_faces(section, 2 * max(panes)),
        coatings_max=1 if most is None else most,
        targets=_targets(section),
        rank_by=rank_by,
        minimise=section.flag("minimise", QUANTITIES[rank_by]),
        keep=10 if keep is None else keep,
        cold=_condition(section, "cold", conditions),
        sun=_condition(section, "sun", conditions),
    )


def _pane_counts(section: Section, rows: Sequence[Section]) -> tuple[int, ...]:
    """Numbers of panes to try; left out, what the list of layers makes."""
    if rows and len(rows) % 2 == 0:
        section.fault("layers", given=f"{len(rows)} layers", allowed="pane, gap, pane, …, pane: an odd number")
    of_rows = (len(rows) + 1) // 2
    given = section.numbers("panes", whole=True)
    if given is None:
        if not rows and "panes" not in section:
            section.missing("panes", "the numbers of panes to try, as [2, 3], or a list of layers")
        return (max(of_rows, 1),)
    if rows and max(given) > of_rows:
        section.refuse("panes", f"at most {of_rows}, which is what the list of layers makes")
    if len(set(given)) < len(given):
        section.refuse("panes", "each number once")
    return tuple(dict.fromkeys(int(count) for count in given))


_PANE_CHOICES = ("glasses", "thickness_mm", "treatment")
_GAP_CHOICES = ("gases", "gap_mm")


def _choices(
    section: Section, rows: Sequence[Section], k: int, names: Names, case_panes: int | None
) -> PaneChoices | GapChoices | CaseLayer:
    """Choices of layer k, counted from 0: each key from the layer's own table, or else from the whole unit's."""
    own = rows[k] if k < len(rows) else section
    if own is not section and "case_layer" in own:
        own.exclusive("case_layer", (*_PANE_CHOICES, *_GAP_CHOICES))
        return CaseLayer(_case_layer(own, k, case_panes))
    wanted, others = (_GAP_CHOICES, _PANE_CHOICES) if k % 2 else (_PANE_CHOICES, _GAP_CHOICES)
    for key in others:
        if own is not section and key in own:
            own.fault(key, given=f"in the place of a {'gap' if k % 2 else 'pane'}", allowed=listed(wanted))
    place = {key: own if key in own or key not in section else section for key in wanted}
    if k % 2:
        return GapChoices(_millimetres(place["gap_mm"], "gap_mm"), _fills(place["gases"]))
    return PaneChoices(
        _glasses(place["glasses"], names),
        _millimetres(place["thickness_mm"], "thickness_mm"),
        place["treatment"].choice("treatment", TREATMENTS) or TREATMENTS[0],
    )


def _case_layer(own: Section, k: int, case_panes: int | None) -> int:
    """The number of a layer of the case that can stand in the place of layer k: a pane for a pane, a gap for a gap."""
    number = own.whole("case_layer")
    there = range(1 + k % 2, 40 if case_panes is None else 2 * case_panes, 2)
    if number is not None and number not in there:
        what = f"the number of a {'gap' if k % 2 else 'pane'} of the case"
        own.refuse("case_layer", f"{what}: {listed(there) if case_panes else 'an even one' if k % 2 else 'an odd one'}")
    return number or 1


def _glasses(section: Section, names: Names) -> tuple[str, ...]:
    if "glasses" not in section:
        section.missing("glasses", "a list of glasses")
    return _names(section, "glasses", "glass", names) or ()


def _millimetres(section: Section, key: str) -> tuple[float, ...]:
    if key not in section:
        section.missing(key, "a list of numbers")
    given = section.numbers(key) or ()
    if len(set(given)) < len(given):
        section.refuse(key, "each number once")
    return tuple(value * 1e-3 for value in given)


def _fills(section: Section) -> tuple[Fill, ...]:
    if "gases" not in section:
        section.missing("gases", "a list of gases")
        return ()
    given = section.table["gases"]
    if not isinstance(given, list) or not given:
        section.refuse("gases", "a list of gases, each a name or a table of shares")
        return ()
    fills = [read_fill(section, f"gases.{number}", gas) for number, gas in enumerate(given, 1)]
    if None not in fills and len(set(fills)) < len(fills):
        section.refuse("gases", "each gas once")
    return tuple(fill for fill in fills if fill is not None)


def _names(section: Section, key: str, kind: str, names: Names) -> tuple[str, ...] | None:
    """A list of names of one kind, each defined and each once."""
    given = section.texts(key)
    if given is None:
        return None
    if len(set(given)) < len(given):
        section.refuse(key, "each name once")
    return tuple(name for name in given if names.check(section, key, kind, name))


def _targets(section: Section) -> Targets:
    limits = section.section("limits", "limits")
    if limits is None:
        return Targets()
    room, hottest = limits.number("room_face_min_C"), limits.number("hottest_pane_max_C")
    thickness = limits.number("thickness_max_mm")
    for low, high in (("g_min", "g_max"), ("light_transmittance_min", "light_transmittance_max")):
        bounds = limits.number(low), limits.number(high)
        if bounds[0] is not None and bounds[1] is not None and bounds[0] > bounds[1]:
            limits.refuse(low, f"at most {high}, {bounds[1]:g}")
    return Targets(
        U_max=limits.number("U_max_W_m2K"),
        U_en673_max=limits.number("U_en673_max_W_m2K"),
        g_min=limits.number("g_min"),
        g_max=limits.number("g_max"),
        light_transmittance_min=limits.number("light_transmittance_min"),
        light_transmittance_max=limits.number("light_transmittance_max"),
        selectivity_min=limits.number("selectivity_min"),
        room_face_min=None if room is None else room + CELSIUS,
        hottest_pane_max=None if hottest is None else hottest + CELSIUS,
        thickness_max=None if thickness is None else thickness * 1e-3,
        mass_max=limits.number("mass_max_kg_m2"),
    )


def read_tolerance(root: Section) -> Tolerance | None:
    """[tolerance], None where there is none."""
    section = root.section("tolerance", "tolerance")
    if section is None:
        return None
    return Tolerance(
        thickness=section.scaled("thickness_mm", 1e-3),
        gap=section.scaled("gap_mm", 1e-3),
        fill=_fill_deviation(section),
        emissivity=section.number("emissivity"),
        conductivity=section.scaled("conductivity_pct", 0.01),
        outdoor_film=section.scaled("outdoor_film_pct", 0.01),
        indoor_film=section.scaled("indoor_film_pct", 0.01),
        samples=section.whole("samples"),
        seed=section.whole("seed"),
        distribution=section.choice("distribution", DISTRIBUTIONS) or DISTRIBUTIONS[0],
    )


def _fill_deviation(section: Section) -> tuple[float, float] | None:
    """Lower and upper deviation of the main gas in percentage points: [-5, 10], or one number for both sides."""
    if "fill_pct" not in section:
        return None
    given = section.table["fill_pct"]
    if isinstance(given, list):
        values = section.numbers("fill_pct")
        if values is not None and (len(values) != 2 or values[0] > 0.0 or values[1] < 0.0):
            section.refuse("fill_pct", "two numbers around zero, as [-5, 10]")
            return None
        return None if values is None else (values[0] * 0.01, values[1] * 0.01)
    one = as_number(given)
    if one is None or section.number("fill_pct") is None or one < 0.0:
        if one is not None and one < 0.0:
            section.refuse("fill_pct", "a number from 0, or two numbers, the lower deviation first")
        return None
    return -0.01 * one, 0.01 * one


def read_frame(root: Section) -> Frame | None:
    """[frame], None where there is none."""
    section = root.section("frame", "frame")
    if section is None:
        return None
    edge = section.number("edge_C")
    return Frame(None if edge is None else edge + CELSIUS, section.number("edge_loss_W_mK"))


def read_loads(root: Section) -> Loads | None:
    """[loads], None where there is none."""
    section = root.section("loads", "loads")
    if section is None:
        return None
    wind, snow = _winds(section), section.number("snow_Pa")
    factors = [section.number(key) or 1.0 for key in ("partial_factor", "partial_factor_permanent")]
    loads = Loads(wind, snow, Factors(*factors))
    for key, values in (("wind_Pa", loads.winds), ("snow_Pa", (loads.snow or 0.0,))):
        for value in values:
            if 0.0 < abs(value) < LEAST_LOAD:
                section.warn(key, f"{value:g} Pa is hardly a load; it is in pascal, as {1e3 * value:g}, not in kPa")
    return loads


LEAST_LOAD = 50.0
"""Wind and snow below this are taken for kilopascals [Pa]."""


def _winds(section: Section) -> float | tuple[float, ...] | None:
    """One pressure, or a list of them."""
    if not isinstance(section.table.get("wind_Pa"), list):
        return section.number("wind_Pa")
    given = section.numbers("wind_Pa") or ()
    if len(set(given)) < len(given):
        section.refuse("wind_Pa", "each number once")
    return given


def _faces(section: Section, last: int | None) -> tuple[int, ...] | None:
    values = section.numbers("faces", whole=True)
    if values is None:
        return None
    faces = tuple(int(v) for v in values)
    if last is not None and max(faces) > last:
        section.refuse("faces", f"faces 1 to {last}")
    if len(set(faces)) < len(faces):
        section.refuse("faces", "each face once")
    return faces


def _condition(section: Section, key: str, conditions: Sequence[str]) -> str | None:
    """The name of one of the case's conditions."""
    name = section.text(key)
    if name is not None and name not in conditions:
        allowed = f"the name of one of the conditions: {listed(map(shown, conditions))}"
        section.refuse(key, allowed, quoted_near(name, conditions))
        return None
    return name
