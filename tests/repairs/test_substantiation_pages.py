"""The pages of folders: drafted from a finding, reviewed, signed, listed, linked."""

from __future__ import annotations

import html
import re

import pytest
from django.core.files.uploadedfile import SimpleUploadedFile
from django.urls import reverse

from repairs.models import Substantiation
from repairs.selectors.substantiation_needs import TOUCHES
from tests.factories import PASSWORD, authorise, user_make
from tests.folder_rows import folders_make
from tests.queries import assert_same_queries
from tests.record_rows import CRACK, assessed, found
from tests.rules.test_r10 import released, stage_1

pytestmark = pytest.mark.django_db
NEAR = "STA 640+10, 10 in below S-7R"
FOLDER = {
    "title": "External doubler at STA 650",
    "answer": "permanent",
    "scale": "major",
    "scale_reason": "alters a principal structural element",
    "category": "b",
    "data_due_on": "2025-11-01",
}


@pytest.fixture(autouse=True)
def _on_the_day(settings):
    settings.FRAMEBAY_TODAY = "2025-01-01"


@pytest.fixture
def folders(world):
    return folders_make(world)


@pytest.fixture
def engineer(client, world):
    client.force_login(world.engineer)
    return client


def text_of(client, name, *args) -> str:
    response = client.get(reverse(name, args=args))
    assert response.status_code == 200
    return response.content.decode()


def post(client, name, *args, **said):
    return client.post(reverse(name, args=args), said)


def test_a_folder_is_drafted_from_its_finding_and_named_on_it(engineer, folders, world):
    finding = assessed(world)
    page = text_of(engineer, "finding", finding.pk)
    address = f"{reverse('substantiation_new')}?finding={finding.pk}"
    assert address in page
    said = FOLDER | {"findings": [finding.pk], "prepared_by": world.assessor.pk}
    response = engineer.post(address, said)
    folder = Substantiation.objects.get()
    assert response.url == reverse("substantiation", args=[folder.pk])
    assert folder.finding_rows.get().finding == finding
    assert folder.prepared_by == world.assessor
    assert reverse("substantiation", args=[folder.pk]) in text_of(
        engineer, "finding", finding.pk
    )


def test_what_is_open_nearby_is_offered_first_and_the_rest_folded(
    engineer, folders, world
):
    """Damages near one another are judged together (14 CFR 26.41: the repair and the
    structure it affects); the reach of the policy is 508 mm, 20 in."""
    finding = assessed(world)
    near = found(world, place_entered=NEAR)
    far = found(world, place_entered="STA 900, S-7R")
    address = f"{reverse('substantiation_new')}?finding={finding.pk}"
    page = engineer.get(address).content.decode()
    first, _, folded = page.partition("Further findings of the aircraft: 1")
    ticked = [f'name="findings" value="{one.pk}"' for one in (finding, near)]
    assert 0 < first.index(ticked[0]) < first.index(ticked[1])
    assert f'name="further" value="{far.pk}"' in folded
    assert "<details><summary>" in first[-30:]
    place = html.escape(near.place_text)
    assert f"{near} {near.get_damage_type_display()}, {place}, reported" in first
    said = FOLDER | {"findings": [finding.pk], "further": [far.pk]}
    refused = engineer.post(address, said).content.decode()
    assert "<details open><summary>Further findings" in refused
    engineer.post(address, said | {"prepared_by": world.assessor.pk})
    covered = Substantiation.objects.get().finding_rows.values_list("finding")
    assert {key for (key,) in covered} == {finding.pk, far.pk}


def test_a_closed_finding_nearby_is_folded_away(engineer, folders, world):
    """Closed means that no damage remains (this programme's own word)."""
    finding, closed = assessed(world), found(world, place_entered=NEAR)
    type(closed).objects.filter(pk=closed.pk).update(state="closed")
    address = f"{reverse('substantiation_new')}?finding={finding.pk}"
    page = engineer.get(address).content.decode()
    assert f'name="further" value="{closed.pk}"' in page
    assert f'name="findings" value="{closed.pk}"' not in page


def test_a_folder_is_drafted_from_a_repair_and_becomes_its_folder(
    engineer, folders, world
):
    repair = released(world)
    address = f"{reverse('substantiation_new')}?repair={repair.pk}"
    assert address in text_of(engineer, "repair", repair.pk)
    shown = engineer.get(address).context["form"]
    said = FOLDER | {"repair": repair.pk, "prepared_by": world.assessor.pk}
    assert str(shown.initial["repair"]) == str(repair.pk)
    engineer.post(address, said)
    repair.refresh_from_db()
    assert repair.substantiation == Substantiation.objects.get()
    assert repair.substantiation.number in text_of(engineer, "repair", repair.pk)


