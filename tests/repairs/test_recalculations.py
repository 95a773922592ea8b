"""Evaluations made again in bulk: what moves, what does not, going on after a stop."""

from __future__ import annotations

import datetime as dt
from io import StringIO

import pytest
from django.core.exceptions import ValidationError
from django.core.management import CommandError, call_command

from fleet.models import FatiguePolicy
from fleet.services.history import Writing
from fleet.services.materials import demo_values_load
from repairs.analysis.types import Use
from repairs.models import Evaluation, Recalculation, RecalculationItem
from repairs.selectors.evaluations import (
    ONE_METHOD,
    evaluations_stale,
    stale_reasons,
)
from repairs.selectors.recalculations import (
    SHORTER,
    moved_numbers,
    report_rows,
    run_items,
    run_progress,
)
from repairs.services import recalculations
from repairs.services.evaluation_gathered import Choice
from repairs.services.evaluations import evaluation_make, method_versions
from repairs.services.recalculation_parts import HOLD
from repairs.services.recalculations import (
    recalculation_start,
    recalculation_work,
)
from tests.factories import FIXTURES, NOW, TODAY
from tests.record_rows import CRACK, World, found, world_make

pytestmark = pytest.mark.django_db
LATER = NOW + dt.timedelta(days=1)


@pytest.fixture
def world() -> World:
    made = world_make()
    demo_values_load(
        path=FIXTURES / "materials.toml",
        operator=made.operator,
        person=made.assessor,
        second_person=made.approver,
        on=TODAY,
        actor=made.engineer,
        at=NOW,
    )
    return made


def evaluated(world: World, count: int = 3) -> list[Evaluation]:
    """Cracks in mid-bay, each evaluated as if it had been rectified."""
    made = []
    for number in range(count):
        finding = found(
            world,
            damage_type="crack",
            typed=CRACK,
            element="skin",
            place_entered=f"STA 630, {5 + number / 10} in below S-8R",
        )
        made.append(
            evaluation_make(
                subject=finding,
                choice=Choice(Use.NO_KNOWN_CRACK),
                as_of=TODAY,
                actor=world.engineer,
                at=NOW,
            )
        )
    return made


def started(world: World, *, stale_only: bool = False) -> Recalculation:
    return recalculation_start(
        operator=world.operator,
        stale_only=stale_only,
        as_of=TODAY,
        actor=world.engineer,
        at=LATER,
    )


def worked(run: Recalculation, **more: object) -> int:
    settled = recalculation_work(
        run,
        holder="test",
        actor=None,
        clock=lambda: LATER,
        **more,  # type: ignore[arg-type]
    )
    run.refresh_from_db()
    return settled


def stricter(world: World) -> None:
    """A policy of the type replaced by one with twenty times its factor."""
    old = FatiguePolicy.objects.get(name="growth_threshold", replaced_by=None)
    with Writing(actor=None, action="policy_change", at=NOW) as w:
        w.create(
            FatiguePolicy(
                aircraft_type=old.aircraft_type,
                name=old.name,
                revision=old.revision + 1,
                factor=20 * old.factor,
                multiplies=old.multiplies,
                spectrum_severity_inside=old.spectrum_severity_inside,
                source="the type's next revision",
                grade=old.grade,
                replaces=old,
            )
        )


def test_what_gives_the_same_bits_is_not_kept_again(world):
    evaluated(world)
    run = started(world)
    assert worked(run) == 3
    assert Evaluation.objects.count() == 3
    assert run_progress(run).unchanged == 3
    assert run.finished_at == LATER
    assert [row[3] for row in report_rows(run)] == ["the same"] * 3


def test_a_run_over_stale_ones_has_nothing_to_do_while_none_is(world):
    evaluated(world)
    with pytest.raises(ValidationError, match="nothing to recalculate"):
        started(world, stale_only=True)


def test_a_changed_policy_makes_stale_and_the_report_says_which_interval_shortens(
    world,
):
    before = evaluated(world)
    stricter(world)
    run = started(world, stale_only=True)
    assert run.wanted_count == 3
    worked(run)
    progress = run_progress(run)
    assert (progress.moved, progress.shorter, progress.unchanged) == (3, 3, 0)
    item = run_items(run, SHORTER).first()
    assert item.before in before
    assert item.after.replaces == item.before
    threshold = next(m for m in moved_numbers(item) if m.title == "threshold")
    assert threshold.after <= threshold.before
    rows = list(report_rows(run, SHORTER))
    assert {"threshold", "life after factor"} & {row[3] for row in rows}


