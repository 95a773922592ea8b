"""What the bridge reads from the record: structure, materials, measurements."""

from __future__ import annotations

import datetime as dt

import pytest

from fleet.models import Material, MaterialProperty
from repairs.analysis.growth.laws import FormanLaw, WalkerLaw
from repairs.analysis.inputs import Value
from repairs.analysis.types import INCH, KSI, Grade, Sourced, Stated, Use
from repairs.measured import Hole, Typed
from repairs.models import Finding, Repair
from repairs.selectors.latest import measured_of
from repairs.services.evaluation_gathered import Choice, Gathered
from repairs.services.evaluation_inputs import gather
from repairs.services.evaluation_materials import material_inputs
from repairs.services.evaluation_panel import less_blended
from repairs.services.evaluation_structure import bays_touched
from repairs.services.measuring import Measuring, measurement_record
from tests.factories import NOW, TODAY
from tests.record_rows import World, found, world_make

pytestmark = pytest.mark.django_db
CRACK = (
    Typed("length_mm", "0.94 ± 0.02 in"),
    Typed("direction", "longitudinal"),
    Typed("origin", "skin"),
)


@pytest.fixture
def world() -> World:
    return world_make()


def gathered(
    subject: Finding | Repair, use: Use = Use.FOUND_DAMAGE
) -> dict[str, Value]:
    measured = measured_of(subject)
    return gather(subject, measured, Choice(use), as_of=TODAY).values


def cracked(world: World, place: str = "STA 630, 5 in below S-8R") -> Finding:
    return found(
        world,
        damage_type="crack",
        typed=CRACK,
        element="skin",
        place_entered=place,
    )


def number(values: dict[str, Value], name: str) -> Sourced:
    value = values[name]
    assert isinstance(value, Sourced)
    return value


# -- structure at the place ----------------------------------------------------------


def test_frames_and_stringers_at_the_place_give_area_and_pitch(world):
    values = gathered(cracked(world))
    # Frames 0.35 in2 every 20 in, stringers 0.20 in2, 40 of them round 56 in radius.
    assert number(values, "frame_area").value == pytest.approx(0.35 * INCH**2)
    assert number(values, "frame_pitch").value == pytest.approx(20 * INCH)
    assert number(values, "stringer_area").value == pytest.approx(0.20 * INCH**2)
    assert number(values, "stringer_pitch").value == pytest.approx(223.4, abs=0.1)
    assert "FR 27 to FR 28" in number(values, "frame_pitch").source
    assert "S-8R to S-9R" in number(values, "stringer_pitch").source


def test_every_bay_the_damage_touches_counts_and_no_other():
    lines = [(-600.0, "FR 1"), (-100.0, "FR 2"), (400.0, "FR 3"), (960.0, "FR 4")]
    assert [bay.width for bay in bays_touched(lines, 20.0)] == [500.0]
    assert [bay.width for bay in bays_touched(lines, 100.0)] == [500.0, 500.0]
    assert [bay.width for bay in bays_touched(lines, 450.0)] == [500.0, 500.0, 560.0]
    assert bays_touched(lines[2:], 20.0) == []


def test_a_place_on_a_frame_touches_both_bays(world):
    values = gathered(cracked(world, "FR 28, 5 in below S-8R"))
    assert number(values, "frame_pitch").value == pytest.approx(20 * INCH)


def test_pitch_across_is_true_where_the_shell_is_narrower(world):
    """Halfway along the nose cone the radius is 38 in, so stringers stand closer."""
    side = gathered(cracked(world))
    nose = gathered(cracked(world, "STA 150, 1 in below S-8R"))
    share = number(nose, "stringer_pitch").value / number(side, "stringer_pitch").value
    assert share == pytest.approx((20 + 36 * 90 / 180) / 56, rel=1e-6)


def test_an_unplaced_damage_has_no_structure_round_it(world):
    values = gathered(cracked(world, "somewhere aft"))
    assert not {"frame_area", "frame_pitch", "stringer_pitch"} & values.keys()


# -- materials -----------------------------------------------------------------------


def sheet(form: str = "bare sheet") -> Material:
    return Material.objects.get(name="2024", temper="T3", form=form)


