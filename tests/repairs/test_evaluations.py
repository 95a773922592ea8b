"""Evaluations from the record: what is gathered, kept, replaced and marked stale."""

from __future__ import annotations

import datetime as dt
import json

import pytest
from django.core.exceptions import ValidationError
from django.db import IntegrityError, transaction

from fleet.canonical import canonical, digest
from fleet.due import Counters
from fleet.models import (
    AdoptedValue,
    DetectableSize,
    FatiguePolicy,
    Material,
    PanelOnAircraft,
)
from fleet.services.history import Writing
from fleet.services.materials import demo_values_load
from fleet.services.people import policy_set
from repairs.analysis.types import INCH, ROOT_1000, Use
from repairs.measured import Typed
from repairs.models import Evaluation, Finding, Repair
from repairs.selectors.evaluations import (
    evaluation_current,
    evaluation_state,
    evaluations_stale,
    input_rows,
    stale_reasons,
)
from repairs.services.evaluation_gathered import Choice
from repairs.services.evaluation_prepare import default_use
from repairs.services.evaluations import (
    evaluation_data,
    evaluation_make,
    evaluation_remake,
    method_versions,
)
from repairs.services.measuring import Measuring, measurement_record
from repairs.services.repair_entry import Answered, Data, RepairEntry
from repairs.services.repairs import repair_record
from repairs.services.stated import Document, input_state
from tests.factories import FIXTURES, NOW, TODAY, program
from tests.record_rows import FOUND, World, assessed, found, world_make

pytestmark = pytest.mark.django_db
CRACK = (
    Typed("length_mm", "0.94 ± 0.02 in"),
    Typed("direction", "longitudinal"),
    Typed("origin", "skin"),
)
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


def cracked(world: World, **changes: object) -> Finding:
    """A crack of 0.94 in mid-bay in the upper side skin."""
    entry: dict[str, object] = {
        "damage_type": "crack",
        "typed": CRACK,
        "element": "skin",
        "place_entered": "STA 630, 5 in below S-8R",
    }
    return found(world, **(entry | changes))


def penetrant(world: World) -> DetectableSize:
    return DetectableSize.objects.get(method="penetrant", detail="open skin")


def evaluated(
    world: World,
    subject: Finding | Repair,
    use: Use | None = None,
    size: DetectableSize | None = None,
) -> Evaluation:
    return evaluation_make(
        subject=subject,
        choice=Choice(use or default_use(subject), size),
        as_of=TODAY,
        actor=world.engineer,
        at=NOW,
    )


def test_a_crack_in_plain_skin_is_computed_from_the_record(world):
    row = evaluated(world, cracked(world))
    assert row.outcome == "computed", json.loads(row.outputs)["warnings"]
    assert row.method == "pressurised-skin-longitudinal-crack"
    assert row.use == "found_damage"
    # 1.15 x 8.5 psi x 56 in / 1.4 mm = 68.47 MPa, and 1.5 x 1.33 x 8.6 psi: 120.19.
    assert row.required_residual_mpa == pytest.approx(68.47, abs=0.01)
    assert row.ultimate_mpa == pytest.approx(120.19, abs=0.01)
    assert row.margin_residual == pytest.approx(
        row.residual_strength_mpa / row.required_residual_mpa - 1
    )
    assert row.ultimate_kept == "not_shown"
    assert row.threshold_cycles is row.repeat_cycles is None
    assert row.life_base == "from finding"


def test_inputs_come_from_the_record_with_their_sources(world):
    inputs = evaluation_data(evaluated(world, cracked(world)))["inputs"]
    assert inputs["crack_length"]["value"] == pytest.approx(0.94 * INCH)
    assert inputs["crack_length_uncertainty"]["value"] == pytest.approx(0.02 * INCH)
    assert "0.94" in inputs["crack_length"]["source"]
    assert inputs["thickness"]["value"] == 1.4
    assert inputs["toughness"]["value"] == pytest.approx(100 * ROOT_1000)
    assert inputs["toughness"]["grade"] == "adopted"
    assert "Robin Engineer" in inputs["toughness"]["source"]
    assert inputs["yield_strength"]["grade"] == "memory"
    assert "A-basis" in inputs["yield_strength"]["source"]
    assert inputs["growth_law"]["reference"]["source"].startswith("DOT/FAA/AR-05/15")
    assert inputs["ceiling"]["value"] == 31_000


def test_every_row_read_is_kept_with_its_digest(world):
    row = evaluated(world, cracked(world))
    what = {item.what for item in input_rows(row)}
    assert {"panel", "material", "measurement", "fatigue policy"} <= what
    assert all(item.agrees for item in input_rows(row))


