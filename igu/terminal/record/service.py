"""The service study for scripts: SI, but degrees Celsius, millimetres and megapascals where the key says so."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from igu.model.case import Case
from igu.model.study_tables import Loads
from igu.studies.ageing import Ageing
from igu.studies.bowing import Bowed
from igu.studies.fracture import Fracture
from igu.studies.service import CAUTION, Service
from igu.studies.tolerance import Spread, Tolerances
from igu.studies.verdicts import Verdict
from igu.terminal.record.contract import celsius, fog_record


def service_record(
    case: Case, found: Service, judged: Sequence[tuple[Verdict, str]], notes: Sequence[str]
) -> dict[str, Any]:
    """One case; `judged` are the verdicts with their words, `notes` what the figures rest on."""
    return {
        "file": case.file,
        "title": case.title,
        "caution": CAUTION,
        "warnings": list(case.warnings),
        "notes": list(notes),
        "partial_factors": (case.loads or Loads()).factors._asdict(),
        "verdicts": [{"question": v.question, "verdict": v.outcome, "because": words} for v, words in judged],
        "fogging": [{"conditions": r.conditions.name, **fog_record(fog)} for r in found.results for fog in r.fog],
        "bowing": [_bowed(b) for b in found.bowed],
        "not_worked_out": list(found.gaps_in_knowledge),
        "thermal_fracture": [_fracture(f) for f in found.fractures],
        "interlayers": [
            {
                "pane": h.pane + 1,
                "material": h.material,
                "conditions": h.conditions,
                "hottest_C": celsius(h.temperature),
            }
            for h in found.interlayers
        ],
        "ageing": None if found.ageing is None else _ageing(found.ageing),
        "tolerances": None if found.tolerances is None else _tolerances(found.tolerances),
    }


def _bowed(b: Bowed) -> dict[str, Any]:
    return {
        "state": b.name,
        "load_duration": b.duration,
        "shear_transfer": b.transfer,
        "U_W_m2K": b.U,
        "U_flat_W_m2K": b.U_flat,
        "panes": [
            {
                "load_Pa": p.load,
                "centre_deflection_mm": 1e3 * p.centre,
                "mean_deflection_mm": 1e3 * p.mean,
                "stress_MPa": None if p.stress is None else 1e-6 * p.stress,
                "design_strength_MPa": None if p.strength is None else 1e-6 * p.strength,
                "small_deflection": p.linear,
            }
            for p in b.panes
        ],
        "gaps": [
            {
                "overpressure_Pa": g.overpressure,
                "centre_width_mm": 1e3 * g.centre,
                "mean_width_mm": 1e3 * g.mean,
                "touching": g.touching,
            }
            for g in b.gaps
        ],
    }


def _fracture(f: Fracture) -> dict[str, Any]:
    return {
        "pane": f.pane + 1,
        "conditions": f.conditions,
        "centre_C": celsius(f.centre),
        "edge_C": celsius(f.edge),
        "edge_from": f.edge_from,
        "difference_K": f.difference,
        "permissible_K": f.permissible,
        "margin_K": f.margin,
        "helps": list(f.helps),
    }


def _ageing(a: Ageing) -> dict[str, Any]:
    return {
        "leakage_pct_a": 100.0 * a.rate,
        "assumed": a.assumed,
        "U_by": a.state,
        "year": list(a.years),
        "share_pct": [100.0 * share for share in a.share],
        "U_W_m2K": list(a.U),
        "share_linear_pct": [100.0 * share for share in a.share_linear],
        "U_linear_W_m2K": list(a.U_linear),
        "U_declared_W_m2K": a.declared,
        "left_in_year": a.leaves,
        "left_in_year_linear": a.leaves_linear,
    }


def _tolerances(t: Tolerances) -> dict[str, Any]:
    return {
        "samples": t.samples,
        "seed": t.seed,
        "distribution": t.distribution,
        "spreads": [_spread(s) for s in t.spreads],
        "U_declared_W_m2K": t.declared,
        "holds_pct": None if t.holds is None else 100.0 * t.holds,
        "assumed": list(t.assumed),
    }


def _spread(s: Spread) -> dict[str, Any]:
    """A figure with its range, in the unit its name carries, and of its variance the share of every tolerance."""
    return {
        "quantity": s.quantity,
        "nominal": s.nominal,
        "low": s.low,
        "median": s.median,
        "high": s.high,
        "variance_pct": {kind: 100.0 * share for kind, share in s.shares.items()},
    }
