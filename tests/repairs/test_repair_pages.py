"""The pages of decisions, signatures and repairs, and the current repair status."""

from __future__ import annotations

import csv
import io

import pytest
from django.urls import reverse

from fleet.due import Counters
from repairs.forms.repair_lines import NO_SEMICOLON
from repairs.models import Disposition, DuePoint, Finding, Repair
from repairs.selectors.repair_status_cells import HEADER
from repairs.services.repair_entry import Answered, Data, RepairEntry
from repairs.services.repairs import repair_record
from tests.factories import NOW, PASSWORD, authorise, program, signed
from tests.finding_rows import defer
from tests.queries import assert_same_queries
from tests.record_rows import CRACK, FOUND, assessed, found

pytestmark = pytest.mark.django_db
APPROVAL = Data("repair_manual", "SRM 53-10-12", "14", "fig. 202")


@pytest.fixture(autouse=True)
def _on_the_day(settings):
    settings.FRAMEBAY_TODAY = "2025-01-01"


@pytest.fixture
def engineer(client, world):
    client.force_login(world.engineer)
    return client


def filled(*forms) -> dict[str, str]:
    """What a browser would send back: every field of the forms as shown."""
    data = {}
    for field in (field for form in forms for field in form):
        value = field.value()
        choices = getattr(field.field, "choices", None)
        if value is None and isinstance(choices, list):
            value = choices[0][0]
        if value not in (None, "", False) and not hasattr(value, "__iter__"):
            data[field.html_name] = str(getattr(value, "pk", value))
        elif isinstance(value, str) and value:
            data[field.html_name] = value
    return data


def repaired(world, **changes) -> Repair:
    entry = {
        "aircraft": world.aircraft,
        "place_entered": "STA 640 to 660, S-6R to S-8R",
        "kind": "external_doubler",
        "description": "doubler over the dent",
        "category": "a",
        "approval_basis": "repair_manual",
        "approval": APPROVAL,
        "released_on": FOUND,
        "at": Counters(604_000, 10_080),
        "released_by": world.certifier,
        "release_reference": "CRS-77",
        "performed_by": world.assessor,
    }
    return repair_record(
        entry=RepairEntry(**(entry | changes)),
        proof=program(world.certifier),
        actor=world.engineer,
        at=NOW,
    )


def decision(client, finding, **changes):
    url = reverse("disposition_new", args=[finding.pk])
    context = client.get(url).context
    said = filled(context["form"], context["raised"])
    said |= {
        "document_reference": "SRM 53-10-12",
        "document_page": "p. 101",
        "reason": "within the manual's limits",
        "kind": said.get("kind") or "accept",
    }
    return client.post(url, signed({**said, **changes}))


def test_no_decision_is_chosen_beforehand_but_to_rectify_a_crack(engineer, world):
    dent, crack = assessed(world), assessed(world, damage_type="crack", typed=CRACK)
    asked = [
        engineer.get(reverse("disposition_new", args=[one.pk])).context["form"]["kind"]
        for one in (dent, crack)
    ]
    assert [one.value() for one in asked] == ["", "rectify"]


def test_a_decision_through_the_form(engineer, world):
    finding = assessed(world)
    response = decision(engineer, finding)
    row = Disposition.objects.get()
    assert response.url == reverse("disposition", args=[row.pk])
    finding.refresh_from_db()
    assert finding.state == "accepted"
    page = engineer.get(response.url).content.decode()
    assert "SRM 53-10-12, p. 101" in page
    assert "accept as is" in page
    assert (
        row.number
        in engineer.get(reverse("finding", args=[finding.pk])).content.decode()
    )


def test_a_refused_decision_keeps_what_was_typed(engineer, world):
    finding = assessed(world, damage_type="crack", typed=CRACK)
    response = decision(engineer, finding, kind="accept")
    page = response.content.decode()
    assert "approval document of a design approval holder" in page
    assert "within the manual&#x27;s limits" in page
    assert not Disposition.objects.exists()


