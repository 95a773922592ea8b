"""Crack growth: cycle by cycle beside C, per flight beside cycle by cycle, many lives.

`python -m tests.bench.growth`; needs a C compiler, no database. Every ratio is of one
run on one machine; times are the best of several.
"""

from __future__ import annotations

import ctypes
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from pathlib import Path

import numpy as np

from repairs.analysis.growth import blocks, by_cycle, loop, retardation
from repairs.analysis.growth import separable as gs
from repairs.analysis.growth import two_directions as td
from repairs.analysis.growth.laws import StressCycle, WalkerLaw
from repairs.analysis.growth.plastic_zone import StressState
from repairs.analysis.intensity.holes import hole_single
from repairs.analysis.intensity.through import centre_crack_secant
from repairs.analysis.spectra.counting import counted
from repairs.analysis.spectra.sequence import Residue, Treatment
from repairs.analysis.spectra.wing_sequence import (
    GROUND_RATIO,
    WING_LOWER_SURFACE,
    Halves,
    WingSequence,
)
from repairs.analysis.types import (
    ROOT_1000,
    EdgeLength,
    Grade,
    GrossStress,
    HalfLength,
    Reference,
)

SOURCE = Path(__file__).parent / "kernels" / "growth.c"
INVENTED = Reference("invented for the measurement", Grade.RECORDED)
LAW = WalkerLaw.from_ksi_root_inch(1.67e-9, 3.273, 0.618, INVENTED)
THICKNESS, RADIUS, WIDTH, LAST = 6.35, 3.175, 500.0, 60.0
FLAW = (1.27, 1.27)
MEAN_STRESS = 50.0
SEED = 20261201
FINDINGS = 10_000
RUNS = 5
NEW_PROCESS = (
    "import time; t = time.perf_counter(); "
    "from tests.bench import growth; s = time.perf_counter(); "
    "growth.first_run(); print(s - t, time.perf_counter() - s)"
)


def wing_block() -> blocks.CycleBlock:
    """The standard wing sequence, its cycles as counting closes them."""
    flown = WingSequence(
        MEAN_STRESS,
        GROUND_RATIO,
        SEED,
        Halves.DRAWN_APART,
        truncate_above=None,
        omit_below=None,
        place=WING_LOWER_SURFACE,
    ).sequence()
    found = counted(flown, Treatment(Residue.REPEATING))
    return blocks.CycleBlock.from_counted(found.maxima, found.minima, flown.flights)


def path() -> td.FlawPath:
    """A corner crack at an open hole, then a through crack to `LAST` mm."""
    return td.FlawPath(
        td.corner_at_hole(THICKNESS, RADIUS, WIDTH / 2),
        lambda c: hole_single(EdgeLength(c), 2 * RADIUS, WIDTH),
        THICKNESS,
        LAST,
    )


def models() -> dict[str, retardation.Retardation | None]:
    return {
        "no retardation": None,
        "Wheeler": retardation.Wheeler(1.43, 320.0, StressState.PLANE_STRESS, INVENTED),
        "Willenborg": retardation.Willenborg(
            3 * ROOT_1000, 2.5, 320.0, StressState.PLANE_STRESS, INVENTED
        ),
    }


def compiled_c(folder: Path) -> loop.March:
    """The same loop in C, called as the program calls its own."""
    library = folder / "growth.so"
    command = ["cc", "-O2", "-shared", "-fPIC", str(SOURCE), "-o", str(library), "-lm"]
    subprocess.run(command, check=True)
    function = ctypes.CDLL(str(library)).march
    function.restype = ctypes.c_int64
    function.argtypes = [ctypes.c_void_p] * 7 + [ctypes.c_int64] * 4

    def march(*given: object) -> int:
        arrays, numbers = given[:7], given[7:]
        pointers = (array.ctypes.data for array in arrays)  # type: ignore[attr-defined]
        return int(function(*pointers, *numbers, len(arrays[0])))  # type: ignore[arg-type]

    return march


def run_with(
    march: loop.March,
    block: blocks.CycleBlock,
    model: retardation.Retardation | None,
) -> tuple[by_cycle.SequenceGrowth, float, float]:
    """One life: the growth, seconds of the whole, seconds inside the loop."""
    inside = 0.0

    def timed(*given: object) -> int:
        nonlocal inside
        began = time.perf_counter()
        reason = march(*given)
        inside += time.perf_counter() - began
        return int(reason)

    following = by_cycle.Following(10**7)
    began = time.perf_counter()
    run = by_cycle._Run(LAW, block, path(), following, model, timed)
    grown = run.grown(FLAW)
    return grown, time.perf_counter() - began, inside