def test_what_is_frozen_is_under_one_digest(world):
    row = evaluated(world, cracked(world))
    texts = ("inputs", "outputs", "applicability", "note", "libraries")
    content = {"number": row.number} | {name: getattr(row, name) for name in texts}
    assert row.content_digest == digest(canonical(content))
    for name in texts:
        assert canonical(json.loads(getattr(row, name))) == getattr(row, name)
    assert set(json.loads(row.libraries)) == {"python", "numpy", "scipy"}


def test_an_evaluation_cannot_be_changed_or_deleted(world):
    row = evaluated(world, cracked(world))
    with pytest.raises(IntegrityError), transaction.atomic():
        Evaluation.objects.filter(pk=row.pk).update(life_cycles=10**6)
    with pytest.raises(IntegrityError), transaction.atomic():
        Evaluation.objects.filter(pk=row.pk).delete()


def test_without_a_measured_length_it_is_incomplete_and_says_where(world):
    finding = cracked(world, typed=(*CRACK[1:], Typed("length_mm", "unknown")))
    row = evaluated(world, finding)
    assert row.outcome == "missing_input"
    assert row.residual_strength_mpa is None
    missing = {m["name"]: m for m in json.loads(row.outputs)["missing"]}
    assert "measurement" in missing["crack_length"]["where"]


def test_near_a_window_no_method_applies(world):
    # The window belt lies between S-10 and S-12; 3 sqrt(R t) is 5.3 in.
    finding = cracked(world, place_entered="STA 630, 1 in above S-10R")
    row = evaluated(world, finding)
    assert row.outcome == "not_covered"
    assert "cut-out" in row.governing
    assert row.life_cycles is None
    tests = json.loads(row.applicability)
    assert [t for t in tests if t["met"] is False]


def test_a_lap_joint_hole_crack_is_refused_until_its_load_transfer_is_stated(world):
    finding = cracked(
        world,
        place_entered="STA 630, S-12R",
        typed=(
            Typed("length_mm", "0.30 ± 0.02 in"),
            Typed("direction", "longitudinal"),
            Typed("origin", "fastener_hole"),
            Typed("through", "yes"),
            Typed("crack_count", "1"),
            Typed("edge_crack_length_mm", "0.10 ± 0.02 in"),
            Typed("hole_diameter_mm", "0.19 in"),
            Typed("edge_distance_mm", "0.5 in"),
            Typed("strip_width_mm", "1.0 in"),
            Typed("hole_load", "loaded"),
            Typed("both_sides", "no"),
        ),
    )
    row = evaluated(world, finding)
    assert row.method == "loaded-fastener-hole"
    assert row.outcome == "missing_input"
    assert row.residual_strength_mpa is None
    missing = {m["name"]: m for m in json.loads(row.outputs)["missing"]}
    assert set(missing) == {"load_transfer"}
    assert "stated input" in missing["load_transfer"]["where"]
    input_state(
        subject=finding,
        name="load_transfer",
        entered="0.35",
        document=Document("JOINT-REPORT-7", "12", "A"),
        actor=world.engineer,
        at=LATER,
        on=TODAY,
    )
    row = evaluated(world, finding)
    assert row.outcome == "computed", json.loads(row.outputs)["warnings"]
    assert row.life_base == "from finding"
    assert "Bearing" in row.barred_reason


def test_a_dent_is_screened_and_has_no_number(world):
    row = evaluated(world, found(world))
    assert (row.outcome, row.method) == ("not_covered", "dent-screening")
    outputs = json.loads(row.outputs)
    assert "Needs an engineer" in outputs["warnings"][0]
    asked = {test["test"] for test in json.loads(row.applicability)}
    assert "dent is creased" in asked
    assert row.life_cycles is None


BLEND = (
    Typed("length_mm", "1.0 in"),
    Typed("width_mm", "0.8 in"),
    Typed("depth_mm", "0.005 in"),
)
REWORKED = (
    Typed("remaining_thickness_mm", "1.25 ± 0.02 mm"),
    Typed("blend_length_mm", "1.2 in"),
    Typed("damage_removed", "yes"),
)


def blended(world: World) -> Finding:
    finding = cracked(world, damage_type="corrosion", typed=BLEND)
    measurement_record(
        finding=finding,
        measuring=Measuring(REWORKED, TODAY, "after_rework"),
        actor=world.engineer,
        at=NOW,
    )
    return finding


def test_corrosion_blended_out_has_threshold_and_repeat_and_is_barred(world):
    finding = blended(world)
    assert default_use(finding) is Use.NO_KNOWN_CRACK
    row = evaluated(world, finding, size=penetrant(world))
    assert row.outcome == "computed", json.loads(row.outputs)["warnings"]
    assert row.method == "corrosion-blend-out"
    # Growth governs: 34,000 FC limit of validity less 10,080 flown at the finding.
    assert row.threshold_cycles == 34_000 - 10_080
    assert row.uncapped_threshold_cycles > row.threshold_cycles
    assert row.repeat_cycles is not None
    assert "limit of validity" in row.cap
    assert row.threshold_base == f"since rework of {finding}"
    assert row.source_from_memory
    assert "barred from approval" in row.barred_reason