def test_a_running_deferral_is_extended_for_all_it_holds(client, world):
    """Trade practice: a deferral is extended by what replaces it, under its number."""
    one, two = assessed(world), assessed(world)
    row = defer(world, one, two)
    client.force_login(world.users["certifier"])
    url = f"{reverse('disposition_new', args=[one.pk])}?kind=defer"
    for name, pk in (("disposition", row.pk), ("finding", one.pk)):
        page = client.get(reverse(name, args=[pk])).content.decode()
        assert f'href="{url}">Extend</a>' in page
    context = client.get(url).context
    form = context["form"]
    assert (form["kind"].value(), form["replaces"].value()) == ("defer", row.pk)
    assert form["also"].value() == [two.pk]
    said = filled(form, context["raised"]) | {
        "also": [two.pk],
        "near_0": "no",
        "why_0": "one decision answers both",
        "document_reference": "SRM 53-10-12",
        "document_page": "p. 101",
        "reason": "to the next check",
        "limit_cycles": "10400",
        "crew_informed_on": "2025-01-01",
    }
    response = client.post(url, signed(said), follow=True)
    text = response.content.decode()
    assert f"{row.number} rev 1 is recorded" in text
    crumb = text.partition('class="crumb"')[2].partition("<h1>")[0]
    assert [row.number in crumb for row in (one, two)] == [True, True]
    earlier = client.get(reverse("disposition", args=[row.pk])).content.decode()
    assert "Extend</a>" not in earlier


def test_findings_near_are_offered_first_and_the_rest_is_folded(engineer, world):
    """Trade practice: one decision answers damage that lies together."""
    one, near = assessed(world), assessed(world)
    far = assessed(world, place_entered="STA 900, S-20L")
    url = reverse("disposition_new", args=[one.pk])
    context = engineer.get(url).context
    lists = {
        name: [value.value for value, _ in context["form"].fields[name].widget.choices]
        for name in ("also", "further")
    }
    assert lists == {"also": [near.pk], "further": [far.pk]}
    folded = {group.legend: group.folded for group in context["groups"]}
    assert folded["Further findings of the aircraft: 1"] is True
    said = {"further": [far.pk], "near_0": "no", "why_0": "an old report"}
    assert decision(engineer, one, **said).status_code == 302
    answered = Disposition.objects.get().finding_rows.all()
    assert {row.finding for row in answered} == {one, far}


def test_a_neighbour_is_reviewed_before_damage_is_left(engineer, world):
    found(world)
    finding = assessed(world)
    response = decision(engineer, finding)
    assert "Say whether F-0001 interacts" in response.content.decode()
    again = decision(engineer, finding, near_0="no", why_0="an old report")
    assert again.status_code == 302, again.context["form"].errors.as_text()
    assert Disposition.objects.get().neighbour_reviews.get().interacts is False


def test_accept_with_inspection_raises_it_from_the_same_form(engineer, world):
    finding = assessed(world)
    decision(
        engineer,
        finding,
        kind="accept_with_inspection",
        **{
            "raised-title": "look again",
            "raised-area": "STA 640",
            "raised-criteria": "no growth",
            "raised-threshold": "500 FC",
            "raised-repeat": "500 FC",
        },
    )
    requirement = Disposition.objects.get().requirements.get()
    assert requirement.title == "look again"
    assert DuePoint.objects.get().due_cycles == 10_580


def test_a_signature_needs_the_password_and_shows_whether_it_holds(client, world):
    client.force_login(world.engineer)
    decision(client, assessed(world))
    row = Disposition.objects.get()
    client.force_login(world.users["signatory"])
    url = reverse("disposition_sign", args=[row.pk])
    said = filled(client.get(url).context["form"])
    said |= {"meaning": "approved", "document_kind": ""}
    wrong = client.post(url, {**said, "password": "not it"})
    assert "not your password" in wrong.content.decode()
    assert client.post(url, {**said, "password": PASSWORD}).status_code == 302
    approval = row.approvals.get(meaning="approved")
    assert approval.signer == world.users["signatory"]
    page = client.get(reverse("disposition", args=[row.pk])).content.decode()
    assert page.count("agrees with what was signed") == 2


