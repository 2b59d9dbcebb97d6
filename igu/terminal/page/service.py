"""The report of the service study: verdicts first, then every question with its figures, cautions once."""

from __future__ import annotations

import math
import textwrap
from collections.abc import Iterator, Sequence
from itertools import groupby

from igu.laws.constants import CELSIUS
from igu.laws.sealed import insulating_unit_factor
from igu.model.case import Case
from igu.model.strength import difference_source, duration_words, permissible_stress, strength_source
from igu.model.study_tables import AS_GIVEN, Factors, Loads
from igu.model.unit import Unit
from igu.ratings.declaration import declaration
from igu.ratings.remarks import loses_gas
from igu.studies.ageing import HORIZON, Ageing
from igu.studies.bowing import STANDARD_LOADS, Bowed, pillared, snow_across
from igu.studies.fracture import EDGES, SPARE, Fracture
from igu.studies.service import CAUTION, Service, site_climbs
from igu.studies.tolerance import Tolerances
from igu.studies.verdicts import CLEAR, DOUBTFUL, HOLDS, Verdict, state, verdicts
from igu.terminal.page.marks import marks_explained
from igu.terminal.page.solve import fogging_lines
from igu.terminal.page.text import WIDTH, wrapped
from igu.terminal.record.service_tables import ageing_table, parts, tolerance_table
from igu.terminal.tables import MISSING, Cell, Column, Table, number

LIMITS = (
    f"Limits of this program, no standard's: doubtful are fogging below {CLEAR:.0f} K, fracture below {SPARE:.0f} K, a "
    f"declared value that does not last the years shown or holds in less than {100 * HOLDS[0]:.0f} % of the samples; "
    f"below {100 * HOLDS[1]:.0f} % it fails."
)

DOUBTS = {
    "gap": "linear plates, bent beyond half a thickness",
    "stress": "linear plates, bent beyond half a thickness",
}
"""Why a question is doubtful, where its limits do not say it."""


def report(case: Case, found: Service) -> str:
    """The report of one case, no line wider than 80 columns."""
    parts_ = [
        [*wrapped(case.title), *wrapped(case.file)],
        wrapped(CAUTION),
        list(_verdicts(case, found)),
        list(fogging_lines(found.results)),
        list(_edge(case)),
        [line for text in (*case.warnings, *found.gaps_in_knowledge) for line in wrapped(f"WARNING {text}")],
        list(_bowing(case, found)),
        list(_fracture(case, found)),
        list(_ageing(found.ageing)),
        list(_tolerances(found.tolerances)),
    ]
    text = "\n\n".join("\n".join(part) for part in parts_ if part)
    marks = marks_explained(text)
    return "\n\n".join([text, *(["\n".join(wrapped(marks))] if marks else [])])


def methods(case: Case, found: Service) -> list[str]:
    """What the figures rest on, for a table that stands alone."""
    said = [LIMITS, *case.warnings, *found.gaps_in_knowledge]
    if found.bowed:
        said += [*_methods(case, found), *_bowing_notes(case, found.bowed)]
    said += _fracture_source(case, found)
    if found.ageing:
        said.append(f"{_ageing_method(found.ageing)}.")
    if found.tolerances and found.tolerances.spreads:
        t = found.tolerances
        said.append(f"{_tolerance_method(t)}. {_assumed_words(t)}".rstrip())
    marks = marks_explained(" ".join(said))
    return [*said, *([marks] if marks else [])]


def judged(case: Case, found: Service) -> list[tuple[Verdict, str]]:
    """The verdicts with the words for what they were judged by."""
    return [(v, WORDS[v.question](case, found, v) + _doubt(v)) for v in verdicts(case.unit, found)]


def _doubt(v: Verdict) -> str:
    return f"; {DOUBTS[v.question]}" if v.outcome == DOUBTFUL and v.question in DOUBTS else ""


def _verdicts(case: Case, found: Service) -> Iterator[str]:
    yield "In short"
    for v, words in judged(case, found):
        head = f"  {v.question:<10} {v.outcome:<11} "
        yield from textwrap.wrap(words, WIDTH, initial_indent=head, subsequent_indent=" " * len(head))
    yield from wrapped(LIMITS, "  ")


