"""Two people, or one hand twice, at the same moment: one wins, the other is told.

Real threads with connections of their own on a copy of the test database. What is
expected is the project's own promise (each form is written once; nobody overwrites what
they have not seen) and, of numbers, that none is lost or given twice.
"""

from __future__ import annotations

import datetime as dt
import html
import re
import uuid
from functools import partial

import pytest
from django.test import Client

from fleet.due import Counters
from fleet.models import (
    Configuration,
    HistoryHead,
    PartInstallation,
    Policy,
    SentForm,
    UsageRecord,
)
from fleet.selectors.verify import problems
from fleet.services.aircraft import configuration_add
from fleet.services.documents import document_get_or_create
from fleet.services.history import Writing
from fleet.services.part_records import (
    life_limit_key,
    part_number_record,
    part_record,
)
from fleet.services.parts import part_remove
from fleet.services.sending import CHANGED, KEY_FIELD, SHOWN_FIELD
from repairs.models import Finding
from repairs.services.findings import FindingEntry, finding_record
from repairs.services.inspections import requirement_raise
from repairs.services.requirement_draft import LimitEntry, RequirementDraft
from tests.factories import BEGAN, NOW, TODAY, signed
from tests.finding_rows import decide
from tests.forms import form_in, form_on
from tests.record_rows import DENT, FOUND, assessed, found
from tests.together.threads import at_once

pytestmark = pytest.mark.django_db

ROUNDS, FEW = 20, 5
"""The numbers and the key of a form, on which the rest builds, are raced more often."""
TOLD = CHANGED.split("}")[1].split(".")[0].strip()


@pytest.fixture(autouse=True)
def _on_the_day(settings):
    settings.FRAMEBAY_TODAY = str(TODAY)


@pytest.fixture(scope="module")
def browsers(world) -> dict[str, list[Client]]:
    """Two signed-in browsers for every role that is asked for."""
    made: dict[str, list[Client]] = {}
    for role in ("engineer", "planner", "administrator", "signatory", "certifier"):
        made[role] = [Client(), Client()]
        for client in made[role]:
            client.force_login(world.users[role])
    return made


@pytest.fixture(autouse=True, scope="module")
def _nothing_is_lost(world):
    """After all rounds: every row is explained, every number given once and in turn."""
    yield
    assert list(problems()) == []
    given = list(Finding.objects.order_by("number").values_list("number", flat=True))
    assert given == [f"F-{n:04d}" for n in range(1, len(given) + 1)]


@pytest.fixture(scope="module")
def configuration(world) -> Configuration:
    """The aircraft's configuration, and a part number whose life ends far away."""
    number = part_number_record(
        actor=None, at=NOW, operator=world.operator, number="ARD-FIT-1", title="Fitting"
    )
    with Writing(actor=None, action="document_record", at=NOW) as w:
        document = document_get_or_create(
            w, operator=world.operator, kind="limitations", reference="ALS-4"
        )
    life_limit_key(
        actor=None,
        at=NOW,
        part_number=number,
        entered="90,000 FC",
        base="birth",
        document=document,
        page="4-1",
        effective_from=BEGAN,
    )
    return configuration_add(
        aircraft_type=world.variant.aircraft_type, code="std", name="Standard", at=NOW
    )


def opened() -> dict[str, str]:
    """What a page puts into its form when it is opened."""
    head = HistoryHead.objects.get().sequence
    return {KEY_FIELD: str(uuid.uuid4()), SHOWN_FIELD: str(head)}


def both_send(clients, address, *forms):
    """The same address, or one each, from two browsers at once."""
    addresses = [address] * 2 if isinstance(address, str) else address
    sends = [
        partial(client.post, one, form)
        for client, one, form in zip(clients, addresses, forms, strict=True)
    ]
    answers = at_once(*sends)
    for answer in answers:
        if isinstance(answer, Exception):
            raise answer
    return answers


def one_wins(answers, *, told=TOLD):
    """One is led on; the other reads what happened, and is given back. By the pages'
    text only: the contexts of answers made at once mix."""
    statuses = sorted(answer.status_code for answer in answers)
    text = html.unescape("".join(a.content.decode() for a in answers))
    listed = re.findall(r"<li>(.*?)</li>", text)
    assert statuses == [200, 302], listed
    assert told in text, listed
    return next(form_in(a) for a in answers if a.status_code == 200)