def test_a_repair_through_the_form_rectifies_its_finding(engineer, world):
    finding = assessed(world)
    url = reverse("repair_new")
    context = engineer.get(
        url, {"aircraft": world.aircraft.pk, "finding": finding.pk}
    ).context
    said = filled(context["form"], context["raised"], *context["answered"])
    assert said["at_cycles"] == "10,080" or said["at_cycles"] == "10080"
    key = f"finding-{finding.pk}"
    said |= {
        "place_entered": "STA 640 to 660, S-6R to S-8R",
        "description": "doubler",
        "kind": "external_doubler",
        "category": "a",
        "document_reference": "SRM 53-10-12",
        "document_page": "fig. 202",
        "released_by": world.certifier.pk,
        "release_reference": "CRS-77",
        "performed_by": world.assessor.pk,
        "length_mm": "20",
        "layers": "2024-T3 clad; 0.063 in; B-1",
        "fasteners": "solid rivet; 5/32 in; 0.8 in; -; 3; 48",
        f"{key}-answers": "on",
        f"{key}-covers": "on",
        f"{key}-damage_removed": "yes",
        "step": "save",
    }
    response = engineer.post(url, signed(said))
    repair = Repair.objects.get()
    assert response.url == reverse("repair", args=[repair.pk])
    assert repair.length_mm == pytest.approx(508.0)  # 20 in, the type's unit
    assert repair.layers.get().thickness_mm == pytest.approx(1.6002)
    fastener = repair.fasteners.get()
    assert (fastener.edge_distance_mm, fastener.rows, fastener.count) == (None, 3, 48)
    assert Finding.objects.get().state == "rectified"
    page = engineer.get(response.url).content.decode()
    assert "2024-T3 clad" in page
    assert "unknown</b>" not in page.split("Layers")[0].split("Findings it answers")[1]


def test_a_repair_that_is_refused_says_why_and_keeps_what_was_typed(engineer, world):
    url = reverse("repair_new")
    context = engineer.get(url, {"aircraft": world.aircraft.pk}).context
    said = filled(context["form"], context["raised"])
    said |= {
        "place_entered": "STA 640 S-6R",
        "description": "left as it was",
        "kind": "external_doubler",
        "category": "c",
        "released_by": world.certifier.pk,
        "document_reference": "SRM 53-10-12",
        "document_page": "fig. 202",
        "step": "save",
    }
    page = engineer.post(url, signed(said)).content.decode()
    assert "recorded with its replacement limit" in page
    assert "left as it was" in page
    assert not Repair.objects.exists()


@pytest.mark.parametrize(
    ("name", "line"),
    [
        ("layers", "doubler, 2024-T3 clad, 1.8"),
        ("required", "2024-T3 clad, 0.063 in, fig. 202"),
        ("fasteners", "solid rivet, 5/32 in, 0.8 in"),
    ],
)
def test_a_line_with_another_separator_is_refused_and_kept(engineer, name, line):
    """Trade practice: a thickness that nobody can compare was not stated."""
    page = engineer.post(reverse("repair_new"), {name: line, "step": "save"})
    (problem,) = page.context["form"].errors[name]
    field = page.context["form"].fields[name]
    assert problem == NO_SEMICOLON.format(
        line=line, cells=field.cells, example=field.example
    )
    assert page.context["form"][name].value() == line
    assert field.clean(field.example)[0][0] in ("2024-T3 clad", "solid rivet")


def test_choices_of_a_repair_say_what_they_are_and_who_holds_what(engineer, world):
    """Trade practice: certifying staff are known by number and validity."""
    row = defer(world, assessed(world))
    inspector = world.users["recorder"].person
    authorise(inspector, world.operator, "inspect")
    held = world.certifier.authorisations.get(scope="certify")
    url = reverse("repair_new")
    form = engineer.get(url, {"aircraft": world.aircraft.pk}).context["form"]
    told = {
        name: [str(label) for _, label in form.fields[name].choices][1:]
        for name in ("disposition", "released_by", "inspected_by")
    }
    assert told["disposition"] == [f"{row.number} defer, F-0001 dent, {row.decided_on}"]
    (releaser,) = told["released_by"]
    assert releaser.startswith(f"{world.certifier}, {held.number} ({held.valid_from}")
    assert [one.split(",")[0] for one in told["inspected_by"]] == [inspector.name]


