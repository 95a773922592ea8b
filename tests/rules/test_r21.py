"""R21: whether it is reportable is decided, yes or no with the reason, before a
structural finding beyond limits is closed.

14 CFR 121.703(a)(14) and (15): structure that requires major repair; cracks, permanent
deformation or corrosion beyond the maximum acceptable. Regulation (EU) 2015/1018 annex
II 3(1): serious structural damage found during maintenance.
"""

from __future__ import annotations

import datetime as dt

import pytest
from django.core.exceptions import ValidationError

from fleet.due import Counters
from fleet.models import AircraftPeriod
from repairs.models import LimitCheck
from repairs.services.events import event_record
from repairs.services.reports import Reportability, report_decide
from tests.factories import NOW
from tests.finding_rows import CORROSION, close, decide, levelled, rectified, repaired
from tests.record_rows import CRACK, FOUND, assessed, found

pytestmark = pytest.mark.django_db
UNDECIDED = "reportable under EASA"
NO = Reportability(False, "found and repaired in the same check")


def beyond(finding) -> None:
    LimitCheck.objects.create(
        finding=finding, outcome="beyond", checked_at=NOW, lines="[]"
    )


def test_damage_beyond_a_recorded_limit_waits_for_the_answer(world):
    finding = rectified(world)
    beyond(finding)
    with pytest.raises(ValidationError, match=UNDECIDED):
        close(world, finding)
    assert close(world, finding, report=NO).state == "closed"


def test_a_crack_in_pse_waits_for_the_answer(world):
    finding = rectified(world, damage_type="crack", typed=CRACK)
    with pytest.raises(ValidationError, match=UNDECIDED):
        close(world, finding, cause="fatigue")
    close(world, finding, cause="fatigue", report=Reportability(True, "crack in PSE"))
    assert finding.reports.get().state == "reportable"


def test_a_major_repair_waits_for_the_answer(world):
    finding = assessed(world)
    decide(world, finding, kind="rectify", scale="major", scale_reason="doubler")
    repaired(world, finding)
    finding.refresh_from_db()
    with pytest.raises(ValidationError, match=UNDECIDED):
        close(world, finding)


def test_corrosion_of_level_2_waits_for_the_answer(world):
    finding = rectified(world, damage_type="corrosion", typed=CORROSION)
    levelled(world, finding, 2, programme_action="amendment 31")
    with pytest.raises(ValidationError, match=UNDECIDED):
        close(world, finding)


def test_damage_after_an_event_waits_for_the_answer_on_the_event(world):
    event = event_record(
        aircraft=world.aircraft,
        kind="hard_landing",
        happened_on=FOUND,
        counters=Counters(),
        description="",
        actor=None,
        at=NOW,
    )
    finding = rectified(world, event=event)
    with pytest.raises(ValidationError, match="whether V-0001 is reportable"):
        close(world, finding, report=NO)
    report_decide(
        report=event.reports.get(), answer=NO, decided_by=None, actor=None, at=NOW
    )
    assert close(world, finding).state == "closed"


def test_every_regime_of_that_day_wants_its_own_answer(world):
    AircraftPeriod.objects.create(
        aircraft=world.aircraft,
        operator=world.operator,
        registration="Q7-AAA",
        regime="FAA",
        from_on=FOUND - dt.timedelta(days=90),
        to_on=FOUND,
        entered_at=NOW,
    )
    world.aircraft.periods.filter(regime="EASA").update(
        from_on=FOUND + dt.timedelta(days=1)
    )
    finding = found(world, damage_type="crack", typed=CRACK)
    regimes = finding.reports.values_list("regime", flat=True)
    assert sorted(regimes) == ["EASA", "FAA"]


def test_no_is_no_answer_without_a_reason(world):
    finding = rectified(world, damage_type="crack", typed=CRACK)
    with pytest.raises(ValidationError, match="Say why"):
        close(world, finding, cause="fatigue", report=Reportability(False, " "))


def test_a_dent_that_nothing_asks_about_is_closed_without_the_question(world):
    finding = close(world, rectified(world))
    assert (finding.state, finding.reports.count()) == ("closed", 0)


def test_not_damage_is_no_way_around_the_answer(world):
    finding = assessed(world)
    beyond(finding)
    with pytest.raises(ValidationError, match=UNDECIDED):
        decide(world, finding, kind="not_damage", by=world.certifier)
