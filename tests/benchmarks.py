"""Timings as ratios within one run: `python -m tests.benchmarks`. `--write` puts them into docs/benchmarks.md."""

from __future__ import annotations

import os
import resource
import statistics
import subprocess
import sys
import time
from collections.abc import Callable
from concurrent.futures import ProcessPoolExecutor
from contextlib import nullcontext
from pathlib import Path
from typing import Any

import numpy as np
from scipy.optimize import root

from igu.model.catalogue import catalogue
from igu.model.conditions import Conditions
from igu.model.makeups import MakeUps
from igu.model.study_tables import GapChoices, PaneChoices, Seek, Targets
from igu.model.unit import Gap, Unit
from igu.ratings.sunlight import makeup_bands
from igu.solver.balance import evaluate, residual, spread
from igu.solver.newton import TARGET, _first_guess, solve
from igu.solver.problem import Problem, problem_of
from igu.studies.seek import BLOCK, seek

ROOT = Path(__file__).parents[1]
ARGON = (("argon", 0.9), ("air", 0.1))
WINTER = Conditions("winter", outdoor_air=255.15, indoor_air=294.15, outdoor_convection=26.0)
SUMMER = Conditions("summer", outdoor_air=305.15, indoor_air=297.15, outdoor_convection=15.0, sun=783.0)
GOALS = {
    "a": "scipy.optimize.root, one stack at a time, over the batch (at least 300)",
    "b": "batch solve over one residual evaluation of the same batch (at most 14)",
    "c": "igu solve on one case over python -c 'import numpy', processes (at most 2.5)",
    "d": "peak memory of a million stacks [MiB] (below 1024)",
    "e": "optics of 10,000 triples of 20 panes, normal incidence, over their thermal solve (at most 3)",
    "f": "the same at 60 degrees, both polarisations (no goal)",
    "g": "search over the bare batch solves and optics it needs, same workers (at most 1.5)",
    "h": "a million make-ups of a triple unit, spectral, all cores [s] (below 60)",
}


def median_time(work: Callable[[], Any], times: int = 5) -> float:
    """Median of several runs after one to warm up [s]."""
    work()
    spans = []
    for _ in range(times):
        start = time.perf_counter()
        work()
        spans.append(time.perf_counter() - start)
    return statistics.median(spans)


def triples(count: int, seed: int = 1) -> MakeUps:
    """Random triple units of 20 different panes and 5 gaps."""
    library, rng = catalogue(), np.random.default_rng(seed)
    coats = [None, "soft-single", "soft-double", "hard"]
    panes = tuple(
        library.pane([library.glass_ply(glass, t)], coating_in=coat)
        for glass in ("clear", "low-iron", "green", "grey", "bronze")
        for t, coat in zip((0.004, 0.006, 0.004, 0.006), coats, strict=True)
    )
    gaps = tuple(Gap(w, ARGON) for w in (0.008, 0.012, 0.014, 0.016, 0.018))
    index = rng.integers(0, len(panes), (3, count)), rng.integers(0, len(gaps), (2, count))
    return MakeUps(panes, gaps, *index, np.array([1.5]), np.array([np.pi / 2]))


def lit_problem(count: int) -> Problem:
    """The same units in winter with random absorbed heat."""
    heat = np.random.default_rng(2).uniform(0.0, 100.0, (3, count))
    return problem_of(triples(count), WINTER).with_absorbed(heat)


def against_scipy() -> float:
    """Time per stack of scipy.optimize.root on the same residual, start and tolerance, over that of the batch."""
    problem = lit_problem(10_000)
    batch = median_time(lambda: solve(problem)) / problem.size
    singles = [spread(problem.columns(np.array([k]))) for k in range(60)]
    starts = [_first_guess(b, 1)[:, 0] for b in singles]

    def one_by_one() -> None:
        for b, start in zip(singles, starts, strict=True):
            root(lambda T, b=b: residual(evaluate(T[:, None], b), b)[:, 0], start, tol=TARGET)

    return median_time(one_by_one) / len(singles) / batch


def in_residuals() -> float:
    """A whole solve of a batch in evaluations of its residual, both in blocks of the solver's own size."""
    problem = lit_problem(10_000)
    solution = solve(problem)
    blocks = [np.arange(k, min(k + 4096, problem.size)) for k in range(0, problem.size, 4096)]
    spreads = [(spread(problem.columns(b)), solution.T[:, b]) for b in blocks]
    once = median_time(lambda: [residual(evaluate(T, b), b) for b, T in spreads])
    return median_time(lambda: solve(problem)) / once