def test_the_same_form_at_the_same_moment_is_written_once(world, browsers):
    for n in range(ROUNDS):
        form = opened() | {
            "operator": world.operator.pk,
            "key": f"round_{n}",
            "value": "1",
            "unit": "days",
            "source": "M.A.305",
            "grade": "quoted",
            "effective_from": "2024-10-01",
        }
        answers = both_send(browsers["administrator"], "/policies/new/", form, form)
        assert [a.status_code for a in answers] == [302, 302]
        assert len({a.url for a in answers}) == 1
        assert Policy.objects.filter(key=f"round_{n}").count() == 1
    assert SentForm.objects.filter(path="/policies/new/").count() == ROUNDS


def test_two_revisions_of_one_policy_at_once(world, browsers):
    for n in range(ROUNDS):
        forms = [
            opened()
            | {
                "operator": world.operator.pk,
                "key": "late_entry_days",
                "value": value,
                "unit": "days",
                "source": "M.A.305",
                "grade": "quoted",
                "effective_from": str(BEGAN + dt.timedelta(days=n)),
            }
            for value in (30, 31)
        ]
        answers = both_send(browsers["administrator"], "/policies/new/", *forms)
        lost = one_wins(answers, told="late_entry_days" if n == 0 else TOLD)
        assert lost["source"] == "M.A.305"
    assert Policy.objects.filter(key="late_entry_days").count() == ROUNDS


def test_two_people_locate_one_finding_anew_at_once(world, browsers):
    finding = found(world)
    address = f"/findings/{finding.pk}/place/"
    for n in range(FEW):
        forms = [
            opened() | {"place_entered": f"STA 640+{n + 1}, {inch} in below S-7R"}
            for inch in (3, 5)
        ]
        answers = both_send(browsers["engineer"], address, *forms)
        finding.refresh_from_db()
        lost = one_wins(answers, told=f"→ {finding.place_text}")
        assert lost["place_entered"] in {form["place_entered"] for form in forms}
        assert lost["place_entered"] != finding.place_entered


def test_two_people_install_one_serial_at_once(world, browsers, configuration):
    part = _part(world)
    address = f"/safe-life/{part.pk}/install/"
    for n in range(FEW):
        forms = [
            opened() | _installing(world, configuration, position, n)
            for position in ("MLG LH", "MLG RH")
        ]
        one_wins(both_send(browsers["planner"], address, *forms))
        row = PartInstallation.objects.get(part=part, removed_on=None)
        counters = Counters(600_000 + n, 10_000 + n, 10_000 + n)
        part_remove(
            actor=None,
            at=NOW,
            part=part,
            on=row.installed_on,
            counters=counters,
            reason="next round",
            release_reference="release certificate",
        )


def test_two_serials_go_on_one_position_at_once(world, browsers, configuration):
    """Each serial is free; the position takes one, and the other reads which."""
    for n in range(FEW):
        parts = [_part(world), _part(world)]
        form = _installing(world, configuration, f"NLG {n}", n)
        addresses = [f"/safe-life/{part.pk}/install/" for part in parts]
        forms = [opened() | form for _ in parts]
        answers = both_send(browsers["planner"], addresses, *forms)
        on = PartInstallation.objects.get(position=f"NLG {n}").part
        one_wins(answers, told=on.serial)


def test_two_people_correct_one_usage_day_at_once(world, browsers):
    row = world.aircraft.usage.latest("day")
    for n in range(FEW):
        address = f"/aircraft/{world.aircraft.pk}/usage/{row.pk}/correct/"
        forms = [
            opened()
            | {"cycles": 2 * n + c, "minutes": "3:20", "source": "log", "reason": "x"}
            for c in (5, 6)
        ]
        answers = both_send(browsers["planner"], address, *forms)
        row = UsageRecord.objects.get(replaces=row)
        texts = [html.unescape(a.content.decode()) for a in answers]
        (lost,) = [text for text in texts if TOLD in text]
        assert f"→ {row.cycles}" in lost