def test_corrosion_that_nobody_removed_is_incomplete(world):
    row = evaluated(world, cracked(world, damage_type="corrosion", typed=BLEND))
    assert row.outcome == "missing_input"
    missing = {one["name"] for one in json.loads(row.outputs)["missing"]}
    assert {"corrosion_type", "damage_depth_uncertainty"} <= missing


def test_without_a_detectable_size_there_is_no_repeat(world):
    row = evaluated(world, blended(world))
    assert row.repeat_cycles is None
    assert any("No detectable size" in w for w in json.loads(row.outputs)["warnings"])


def test_the_operators_largest_interval_caps(world):
    policy_set(
        key="largest_interval_principal",
        value=2_000,
        unit="cycles",
        source="maintenance programme 4.2",
        grade="practice",
        effective_from=TODAY,
        operator=world.operator,
        at=NOW,
    )
    row = evaluated(world, blended(world), size=penetrant(world))
    assert row.threshold_cycles == row.repeat_cycles == 2_000
    assert "maintenance programme 4.2" in row.cap


def test_a_detectable_size_of_another_type_is_refused(world):
    from tests.factories import type_bare

    other, _ = type_bare()
    with Writing(actor=None, action="size_set", at=NOW) as w:
        size = w.create(
            DetectableSize(
                aircraft_type=other,
                method="penetrant",
                length_mm=6.0,
                hidden_mm=0.0,
                source="test",
                grade="adopted",
            )
        )
    with pytest.raises(ValidationError, match="another aircraft type"):
        evaluated(world, blended(world), size=size)


def test_the_panel_on_this_aircraft_goes_before_the_types_panel(world):
    finding = cracked(world)
    before = evaluated(world, finding)
    with Writing(actor=None, action="panel_fit", at=NOW) as w:
        w.create(
            PanelOnAircraft(
                aircraft=world.aircraft,
                panel=finding.panel,
                reason="replaced",
                from_on=TODAY,
                at_cycles=10_000,
                thickness_mm=1.6,
                source="modification record 12",
            )
        )
    row = evaluated(world, finding)
    inputs = evaluation_data(row)["inputs"]
    assert inputs["thickness"]["value"] == 1.6
    assert "modification record 12" in inputs["thickness"]["source"]
    assert inputs["skin_cycles"]["value"] == 80
    assert inputs["life_base"]["value"].startswith("since the panel was fitted")
    assert row.required_residual_mpa == pytest.approx(
        before.required_residual_mpa * 1.4 / 1.6
    )
    assert "panel on aircraft" in {item.what for item in input_rows(row)}


def test_an_adopted_value_lifts_the_bar(world):
    def adopt(quantity: str, value: float, unit: str, material: Material | None):
        with Writing(actor=None, action="value_adopt", at=NOW) as w:
            w.create(
                AdoptedValue(
                    operator=world.operator,
                    material=material,
                    quantity=quantity,
                    value=value,
                    unit=unit,
                    document="14 CFR 25, as amended",
                    page="571",
                    person=world.assessor,
                    second_person=world.approver,
                    adopted_on=TODAY,
                )
            )

    clad = Material.objects.get(form="clad sheet")
    adopt("residual_pressure_factor", 1.15, "-", None)
    adopt("tension_yield_mpa", 310.0, "MPa", clad)
    adopt("tension_ultimate_mpa", 420.0, "MPa", clad)
    row = evaluated(world, cracked(world))
    lines = [li for li in json.loads(row.note) if li["grade"] == "memory"]
    # The comparison by a law from memory stays marked; the result does not rest on it.
    assert [li["symbol"] for li in lines] == ["N′", "N′"]
    assert not row.source_from_memory
    assert row.barred_reason == ""
    inputs = evaluation_data(row)["inputs"]
    assert inputs["residual_pressure_factor"]["grade"] == "adopted"


def test_a_new_evaluation_of_a_use_replaces_the_one_before(world):
    finding = cracked(world)
    first = evaluated(world, finding)
    other = evaluated(world, finding, Use.NO_KNOWN_CRACK)
    second = evaluation_remake(
        evaluation=first, as_of=TODAY, actor=world.engineer, at=LATER
    )
    assert second.replaces_id == first.pk
    assert second.number != first.number
    assert evaluation_current(finding, "found_damage") == second
    assert evaluation_current(finding, "no_known_crack") == other
    assert evaluation_state(first) == "superseded"
    assert evaluation_state(second) == "unchecked"
    with pytest.raises(ValidationError, match="superseded by"):
        evaluation_remake(evaluation=first, as_of=TODAY, actor=None, at=LATER)


