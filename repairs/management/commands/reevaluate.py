"""`manage.py reevaluate [--stale] [--jobs N]`: evaluations made again in bulk."""

from __future__ import annotations

import csv
import os
import socket
import subprocess
import sys
import time
from dataclasses import asdict
from typing import Any, NoReturn

from django.conf import settings
from django.core.exceptions import ValidationError
from django.core.management.base import BaseCommand, CommandError, CommandParser

from fleet.clock import now, today
from fleet.models import Operator
from repairs.models import Recalculation
from repairs.selectors.recalculations import (
    REPORT_HEADER,
    report_rows,
    run_open,
    run_progress,
)
from repairs.services.recalculations import recalculation_start, recalculation_work

NO_OPERATOR = "There is no operator “{code}”; there is: {held}."
WHICH_OPERATOR = "Several operators are recorded ({held}); name one: --operator CODE."
ONE_JOB = "--jobs {jobs}: at least one."
NO_RUN = "There is no recalculation {number}; the open ones are: {held}."
WORKER_ENDED = "A worker process ended with {code}; run the command again to go on."
GOING_ON = "Going on with recalculation {number}: {done:,} of {wanted:,} are done."
STARTED = "Recalculation {number}: {wanted:,} evaluations."
PAUSE = 5.0
"""Seconds between looks for a run that somebody started on the page."""
SUMMARY = (
    "{settled:,} of {wanted:,} settled: {unchanged:,} the same, {moved:,} made again, "
    "{shorter:,} with a shorter life or interval, {less:,} with a smaller margin, "
    "{errors:,} with an error."
)


class Command(BaseCommand):
    help = (
        "Make the evaluations in force again from the record as it stands. What gives "
        "the same is left; what moves is kept as a new, unchecked evaluation. A run "
        "that was stopped goes on where it ended. Other machines share the work with "
        "--join; --serve waits for runs that are started on the page."
    )

    def add_arguments(self, parser: CommandParser) -> None:
        parser.add_argument(
            "--operator", default="", help="Code, if there are several."
        )
        parser.add_argument(
            "--stale", action="store_true", help="Only those whose record has changed."
        )
        parser.add_argument("--jobs", type=int, default=1, help="Worker processes.")
        parser.add_argument(
            "--join", type=int, metavar="NUMBER", help="Only help with this run."
        )
        parser.add_argument(
            "--serve", action="store_true", help="Stay, and take up every run."
        )
        parser.add_argument(
            "--report",
            choices=("short", "csv"),
            default="short",
            help="Counts, or every number that moved.",
        )

    def handle(self, *args: Any, **options: Any) -> None:
        if options["jobs"] < 1:
            raise CommandError(ONE_JOB.format(jobs=options["jobs"]))
        if options["serve"]:
            self._serve()
        if options["join"] is not None:
            _share(_run_numbered(options["join"]))
            return
        run = self._run(_operator(options["operator"]), stale=options["stale"])
        _work(run, options["jobs"])
        run.refresh_from_db()
        self._report(run, options["report"])

    def _run(self, operator: Operator, *, stale: bool) -> Recalculation:
        """The run that is open, else a new one."""
        found = run_open(operator)
        if found is not None:
            done = found.items.count()
            words = GOING_ON.format(
                number=found.pk, done=done, wanted=found.wanted_count
            )
            self.stderr.write(words)
            return found
        try:
            run = recalculation_start(
                operator=operator, stale_only=stale, as_of=today(), actor=None, at=now()
            )
        except ValidationError as error:
            raise CommandError(" ".join(error.messages)) from error
        self.stderr.write(STARTED.format(number=run.pk, wanted=run.wanted_count))
        return run

    def _report(self, run: Recalculation, form: str) -> None:
        if form == "csv":
            writer = csv.writer(self.stdout)
            writer.writerow(REPORT_HEADER)
            writer.writerows(report_rows(run))
        else:
            self.stdout.write(SUMMARY.format(**asdict(run_progress(run))))

    def _serve(self) -> NoReturn:
        """Take up every open run, and look again after a pause."""
        while True:
            for run in Recalculation.objects.filter(finished_at__isnull=True):
                _share(run)
            time.sleep(PAUSE)


def _run_numbered(number: int) -> Recalculation:
    found = Recalculation.objects.filter(pk=number).first()
    if found is None:
        rows = Recalculation.objects.filter(finished_at__isnull=True)
        held = ", ".join(str(row.pk) for row in rows) or "none"
        raise CommandError(NO_RUN.format(number=number, held=held))
    return found


def _operator(code: str) -> Operator:
    rows = Operator.objects.order_by("code")
    held = ", ".join(row.code for row in rows) or "none"
    if code:
        found = rows.filter(code=code).first()
        if found is None:
            raise CommandError(NO_OPERATOR.format(code=code, held=held))
        return found
    if rows.count() != 1:
        raise CommandError(WHICH_OPERATOR.format(held=held))
    return rows.get()


def _work(run: Recalculation, jobs: int) -> None:
    """Work alone, or beside processes of their own that join the run."""
    program = [sys.executable, str(settings.BASE_DIR / "manage.py"), "reevaluate"]
    others = [
        subprocess.Popen([*program, "--join", str(run.pk)]) for _ in range(jobs - 1)
    ]
    _share(run)
    for other in others:
        if code := other.wait():
            raise CommandError(WORKER_ENDED.format(code=code))


def _share(run: Recalculation) -> None:
    """Take shares of a run until none is left, saying how many are done."""
    holder = f"{socket.gethostname()} {os.getpid()}"
    counted = 0

    def say(done: int) -> None:
        nonlocal counted
        counted += done
        if sys.stderr.isatty():
            sys.stderr.write(f"\r{holder}: {counted:,} ")

    recalculation_work(run, holder=holder, actor=None, clock=now, say=say)