def of_material(world: World, material: Material, thickness: float) -> dict[str, Value]:
    given = material_inputs(material, world.operator, thickness)
    return {name: value for name, value, _ in given}


def row_of(material: Material, quantity: str, value: float, **more: object) -> None:
    MaterialProperty.objects.create(
        material=material,
        quantity=quantity,
        value=value,
        source="a table",
        seen="print",
        **({"basis": "a"} | more),
    )


def test_stiffness_is_typical_and_strength_is_not(world):
    values = of_material(world, sheet(), 1.4)
    assert number(values, "modulus").value == pytest.approx(10_500 * KSI)
    assert "typical" in number(values, "modulus").source
    assert number(values, "poisson").value == 0.33
    assert number(values, "compression_yield").value == pytest.approx(39 * KSI)
    assert number(values, "shear_strength").value == pytest.approx(39 * KSI)


def test_clad_sheet_is_as_stiff_as_the_bare_sheet_in_it(world):
    clad = of_material(world, sheet("clad sheet"), 1.4)
    bare = of_material(world, sheet(), 1.4)
    assert number(clad, "modulus").value == number(bare, "modulus").value
    assert number(clad, "modulus").source.startswith("2024 T3 bare sheet")
    assert number(clad, "yield_strength").value < number(bare, "yield_strength").value


def test_typical_toughness_is_on_record_and_serves_no_calculation(world):
    material = sheet()
    held = material.properties.filter(quantity__startswith="toughness_")
    assert held.exists()
    assert "toughness" not in of_material(world, material, 1.4)


def test_of_several_grain_directions_the_weakest_counts(world):
    material = Material.objects.create(name="made", temper="T1", form="sheet")
    row_of(material, "tension_yield_mpa", 320.0, direction="L")
    row_of(material, "tension_yield_mpa", 290.0, direction="LT")
    row_of(material, "tension_yield_mpa", 280.0, direction="LT", basis="s")
    found_yield = number(of_material(world, material, 1.0), "yield_strength")
    assert found_yield.value == 290.0
    assert "LT" in found_yield.source
    assert found_yield.grade is Grade.PRINT


def test_walker_goes_before_paris_whatever_their_ranks(world):
    material = Material.objects.create(name="made", temper="T1", form="sheet")
    for law, m, rank in (("paris_p", 3.0, 1), ("walker_w", 3.2, 2)):
        for name, value in (("c_mm_mpa_root_mm", 1e-13), ("m", m), ("rank", rank)):
            row_of(material, f"{law}_{name}", value, basis="fit")
    row_of(material, "walker_w_gamma", 0.6, basis="fit")
    values = of_material(world, material, 1.0)
    first, second = values["growth_law"], values["second_growth_law"]
    assert isinstance(first, WalkerLaw)
    assert isinstance(second, WalkerLaw)
    assert (first.exponent, first.gamma) == (3.2, 0.6)
    assert (second.exponent, second.gamma) == (3.0, 1.0)


def test_formans_law_is_the_second_beside_one_of_walker_and_the_first_alone(world):
    material = Material.objects.create(name="made", temper="T1", form="sheet")
    for name, value in (
        ("c_mm_mpa_root_mm", 1e-9), ("m", 2.7), ("kc_mpa_root_mm", 2250.0), ("rank", 1)
    ):  # fmt: skip
        row_of(material, f"forman_f_{name}", value, basis="fit")
    alone = of_material(world, material, 1.0)
    assert isinstance(alone["growth_law"], FormanLaw)
    assert "second_growth_law" not in alone
    for name, value in (
        ("c_mm_mpa_root_mm", 1e-13), ("m", 3.2), ("gamma", 0.6), ("rank", 5)
    ):  # fmt: skip
        row_of(material, f"walker_w_{name}", value, basis="fit")
    both = of_material(world, material, 1.0)
    assert isinstance(both["growth_law"], WalkerLaw)
    second = both["second_growth_law"]
    assert isinstance(second, FormanLaw)
    assert (second.toughness, second.exponent) == (2250.0, 2.7)


# -- measurements --------------------------------------------------------------------