def _fogging_words(case: Case, found: Service, v: Verdict) -> str:
    breathes = case.unit.sealed.vented and any(not gap.evacuated for gap in case.unit.gaps)
    inside = case.unit.sealed.fill_dew_point is not None or not breathes
    rest = "" if inside else "; inside the vented gap not judged, its moisture is not known"
    if v.value is None:
        why = "no humidity is given; where it starts is below" if found.results else "no conditions by ISO 15099"
        return why + rest
    side = "below" if v.value < 0.0 else "above"
    open_faces = {1: "outdoor face", 2 * len(case.unit.panes): "room-side face"}
    where = open_faces.get(v.at or 0, f"face {v.at}, inside a gap")
    only = "; only the outdoor face fogs" if v.outcome == DOUBTFUL and v.value < -1e-6 else ""
    return f"{where} {number(abs(v.value), 1)} K {side} the dew or frost point ({v.under}){only}{rest}"


def _gap_words(case: Case, found: Service, v: Verdict) -> str:
    if v.value is None or v.limit is None:
        return "no gap with gas whose bowing was worked out"
    over = [g.overpressure for b in found.bowed for g in b.gaps if g.overpressure is not None]
    width = "panes touch" if v.value <= 0.0 else f"narrowest {1e3 * v.value:.1f} of {1e3 * v.limit:g} mm"
    low, high = number(min(over), 0), number(max(over), 0)
    return f"{width}, gap {v.at} ({v.under}); overpressure {low} to {high} Pa"


def _stress_words(case: Case, found: Service, v: Verdict) -> str:
    worked_out = any(pane.use is not None for b in found.bowed for pane in b.panes)
    missing, empty = _loads_not_given(case), _stress_not_worked_out(case.unit)
    if v.value is None or v.limit is None:
        said = [f"no load acts: {missing.removeprefix(MILD)}" if worked_out else "no stress was worked out"]
    else:
        said = [
            f"{100 * v.value / v.limit:.0f} % of the design strength used, {1e-6 * v.value:.1f} of "
            f"{1e-6 * v.limit:.1f} MPa: pane {v.at} ({v.under})",
            _factor_words(_loads(case).factors),
            *([missing] if missing else []),
            *([UNWEIGHED] if _weight_assumed(case.unit) else []),
        ]
    return "; ".join([*said, *([empty] if empty and worked_out else [])])


def _loads(case: Case) -> Loads:
    return case.loads or Loads()


def _factor_words(factors: Factors) -> str:
    """How the loads of the stress stand to those given."""
    if factors == AS_GIVEN:
        return "loads without partial factors"
    return f"partial factors {factors.variable:g} (variable), {factors.permanent:g} (permanent)"


MILD = "climate and weight only, "


def _loads_not_given(case: Case) -> str:
    """The loads that could act on the unit and are not in its figures."""
    loads = _loads(case)
    snowless = not loads.snow and snow_across(case.unit, 1.0) > 0.0
    absent = [*([] if loads.winds else ["wind"]), *(["snow"] if snowless else [])]
    only = "" if loads.winds or loads.snow else MILD
    return f"{only}no {' or '.join(absent)} given" if absent else ""


def _stress_not_worked_out(unit: Unit) -> str:
    """The panes beside an evacuated gap, where others are judged."""
    empty = [k for k, beside in enumerate(pillared(unit), 1) if beside]
    return f"pane{'s' * (len(empty) > 1)} {', '.join(map(str, empty))} beside a vacuum not judged" if empty else ""


def _fracture_verdict_words(case: Case, found: Service, v: Verdict) -> str:
    if v.value is None:
        return "no condition has sun on panes known in the sun"
    side = "to" if v.value >= 0.0 else "beyond"
    return f"{number(abs(v.value), 1)} K {side} the limit of {v.limit:.0f} K: pane {v.at} ({v.under})"