def test_one_from_before_every_method_was_asked_is_stale(world):
    made = evaluated(world, 1)[0]
    columns = {
        field.attname: getattr(made, field.attname)
        for field in Evaluation._meta.concrete_fields
        if not field.primary_key
    }
    earlier = columns | {"methods": "", "number": "E-9001", "replaces_id": made.pk}
    with Writing(actor=None, action="evaluation_make", at=NOW) as w:
        old = w.create(Evaluation(**earlier))
    current = Evaluation.objects.filter(replaced_by=None)
    assert list(evaluations_stale(current, method_versions())) == [old]
    assert stale_reasons(old, method_versions()) == [ONE_METHOD]


def test_one_run_at_a_time(world):
    evaluated(world)
    started(world)
    with pytest.raises(ValidationError, match="still open"):
        started(world)


def test_a_worker_that_dies_loses_nothing_and_another_goes_on(world, monkeypatch):
    evaluated(world, 4)
    stricter(world)
    run = started(world, stale_only=True)
    monkeypatch.setattr(recalculations, "BATCH", 1)

    class Killed(BaseException):
        pass

    def killed(done: int) -> None:
        if RecalculationItem.objects.count() == 2:
            raise Killed

    with pytest.raises(Killed):
        worked(run, say=killed)
    assert RecalculationItem.objects.count() == 2
    assert worked(run) == 0, "its share is held until the hold ends"
    assert run.finished_at is None
    after = LATER + HOLD + dt.timedelta(seconds=1)
    settled = recalculation_work(run, holder="other", actor=None, clock=lambda: after)
    assert settled == 2
    run.refresh_from_db()
    assert run.finished_at == after
    assert Evaluation.objects.filter(replaced_by=None).count() == 4
    assert Evaluation.objects.count() == 8


def test_what_was_superseded_meanwhile_is_left(world):
    first = evaluated(world, 1)[0]
    stricter(world)
    run = started(world, stale_only=True)
    again = evaluation_make(
        subject=first.finding,
        choice=Choice(Use.NO_KNOWN_CRACK),
        as_of=TODAY,
        actor=world.engineer,
        at=LATER,
    )
    worked(run)
    assert run.finished_at is not None
    assert not Evaluation.objects.filter(replaces=again).exists()


def test_what_cannot_be_calculated_is_said_and_stays(world, monkeypatch):
    evaluated(world, 2)

    def fails(**_: object) -> None:
        raise ValueError("no such thing")

    run = started(world)
    monkeypatch.setattr(recalculations, "evaluation_prepare", fails)
    worked(run)
    assert run_progress(run).errors == 2
    assert {row[6] for row in report_rows(run)} == {"no such thing"}
    assert Evaluation.objects.filter(replaced_by=None).count() == 2


def command(*options: str, stdout: StringIO) -> None:
    """Run the command for the one operator of the tests."""
    call_command(
        "reevaluate", "--operator", "NRT", *options, stdout=stdout, stderr=StringIO()
    )


def test_the_command_starts_goes_on_and_reports(world):
    evaluated(world, 2)
    stricter(world)
    out = StringIO()
    call_command(
        "reevaluate", "--operator", "NRT", "--stale", stdout=out, stderr=StringIO()
    )
    assert "2 of 2 settled: 0 the same, 2 made again" in out.getvalue()
    out = StringIO()
    call_command(
        "reevaluate",
        "--operator",
        "NRT",
        "--report",
        "csv",
        stdout=out,
        stderr=StringIO(),
    )
    assert out.getvalue().splitlines()[0].startswith("subject,before,after")


@pytest.mark.parametrize(
    ("given", "said"),
    [
        ([], r"Several operators are recorded \(NRT, OTH\)"),
        (["--jobs", "0"], "at least one"),
        (["--operator", "NONE"], "There is no operator “NONE”"),
        (["--join", "99"], "There is no recalculation 99"),
    ],
)
def test_the_command_refuses_in_words(world, given, said):
    with pytest.raises(CommandError, match=said):
        call_command("reevaluate", *given)


def test_the_page_starts_a_run_works_on_it_and_shows_what_moved(world, client):
    evaluated(world, 2)
    stricter(world)
    client.force_login(world.engineer)
    shown = client.get("/recalculations/").content.decode()
    assert "Stale evaluations <span>2</span>" in shown
    answer = client.post(
        "/recalculations/", {"operator": world.operator.pk, "which": "stale"}
    )
    run = Recalculation.objects.get()
    assert answer["Location"] == f"/recalculations/{run.pk}/"
    client.post(f"/recalculations/{run.pk}/go-on/")
    page = client.get(f"/recalculations/{run.pk}/?which=shorter").content.decode()
    assert "100 %" in page
    assert "threshold" in page
    table = client.get(f"/recalculations/{run.pk}/?format=csv").content.decode()
    assert table.count("threshold") == 2