def test_repairs_hiding_damage_are_found_by_the_filter(engineer, world):
    finding = assessed(world)
    hiding = repaired(
        world, findings=(Answered(finding, covers=True, damage_removed="unknown"),)
    )
    repaired(world)
    listed = engineer.get(reverse("repair_list"), {"hiding": "on"})
    assert [row.pk for row in listed.context["page"]] == [hiding.pk]
    page = engineer.get(reverse("repair", args=[hiding.pk])).content.decode()
    assert "not shown to be removed" in page


def test_the_status_has_the_columns_asked_of_a_repair_status(engineer, world):
    repaired(
        world,
        chart_number="12",
        ata="53-10",
        length_mm=508.0,
        width_mm=254.0,
        category="c",
        replacement_limit=Counters(cycles=15_000),
        release_reference="CRS-77",
    )
    url = reverse("repair_status", args=[world.aircraft.pk])
    page = engineer.get(url).content.decode()
    assert "doubler over the dent" in page
    text = engineer.get(url, {"format": "csv"}).content.decode("utf-8-sig")
    header, row, blank, *facts = csv.reader(io.StringIO(text))
    assert tuple(header) == HEADER
    assert blank == []
    told = dict(zip(header, row, strict=True))
    assert told["from station"] == "STA 640"
    assert told["to station"] == "STA 660"
    assert told["stringer / WL / BL"] == "S-6R to S-8R"
    assert told["dimensions"] == "20 in × 10 in"
    assert told["remaining material"] == "not applicable"
    assert (told["release date"], told["release reference"]) == (
        "2024-12-20",
        "CRS-77",
    )
    assert (told["FH"], told["FC"]) == ("10,066:40", "10080")
    assert (told["data"], told["data revision"]) == ("SRM 53-10-12", "14")
    assert told["limit"] == "replacement limit 15,000 FC"
    assert {name for name, _ in facts} >= {"as of", "known at", "rows"}


def test_a_removed_repair_leaves_the_status(engineer, world):
    repair = repaired(world)
    url = reverse("repair_status", args=[world.aircraft.pk])
    assert len(engineer.get(url).context["status"].rows) == 1
    engineer.post(
        reverse("repair_remove", args=[repair.pk]),
        {"removed_on": "2024-12-31", "reason": "panel replaced"},
    )
    assert len(engineer.get(url).context["status"].rows) == 0


def test_what_is_another_operators_is_not_found(client, world):
    client.force_login(world.engineer)
    finding = assessed(world)
    decision(client, finding)
    repair = repaired(world)
    client.force_login(world.outsider)
    for name, pk in (
        ("disposition", Disposition.objects.get().pk),
        ("disposition_sign", Disposition.objects.get().pk),
        ("disposition_new", finding.pk),
        ("repair", repair.pk),
        ("repair_sign", repair.pk),
        ("repair_photographs", repair.pk),
        ("repair_remove", repair.pk),
        ("repair_status", world.aircraft.pk),
    ):
        assert client.get(reverse(name, args=[pk])).status_code == 404, name
    assert repair.number not in client.get(reverse("repair_list")).content.decode()


def test_a_reader_may_look_but_not_decide_sign_or_repair(client, world):
    client.force_login(world.engineer)
    finding = assessed(world)
    decision(client, finding)
    repair, row = repaired(world), Disposition.objects.get()
    client.force_login(world.users["auditor"])
    for name, pk in (("disposition", row.pk), ("repair", repair.pk)):
        assert client.get(reverse(name, args=[pk])).status_code == 200, name
    for name, args in (
        ("disposition_new", [finding.pk]),
        ("disposition_sign", [row.pk]),
        ("repair_new", []),
        ("repair_sign", [repair.pk]),
        ("repair_photographs", [repair.pk]),
        ("repair_remove", [repair.pk]),
    ):
        assert client.get(reverse(name, args=args)).status_code == 403, name


def test_lists_cost_the_same_for_one_and_for_twenty(engineer, world):
    repaired(world)
    for url in (
        reverse("repair_list"),
        reverse("repair_status", args=[world.aircraft.pk]),
    ):
        assert_same_queries(engineer, url, lambda: [repaired(world) for _ in range(10)])