def _ageing_words(case: Case, found: Service, v: Verdict) -> str:
    a = found.ageing
    if loses_gas(case.unit):
        return "a vented unit does not keep its gas, how fast it is lost is not known"
    if a is None or a.declared is None:
        return "no gas to lose by leakage" if a is None else _undeclared(case)
    kept = f"kept for {HORIZON} years"
    left = [kept if year is None else f"left in year {year:.0f}" for year in (a.leaves, a.leaves_linear)]
    return f"the declared {a.declared:.1f} W/(m²K) is {left[0]} (pessimistic line: {left[1]})"


def _undeclared(case: Case) -> str:
    return f"no declared value: {'; '.join(declaration(case.unit, case.conditions).reasons)}"


def _tolerance_words(case: Case, found: Service, v: Verdict) -> str:
    t = found.tolerances
    if v.value is None or t is None:
        return _undeclared(case)
    filled = ", as filled" if loses_gas(case.unit) else ""
    return f"the declared {t.declared:.1f} W/(m²K) holds in {100 * v.value:.1f} % of samples{filled}"


WORDS = {
    "fogging": _fogging_words,
    "gap": _gap_words,
    "stress": _stress_words,
    "fracture": _fracture_verdict_words,
    "ageing": _ageing_words,
    "tolerance": _tolerance_words,
}


def _edge(case: Case) -> Iterator[str]:
    if case.frame and case.frame.edge_loss is not None:
        around = 2.0 * (case.unit.width + case.unit.height)
        loss = case.frame.edge_loss * around
        area = case.unit.width * case.unit.height
        yield from wrapped(
            f"Linear edge loss {case.frame.edge_loss:g} W/(m K) over {around:.2f} m: {loss:.2f} W/K, that is "
            f"{loss / area:.2f} W/(m²K) of the whole glass on top of its centre value."
        )


def _bowing(case: Case, found: Service) -> Iterator[str]:
    bowed = found.bowed
    if not bowed:
        return
    yield "Gas pressure, bowing and stress (+ towards the room; a gap: overpressure, width)"
    yield from wrapped(" ".join(_methods(case, found)), "  ")
    groups = [list(group) for _, group in groupby(bowed, key=lambda b: b.name)]
    yield from _state_lines(groups)
    yield from (line for text in _bowing_notes(case, bowed) for line in wrapped(text, "  "))


def _methods(case: Case, found: Service) -> Iterator[str]:
    """How the loads, deflections and stresses come about."""
    yield _method(case)
    if any(not gap.evacuated for gap in case.unit.gaps) and not case.unit.sealed.vented:
        yield _standard_words(case, found)
    yield _acting_words(_loads(case))


def _standard_words(case: Case, found: Service) -> str:
    """What the standards' load sets are."""
    climbs = site_climbs(case, found.results)
    sets = []
    for name, load in STANDARD_LOADS.items():
        parts = [f"{load.warming:+g} K", f"{1e-3 * load.pressure_rise:+g} kPa", f"{load.climb:+g} m"]
        sets.append(f"{name} {', '.join(parts[: 2 if climbs else 3])}".replace("-", "−"))
    site = (
        "at 12 Pa/m the site's own height stands for their +600 and −300 m"
        if climbs
        else "without the site's own height (altitude_m in [sealed] and in conditions)"
    )
    return (
        f"Standard loads against sealing, linear form (DIN 18008-1, EN 16612 [memory]): {'; '.join(sets)}; {site}."
        f"{_unit_factor_words(case.unit)}"
    )


def _unit_factor_words(unit: Unit) -> str:
    """The insulating-unit factor of a double unit of single sheets, for who checks by hand."""
    if len(unit.panes) != 2 or any(len(pane.plies) > 1 for pane in unit.panes):
        return ""
    short, long = sorted((unit.width, unit.height))
    outer, inner = (pane.thickness for pane in unit.panes)
    factor, length = insulating_unit_factor(short=short, long=long, width=unit.gaps[0].width, outer=outer, inner=inner)
    return f" By their table φ = {float(factor):.4f}, a* = {1e3 * float(length):.0f} mm."


