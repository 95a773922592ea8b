"""Pages of inspection requirements, driven as people use them."""

from __future__ import annotations

import pytest
from django.contrib.messages import get_messages

from fleet.models import Aircraft
from repairs.models import (
    Accomplishment,
    DuePoint,
    InspectionRequirement,
    Measurement,
    RequirementSubject,
)
from repairs.services.requirement_draft import LimitEntry
from tests import due_rows as make
from tests.due_rows import TODAY, day, fly
from tests.factories import authorise, signed
from tests.repairs.test_inspections import (
    AT,
    REPEAT,
    THRESHOLD,
    done,
    evaluation,
    finding,
    raised,
    repair,
)

pytestmark = [
    pytest.mark.django_db,
    pytest.mark.usefixtures("demonstration_today"),
]


@pytest.fixture
def demonstration_today(settings):
    settings.FRAMEBAY_TODAY = str(TODAY)


@pytest.fixture
def fixed():
    aircraft = make.aircraft()
    fly(aircraft, 90)
    return repair(aircraft)


def as_user(client, role="engineer", of=None):
    user = make.user(role, of)
    client.force_login(user)
    return user


def said(response) -> str:
    return " ".join(str(x) for x in get_messages(response.wsgi_request))


def from_paper(done) -> dict:
    """What another did, recorded from its release document."""
    return signed(done) | {"release_document": make.document().pk}


FIELDS = {
    "title": "Doubler, row 1",
    "requirement_class": "repair",
    "area": "STA 840-860 S-19R",
    "method": "eddy_current_high",
    "criteria": "no crack",
    "effective_on": "2025-01-01",
    "anchor": "scheduled_if_late",
    "calendar": "date",
    "threshold_1": "15,000 FC",
    "threshold_1_base": "release",
    "threshold_2_base": "new",
    "threshold_3_base": "new",
    "threshold_combine": "first",
    "repeat_1": "5,000 FC",
    "repeat_combine": "first",
    "replace_1_base": "release",
}


class TestRequirementPage:
    def test_it_says_when_with_number_unit_and_date(self, client, fixed):
        """25,360 FC now, 4 a day: 36,340 - 25,360 = 10,980, 2,745 days from
        2024-12-29; 5,000 / 4 = 1,250 days."""
        requirement = raised(fixed, THRESHOLD, REPEAT)
        as_user(client)
        text = client.get(f"/requirements/{requirement.pk}/").content.decode()
        assert (
            "Due at 36,340 FC (first 15,000 FC from release): 10,980 FC left, forecast "
            "2032-07-05. Then every 5,000 FC, about 1,250 days at this rate." in text
        )
        assert "Unverified: awaits second keying" in text
        assert "Key it again" in text

    def test_an_interim_one_names_its_unapproved_calculation(self, client, fixed):
        requirement = raised(fixed, THRESHOLD, REPEAT, evaluation=evaluation(fixed))
        as_user(client)
        text = client.get(f"/requirements/{requirement.pk}/").content.decode()
        assert "come from E-0001, an unapproved calculation" in text

    def test_an_aircraft_without_an_answer_makes_it_incomplete(self, client, fixed):
        make.aircraft("Q7-TSB")
        requirement = raised(
            fixed,
            LimitEntry("threshold", "26,000 FC", base="new"),
            requirement_class="directive",
            repair=None,
            source_document=make.document(),
        )
        as_user(client)
        text = client.get(f"/requirements/{requirement.pk}/").content.decode()
        assert "Incomplete: unaccounted: Q7-TSB." in text