def test_the_same_record_gives_the_same_numbers(world):
    finding = cracked(world)
    one = evaluated(world, finding)
    two = evaluation_remake(evaluation=one, as_of=TODAY, actor=None, at=LATER)
    assert (one.inputs, one.outputs, one.note) == (two.inputs, two.outputs, two.note)


def blend_repair(world: World, finding: Finding, **changes: object) -> Repair:
    entry: dict[str, object] = {
        "aircraft": world.aircraft,
        "place_entered": "STA 630, 5 in below S-8R",
        "kind": "blend",
        "description": "corrosion blended out",
        "category": "a",
        "approval_basis": "repair_manual",
        "approval": Data("repair_manual", "SRM 53-10-12", "14", "fig. 202"),
        "released_on": FOUND,
        "at": Counters(604_000, 10_080),
        "released_by": world.certifier,
        "release_reference": "CRS-77",
        "performed_by": world.assessor,
        "element": "skin",
        "remaining_thickness_mm": 1.25,
        "findings": (Answered(finding, covers=False, damage_removed="yes"),),
    }
    return repair_record(
        entry=RepairEntry(**(entry | changes)),  # type: ignore[arg-type]
        proof=program(world.certifier),
        actor=world.engineer,
        at=NOW,
    )


def test_a_blend_repair_is_evaluated_since_its_release(world):
    finding = assessed(world, blended(world))
    repair = blend_repair(world, finding)
    row = evaluated(world, repair, size=penetrant(world))
    assert row.outcome == "computed", json.loads(row.outputs)["warnings"]
    assert (row.repair, row.finding) == (repair, None)
    assert row.use == "no_known_crack"
    assert row.threshold_base == f"since release of {repair}"
    assert evaluation_current(repair, "no_known_crack") == row


def test_under_a_doubler_no_method_applies(world):
    finding = assessed(world, blended(world))
    doubler = blend_repair(world, finding, kind="external_doubler")
    row = evaluated(world, doubler)
    assert (row.outcome, row.method) == ("not_covered", "")
    hidden = evaluated(world, finding)
    assert hidden.outcome == "not_covered"
    assert "repair edge" in hidden.governing


def test_earlier_blends_at_the_location_are_summed(world):
    earlier = assessed(world, blended(world))
    blend_repair(world, earlier, blend_depth_mm=0.12)
    row = evaluated(world, blended(world))
    inputs = evaluation_data(row)["inputs"]
    assert inputs["earlier_depth"]["value"] == pytest.approx(0.12)
    unknown = assessed(world, blended(world))
    blend_repair(world, unknown)
    row = evaluated(world, blended(world))
    assert row.outcome == "missing_input"
    missing = json.loads(row.outputs)["missing"]
    assert [m["name"] for m in missing] == ["earlier_depth"]


def test_the_flaw_assumed_to_remain_is_the_type_files(world):
    inputs = evaluation_data(evaluated(world, blended(world)))["inputs"]
    assert inputs["assumed_flaw"]["value"] == pytest.approx(0.02 * INCH)
    assert "adopted demo value" in inputs["assumed_flaw"]["source"]


def test_staleness_is_a_query(world):
    row = evaluated(world, cracked(world))
    versions = method_versions()
    every = Evaluation.objects.all()
    assert not evaluations_stale(every, versions).exists()
    assert stale_reasons(row, versions) == []

    newer = {**versions, row.method: row.method_version + 1}
    assert list(evaluations_stale(every, newer)) == [row]
    assert "version 2" in stale_reasons(row, newer)[0]

    policy = FatiguePolicy.objects.get(name="growth_threshold")
    with Writing(actor=None, action="policy_revise", at=LATER) as w:
        w.create(
            FatiguePolicy(
                aircraft_type=policy.aircraft_type,
                name=policy.name,
                revision=2,
                factor=3.0,
                multiplies=policy.multiplies,
                spectrum_severity_inside=False,
                source="revised",
                grade="adopted",
                replaces=policy,
            )
        )
    assert list(evaluations_stale(every, versions)) == [row]
    assert "fatigue policy" in stale_reasons(row, versions)[0]


def test_measuring_again_makes_it_stale(world):
    finding = cracked(world)
    row = evaluated(world, finding)
    measurement_record(
        finding=finding,
        measuring=Measuring((Typed("length_mm", "1.2 ± 0.02 in"),), TODAY, "repeat"),
        actor=world.engineer,
        at=LATER,
    )
    assert stale_reasons(row, method_versions()) == ["the finding was measured again"]
    again = evaluation_make(
        subject=finding,
        choice=Choice(Use.FOUND_DAMAGE),
        as_of=TODAY,
        actor=None,
        at=LATER + dt.timedelta(hours=1),
    )
    assert again.life_cycles < row.life_cycles
    assert not stale_reasons(again, method_versions())