def test_a_refused_form_keeps_what_was_typed_and_says_how_to_mend_it(
    engineer, folders, world
):
    finding = assessed(world)
    address = f"{reverse('substantiation_new')}?finding={finding.pk}"
    said = FOLDER | {
        "findings": [finding.pk],
        "prepared_by": world.assessor.pk,
        "answer": "limitation",
        "temporary_limit_cycles": "1,200",
        "repeat": "5,000 FC",
    }
    page = engineer.post(address, said).content.decode()
    assert "Say what the aircraft may not do." in page
    assert "Name the document that approves it." in page
    assert 'value="External doubler at STA 650"' in page
    assert 'value="1,200"' in page
    assert 'value="5,000 FC"' in page
    assert not Substantiation.objects.exists()


def test_the_page_says_what_is_missing_before_the_next_signature(engineer, folders):
    folder = folders.draft(scale="undecided", scale_reason="", category="")
    page = text_of(engineer, "substantiation", folder.pk)
    assert "Before it is signed as prepared:" in page
    for problem in (
        "Say whether it is minor or major.",
        "Give the repair category",
        "Add the load case of static ultimate strength.",
        "Name the approval data",
    ):
        assert problem in page


def test_neighbours_are_reviewed_one_after_the_other(engineer, folders, world):
    found(world, place_entered=NEAR)
    found(world, place_entered="STA 640+10, 14 in below S-7R")
    folder = folders.draft()
    one, two = folder.neighbours.order_by("gap_mm")
    said = {"answer": "interacts", "reason": "one doubler", "on": "2025-01-01"}
    response = post(engineer, "substantiation_neighbour", folder.pk, one.pk, **said)
    assert response.url == reverse("substantiation_neighbour", args=[folder.pk, two.pk])
    response = post(engineer, "substantiation_neighbour", folder.pk, two.pk, **said)
    assert response.url == reverse("substantiation", args=[folder.pk])
    one.refresh_from_db()
    assert (one.answer, one.reason) == ("interacts", "one doubler")
    assert (str(one.reviewed_on), one.reviewed_by) == ("2025-01-01", world.assessor)


def test_rows_are_added_and_withdrawn(engineer, folders, settings, tmp_path):
    settings.ATTACHMENTS = tmp_path
    folder = folders.draft()
    pk = folder.pk
    case = {"kind": "fatigue", "requirement": "25.571", "case": "pressure"}
    post(engineer, "substantiation_case", pk, **case, margin="0.2")
    effects = dict.fromkeys(TOUCHES, "none")
    post(engineer, "substantiation_effects", pk, **effects)
    paper = SimpleUploadedFile("letter.pdf", b"%PDF-1.4\nletter\n%%EOF\n")
    document = {"document_kind": "letter", "document_reference": "L-7"}
    answer = post(
        engineer, "substantiation_document", pk, role="correspondence",
        document_page="1", file=paper, **document,
    )  # fmt: skip
    assert answer.status_code == 302, answer.context["form"].errors
    page = text_of(engineer, "substantiation", pk)
    assert "letter.pdf" in page
    assert "pressure" in page
    row = folder.cases.get()
    post(engineer, "substantiation_withdraw", pk, "case", row.pk)
    row.refresh_from_db()
    assert row.withdrawn
    assert "pressure" not in text_of(engineer, "substantiation", pk)


def test_rows_of_no_kind_are_not_found(engineer, folders):
    pk = folders.draft().pk
    assert post(engineer, "substantiation_withdraw", pk, "repair", 1).status_code == 404


def test_an_affected_item_says_what_and_how(engineer, folders):
    folder = folders.draft()
    said = {"systems": "affected"}
    page = post(engineer, "substantiation_effects", folder.pk, **said).content.decode()
    assert "Say what is affected, and how." in page
    assert not folder.effects.exists()


def test_three_people_sign_it_with_their_passwords(client, folders, world):
    folder = folders.ready()
    signatory = world.users["signatory"]
    checker = user_make(world.operator, "engineer", "second")
    authorise(checker.person, world.operator, "check")
    for user, meaning in (
        (world.engineer, "prepared"),
        (checker, "checked"),
        (signatory, "stage_1"),
    ):
        client.force_login(user)
        address = reverse("substantiation_sign", args=[folder.pk])
        shown = client.get(address)
        assert f'value="{meaning}" selected' in shown.content.decode()
        said = {
            "meaning": meaning,
            "shown_digest": shown.context["digest"],
            "password": PASSWORD,
            "document_kind": "design_approval",
            "document_number": "ARD-RDA-0077",
            "document_issuer": "Ardent Structures",
            "document_date": "2024-12-22",
        }
        response = client.post(address, said)
        assert response.status_code == 302, response.content.decode()
    page = text_of(client, "substantiation", folder.pk)
    assert "approved, stage 1" in page
    assert "agrees with what was signed" in page
    assert "ARD-RDA-0077" in page