class TestNew:
    def test_it_is_in_force_as_soon_as_it_is_saved(self, client, fixed):
        as_user(client)
        response = client.post(
            f"/requirements/new/?repair={fixed.pk}",
            FIELDS | {"aircraft": [fixed.aircraft_id]},
        )
        requirement = InspectionRequirement.objects.get()
        assert response.url == f"/requirements/{requirement.pk}/"
        assert said(response).startswith("I-0001 is in force")
        assert DuePoint.objects.get().due_cycles == 36_340

    def test_intervals_of_a_calculation_are_filled_in(self, client, fixed):
        calculated = evaluation(fixed)
        as_user(client)
        text = client.get(f"/requirements/new/?evaluation={calculated.pk}")
        assert 'value="15,000 FC"' in text.content.decode()

    @pytest.mark.parametrize(
        ("base", "counted", "effective"),
        [
            ("since rework of F-0001", "effective", day(5)),
            ("since the panel was fitted on 2020-01-01", None, TODAY),
        ],
    )
    def test_a_threshold_since_rework_counts_from_the_day_of_the_rework(
        self, client, fixed, base, counted, effective
    ):
        blended = finding(fixed.aircraft)
        for number, stage in ((1, "as_found"), (2, "after_rework"), (3, "repeat")):
            Measurement.objects.create(
                finding=blended,
                number=number,
                stage=stage,
                measured_on=day(3 + number),
                entered_at=AT,
            )
        calculated = evaluation(
            fixed, repair=None, finding=blended, threshold_base=base
        )
        as_user(client)
        form = client.get(f"/requirements/new/?evaluation={calculated.pk}").context[
            "form"
        ]
        assert form.initial.get("threshold_1_base") == counted
        assert form.initial["effective_on"] == effective

    def test_a_longer_interval_than_calculated_comes_back_with_the_reason(
        self, client, fixed
    ):
        calculated = evaluation(fixed)
        as_user(client)
        response = client.post(
            f"/requirements/new/?evaluation={calculated.pk}",
            FIELDS | {"aircraft": [fixed.aircraft_id], "repeat_1": "5,001 FC"},
        )
        assert "is longer than E-0001 calculated" in response.content.decode()
        assert not InspectionRequirement.objects.exists()

    def test_a_bare_number_is_refused_beside_its_field(self, client, fixed):
        as_user(client)
        response = client.post(
            f"/requirements/new/?repair={fixed.pk}",
            FIELDS | {"aircraft": [fixed.aircraft_id], "repeat_1": "250"},
        )
        assert "“250” is not an interval" in response.content.decode()

    def test_a_known_crack_gets_no_interval_of_its_own(self, client, fixed):
        crack = finding(fixed.aircraft)
        as_user(client)
        response = client.post(
            f"/requirements/new/?finding={crack.pk}",
            FIELDS | {"aircraft": [fixed.aircraft_id], "threshold_1_base": "effective"},
        )
        assert "F-0001 is a known crack" in response.content.decode()

    def test_from_a_document_alone(self, client, fixed):
        as_user(client)
        response = client.post(
            "/requirements/new/",
            FIELDS
            | {
                "aircraft": [fixed.aircraft_id],
                "threshold_1_base": "new",
                "source_document": make.document().pk,
            },
        )
        assert response.status_code == 302
        assert DuePoint.objects.get().due_cycles == 15_000


class TestDone:
    def address(self, requirement) -> str:
        subject = requirement.subjects.get()
        return f"/requirements/{requirement.pk}/done/{subject.pk}/"

    def test_counters_as_flown_are_filled_in_and_the_next_due_opens(
        self, client, fixed
    ):
        requirement = raised(fixed, THRESHOLD, REPEAT)
        as_user(client, "certifier")
        page = client.get(self.address(requirement)).content.decode()
        assert 'value="25360"' in page
        response = client.post(
            self.address(requirement),
            from_paper(
                {
                    "done_on": "2024-12-30",
                    "result": "no_finding",
                    "at_minutes": "20,300:00",
                    "at_cycles": "25,360",
                }
            ),
        )
        assert said(response) == "Recorded. The next due point is open."
        assert Accomplishment.objects.get().at_minutes == 20_300 * 60
        assert DuePoint.objects.get(closed_on=None).due_cycles == 30_360

    def test_an_overrun_is_said_with_its_amount(self, client, fixed):
        requirement = raised(fixed, THRESHOLD, REPEAT)
        as_user(client, "certifier")
        response = client.post(
            self.address(requirement),
            from_paper(
                {
                    "done_on": "2024-12-30",
                    "result": "no_finding",
                    "at_cycles": "36,371",
                }
            ),
        )
        assert said(response).startswith("Recorded, 31 FC beyond its due")

    def test_what_does_not_apply_needs_its_reason(self, client, fixed):
        requirement = raised(fixed, THRESHOLD)
        as_user(client, "certifier")
        answer = signed({"done_on": "2024-12-30", "result": "not_applicable"})
        refused = client.post(self.address(requirement), answer)
        assert "Say why it does not apply." in refused.content.decode()
        client.post(self.address(requirement), answer | {"evidence": "skin renewed"})
        assert RequirementSubject.objects.get().reason == "skin renewed"

    def test_the_end_is_verified_by_another_person(self, client, fixed):
        one = as_user(client, "certifier")
        requirement = raised(fixed, THRESHOLD)
        subject = requirement.subjects.get()
        done(subject, 36_000, result="terminated", evidence="seen", actor=one)
        address = f"/requirements/{requirement.pk}/verify/{subject.pk}/"
        evidence = signed({"evidence": "part number read"})
        refused = client.post(address, evidence)
        assert "someone other than who recorded it" in refused.content.decode()
        two = as_user(client, "certifier")
        authorise(two.person, requirement.operator, "inspect")
        assert client.post(address, evidence).status_code == 302
        assert not DuePoint.objects.filter(closed_on=None).exists()