def test_two_people_decide_on_one_finding_at_once(world, browsers):
    said = {
        "document_reference": "SRM 53-10-12",
        "document_page": "p. 101",
        "reason": "Within the manual's limits.",
        "limit_cycles": 12_000,
        "limit_on": "2025-03-01",
        "crew_informed_on": str(TODAY),
    }
    page: dict[str, str] = {}
    for n in range(FEW):
        finding = assessed(world, place_entered=_apart(n))
        address = f"/findings/{finding.pk}/disposition/"
        page = page or form_on(browsers["certifier"][0], address)
        page.pop("limit_checks", None)
        forms = [
            signed(page | said | opened() | {"kind": kind})
            for kind in ("defer", "accept")
        ]
        lost = one_wins(both_send(browsers["certifier"], address, *forms))
        assert lost["reason"] == "Within the manual's limits."
        assert finding.disposition_rows.count() == 1


def test_two_people_sign_one_decision_at_once(world, browsers):
    for n in range(FEW):
        finding = assessed(world, place_entered=_apart(FEW + n))
        decision = decide(world, finding)
        address = f"/dispositions/{decision.pk}/sign/"
        page = form_on(browsers["signatory"][0], address)
        forms = [
            signed(page | opened() | {"meaning": "approved", "statement": said})
            for said in ("One read it.", "Another read it.")
        ]
        lost = one_wins(both_send(browsers["signatory"], address, *forms))
        kept = decision.approvals.get(meaning="approved")
        assert lost["statement"] != kept.statement


def test_two_people_record_one_inspection_at_once(world, browsers):
    requirement = requirement_raise(
        draft=RequirementDraft(
            operator=world.operator,
            title="Look at the keel",
            requirement_class="operator",
            area="keel",
            criteria="no crack",
            method="detailed_visual",
            effective_on=BEGAN,
            limits=(LimitEntry("repeat", "500 FC"),),
            aircraft=(world.aircraft,),
            finding=found(world),
        ),
        actor=world.engineer,
        at=NOW,
    )
    subject = requirement.subjects.get()
    address = f"/requirements/{requirement.pk}/done/{subject.pk}/"
    page = form_on(browsers["certifier"][0], address) | {"result": "no_finding"}
    for n in range(FEW):
        forms = [
            signed(page | opened() | {"evidence": said}) for said in ("one", "other")
        ]
        lost = one_wins(both_send(browsers["certifier"], address, *forms))
        assert subject.accomplishments.count() == n + 1
        assert lost["evidence"] != subject.accomplishments.last().evidence
    assert subject.due_points.filter(closed_on=None).count() == 1


def test_two_people_claim_the_next_number_at_once(world):
    before = Finding.objects.count()
    for _ in range(ROUNDS):
        made = at_once(*[lambda: _found(world)] * 2)
        assert all(isinstance(one, Finding) for one in made), made
        assert len({one.number for one in made}) == 2
    assert Finding.objects.count() == before + 2 * ROUNDS


def _apart(n: int) -> str:
    """Bays so far from each other that no finding is near another."""
    return f"STA {400 + 32 * (n % 20)}, S-3{'LR'[n // 20]}"


def _found(world) -> Finding:
    entry = FindingEntry(
        aircraft=world.aircraft,
        place_entered="STA 640+10, 4 in below S-7R",
        damage_type="dent",
        found_on=FOUND,
        typed=DENT,
    )
    return finding_record(entry=entry, actor=world.users["recorder"], at=NOW)


def _part(world):
    number = world.operator.part_numbers.get()
    return part_record(
        actor=None,
        at=NOW,
        part_number=number,
        serial=uuid.uuid4().hex[:8],
        manufactured_on=BEGAN,
        release_reference="release certificate",
    )


def _installing(world, configuration, position, n) -> dict[str, object]:
    return {
        "aircraft": world.aircraft.pk,
        "position": position,
        "configuration": configuration.pk,
        "on": str(FOUND),
        "at_minutes": "10000:00",
        "at_cycles": 10_000 + n,
        "at_landings": 10_000 + n,
    }