def processes() -> float:
    """Whole processes: a solve against importing numpy, median of seven in turn, bytecode cached as on an installed
    machine."""
    kept = {name: value for name, value in os.environ.items() if name != "PYTHONDONTWRITEBYTECODE"}
    commands = [
        [sys.executable, "-m", "igu", "solve", "cases/reading-room.toml"],
        [sys.executable, "-c", "import numpy"],
    ]
    spans: list[list[float]] = [[], []]
    for _ in range(8):
        for command, span in zip(commands, spans, strict=True):
            start = time.perf_counter()
            subprocess.run(command, cwd=ROOT, env=kept, check=True, stdout=subprocess.DEVNULL)
            span.append(time.perf_counter() - start)
    return statistics.median(a / b for a, b in zip(spans[0][1:], spans[1][1:], strict=True))


def memory() -> float:
    """Peak of a process that solves a million stacks [MiB]."""
    code = "from tests.benchmarks import lit_problem, solve; solve(lit_problem(1_000_000))"
    before = resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss
    subprocess.run([sys.executable, "-c", code], cwd=ROOT, check=True)
    peak = resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss
    assert peak > before
    return peak / 1024.0


def optics(incidence: float) -> float:
    """Optics of a batch over its thermal solve."""
    makeups = triples(10_000)
    problem = problem_of(makeups, WINTER)
    return median_time(lambda: makeup_bands(makeups, incidence=incidence)) / median_time(lambda: solve(problem))


def search_space(thicknesses: int) -> Seek:
    """A triple unit: 2 x t thicknesses a pane, 5 gaps, one coating on any allowed face."""
    pane = PaneChoices(("clear", "low-iron"), tuple(0.004 + 0.001 * k for k in range(thicknesses)))
    gap = GapChoices((0.010, 0.012, 0.014, 0.016, 0.018), (ARGON,))
    targets = Targets(U_max=1.1, g_min=0.4, light_transmittance_min=0.6)
    return Seek((3,), (pane, gap, pane, gap, pane), ("soft-single", "soft-double"), coatings_max=1, targets=targets)


def unit() -> Unit:
    """Size and tilt of the searches."""
    library = catalogue()
    return Unit((library.pane([library.glass_ply("clear", 0.004)]),), (), height=1.5)


def search_seconds(thicknesses: int, workers: int) -> tuple[float, int]:
    """Time of a search and the number of make-ups."""
    with ProcessPoolExecutor(workers) if workers > 1 else nullcontext() as executor:
        start = time.perf_counter()
        found = seek(search_space(thicknesses), unit(), catalogue(), cold=WINTER, sun=SUMMER, executor=executor,
                     workers=workers)  # fmt: skip
        return time.perf_counter() - start, found.total


def search_overhead() -> float:
    """One worker: the search over the solves (cold dark, sunny dark and lit) and optics of the same make-ups bare."""
    from igu.studies.space import spaces

    seconds, total = search_seconds(3, 1)
    (space,) = spaces(search_space(3), unit(), catalogue())
    start = time.perf_counter()
    for at in range(0, total, BLOCK):
        makeups = space.block(at, min(at + BLOCK, total))
        bands = makeup_bands(makeups)
        sunny = problem_of(makeups, SUMMER)
        solve(problem_of(makeups, WINTER))
        solve(sunny.with_absorbed(np.zeros((3, 1))))
        solve(sunny.with_absorbed(783.0 * bands.absorptance))
    return seconds / (time.perf_counter() - start)


def million_search() -> float:
    """Seconds for a million make-ups on all cores, scaled from the number searched."""
    seconds, total = search_seconds(8, os.cpu_count() or 1)
    return seconds * 1e6 / total


def figures() -> dict[str, float]:
    """Every figure of this run."""
    return {
        "a": against_scipy(),
        "b": in_residuals(),
        "c": processes(),
        "d": memory(),
        "e": optics(0.0),
        "f": optics(np.pi / 3),
        "g": search_overhead(),
        "h": million_search(),
    }


def table(found: dict[str, float]) -> str:
    """The figures as a Markdown table."""
    rows = [f"| {GOALS[key]} | {value:.1f} |" for key, value in found.items()]
    return "\n".join(["| what (goal) | this run |", "|---|---:|", *rows])


if __name__ == "__main__":
    text = table(figures())
    print(text)
    if "--write" in sys.argv:
        head = "# Benchmarks\n\n`python -m tests.benchmarks` prints ratios of one run.\n\n"
        machine = f"This run: {os.cpu_count()} cores, Python {sys.version.split()[0]}, numpy {np.__version__}.\n\n"
        (ROOT / "docs/benchmarks.md").write_text(head + machine + text + "\n", encoding="utf-8")