def _acting_words(loads: Loads) -> str:
    """How loads stand together and which partial factors the stress has."""
    together = (
        "Wind and snow each act alone and whole, on top of a state's climate. " if loads.winds or loads.snow else ""
    )
    if loads.factors == AS_GIVEN:
        stress = "Stress: loads as given, without partial factors"
    else:
        f = loads.factors
        stress = (
            f"Stress has partial factors: {f.variable:g} on wind, snow and climate, {f.permanent:g} on weight and "
            "altitude where they do not relieve it; pressures and deflections are as given"
        )
    return f"{together}{stress}."


def _method(case: Case) -> str:
    if all(gap.evacuated for gap in case.unit.gaps):
        text = "Linear plates on four supported edges."
    else:
        closed = f"{_closed_words(case)}; exact gas law"
        if case.unit.sealed.vented:
            closed = "Vented by a capillary tube: the gaps keep the pressure of the site, but in a gust; gas"
        text = (
            f"{closed} at each gap's mean face temperature, linear plates on four supported edges, with the "
            "heat balance. U in the sun is the dark U at that bowing."
        )
    text += " No deflection limit is applied."
    if any(len(pane.plies) > 1 for pane in case.unit.panes):
        text += " Laminated panes: layered/monolithic."
    return text


def _closed_words(case: Case) -> str:
    """The state of sealing, and what of it the case leaves to the program."""
    sealed, given = case.unit.sealed, case.table.get("sealed", {})
    temperature = f"{number(sealed.temperature - CELSIUS, 1)} °C"
    pressure = f"{sealed.pressure / 100:.0f} hPa"
    warm, tight = "temperature_C" in given, bool({"pressure_Pa", "altitude_m"} & set(given))
    if warm == tight:
        return f"Closed at {temperature} and {pressure}{'' if warm else ' by default'}"
    return f"Closed at {temperature}{'' if warm else ' by default'} and {pressure}{'' if tight else ' by default'}"


def _state_lines(groups: Sequence[Sequence[Bowed]]) -> Iterator[str]:
    """One table of all states, each under its name."""
    columns = (
        Column("part", ""),
        Column("load_Pa", "load\nPa", 0, right=True),
        Column("centre_mm", "centre\nmm", 2, right=True),
        Column("mean_mm", "mean\nmm", 2, right=True),
        Column("stress_MPa", "stress\nMPa", 1, right=True),
        Column("used_pct", "used\n%", 0, right=True),
    )
    rows = [row for group in groups for row in _state_rows(group, columns)]
    first, second, rule, *lines = Table(columns, tuple(rows)).plain().splitlines()
    yield from (f"    {line}" for line in (first, second, rule))
    each = len(lines) // len(groups)
    for at, group in enumerate(groups):
        yield from wrapped(_state_words(group), "  ")
        yield from (f"    {line}" for line in lines[at * each : (at + 1) * each])


def _state_words(group: Sequence[Bowed]) -> str:
    text = group[0].name
    known = [b for b in group if b.U_flat and (b.U is not None or b.touching)]
    if known:
        bent = "/".join(dict.fromkeys(f"{MISSING} (contact)" if b.U is None else f"{b.U:.3f}" for b in known))
        changes = [100.0 * (b.U / b.U_flat - 1.0) for b in known if b.U is not None and b.U_flat]
        change = "/".join(dict.fromkeys(number(change, 1) for change in changes))
        text += f": U {bent} bowed, {number(known[0].U_flat, 3)} flat" + (f" ({change} %)" if change else "")
    return text


def _state_rows(group: Sequence[Bowed], columns: Sequence[Column]) -> Iterator[tuple[Cell, ...]]:
    """Rows of one state, the figures of its shear transfers side by side."""
    for same in zip(*map(parts, group), strict=True):
        part = same[0][0]
        stars = [_star(part, b) for b in group]
        load, centre, mean, stress, _, used = zip(*(figures for _, figures in same), strict=True)
        cells = [
            _side_by_side(values, column.decimals, stars if column.key == "centre_mm" else None)
            for values, column in zip((load, centre, mean, stress, used), columns[1:], strict=True)
        ]
        yield (part, *cells)


