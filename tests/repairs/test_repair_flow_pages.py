"""The pages on which a repair is planned, done step by step, released and ended."""

from __future__ import annotations

import csv
import io

import pytest
from django.urls import reverse

from fleet.drawing.sheet import Sheet
from fleet.drawing.structure_map import MapRepair, StructureMap, structure_map_svg
from fleet.services.applicability import document_applicability_record
from repairs.forms.repairs import STAGE_DIFFERS
from repairs.models import Repair
from repairs.repair_file import ITEMS
from repairs.selectors.maps import repairs_of
from repairs.selectors.repairs import repairs_listed
from repairs.services.repair_entry import Answered, Layer, Required, Step
from tests.factories import NOW, PASSWORD, authorise
from tests.folder_rows import folders_make
from tests.queries import assert_same_queries
from tests.record_rows import assessed
from tests.repair_rows import PLACE, RELEASED, embody, inspection, plan, record
from tests.repairs.test_repair_pages import filled

pytestmark = pytest.mark.django_db


@pytest.fixture(autouse=True)
def _on_the_day(settings):
    settings.FRAMEBAY_TODAY = "2025-01-01"


@pytest.fixture
def engineer(client, world):
    client.force_login(world.engineer)
    return client


def page(client, repair) -> str:
    return client.get(reverse("repair", args=[repair.pk])).content.decode()


def released_said(context, world, **changes) -> dict[str, str]:
    said = filled(context["form"], context["raised"], *context["answered"])
    return {
        **said,
        "release_reference": "CRS-78",
        "released_by": world.certifier.pk,
        "performed_by": world.assessor.pk,
        "password": PASSWORD,
        "step": "save",
        **changes,
    }


def test_a_repair_is_planned_from_a_finding_and_then_released(engineer, world):
    finding = assessed(world)
    url = reverse("repair_plan")
    asked = {"aircraft": world.aircraft.pk, "finding": finding.pk}
    context = engineer.get(url, asked).context
    said = filled(context["form"], *context["answered"])
    assert said[f"finding-{finding.pk}-answers"] == "True"
    said |= {
        "place_entered": PLACE,
        "kind": "external_doubler",
        "description": "doubler over the dent",
        "document_reference": "SRM 53-10-12",
        "document_page": "fig. 202",
        "required": "2024-T3 clad; 0.063 in; fig. 202",
        "steps": "drill and fit\nseal; option 2",
        f"finding-{finding.pk}-covers": "on",
        "step": "save",
    }
    repair = Repair.objects.get(pk=engineer.post(url, said).url.split("/")[-2])
    assert (repair.state, repair.required.get().thickness_entered) == (
        "planned",
        "0.063 in",
    )
    assert (
        "it answers nothing yet"
        in engineer.get(reverse("finding", args=[finding.pk])).content.decode()
    )
    assert "answers no finding before its release" in page(engineer, repair)
    for row in repair.steps.all():
        done = {"step": row.pk, "done_on": "2024-12-25", "done_by": world.assessor.pk}
        engineer.post(reverse("repair_step", args=[repair.pk]), done)
    url = reverse("repair_release", args=[repair.pk])
    context = engineer.get(url).context
    said = released_said(context, world, category="a", layers="2024-T3 clad; 0.063 in")
    assert said["required"] == "2024-T3 clad; 0.063 in; fig. 202"
    assert engineer.post(url, said).status_code == 302
    repair.refresh_from_db()
    finding.refresh_from_db()
    assert (repair.state, finding.state) == ("embodied", "rectified")
    assert repair.approvals.count() == 0  # another released it, on paper


def test_the_stage_starts_from_the_folder_and_may_not_contradict_it(engineer, world):
    """AMC 20-20A appendix 3 annex 1: the stages are approvals, not statements."""
    folders = folders_make(world)
    folder = folders.approve(folders.ready(), "stage_1")
    url = reverse("repair_plan")
    asked = {"aircraft": world.aircraft.pk, "substantiation": folder.pk}
    form = engineer.get(url, asked).context["form"]
    assert form["stage_reached"].value() == "1"
    said = filled(form) | {"stage_reached": "not_applicable", "step": "save"}
    (problem,) = engineer.post(url, said).context["form"].errors["stage_reached"]
    assert problem == STAGE_DIFFERS.format(
        folder=folder, reached="stage 1", said="not applicable"
    )
    said["stage_reached"] = "1"
    assert "stage_reached" not in engineer.post(url, said).context["form"].errors


def test_who_released_it_signs_the_release(client, world):
    repair = plan(world)
    client.force_login(world.users["certifier"])
    url = reverse("repair_release", args=[repair.pk])
    said = released_said(client.get(url).context, world, category="a")
    assert client.post(url, said).status_code == 302
    signature = repair.approvals.get()
    assert (signature.meaning, signature.signer_person) == ("released", world.certifier)
    assert "agrees with what was signed" in page(client, repair)


