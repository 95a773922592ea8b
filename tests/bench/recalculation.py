"""How a whole-fleet recalculation scales from one process to two, and its memory.

python -m tests.bench.recalculation [--findings 2000] [--server postgres://...]

Cracks are copied by SQL from one that was recorded and evaluated through the services,
spread over twelve aircraft, so that 100,000 of them are there in a minute. Each run
makes all of them again after a policy of the type changed, one process first, then two,
then one once more; the rate of two is held against the mean of the runs beside it.
"""

from __future__ import annotations

import argparse
import os
import subprocess
import sys
import time
from pathlib import Path

from tests.bench.throwaway import ROOT, throwaway

AIRCRAFT = 12


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--findings", type=int, default=2_000)
    parser.add_argument("--server", default="", help="a PostgreSQL server; else SQLite")
    options = parser.parse_args()
    with throwaway(options.server):
        import django

        django.setup()
        made = copies(options.findings)
        print(
            f"{made:,} findings on {AIRCRAFT} aircraft, load {os.getloadavg()[0]:.1f}"
        )
        rates = []
        for factor, jobs in ((30.0, 1), (40.0, 2), (50.0, 1)):
            stricter(factor)
            seconds, peak = run(jobs)
            rates.append(made / seconds)
            print(
                f"{jobs} process(es): {seconds:7.1f} s, {rates[-1]:7.1f} a second, "
                f"peak {peak} MB a process"
            )
        alone = (rates[0] + rates[2]) / 2
        print(f"two processes over one: {rates[1] / alone:.2f}")


def run(jobs: int) -> tuple[float, int]:
    """Seconds of one recalculation, and the largest peak of its processes [MB]."""
    began, peak = time.perf_counter(), 0
    program = subprocess.Popen(
        [sys.executable, "manage.py", "reevaluate", "--operator", "NRT",
         "--stale", "--jobs", str(jobs)],
        cwd=ROOT,
        stderr=subprocess.DEVNULL,
    )  # fmt: skip
    while program.poll() is None:
        peak = max(peak, *(peak_mb(pid) for pid in family(program.pid)))
        time.sleep(0.2)
    if program.returncode:
        raise RuntimeError(f"reevaluate ended with {program.returncode}")
    return time.perf_counter() - began, peak


def family(pid: int) -> list[int]:
    """A process and those it has started."""
    try:
        children = Path(f"/proc/{pid}/task/{pid}/children").read_text().split()
    except OSError:
        return [pid]
    return [pid, *(int(child) for child in children)]


def peak_mb(pid: int) -> int:
    """Peak memory since the program of a process began; resource usage would count
    what its parent held when it was forked."""
    try:
        lines = Path(f"/proc/{pid}/status").read_text().splitlines()
    except OSError:
        return 0
    found = [line.split()[1] for line in lines if line.startswith("VmHWM")]
    return int(found[0]) // 1024 if found else 0


def stricter(factor: float) -> None:
    """The growth policy of the type with another factor: every evaluation is stale."""
    from fleet.models import FatiguePolicy
    from fleet.services.history import Writing
    from tests.factories import NOW

    old = FatiguePolicy.objects.get(name="growth_threshold", replaced_by=None)
    with Writing(actor=None, action="policy_change", at=NOW) as w:
        w.create(
            FatiguePolicy(
                aircraft_type=old.aircraft_type,
                name=old.name,
                revision=old.revision + 1,
                factor=factor,
                multiplies=old.multiplies,
                spectrum_severity_inside=old.spectrum_severity_inside,
                source=f"bench, factor {factor:g}",
                grade=old.grade,
                replaces=old,
            )
        )


def copies(count: int) -> int:
    """Findings like one that the services recorded, with measurement and evaluation."""
    from django.db.models import Max

    from fleet.models import RecordNumber
    from repairs.models import (
        Evaluation,
        EvaluationInput,
        Finding,
        MeasuredValue,
        Measurement,
    )
    from tests.factories import aircraft_make
    from tests.record_rows import FIRST

    first = seed()
    aircraft = [first.finding.aircraft] + [
        aircraft_make(
            first.operator,
            first.finding.aircraft.variant,
            f"Q7-X{number:02d}",
            data_from=FIRST,
        )
        for number in range(1, AIRCRAFT)
    ]
    finding, measurement = first.finding, first.finding.measurements.get()
    values = list(measurement.values.all())
    used = list(first.input_rows.all())
    top = Finding.objects.aggregate(n=Max("pk"))["n"]
    for start in range(0, count, 2_000):
        keys = range(start, min(start + 2_000, count))
        findings = Finding.objects.bulk_create(
            copied(finding, number=f"F-{9_000 + top + key}", client_key=None,
                   aircraft=aircraft[key % AIRCRAFT])
            for key in keys
        )  # fmt: skip
        measured = Measurement.objects.bulk_create(
            copied(measurement, finding=row) for row in findings
        )
        MeasuredValue.objects.bulk_create(
            copied(value, measurement=row) for row in measured for value in values
        )
        evaluations = Evaluation.objects.bulk_create(
            copied(first, finding=row, number=f"E-{9_000 + key}")
            for key, row in zip(keys, findings, strict=True)
        )
        EvaluationInput.objects.bulk_create(
            copied(one, evaluation=row,
                   **({"measurement": m} if one.measurement_id else {}))
            for row, m in zip(evaluations, measured, strict=True)
            for one in used
        )  # fmt: skip
    RecordNumber.objects.filter(kind="E").update(last=9_000 + count)
    return count


def copied(row, **changes):  # type: ignore[no-untyped-def]
    """A copy of a row with other columns, not yet written."""
    columns = {
        field.attname: getattr(row, field.attname)
        for field in row._meta.concrete_fields
        if not field.primary_key
    }
    made = type(row)(**columns)
    for name, value in changes.items():
        setattr(made, name, value)
    return made


def seed():  # type: ignore[no-untyped-def]
    """One crack evaluated through the services, as if it had been rectified."""
    from fleet.services.materials import demo_values_load
    from repairs.analysis.types import Use
    from repairs.services.evaluation_inputs import Choice
    from repairs.services.evaluations import evaluation_make
    from tests.factories import FIXTURES, NOW, TODAY
    from tests.record_rows import CRACK, found, world_make

    world = world_make()
    demo_values_load(
        path=FIXTURES / "materials.toml",
        operator=world.operator,
        person=world.assessor,
        second_person=world.approver,
        on=TODAY,
        actor=world.engineer,
        at=NOW,
    )
    finding = found(
        world,
        damage_type="crack",
        typed=CRACK,
        element="skin",
        place_entered="STA 630, 5 in below S-8R",
    )
    return evaluation_make(
        subject=finding,
        choice=Choice(Use.NO_KNOWN_CRACK),
        as_of=TODAY,
        actor=world.engineer,
        at=NOW,
    )


if __name__ == "__main__":
    main()