def _star(part: str, b: Bowed) -> str:
    """A star on a pane that deflects beyond the linear theory, room for it on the others."""
    kind, at = part.split()
    return "*" if kind == "pane" and not b.panes[int(at) - 1].linear else " "


def _side_by_side(values: Sequence[float | None], decimals: int, stars: Sequence[str] | None) -> str:
    if all(value is None for value in values):
        return MISSING + (" " if stars else "")
    texts = [number(value, decimals) for value in values]
    if stars is None:
        return "/".join(texts)
    inner = [text + star.strip() for text, star in zip(texts, stars, strict=True)]
    return "/".join([*inner[:-1], texts[-1] + stars[-1]])


def _bowing_notes(case: Case, bowed: Sequence[Bowed]) -> Iterator[str]:
    """What is wrong in which states, and what the figures rest on."""
    for k in range(len(case.unit.gaps)):
        touching = [state(b, bowed) for b in bowed if b.gaps[k].touching]
        if touching:
            yield f"WARNING the panes touch in gap {k + 1}; figures beyond the model: {'; '.join(touching)}."
    for k in range(len(case.unit.panes)):
        beyond = [state(b, bowed) for b in bowed if (b.panes[k].use or 0.0) > 1.0]
        if beyond:
            yield f"WARNING pane {k + 1} is stressed beyond its design strength: {'; '.join(beyond)}."
    bent = {b.given_pressure for b in bowed for pane in b.panes if not pane.linear}
    if bent:
        low = "leave out the stress in the plane of the glass, and the stress may read too low"
        high = "read deflection and stress too high"
        ways = {
            (False,): low,
            (True,): high,
            (False, True): f"{low}; with wind or snow they {high}",
        }[tuple(sorted(bent))]
        factored = "" if _loads(case).factors == AS_GIVEN else ", with the partial factors"
        yield f"WARNING more than half the thickness{factored} (*): linear plates {ways}."
    if any(pane.use is not None for b in bowed for pane in b.panes):
        yield _strength_words(case, bowed)
    if any(gap.evacuated for gap in case.unit.gaps):
        yield "An evacuated gap keeps its width, its panes bend together."
    if _weight_assumed(case.unit):
        yield f"{UNWEIGHED.capitalize()}."


UNWEIGHED = "a pane of unknown density is given the weight of glass"


def _weight_assumed(unit: Unit) -> bool:
    """Whether weight that is not known bends a pane."""
    return unit.mass_per_area is None and abs(math.cos(unit.tilt)) > 1e-9


def _strength_words(case: Case, bowed: Sequence[Bowed]) -> str:
    durations = list(dict.fromkeys(b.duration for b in bowed))
    glasses = list(dict.fromkeys(pane.treatment for pane in case.unit.panes))
    strengths = [
        "/".join(f"{1e-6 * permissible_stress(glass, d):.1f}" for glass in glasses) + f" ({duration_words(d)})"
        for d in durations
    ]
    return (
        f"Design strength, MPa ({strength_source()}; the greatest stress is at the centre; loads together: the "
        f"shortest duration): {'/'.join(glasses)} {', '.join(strengths)}."
    )


def _fracture(case: Case, found: Service) -> Iterator[str]:
    yield "Thermal fracture, worst of the conditions"
    if not found.fractures:
        yield from wrapped("no condition of the case has sun on panes known in the sun: not worked out", "  ")
    for f in found.fractures:
        yield from wrapped(_fracture_words(case, f), "  ")
    yield from (line for text in _edge_doubts(found) for line in wrapped(text, "  "))
    for heat in found.interlayers:
        yield from wrapped(
            f"pane {heat.pane + 1}: interlayer {heat.material} reaches {number(heat.temperature - CELSIUS, 1)} °C "
            f"({heat.conditions})",
            "  ",
        )
    yield from (line for text in _fracture_source(case, found) for line in wrapped(text, "  "))


