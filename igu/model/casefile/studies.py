"""[compare], [sweep], [seek], [tolerance], [frame] and [loads]: what the case asks of the studies."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from typing import Any

from igu.errors import ModelError
from igu.laws.constants import CELSIUS
from igu.model.casefile.faults import listed, shown
from igu.model.casefile.layers import read_fill
from igu.model.casefile.names import Names
from igu.model.casefile.paths import patched
from igu.model.casefile.section import Section, as_number, quoted_near
from igu.model.study_tables import (
    COLUMNS,
    DISTRIBUTIONS,
    QUANTITIES,
    Compare,
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

MOST_POINTS = 100_000
"""Points of one sweep; more is a slip of the pen."""


def read_compare(root: Section, names: Names, conditions: Sequence[str], faces: int | None) -> Compare | None:
    """[compare], None where there is none."""
    section = root.section("compare", "compare")
    if section is None:
        return None
    coatings = section.texts("coatings")
    known = [names.check(section, "coatings", "coating", name) for name in coatings or ()]
    return Compare(
        faces=_faces(section, faces),
        coatings=None if coatings is None else tuple(name for name in known if name),
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
    vary = [v for row in rows if (v := _vary(row, table)) is not None]
    if math.prod(len(v.values) for v in vary) > MOST_POINTS:
        section.fault(
            "vary", given=f"{math.prod(len(v.values) for v in vary)} points", allowed=f"at most {MOST_POINTS}"
        )
    of = section.choices("of", tuple(QUANTITIES)) or ("U_W_m2K",)
    return Sweep(
        tuple(vary),
        of=of,
        minimise=section.flag("minimise", QUANTITIES[of[0]]),
        cold=_condition(section, "cold", conditions),
        sun=_condition(section, "sun", conditions),
    )


def _vary(section: Section, table: Mapping[str, Any]) -> Vary | None:
    keys = _keys(section)
    section.exclusive("values", ("from", "to", "step", "count"))
    values, ranged = (_listed_values(section), False) if "values" in section else (_range(section), True)
    if not keys or not values:
        return None
    for key in keys:
        try:
            patched(table, key, values[0])
        except ModelError as error:
            section.fault("key", given=shown(key), allowed=f"a path in this case: {error}")
    return Vary(keys, values, ranged)


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
    count = count or math.floor((high - low) / (step or 1.0) + 1e-9) + 1
    if count > MOST_POINTS:
        section.refuse("step", f"at most {MOST_POINTS} values")
        return ()
    width = step if step is not None else (high - low) / (count - 1)
    return tuple(round(low + k * width, 12) for k in range(count))


def read_seek(root: Section, names: Names, conditions: Sequence[str]) -> Seek | None:
    """[seek], None where there is none."""
    section = root.section("seek", "seek")
    if section is None:
        return None
    panes = tuple(int(n) for n in section.numbers("panes", whole=True) or (2,))
    layers = _layers(section, names, max(panes))
    coatings = section.texts("coatings") or ()
    known = [names.check(section, "coatings", "coating", name) for name in coatings]
    rank_by = section.choice("rank_by", tuple(QUANTITIES)) or "U_W_m2K"
    keep, most = section.whole("keep"), section.whole("coatings_max")
    return Seek(
        panes=panes,
        layers=layers,
        coatings=tuple(name for name in known if name),
        faces=_faces(section, 2 * max(panes)),
        coatings_max=1 if most is None else most,
        targets=_targets(section),
        rank_by=rank_by,
        minimise=section.flag("minimise", QUANTITIES[rank_by]),
        keep=10 if keep is None else keep,
        cold=_condition(section, "cold", conditions),
        sun=_condition(section, "sun", conditions),
    )


def _layers(section: Section, names: Names, panes: int) -> tuple[PaneChoices | GapChoices, ...]:
    """Choices layer by layer: those of [[seek.layers]], each filled up from those for the whole unit."""
    whole = {key: section.table[key] for key in ("glasses", "thickness_mm", "gases", "gap_mm") if key in section}
    rows = section.sections("layers", "layers")
    count = 2 * panes - 1
    if rows and len(rows) != count:
        section.fault("layers", given=f"{len(rows)} layers", allowed=f"{count}: pane, gap, pane … for {panes} panes")
        return ()
    if not rows:
        rows = [section.below({}, "", "layers") for _ in range(count)]
    made = []
    for k, row in enumerate(rows):
        wanted, refused = (("glasses", "thickness_mm"), ("gases", "gap_mm"))[:: 1 if k % 2 == 0 else -1]
        for key in refused:
            if key in row:
                row.fault(key, given="a key of a gap" if k % 2 == 0 else "a key of a pane", allowed=listed(wanted))
        merged = Section(
            {key: row.table.get(key, whole.get(key)) for key in wanted if key in row.table or key in whole},
            kind="layers",
            path=row.path,
            file=row.file,
            faults=row.faults,
        )
        made.append(_pane_choices(merged, names) if k % 2 == 0 else _gap_choices(merged))
    return tuple(choice for choice in made if choice is not None)


def _pane_choices(section: Section, names: Names) -> PaneChoices | None:
    glasses, thicknesses = section.texts("glasses"), section.numbers("thickness_mm")
    for key in ("glasses", "thickness_mm"):
        if key not in section:
            section.missing(key, "a list of choices")
    known = [names.check(section, "glasses", "glass", name) for name in glasses or ()]
    if not known or not all(known) or thicknesses is None:
        return None
    return PaneChoices(tuple(name for name in known if name), tuple(t * 1e-3 for t in thicknesses))


def _gap_choices(section: Section) -> GapChoices | None:
    widths = section.numbers("gap_mm")
    for key in ("gases", "gap_mm"):
        if key not in section:
            section.missing(key, "a list of choices")
    given = section.table.get("gases", [])
    if not isinstance(given, list) or not given:
        section.refuse("gases", "a list of gases, each a name or a table of shares")
        return None
    fills = [read_fill(section, "gases", gas) for gas in given]
    good = tuple(fill for fill in fills if fill is not None)
    if widths is None or len(good) < len(fills):
        return None
    return GapChoices(tuple(w * 1e-3 for w in widths), good)


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
        thickness=_scaled(section.number("thickness_mm"), 1e-3),
        gap=_scaled(section.number("gap_mm"), 1e-3),
        fill=_fill_deviation(section),
        emissivity=section.number("emissivity"),
        conductivity=_scaled(section.number("conductivity_pct"), 0.01),
        outdoor_film=_scaled(section.number("outdoor_film_pct"), 0.01),
        indoor_film=_scaled(section.number("indoor_film_pct"), 0.01),
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
        if values is not None and (len(values) != 2 or values[0] > values[1]):
            section.refuse("fill_pct", "two numbers, the lower deviation first")
            return None
        return None if values is None else (values[0] * 0.01, values[1] * 0.01)
    one = as_number(given)
    if one is None or section.number("fill_pct") is None or one < 0.0:
        if one is not None and one < 0.0:
            section.refuse("fill_pct", "a number from 0, or two numbers, the lower deviation first")
        return None
    return -0.01 * one, 0.01 * one


def _scaled(value: float | None, factor: float) -> float | None:
    return None if value is None else value * factor


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
    return None if section is None else Loads(section.number("wind_Pa"))


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
        section.refuse(key, f"the name of one of the conditions: {listed(conditions)}", quoted_near(name, conditions))
        return None
    return name
