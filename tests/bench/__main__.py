"""Measure the main jobs on the demo fleet, each beside a reference of the same run.

A machine's speed varies, so each time stands also as a multiple of a fixed piece of
work (SHA-256 over 8 MiB) timed just before it. Peak memory of the demo load is that of
its own process.
"""

from __future__ import annotations

import argparse
import hashlib
import json
import os
import resource
import statistics
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from dataclasses import asdict, dataclass
from pathlib import Path

ROOT = Path(__file__).parents[2]
OTHERS = ("counting", "growth", "locations", "recalculation")
"""Measurements against a reference of their own, each in a process of its own."""
REFERENCE = b"\0" * (8 * 1024 * 1024)


@dataclass(frozen=True)
class Figure:
    """One measured line."""

    what: str
    runs: int
    seconds: float
    times_reference: float
    note: str = ""


def reference_seconds() -> float:
    """Time of the fixed piece of work, the best of three."""
    times = []
    for _ in range(3):
        began = time.perf_counter()
        hashlib.sha256(REFERENCE).hexdigest()
        times.append(time.perf_counter() - began)
    return min(times)


def measure(what: str, job: Callable[[], str | None], *, runs: int = 5) -> Figure:
    """Median time of several runs; the job may return a note on what it did."""
    reference = reference_seconds()
    times, note = [], ""
    for _ in range(runs):
        began = time.perf_counter()
        note = job() or ""
        times.append(time.perf_counter() - began)
    middle = statistics.median(times)
    return Figure(what, runs, middle, middle / reference, note)


def demo_figure(data: Path) -> Figure:
    """Load the demo in a process of its own."""
    reference = reference_seconds()
    environment = os.environ | {"FRAMEBAY_DATA": str(data)}
    environment.pop("DATABASE_URL", None)
    began = time.perf_counter()
    subprocess.run(
        [sys.executable, "manage.py", "demo"],
        cwd=ROOT,
        env=environment,
        check=True,
        stdout=subprocess.DEVNULL,
    )
    took = time.perf_counter() - began
    peak = resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss / 1024
    return Figure("demo load", 1, took, took / reference, f"peak {peak:.0f} MB")


def main() -> None:
    parser = argparse.ArgumentParser(prog="python -m tests.bench", description=__doc__)
    parser.add_argument("--json", action="store_true", help="print JSON")
    parser.add_argument("--data", type=Path, help="folder holding the demo already")
    options = parser.parse_args()
    with tempfile.TemporaryDirectory() as kept:
        data = options.data or Path(kept)
        figures = [] if options.data else [demo_figure(data)]
        os.environ["FRAMEBAY_DATA"] = str(data)
        os.environ["DJANGO_SETTINGS_MODULE"] = "fleet.site.settings"
        import django

        django.setup()
        from tests.bench.jobs import JOBS

        figures += [measure(what, job) for what, job in JOBS.items()]
    if options.json:
        print(json.dumps([asdict(figure) for figure in figures], indent=1))
        return
    print(f"{'what':<44}{'runs':>5}{'seconds':>10}{'× reference':>13}  note")
    for row in figures:
        print(
            f"{row.what:<44}{row.runs:>5}{row.seconds:>10.4f}"
            f"{row.times_reference:>13.2f}  {row.note}"
        )
    for name in OTHERS:
        print(f"\n== {name}", flush=True)
        subprocess.run([sys.executable, "-m", f"tests.bench.{name}"], cwd=ROOT)


if __name__ == "__main__":
    main()
