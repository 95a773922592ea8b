"""The pages of occurrence reports and corrosion levels, through their forms."""

from __future__ import annotations

import csv
import datetime as dt
import io

import pytest
from django.urls import reverse

from fleet.canonical import digest
from repairs.models import CorrosionLevel, OccurrenceReport
from tests.factories import NOW, program
from tests.finding_rows import CORROSION, clock, close, defer, rectified
from tests.queries import assert_same_queries
from tests.record_rows import CRACK, FOUND, assessed, found

pytestmark = pytest.mark.django_db


@pytest.fixture(autouse=True)
def _on_the_day(settings):
    settings.FRAMEBAY_TODAY = "2024-12-21"


@pytest.fixture
def clocks(world):
    clock("report_hours", 72, "hours", source="Regulation (EU) 2015/1018")
    clock("report_preliminary_days", 30, "days", grade="memory")


@pytest.fixture
def report(world, clocks) -> OccurrenceReport:
    return found(world, damage_type="crack", typed=CRACK).reports.get()


@pytest.fixture
def engineer(client, world):
    client.force_login(world.engineer)
    return client


def page(client, name: str, pk: int) -> str:
    text = client.get(reverse(name, args=[pk])).content.decode()
    return " ".join(text.split())


def send(client, name: str, pk: int, **said):
    return client.post(reverse(name, args=[pk]), said)


def decide(client, report, **changes):
    said = {"reportable": "yes", "reason": "a crack in PSE"}
    said |= {"detected_on": "2024-12-20", "detected_time": "12:00"}
    return send(client, "report_decide", report.pk, **(said | changes))


SENT = {
    "sent_on": "2024-12-20",
    "sent_time": "18:30",
    "reference": "OR-1",
    "recipients": "the authority",
    "content": "Crack at STA 630.\r\n\r\nProblem text:\r\nIt grew.",
}


def test_it_is_answered_sent_supplemented_and_closed_through_its_pages(
    engineer, report
):
    assert decide(engineer, report).url == reverse("report", args=[report.pk])
    text = page(engineer, "report_send", report.pk)
    assert "Not known yet: " in text
    assert "Problem text:" in text
    assert send(engineer, "report_send", report.pk, **SENT).status_code == 302
    report.refresh_from_db()
    assert (report.state, f"{report.sent_at:%H:%M}") == ("sent", "18:30")
    shown = page(engineer, "report", report.pk)
    assert digest(report.content) in shown
    assert "preliminary analysis by <b>2025-01-19</b>" in shown
    follow = page(engineer, "report_supplement", report.pk)
    assert "preliminary analysis, due 2025-01-19" in follow
    more = SENT | {"reference": "OR-1/2", "content": "Two more holes."}
    send(engineer, "report_supplement", report.pk, **more)
    assert report.supplemented.get().content == "Two more holes."
    send(engineer, "report_close", report.pk, reason="analysis sent")
    report.refresh_from_db()
    assert report.state == "closed"


def test_a_report_sent_later_than_now_is_refused_with_both_times(
    engineer, report, monkeypatch
):
    """Trade practice: what has not gone out yet was not sent."""
    now = dt.datetime(2025, 1, 1, 14, 29, tzinfo=dt.UTC)
    monkeypatch.setattr("repairs.views.reports.moment", lambda: now)
    decide(engineer, report)
    late = SENT | {"sent_on": "2025-01-01", "sent_time": "15:10"}
    for changes, accepted in ((late, False), (late | {"sent_time": "14:29"}, True)):
        response = send(engineer, "report_send", report.pk, **changes)
        report.refresh_from_db()
        assert (report.state == "sent") is accepted
        if not accepted:
            text = response.content.decode()
            assert "2025-01-01 15:10 UTC lies ahead of now, 2025-01-01 14:29" in text
            assert 'value="15:10"' in text


def test_the_countdown_stands_on_the_page_of_the_finding(engineer, report):
    text = page(engineer, "finding", report.finding_id)
    assert "is it reportable?" in text
    assert "due 2024-12-23 00:00 UTC" in text