def _fracture_source(case: Case, found: Service) -> Iterator[str]:
    """Where the edge and the limits come from, and what is not in them."""
    if found.fractures:
        edge = ", ".join(words for name, words in EDGES.items() if any(f.edge_from == name for f in found.fractures))
        glasses = dict.fromkeys(case.unit.panes[f.pane].treatment for f in found.fractures)
        yield (
            f"Edge in its rebate {edge}. Partial shade and a blind close behind are not in it and make it worse. "
            f"Limits: {'; '.join(map(difference_source, glasses))}."
        )


def _edge_doubts(found: Service) -> Iterator[str]:
    """That an edge given is colder than both airs, once for where it is given."""
    doubtful = [f for f in found.fractures if _edge_is_doubtful(found, f)]
    for given in dict.fromkeys(f.edge_from for f in doubtful):
        names = ", ".join(dict.fromkeys(f.conditions for f in doubtful if f.edge_from == given))
        everywhere = "; it is taken under every condition without its own" if given == "frame" else ""
        yield f"the edge temperature {EDGES[given]} is colder than the air on both sides under {names}{everywhere}"


def _edge_is_doubtful(found: Service, f: Fracture) -> bool:
    """Whether the edge is colder than both airs of the conditions the verdict belongs to."""
    conditions = next(r.conditions for r in found.results if r.conditions.name == f.conditions)
    return f.edge < min(conditions.outdoor_air, conditions.indoor_air) - 0.05


def _fracture_words(case: Case, f: Fracture) -> str:
    pane = case.unit.panes[f.pane]
    outcome = f"margin {number(f.margin, 1)} K" if f.margin >= 0.0 else f"BEYOND THE LIMIT by {number(-f.margin, 1)} K"
    given = "" if f.edge_from == "dark" else f" {EDGES[f.edge_from]}"
    helps = f"; what would help: {', '.join(f.helps)}" if f.helps else ""
    edge = f"edge {number(f.edge - CELSIUS, 1)} °C{given}"
    return (
        f"pane {f.pane + 1} ({pane.treatment}, edges {pane.edge_work}): centre {number(f.centre - CELSIUS, 1)} °C, "
        f"{edge}, difference {number(f.difference, 1)} K of {f.permissible:.0f} K, "
        f"{outcome} ({f.conditions}){helps}"
    )


def _ageing(a: Ageing | None) -> Iterator[str]:
    if a is None:
        return
    yield from wrapped(_ageing_method(a))
    yield from (f"  {line}" for line in ageing_table(a).plain().splitlines())


def _ageing_method(a: Ageing) -> str:
    assumed = " (the limit of EN 1279-3 [memory])" if a.assumed else ""
    return (
        f"Ageing: {100 * a.rate:g} % of the remaining gas a year{assumed}, replaced by air; pessimistic line beside "
        f"it: of the whole; U by {a.state}"
    )


def _tolerances(t: Tolerances | None) -> Iterator[str]:
    if t is None or not t.spreads:
        return
    yield from wrapped(_tolerance_method(t))
    spreads = tolerance_table(t).only(range(5))
    columns = (*spreads.columns, Column("matters", "matters most"))
    rows = tuple((*row, _most(s.shares)) for row, s in zip(spreads.rows, t.spreads, strict=True))
    yield from (f"  {line}" for line in Table(columns, rows).plain().splitlines())
    if t.assumed:
        yield from wrapped(_assumed_words(t), "  ")


def _assumed_words(t: Tolerances) -> str:
    """What was assumed, each source once."""
    of_source: dict[str, list[str]] = {}
    for text in t.assumed:
        what, _, source = text.partition(": ")
        of_source.setdefault(source, []).append(what)
    said = [f"{', '.join(what)}: {source}" for source, what in of_source.items() if source]
    said += of_source.get("", [])
    return f"Assumed: {'; '.join(said)}." if said else ""


def _tolerance_method(t: Tolerances) -> str:
    return f"Tolerances: {t.samples} quasi-random samples, {t.distribution}, seed {t.seed}"


def _most(shares: dict[str, float]) -> str:
    """The kind of tolerance with the largest share of the variance."""
    if not shares:
        return ""
    kind, share = max(shares.items(), key=lambda pair: pair[1])
    return f"{kind} {100 * share:.0f} %"