class TestSecondKeying:
    def test_the_page_shows_nothing_of_the_first_and_compares(self, client, fixed):
        one = make.user("engineer")
        requirement = raised(fixed, THRESHOLD, REPEAT, actor=one)
        address = f"/requirements/{requirement.pk}/again/"
        as_user(client, "planner")
        page = client.get(address).content.decode()
        assert "15,000" not in page
        assert "Q7-TSA" not in page
        wrong = client.post(address, FIELDS | {"applies_to": "Q7-TSB"})
        assert "differs from the first" in said(wrong)
        right = client.post(address, FIELDS | {"applies_to": "q7-tsa"})
        assert "it is verified" in said(right)


class TestSisters:
    def test_every_sister_is_asked_and_stays_on_the_list_until_it_answers(
        self, client, fixed
    ):
        sister = make.aircraft("Q7-TSB")
        crack = finding(fixed.aircraft)
        as_user(client)
        address = f"/findings/{crack.pk}/sisters/"
        assert "Q7-TSB" in client.get(address).content.decode()
        response = client.post(
            address,
            {
                "title": "look at FR 31",
                "area": "FR 31 S-14L",
                "method": "detailed_visual",
                "criteria": "no crack",
                "deadline": "90 days",
                "effective_on": "2025-01-01",
                "aircraft": [sister.pk],
            },
        )
        requirement = InspectionRequirement.objects.get()
        assert said(response).startswith("I-0001 asks 1 aircraft")
        assert requirement.finding == crack
        point = DuePoint.objects.get()
        assert (point.aircraft, str(point.due_on)) == (sister, "2025-04-01")
        text = client.get(response.url).content.decode()
        assert "Incomplete: 1 without an answer" in text
        done(requirement.subjects.get(), 25_000, on=TODAY)
        text = client.get(response.url).content.decode()
        assert "Incomplete" not in text


def addresses(fixed) -> dict[str, str]:
    requirement = raised(fixed, THRESHOLD, REPEAT)
    subject = requirement.subjects.get()
    crack = finding(fixed.aircraft)
    base = f"/requirements/{requirement.pk}/"
    return {
        "page": base,
        "again": f"{base}again/",
        "done": f"{base}done/{subject.pk}/",
        "verify": f"{base}verify/{subject.pk}/",
        "sisters": f"/findings/{crack.pk}/sisters/",
        "new": f"/requirements/new/?repair={fixed.pk}",
    }


class TestAccess:
    @pytest.mark.parametrize(
        "name", ["page", "again", "done", "verify", "sisters", "new"]
    )
    def test_an_outsider_finds_nothing(self, client, fixed, name):
        address = addresses(fixed)[name]
        as_user(client, "engineer", make.operator("OTH"))
        assert client.get(address).status_code == 404

    @pytest.mark.parametrize("name", ["again", "done", "verify", "sisters", "new"])
    def test_an_auditor_may_read_but_not_act(self, client, fixed, name):
        address = addresses(fixed)[name]
        as_user(client, "auditor")
        assert client.get(address).status_code == 403

    def test_an_outsider_sees_an_empty_list(self, client, fixed):
        raised(fixed, THRESHOLD)
        as_user(client, "engineer", make.operator("OTH"))
        assert "No requirement matches" in client.get("/requirements/").content.decode()

    @pytest.mark.parametrize("key", ["abc", "9999"])
    def test_a_record_that_is_none_is_not_found(self, client, fixed, key):
        as_user(client)
        assert client.get(f"/requirements/new/?repair={key}").status_code == 404