def test_an_answer_without_a_reason_keeps_what_was_typed(engineer, report):
    response = decide(engineer, report, reason=" ", detected_time="13:45")
    text = response.content.decode()
    assert response.status_code == 200
    assert 'value="13:45"' in text
    report.refresh_from_db()
    assert report.state == "to_assess"


def test_who_reported_is_shown_to_those_who_may_know(client, world, report):
    client.force_login(world.users["certifier"])
    decide(client, report)
    name = world.users["certifier"].person.name
    for role, may in (
        ("certifier", True), ("engineer", True), ("manager", True),
        ("administrator", True), ("recorder", False), ("planner", False),
        ("auditor", False), ("signatory", False),
    ):  # fmt: skip
        client.force_login(world.users[role])
        text = page(client, "report", report.pk).partition("<h1>")[2]
        assert (f"Decided by {name}" in text) is may, role
        assert (name in text) is may, role
        assert ("Who reported is confidential" in text) is not may, role


def test_a_problem_text_too_long_is_said_and_recorded_all_the_same(engineer, report):
    clock("report_text_characters", 10, "count", source="form instructions")
    decide(engineer, report)
    long = SENT | {"content": "Head\n\nProblem text:\n" + "x" * 11}
    response = engineer.post(
        reverse("report_send", args=[report.pk]), long, follow=True
    )
    assert "the form takes 10 (form instructions)" in response.content.decode()
    report.refresh_from_db()
    assert report.state == "sent"


def test_the_list_has_the_overdue_first_and_is_a_table_file_too(
    engineer, world, report, settings
):
    late = found(world, damage_type="crack", typed=CRACK, found_on=FOUND.replace(day=5))
    url = reverse("report_list")
    lines = engineer.get(url).context["page"].object_list
    assert [line.subject for line in lines] == [late, report.finding]
    assert [line.late for line in lines] == [True, False]
    text = engineer.get(url, {"format": "csv"}).content.decode("utf-8-sig")
    rows = list(csv.DictReader(io.StringIO(text)))
    assert [(row["record"], row["overdue"]) for row in rows] == [
        (late.number, "yes"),
        (report.finding.number, "no"),
    ]
    assert "Robin" not in text


def test_what_was_not_reportable_leaves_the_list_of_open_ones(engineer, report):
    decide(engineer, report, reportable="no", reason="tool mark, no crack")
    url = reverse("report_list")
    assert not engineer.get(url).context["page"].object_list
    assert len(engineer.get(url, {"show": "all"}).context["page"].object_list) == 1


def test_the_list_costs_the_same_for_one_and_for_twenty(engineer, world, report):
    def grow():
        for _ in range(19):
            found(world, damage_type="crack", typed=CRACK)

    assert_same_queries(engineer, reverse("report_list"), grow)


def test_the_overview_counts_what_is_to_be_answered_or_sent(engineer, world, report):
    found(world, damage_type="crack", typed=CRACK, found_on=FOUND.replace(day=5))
    text = " ".join(engineer.get(reverse("overview")).content.decode().split())
    row = text.partition("occurrence reports to answer or send")[2][:120]
    assert "1 overdue" in row
    assert '<td class="num">2</td>' in row


def test_a_set_aside_finding_asks_nothing_more(engineer, world, report):
    url = reverse("finding_void", args=[report.finding_id])
    engineer.post(url, {"reason": "wrong aircraft"})
    assert not engineer.get(reverse("report_list")).context["page"].object_list


def test_another_operator_finds_none_of_it(client, world, report):
    client.force_login(world.outsider)
    assert client.get(reverse("report", args=[report.pk])).status_code == 404
    listed = client.get(reverse("report_list")).content.decode()
    assert report.finding.number not in listed


def test_the_question_is_asked_under_further_rules_from_the_finding(engineer, world):
    clock("report_hours", 96, "hours", regime="FAA 145", source="14 CFR 145.221")
    finding = assessed(world)
    response = send(engineer, "finding_report", finding.pk, regime="FAA 145")
    made = finding.reports.get()
    assert response.url == reverse("report_decide", args=[made.pk])


# --- corrosion -----------------------------------------------------------------------

LEVEL = {
    "level": "3", "definitions": "Corrosion programme 2.3", "task": "C-53-120",
    "first_inspection": "unknown", "spread": "local", "single_rework": "beyond",
    "cumulative": "unknown", "determined_on": "2024-12-20",
}  # fmt: skip