def test_an_overlap_is_asked_and_what_was_typed_is_kept(engineer, world):
    under = record(world)
    url = reverse("repair_new")
    context = engineer.get(url, {"aircraft": world.aircraft.pk}).context
    said = released_said(context, world) | {
        "place_entered": "STA 655 to 670, S-6R to S-8R",
        "kind": "external_doubler",
        "description": "second doubler",
        "category": "a",
        "document_reference": "SRM 53-10-12",
        "document_page": "fig. 202",
    }
    asked = engineer.post(url, said).content.decode()
    assert (
        f'Its extent overlaps <a href="{reverse("repair", args=[under.pk])}"' in asked
    )
    assert "second doubler" in asked
    assert Repair.objects.count() == 1
    engineer.post(url, said | {f"over-{under.pk}-how": "over"})
    over = Repair.objects.get(description__startswith="second")
    assert "this one lies over it" in page(engineer, over)
    assert "this one lies under it" in page(engineer, under)
    engineer.post(
        url,
        said | {f"over-{under.pk}-how": "supersedes", f"over-{over.pk}-how": "apart"},
    )
    under.refresh_from_db()
    assert under.state == "superseded"
    assert "oldest to newest" in page(engineer, under)


def test_a_difference_is_named_on_the_form_and_answered_there(engineer, world):
    repair = plan(world, required=(Required("2024-T3 clad", ".090 in", 2.286),))
    url = reverse("repair_release", args=[repair.pk])
    said = released_said(
        engineer.get(url).context, world, category="a", layers="2024-T3 clad; .080 in"
    )
    refused = engineer.post(url, said).content.decode()
    assert ".080 in fitted where .090 in required" in refused
    answers = {"answers": "2; stress report; ARD-L-0088", "answered_by": ""}
    wrong = engineer.post(url, said | answers).content.decode()
    assert "is not the number of a required layer; there are 1" in wrong
    told = {
        "answers": "1; stress report allows it; ARD-L-0088 p. 3",
        "answered_by": world.approver.pk,
    }
    assert engineer.post(url, said | told).status_code == 302
    shown = page(engineer, repair)
    assert "stress report allows it (ARD-L-0088 p. 3)" in shown
    assert ".080 in fitted where .090 in required" in shown


def test_a_further_step_and_a_step_half_told(engineer, world):
    repair = plan(world, steps=(Step("drill"),))
    url = reverse("repair_step", args=[repair.pk])
    half = engineer.post(url, {"title": "seal", "done_on": "2024-12-25"})
    assert "leave both empty" in half.content.decode()
    unsaid = engineer.post(url, {"step": repair.steps.get().pk})
    assert "on which day it was done" in unsaid.content.decode()
    assert engineer.post(url, {"title": "seal"}).status_code == 302
    assert "2. seal" in page(engineer, repair)


def test_work_begins_and_a_repair_is_cancelled(engineer, world):
    repair = plan(world)
    start = reverse("repair_start", args=[repair.pk])
    engineer.post(start)
    repair.refresh_from_db()
    assert repair.state == "in_work"
    told = engineer.post(start, follow=True).content.decode()
    assert "only a planned repair is begun" in told
    engineer.post(reverse("repair_cancel", args=[repair.pk]), {"reason": "not needed"})
    repair.refresh_from_db()
    assert repair.state == "cancelled"


def test_an_inspector_rejects_and_another_answers(client, world):
    repair = plan(world)
    authorise(world.users["certifier"].person, world.operator, "inspect")
    client.force_login(world.users["certifier"])
    url = reverse("repair_inspect", args=[repair.pk])
    said = {"statement": "rivets short", "on": "2024-12-25", "password": PASSWORD}
    client.post(url, said | {"outcome": "rejected"})
    assert "A required inspection rejected it" in page(client, repair)
    rejection = repair.approvals.get()
    client.force_login(world.users["signatory"])
    told = {"outcome": "accepted", "answers": rejection.pk, "statement": "seen"}
    refused = client.post(url, said | told)
    assert "held no authorisation" in refused.content.decode()
    authorise(world.users["signatory"].person, world.operator, "ndt")
    assert client.post(url, said | told).status_code == 302
    assert "A required inspection rejected it" not in page(client, repair)


def test_a_new_approval_changes_the_category(engineer, world):
    repair = record(world, category="b", new_requirement=inspection(world))
    url = reverse("repair_reclassify", args=[repair.pk])
    said = filled(*engineer.get(url).context["forms"]) | {
        "document_kind": "design_approval",
        "document_reference": "ARD-RDA-0099",
        "document_page": "p. 1",
        "category": "a",
        "stage_reached": "1",
        "reason": "evaluation complete",
    }
    assert "still pending" in engineer.post(url, said).content.decode()
    assert engineer.post(url, said | {"stage_reached": "3"}).status_code == 302
    repair.refresh_from_db()
    assert repair.category == "a"