def best(job: Callable[[], float], runs: int = RUNS) -> float:
    return min(job() for _ in range(runs))


def timed(job: Callable[[], object]) -> float:
    began = time.perf_counter()
    job()
    return time.perf_counter() - began


def first_run() -> None:
    """The first life of a process, over one flight's cycles."""
    block = blocks.CycleBlock(np.full(100, 100.0), np.zeros(100), 1)
    by_cycle.life_by_cycle(LAW, block, path(), FLAW, by_cycle.Following(1))


def against_c(block: blocks.CycleBlock) -> None:
    """Print each model beside C."""
    ours = loop.compiled_march()
    with tempfile.TemporaryDirectory() as folder:
        theirs = compiled_c(Path(folder))
        for name, model in models().items():
            mine, their = [], []
            for _ in range(RUNS):  # in turn: another program's load strikes both
                mine.append(run_with(ours, block, model))
                their.append(run_with(theirs, block, model))
            grown, reference = mine[0][0], their[0][0]
            assert (grown.cycles, grown.end) == (reference.cycles, reference.end)
            whole, ours_in = min(r[1] for r in mine), min(r[2] for r in mine)
            in_c = min(r[2] for r in their)
            print(
                f"{name:<16}{grown.cycles:>11,} cycles{grown.flights:>9,} flights "
                f"{whole:>7.3f} s whole, loop {ours_in:.3f} s, in C {in_c:.3f} s: "
                f"{ours_in / in_c:.2f} times C"
            )


def per_flight(block: blocks.CycleBlock) -> None:
    """Print the per-flight form beside the loop, both timed in turn."""
    march = loop.compiled_march()
    table = blocks.CycleTable.of(block)

    def separable() -> td.ToEnd:
        cycle = blocks.equivalent_cycle(LAW, table)
        return td.grow_to_end(LAW, path(), cycle, FLAW)

    whole, took = [], []
    for _ in range(RUNS):
        life, seconds, _ = run_with(march, block, None)
        whole.append(seconds)
        took += [timed(separable) for _ in range(4)]
    once = best(lambda: timed(lambda: blocks.CycleTable.of(block)))
    flights = life.cycles / block.cycles * block.flights
    found = separable().cycles
    apart = 100 * (found / flights - 1)
    print(
        f"per flight      {found:>11,.1f} flights, {apart:+.4f} % "
        f"from the loop, {1000 * min(took):.2f} ms: {min(whole) / min(took):.0f} times "
        f"faster (counting the block once a spectrum: {1000 * once:.0f} ms)"
    )


def many_lives() -> None:
    """Print lives of many findings of one panel family."""
    draw = np.random.default_rng(SEED)
    starts = draw.uniform(3.0, 40.0, FINDINGS)
    ends = np.full(FINDINGS, 60.0)
    cycle = StressCycle(GrossStress(80.0), 0.1)

    def factor(a: float) -> float:
        return centre_crack_secant(HalfLength(a), 400.0)

    def lives() -> np.ndarray:
        return gs.GrowthTable(LAW, factor, cycle, 3.0, 60.0).lives(starts, ends)

    took = best(lambda: timed(lives), 10)
    one = timed(lambda: gs.growth_cycles(LAW, factor, cycle, 3.0, 60.0))
    print(
        f"{FINDINGS:,} findings  {1000 * took:.2f} ms, the table included; one life "
        f"alone {1000 * one:.2f} ms"
    )


def first_calls() -> None:
    """Print what the first life costs in a process, not compiled yet and compiled."""
    for state, cache in (("not compiled yet", True), ("compiled before", False)):
        with tempfile.TemporaryDirectory() as folder:
            command = [sys.executable, "-c", NEW_PROCESS]
            environment = {"NUMBA_CACHE_DIR": folder, "PATH": "/usr/bin:/bin"}
            if not cache:
                subprocess.run(
                    command, env=environment, check=True, capture_output=True
                )
            done = subprocess.run(
                command, env=environment, check=True, capture_output=True, text=True
            )
        imports, call = map(float, done.stdout.split())
        print(
            f"first life      {call:.2f} s, {state} (import of the program's part "
            f"{imports:.2f} s, without numba)"
        )


def main() -> None:
    block = wing_block()
    print(f"{block.cycles:,} cycles and {block.flights:,} flights a block")
    against_c(block)
    per_flight(block)
    many_lives()
    first_calls()


if __name__ == "__main__":
    main()