AT_HOLES = (
    Typed("length_mm", "unknown"),
    Typed("direction", "longitudinal"),
    Typed("origin", "fastener hole"),
    Typed("edge_crack_length_mm", "2.0 ± 0.2 mm"),
    Typed("hole_diameter_mm", "4.8 mm"),
)


def row_measured(world: World, *holes: Hole) -> Finding:
    finding = found(world, damage_type="crack", typed=AT_HOLES, element="skin")
    measurement_record(
        finding=finding,
        measuring=Measuring(AT_HOLES, TODAY, holes=holes),
        actor=world.engineer,
        at=NOW,
    )
    return finding


def test_a_row_of_holes_gives_count_largest_crack_pitch_and_ligament(world):
    finding = row_measured(
        world,
        Hole(1, 0.0, 1.5, 4.8, 20.0),
        Hole(2, 2.5, 3.0, 4.8, 19.0),
        Hole(3, 0.0, 0.0, 5.0, None),
    )
    values = gathered(finding)
    assert number(values, "crack_count").value == 3
    assert number(values, "edge_crack_length").value == 3.0
    assert "hole 2" in number(values, "edge_crack_length").source
    assert number(values, "hole_diameter").value == 5.0
    assert number(values, "hole_pitch").value == 19.0
    # Hole 2 to 3: 19 - 4.9 - 3.0 = 11.1; hole 1 to 2: 20 - 4.8 - 1.5 - 2.5 = 11.2.
    assert number(values, "ligament").value == pytest.approx(11.1)
    both = values["both_sides"]
    assert isinstance(both, Stated)
    assert both.value == "yes"


def test_what_was_not_measured_in_a_row_is_neither_crack_nor_sound_metal(world):
    finding = row_measured(
        world, Hole(1, 1.0, None, 4.8, 20.0), Hole(2, None, 0.0, 4.8, None)
    )
    values = gathered(finding)
    assert number(values, "crack_count").value == 1
    assert number(values, "edge_crack_length").value == 2.0
    assert "ligament" not in values
    assert "both_sides" not in values


def test_sizes_go_to_the_damage_they_are_of(world):
    sizes = (Typed("length_mm", "40 mm"), Typed("depth_mm", "0.2 ± 0.05 mm"))
    scratch = gathered(found(world, damage_type="scratch", typed=sizes))
    assert number(scratch, "damage_length").value == 40.0
    assert number(scratch, "damage_depth").value == 0.2
    assert not {"crack_length", "crack_depth"} & scratch.keys()
    crack = gathered(cracked(world))
    assert number(crack, "crack_length").value == pytest.approx(0.94 * INCH)
    assert not {"damage_length", "damage_direction"} & crack.keys()


# -- earlier blends ------------------------------------------------------------------


def test_a_crack_in_blended_skin_goes_through_what_is_left():
    def thickness(**more: Value) -> float | None:
        found_so_far = Gathered(
            {"thickness": Sourced(1.4, "mm", "panel", Grade.RECORDED), **more}
        )
        less_blended(found_so_far)
        left = found_so_far.values.get("thickness")
        return left.value if isinstance(left, Sourced) else None

    crack, dent = Stated("crack", "F-1"), Stated("dent", "F-1")
    blended, none = (
        Sourced(depth, "mm", "blend", Grade.RECORDED) for depth in (0.3, 0.0)
    )
    assert thickness(damage_type=crack, earlier_depth=none) == 1.4
    assert thickness(damage_type=crack, earlier_depth=blended) == pytest.approx(1.1)
    assert thickness(damage_type=dent, earlier_depth=blended) == 1.4
    assert thickness(damage_type=crack) is None


# -- the aircraft's rules ------------------------------------------------------------


def test_the_rules_are_those_of_the_period_that_holds_the_day(world):
    finding = cracked(world)
    assert "regime" not in gathered(finding)
    finding.aircraft.variant.aircraft_type.ceiling_ft = 51_000
    period = finding.aircraft.periods.get()
    regime = gathered(finding)["regime"]
    assert isinstance(regime, Stated)
    assert regime.value == period.regime
    period.to_on = TODAY - dt.timedelta(days=1)
    period.save()
    assert "regime" not in gathered(finding)