def test_what_lies_beneath_stands_out_wherever_the_repair_is_shown(engineer, world):
    finding = assessed(world)
    repair = record(world, findings=(Answered(finding, covers=True),))
    record(world, place_entered="STA 662 to 668, S-6R to S-8R")
    shown = page(engineer, repair)
    assert "not shown to be removed" in shown
    assert "2.4 in × 1.8 in × 0.040 in" in shown  # its extent as found
    assert "none kept" in shown  # no photograph before it was covered
    finding_page = engineer.get(reverse("finding", args=[finding.pk])).content.decode()
    assert "lies under it, not shown to be removed" in finding_page
    assert "over damage not shown to be removed" in finding_page  # among neighbours
    status = engineer.get(reverse("repair_status", args=[world.aircraft.pk]))
    assert "beneath: damage not shown to be removed" in status.content.decode()
    aircraft = engineer.get(reverse("aircraft", args=[world.aircraft.pk]))
    assert "1 over damage not shown to be removed" in aircraft.content.decode()


def test_on_the_map_what_is_planned_is_dashed_and_what_hides_damage_crossed(world):
    finding = assessed(world)
    record(world, findings=(Answered(finding, covers=True),))
    plan(world, findings=(Answered(finding, covers=True),))
    record(world, place_entered="STA 500 to 510, S-3L to S-4L")
    rows = repairs_of(list(repairs_listed(world.engineer)))
    assert {row.mark for row in rows} == {"hides", "planned", "repair"}
    drawn = map_of(world, rows)
    assert "repair over damage not shown to be removed" in drawn
    assert "repair planned or in work" in drawn
    assert drawn.count('class="repair planned"') == 2  # itself and the legend's
    assert drawn.count('class="repair cross-out"') == 2
    plain = map_of(world, [row for row in rows if row.mark == "repair"])
    assert "cross-out" not in plain
    assert "planned" not in plain


def map_of(world, rows: list[MapRepair]) -> str:
    section = world.aircraft.repairs.first().geometry
    from fleet.location.geometry import geometry_from_toml

    geometry = geometry_from_toml(section.content)
    sheet = Sheet(geometry.section("FUS"), "base")
    return structure_map_svg(StructureMap("map", sheet, "in", repairs=rows))


def test_the_page_says_whether_the_approval_holds_for_the_serial(engineer, world):
    repair = record(world)
    assert "applicability not recorded" in page(engineer, repair)
    document_applicability_record(
        document=repair.approval_document, page="p. 1", actor=None, at=NOW,
        first_serial=world.aircraft.serial_number,
    )  # fmt: skip
    assert f"serial {world.aircraft.serial_number} to later (p. 1)" in page(
        engineer, repair
    )


def test_the_file_of_a_repair_is_counted_in_twelve(engineer, world):
    assert len(ITEMS) == 12
    bare = record(
        world, legacy=True, approval=None, released_by=None, release_reference="",
        performed_by=None, category="pending",
    )  # fmt: skip
    full = record(
        world,
        chart_number="12",
        length_mm=508.0,
        width_mm=254.0,
        work_order="WO-17",
        inspected_by=world.approver,
        layers=(Layer("2024-T3", "0.063 in", 1.6002),),
        new_requirement=inspection(world),
    )
    url = reverse("repair_status", args=[world.aircraft.pk])
    text = engineer.get(url, {"format": "csv"}).content.decode("utf-8-sig")
    rows = {row["repair no."]: row for row in csv.DictReader(io.StringIO(text))}
    # Bare: placed by station and stringer, released on known counters; nothing else.
    assert rows[bare.number]["file"] == "2 of 12"
    # Full: everything but the fasteners.
    assert rows[full.number]["file"] == "11 of 12"
    assert rows[full.number]["not in the file"] == "materials and fasteners"
    assert "materials and fasteners" in page(engineer, full)


def test_the_status_prints_its_policies_and_keeps_planned_repairs_apart(
    engineer, world
):
    record(world)
    planned = plan(world)
    url = reverse("repair_status", args=[world.aircraft.pk])
    shown = engineer.get(url)
    status = shown.context["status"]
    assert [row.repair.state for row in status.rows] == ["embodied"]
    assert planned.number in shown.content.decode()
    facts = dict(status.facts())
    assert facts["stage 2 of a repair's approval within"] == "not recorded"
    assert set(facts) >= {"as of", "known at", "digest of the rows (SHA-256)"}
    assert planned.number in engineer.get(reverse("repair_list")).content.decode()


def test_status_and_list_cost_the_same_with_all_that_hangs_on_repairs(engineer, world):
    def more() -> None:
        for _ in range(4):
            finding = assessed(world)
            first = record(world, findings=(Answered(finding, covers=True),))
            record(
                world, supersedes=(first,), category="b",
                new_requirement=inspection(world), released_on=RELEASED,
            )  # fmt: skip
            embody(world, plan(world))

    more()
    for name, args in (("repair_list", []), ("repair_status", [world.aircraft.pk])):
        assert_same_queries(engineer, reverse(name, args=args), more)
