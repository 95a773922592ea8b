"""Rainflow counting beside an independent library and beside the same loop in C.

`python -m tests.bench.counting`; needs no database, and a C compiler for the second.
Ratios are of one run on one machine: the quickest of several rounds that time both in
turn, since a busy machine only ever slows.
"""

from __future__ import annotations

import ctypes
import shutil
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from pathlib import Path

import numpy as np
import rainflow as library

from repairs.analysis.spectra import counting
from repairs.analysis.spectra.sequence import Floats, Residue

SOURCE = Path(__file__).parent / "kernels" / "rainflow.c"
REVERSALS, SEED, ROUNDS = 1_000_000, 20261201, 5
TIMES_LIBRARY, TIMES_C = 40, 2
Columns = tuple[Floats, Floats, Floats]
"""Ranges, means and counts in the order found."""
NEW_PROCESS = """
import time
import numpy as np
from repairs.analysis.spectra import counting
from repairs.analysis.spectra.sequence import Residue
history = np.random.default_rng(1).normal(size={size})
began = time.perf_counter()
import numba
imported = time.perf_counter()
counting.rainflow(history, Residue.HALVES)
print(imported - began, time.perf_counter() - imported)
"""


def random_reversals() -> Floats:
    """A million reversals of random stress."""
    drawn = np.random.default_rng(SEED).normal(80, 30, 2 * REVERSALS)
    return counting.reversals(drawn)[:REVERSALS].copy()


def by_us(history: Floats) -> Columns:
    found = counting.rainflow(history, Residue.HALVES)
    return found.ranges, found.means, found.counts


def by_library(history: list[float]) -> list[tuple[float, float, float, int, int]]:
    return list(library.extract_cycles(history))


def compiled_c(folder: Path) -> Callable[[Floats], Columns]:
    """The same loop in C, fed as ours is: checked, and with new arrays each time."""
    built = folder / "rainflow.so"
    command = ["cc", "-O2", "-shared", "-fPIC", str(SOURCE), "-o", str(built), "-lm"]
    subprocess.run(command, check=True)
    loop = ctypes.CDLL(str(built)).closed_cycles
    loop.restype = ctypes.c_int64

    def at(array: Floats) -> ctypes.c_void_p:
        return ctypes.c_void_p(array.ctypes.data)

    def count(history: Floats) -> Columns:
        assert np.isfinite(history).all()
        arrays = [np.empty(len(history)) for _ in range(4)]
        found = loop(
            at(history), ctypes.c_int64(len(history)), *(at(a) for a in arrays), 0
        )
        first, second, counts = (array[:found] for array in arrays[:3])
        cycles = counting.CountedCycles(first, second, counts, Residue.HALVES)
        return cycles.ranges, cycles.means, counts

    return count


def timed(job: Callable[[], object]) -> tuple[float, object]:
    began = time.perf_counter()
    found = job()
    return time.perf_counter() - began, found


def same(ours: Columns, theirs: Columns) -> None:
    for mine, other in zip(ours, theirs, strict=True):
        assert np.array_equal(mine, other)


def against_library(history: Floats) -> float:
    """Print our time beside the library's, counts asserted equal; return the ratio."""
    listed = history.tolist()
    ours = by_us(history)
    mine = its = float("inf")
    for _ in range(ROUNDS):
        took, rows = timed(lambda: by_library(listed))
        its = min(its, took)
        mine = min(mine, *(timed(lambda: by_us(history))[0] for _ in range(5)))
    ranges, means, counts, _, _ = np.array(rows).T
    same(ours, (ranges, means, counts))
    ratio = its / mine
    print(
        f"{len(history):,} reversals, {len(ours[2]):,} ranges counted alike: ours "
        f"{1000 * mine:.1f} ms, rainflow {library.__version__} "
        f"{1000 * its:.0f} ms: {ratio:.0f} times as fast (asked: {TIMES_LIBRARY})"
    )
    return ratio


def against_c(history: Floats) -> float | None:
    """Print our time beside the same loop in C; return the ratio, None without cc."""
    if shutil.which("cc") is None:
        print("no C compiler on the path: not measured beside C")
        return None
    with tempfile.TemporaryDirectory() as folder:
        in_c = compiled_c(Path(folder))
        same(by_us(history), in_c(history))
        rounds = [
            (timed(lambda: by_us(history))[0], timed(lambda: in_c(history))[0])
            for _ in range(5 * ROUNDS)
        ]
    mine, other = (1000 * min(column) for column in zip(*rounds, strict=True))
    ratio = mine / other
    print(
        f"the same with C -O2, counted alike: ours {mine:.1f} ms, C {other:.1f} ms: "
        f"{ratio:.2f} times C (asked: {TIMES_C})"
    )
    return ratio


def first_calls() -> None:
    """Print what a new process pays: not compiled yet, compiled, not needed."""
    with tempfile.TemporaryDirectory() as folder:
        environment = {"NUMBA_CACHE_DIR": folder, "PATH": "/usr/bin:/bin"}
        for state in ("not compiled yet", "compiled before"):
            imports, call = new_process(counting.COMPILED_FROM, environment)
            print(
                f"first count of a process, {state}: {1000 * call:.0f} ms, and "
                f"{1000 * imports:.0f} ms to import numba"
            )
    short = np.random.default_rng(1).normal(size=counting.COMPILED_FROM - 1)
    took = min(timed(lambda: by_us(short))[0] for _ in range(5))
    print(f"{len(short):,} points without numba: {1000 * took:.1f} ms")


def new_process(size: int, environment: dict[str, str]) -> tuple[float, float]:
    """Seconds to import numba and of the first count, in a process of its own."""
    done = subprocess.run(
        [sys.executable, "-c", NEW_PROCESS.format(size=size)],
        env=environment,
        check=True,
        capture_output=True,
        text=True,
    )
    imports, call = map(float, done.stdout.split())
    return imports, call


def main() -> None:
    history = random_reversals()
    against_library(history)
    against_c(history)
    first_calls()


if __name__ == "__main__":
    main()