def test_a_level_is_determined_and_corrected_through_its_page(engineer, world):
    finding = found(world, damage_type="corrosion", typed=CORROSION)
    said = LEVEL | {"determined_by": world.assessor.pk}
    assert send(engineer, "finding_level", finding.pk, **said).status_code == 302
    text = page(engineer, "finding", finding.pk)
    assert "as worded in Corrosion programme 2.3" in text
    assert text.count("no action recorded: it cannot be closed") == 2
    assert "Look on the sisters" in text
    corrected = said | {"level": "1"}
    send(engineer, "finding_level", finding.pk, **corrected)
    first, second = CorrosionLevel.objects.order_by("pk")
    assert second.replaces == first
    assert "corrects an earlier one" in page(engineer, "finding", finding.pk)


@pytest.mark.parametrize(
    ("changes", "words"),
    [
        ({"definitions": ""}, "This field is required"),
        ({"determined_on": "2024-12-19"}, "before F-0001 was found"),
        ({"determined_on": "2024-12-22"}, "lies after today"),
        ({"last_inspected_on": "2024-12-20"}, "is not before the find"),
    ],
)
def test_a_level_that_cannot_be_is_refused_and_kept_as_typed(
    engineer, world, changes, words
):
    finding = found(world, damage_type="corrosion", typed=CORROSION)
    said = LEVEL | {"determined_by": world.assessor.pk} | changes
    text = send(engineer, "finding_level", finding.pk, **said).content.decode()
    assert words in text
    assert 'value="C-53-120"' in text
    assert not CorrosionLevel.objects.exists()


def test_only_corrosion_has_a_level(engineer, world):
    finding = found(world)
    said = LEVEL | {"determined_by": world.assessor.pk}
    text = send(engineer, "finding_level", finding.pk, **said).content.decode()
    assert "is a dent; only corrosion has a corrosion level" in text


# --- deferrals -----------------------------------------------------------------------


def test_the_chain_of_deferrals_stands_on_both_pages(engineer, world):
    finding = assessed(world)
    first = defer(world, finding)
    second = defer(world, finding, replaces=first, reason="no part yet")
    for name, pk in (("finding", finding.pk), ("disposition", second.pk)):
        text = page(engineer, name, pk)
        assert "Found 2024-12-20, deferred 2nd time" in text
        assert text.count("to <b>10,300 FC</b>") >= 2
    assert "Found 2024-12-20, deferred 2nd time" in page(
        engineer, "disposition_new", finding.pk
    )


def test_a_passed_limit_stands_at_the_top_of_the_finding(engineer, world, settings):
    finding = assessed(world)
    defer(world, finding, limit_on=FOUND)
    text = page(engineer, "finding", finding.pk)
    assert "deferral limit passed: 2024-12-20, now 2024-12-21" in text


def test_closing_asks_on_reporting_only_while_it_is_undecided(client, world, clocks):
    client.force_login(world.users["certifier"])
    dent = rectified(world)
    crack = rectified(world, damage_type="crack", typed=CRACK)
    dents, cracks = (
        client.get(reverse("finding_close", args=[one.pk])).context["forms"][0].fields
        for one in (dent, crack)
    )
    assert "reportable" not in dents
    assert cracks["reportable"].label == "reportable under EASA"
    close(world, dent, proof=program(world.certifier), at=NOW)
    assert "closed" in page(client, "finding", dent.pk)


def test_the_history_tells_who_reported_to_those_only_who_may_know(
    client, world, report
):
    client.force_login(world.users["certifier"])
    decide(client, report)
    name = str(world.users["certifier"])
    for role, may in (("manager", True), ("auditor", False)):
        client.force_login(world.users[role])
        for page_name in ("history", "overview"):
            text = " ".join(client.get(reverse(page_name)).content.decode().split())
            row = f"<td>{name}</td><td>report decided</td>"
            assert (row in text) is may, (role, page_name)
            hidden = "<td>confidential</td><td>report decided</td>"
            assert (hidden in text) is not may, (role, page_name)
        found = client.get(reverse("history"), {"who": name}).content.decode()
        assert ("<td>report decided</td>" in found) is may, role