@pytest.mark.parametrize("count", [1, 20])
def test_queries_of_the_list_do_not_grow(
    client, fixed, count, django_assert_max_num_queries
):
    for _ in range(count):
        raised(fixed, THRESHOLD, REPEAT)
    as_user(client)
    with django_assert_max_num_queries(11):
        response = client.get("/requirements/")
    assert response.content.count(b'<th scope="row">') == count


@pytest.mark.parametrize("count", [1, 20])
def test_queries_of_a_requirement_do_not_grow_with_its_subjects(
    client, fixed, count, django_assert_max_num_queries
):
    fleet = [make.aircraft(f"Q7-T{n:02d}") for n in range(count)]
    requirement = raised(fixed, THRESHOLD, REPEAT, aircraft=fleet)
    for subject in requirement.subjects.all():
        done(subject, 30_000, on=day(90))
    as_user(client)
    with django_assert_max_num_queries(24):
        client.get(f"/requirements/{requirement.pk}/")


class TestAnswer:
    @pytest.fixture
    def directive(self, fixed):
        make.aircraft("Q7-TSB")
        return raised(
            fixed,
            LimitEntry("threshold", "26,000 FC", base="new"),
            requirement_class="directive",
            repair=None,
            source_document=make.document(),
        )

    def answer(self, client, directive, **data):
        aircraft = Aircraft.objects.get(registration="Q7-TSB")
        data = {"aircraft": aircraft.pk, "on": "2025-01-01"} | data
        return client.post(f"/requirements/{directive.pk}/answer/", data)

    def test_the_due_list_says_which_aircraft_have_no_answer(self, client, directive):
        as_user(client, "planner")
        text = client.get("/due/").content.decode()
        assert "I-0001</a> has no answer for 1 aircraft" in text

    def test_that_it_applies_puts_the_aircraft_on_the_list(self, client, directive):
        as_user(client)
        self.answer(client, directive, applies="yes")
        point = DuePoint.objects.get(aircraft__registration="Q7-TSB")
        assert point.due_cycles == 26_000
        assert "Incomplete" not in client.get("/due/").content.decode()

    def test_that_it_does_not_needs_its_reason(self, client, directive):
        as_user(client)
        refused = self.answer(client, directive, applies="no")
        assert "Say why it does not apply." in refused.content.decode()
        self.answer(client, directive, applies="no", reason="built with the change")
        page = client.get(f"/requirements/{directive.pk}/").content.decode()
        assert "does not apply: built with the change" in page
        assert "Incomplete" not in page

    def test_what_came_from_one_repair_concerns_its_aircraft_only(self, client, fixed):
        make.aircraft("Q7-TSB")
        requirement = raised(fixed, THRESHOLD)
        as_user(client)
        page = client.get(f"/requirements/{requirement.pk}/").content.decode()
        assert "Incomplete" not in page

    def test_an_outsider_and_an_auditor_cannot_answer(self, client, directive):
        as_user(client, "engineer", make.operator("OTH"))
        assert client.get(f"/requirements/{directive.pk}/answer/").status_code == 404
        as_user(client, "auditor")
        assert client.get(f"/requirements/{directive.pk}/answer/").status_code == 403


class TestCorrect:
    @pytest.fixture
    def wrong(self, fixed):
        subject = raised(fixed, THRESHOLD, REPEAT).subjects.get()
        return done(subject, 25_063, on=day(8)).row

    def test_the_row_as_it_should_have_been_counts(self, client, wrong):
        as_user(client, "certifier")
        address = f"/accomplishments/{wrong.pk}/correct/"
        assert 'value="25063"' in client.get(address).content.decode()
        data = from_paper(
            {"done_on": str(day(8)), "result": "no_finding", "at_cycles": "25,036"}
        )
        refused = client.post(address, data)
        assert "This field is required" in refused.content.decode()
        client.post(address, data | {"reason": "digits swapped"})
        assert DuePoint.objects.get(closed_on=None).due_cycles == 30_036
        page = client.get(f"/requirements/{wrong.subject.requirement_id}/")
        assert "corrects an earlier entry" in page.content.decode()

    def test_only_the_operator_and_its_roles(self, client, wrong):
        address = f"/accomplishments/{wrong.pk}/correct/"
        as_user(client, "certifier", make.operator("OTH"))
        assert client.get(address).status_code == 404
        as_user(client, "auditor")
        assert client.get(address).status_code == 403