@pytest.mark.parametrize(
    ("signed", "proposed", "none_offered"),
    [
        ((), "prepared", True),
        (("prepared",), "checked", True),
        (("prepared", "checked"), "stage_1", False),
        (("prepared", "checked", "stage_1"), "stage_2", False),
    ],
)
def test_the_form_starts_at_the_meaning_that_comes_next(
    client, folders, world, signed, proposed, none_offered
):
    """An approval of a stage is given by a document (AMC 20-20A appendix 3 annex 1);
    to prepare and to check needs none."""
    folder = folders.ready(scale="minor")
    for meaning in signed:
        folders.sign(folder, meaning)
    client.force_login(world.users["signatory"])
    page = text_of(client, "substantiation_sign", folder.pk)
    assert re.findall(r'value="(\w+)" selected', page) == [proposed]
    assert ("none: this signature" in page) == none_offered
    assert ("choose: a stage names its document" in page) != none_offered


def test_the_sign_page_says_what_is_missing_and_keeps_the_statement(
    client, folders, world
):
    folder = folders.draft()
    client.force_login(world.engineer)
    address = reverse("substantiation_sign", args=[folder.pk])
    said = {
        "meaning": "prepared",
        "statement": "as I see it",
        "shown_digest": client.get(address).context["digest"],
        "password": PASSWORD,
    }
    page = client.post(address, said).content.decode()
    assert "Add the load case of static ultimate strength." in page
    assert 'value="as I see it"' in page
    assert not folder.approvals.exists()


def test_a_signed_one_offers_a_revision_and_shows_what_it_changed(engineer, folders):
    folder = folders.approve(folders.ready())
    page = text_of(engineer, "substantiation", folder.pk)
    assert reverse("substantiation_edit", args=[folder.pk]) not in page
    assert reverse("substantiation_revise", args=[folder.pk]) in page
    said = {
        "revision_reason": "category after the letter",
        "prepared_by": folder.prepared_by_id,
    }
    response = post(engineer, "substantiation_revise", folder.pk, **said)
    later = Substantiation.objects.get(revision=1)
    assert response.url == reverse("substantiation", args=[later.pk])
    columns = FOLDER | {"category": "c", "prepared_by": folder.prepared_by_id}
    post(engineer, "substantiation_edit", later.pk, **columns)
    page = text_of(engineer, "substantiation", later.pk)
    changed = page[page.index("Changed since S-0001") :].partition("</section>")[0]
    assert "C, time-limited" in changed
    assert "category after the letter" in page
    assert "a later revision is" in text_of(engineer, "substantiation", folder.pk)


def test_an_edit_of_a_signed_one_is_refused_with_what_was_typed(engineer, folders):
    folder = folders.approve(folders.ready())
    columns = FOLDER | {"title": "Another", "prepared_by": folder.prepared_by_id}
    response = post(engineer, "substantiation_edit", folder.pk, **columns)
    page = response.content.decode()
    assert "is signed, so it does not change any more" in page
    assert 'value="Another"' in page


def test_an_unapproved_calculation_says_so_in_the_folder(engineer, folders, world):
    crack = assessed(world, damage_type="crack", typed=CRACK)
    evaluation = folders.evaluation(crack)
    folder = folders.draft(findings=[crack])
    folders.case(folder, evaluation=evaluation, margin=None)
    page = text_of(engineer, "substantiation", folder.pk)
    assert "unapproved calculation" in page
    assert folder.number in text_of(engineer, "evaluation", evaluation.pk)


def test_the_clock_is_shown_on_the_folder_and_in_the_list(engineer, folders, world):
    folder = stage_1(folders)
    repair = released(world, folder)
    page = text_of(engineer, "substantiation", folder.pk)
    assert "2026-01-31" in page
    assert reverse("repair", args=[repair.pk]) in page
    address = reverse("substantiation_list")
    assert folder.number in engineer.get(f"{address}?clock=on").content.decode()
    assert folder.number in engineer.get(f"{address}?stage=1").content.decode()
    assert folder.number not in engineer.get(f"{address}?stage=2").content.decode()


def test_the_list_costs_the_same_for_one_and_twenty(engineer, folders, world):
    folders.draft(findings=[found(world)])

    def grow():
        for n in range(19):
            folders.draft(findings=[found(world)], title=f"Folder {n}")

    assert_same_queries(engineer, reverse("substantiation_list"), grow)


def test_the_page_costs_the_same_for_one_and_twenty_rows(engineer, folders, world):
    finding = assessed(world)
    found(world, place_entered=NEAR)
    folder = folders.draft(findings=[finding])
    folders.case(folder)

    def grow():
        for _ in range(10):
            found(world, place_entered=NEAR)
            folders.case(folder)
        engineer.post(reverse("substantiation_neighbours", args=[folder.pk]))

    address = reverse("substantiation", args=[folder.pk])
    assert_same_queries(engineer, address, grow, ceiling=60)
