"""From the record to the inputs of a calculation, and the rows they were read from.

What the record does not say is left out: the method names it as missing. The panel on
this aircraft goes before the type's panel, an adopted value before a recorded one.
"""

from __future__ import annotations

import datetime as dt
import json
from collections.abc import Iterator
from dataclasses import dataclass, field

from django.db import models

from fleet.location.geometry import geometry_from_toml
from fleet.models import (
    AdoptedValue,
    AircraftType,
    DetectableSize,
    FatiguePolicy,
    Material,
    Operator,
    Panel,
    PanelOnAircraft,
    Policy,
    Spectrum,
)
from fleet.selectors.counters import aircraft_standing
from fleet.selectors.kept import of_the_fleet
from fleet.selectors.people import policy
from fleet.selectors.validity import validity_limits
from repairs.analysis.inputs import SPECS, Value
from repairs.analysis.inspection.intervals import SINCE_NEW
from repairs.analysis.scatter import factors as scatter
from repairs.analysis.types import Grade, Sourced, Stated, Use
from repairs.models import MeasuredValue, Measurement, Repair, StatedInput
from repairs.selectors.edges import earlier_depth_mm
from repairs.selectors.latest import Latest
from repairs.selectors.stated import stated_inputs, stated_source
from repairs.services.evaluation_materials import (
    STRENGTHS,
    Given,
    adopted_number,
    adopted_values,
    grade_of,
    material_inputs,
)
from repairs.services.evaluation_place import (
    Skin,
    Subject,
    skin_under,
    surroundings_of,
)

ADOPTABLE = (
    "clearance_multiple",
    "residual_pressure_factor",
    "ultimate_factor",
    "proof_factor",
    "clad_life_factor",
    "assumed_flaw",
)
ADOPTABLE_WORDS = {
    **{name: (SPECS[name].title, SPECS[name].unit) for name in ADOPTABLE},
    **{
        quantity: (SPECS[name].title, unit)
        for name, (quantity, unit) in STRENGTHS.items()
    },
}
"""What may be adopted, with its words and the unit it is adopted in."""
OF_MATERIAL = frozenset(quantity for quantity, _ in STRENGTHS.values())

POLICIES = {
    "stress_life_policy": "stress_life",
    "growth_policy": "growth_threshold",
    "repeat_policy": "growth_repeat",
}
LARGEST_INTERVAL = "largest_interval_{criticality}"
"""Policy key of the operator's largest interval of a class, in flight cycles."""

AT_A_HOLE = "fastener_hole"
BLEND = "blend"
"""Where the type's file states the flaw that is assumed to remain."""

LENGTHS = {
    "crack_length": "length_mm",
    "edge_crack_length": "edge_crack_length_mm",
    "hole_diameter": "hole_diameter_mm",
    "edge_distance": "edge_distance_mm",
    "strip_width": "strip_width_mm",
    "crack_depth": "depth_mm",
    "ligament": "ligament_mm",
    "stop_hole_diameter": "stop_hole_diameter_mm",
    "damage_length": "length_mm",
    "damage_width": "width_mm",
    "damage_depth": "depth_mm",
    "root_radius": "root_radius_mm",
    "fastener_distance": "fastener_distance_mm",
    "damage_edge_distance": "edge_distance_mm",
    "remaining_thickness": "remaining_thickness_mm",
    "blend_length": "blend_length_mm",
}
UNCERTAINTIES = {
    "crack_length_uncertainty": "length_mm",
    "edge_crack_uncertainty": "edge_crack_length_mm",
    "damage_depth_uncertainty": "depth_mm",
    "gauge_uncertainty": "remaining_thickness_mm",
}
COUNTS = {"crack_count": "crack_count"}
WORDS = {
    "crack_direction": "direction",
    "crack_origin": "origin",
    "crack_through": "through",
    "stop_drilled": "stop_drilled",
    "damage_direction": "direction",
    "nick_at": "at",
    "through_clad": "through_clad",
    "creased": "creased",
    "dent_cracked": "cracked",
    "dent_over": "over",
    "fasteners_pulled": "fasteners_pulled",
    "material_removed": "material_removed",
    "corrosion_type": "corrosion_type",
    "damage_removed": "damage_removed",
    "hole_load": "hole_load",
    "both_sides": "both_sides",
}
CYCLE_KEYS = ("cycle_max_mpa", "cycle_ratio")
"""What a panel's spectrum says of one flight."""

UsedRow = (
    Panel
    | PanelOnAircraft
    | Material
    | Spectrum
    | Measurement
    | FatiguePolicy
    | DetectableSize
    | AdoptedValue
    | Policy
    | StatedInput
)


@dataclass(frozen=True, slots=True)
class Choice:
    """What the engineer chooses when asking for an evaluation."""

    use: Use
    detectable: DetectableSize | None = None
    life_used_reason: str = ""


@dataclass(slots=True)
class Gathered:
    """Inputs found in the record, and every row that was read for them."""

    values: dict[str, Value] = field(default_factory=dict)
    rows: dict[tuple[type[models.Model], int], UsedRow] = field(default_factory=dict)

    def put(self, name: str, value: Value, *rows: UsedRow) -> None:
        """Keep an input and the rows behind it."""
        self.values[name] = value
        for row in rows:
            self.rows[type(row), row.pk] = row

    def number(
        self,
        name: str,
        value: float | None,
        source: str,
        *rows: UsedRow,
        grade: Grade = Grade.RECORDED,
    ) -> None:
        """Keep a number, unless the record does not have it."""
        if value is not None:
            where = source or "recorded without a source"
            self.put(name, Sourced(value, SPECS[name].unit, where, grade), *rows)

    def word(self, name: str, value: str, source: str, *rows: UsedRow) -> None:
        """Keep a stated word, unless it is blank."""
        if value:
            self.put(name, Stated(value, source), *rows)


def subject_words(subject: Subject, measured: Latest) -> dict[str, Value]:
    """What the subject itself says: damage or repair, item hit, cracks at a hole."""
    damage = measured.finding.damage_type if measured.finding else ""
    words = {
        "damage_type": damage,
        "repair_kind": subject.kind if isinstance(subject, Repair) else "",
        "element": subject.element,
        "crack_origin": measured.word("origin") if damage == "crack" else "",
        "hole_cracked": "yes" if _cracked_hole(damage, measured) else "no",
    }
    return {name: Stated(word, str(subject)) for name, word in words.items() if word}


def _cracked_hole(damage: str, measured: Latest) -> bool:
    """Whether a crack is known to start at a hole."""
    if damage == "crack":
        return measured.word("origin") == AT_A_HOLE
    return damage == "hole" and measured.word("radiating_cracks") == "yes"


def gather(
    subject: Subject, measured: Latest, choice: Choice, *, as_of: dt.date
) -> Gathered:
    """Everything the record says that any method may ask for."""
    found = Gathered(subject_words(subject, measured))
    operator = subject.operator
    _measurements(found, subject, measured)
    skin = skin_under(subject)
    if skin is not None:
        _skin(found, subject, skin, operator)
    _pressures(found, subject)
    for name, row in _adopted(operator).items():
        if name in ADOPTABLE:
            found.put(name, adopted_number(row, SPECS[name].unit), row)
    _policies(found, subject, operator, as_of)
    _counters(found, subject, measured, skin, choice, as_of)
    if choice.detectable is not None:
        size = choice.detectable
        length = size.length_mm + size.hidden_mm
        source = f"{size.method.replace('_', ' ')}, {size.detail}: {size.source}"
        found.number("detectable_length", length, source, size,
                     grade=grade_of(size.grade))  # fmt: skip
    _remaining_flaw(found, subject)
    around = surroundings_of(
        subject, _half_along(found), as_found=choice.use is Use.FOUND_DAMAGE
    )
    if around is not None:
        found.put("surroundings", around)
    _stated(found, subject)
    return found


def _stated(found: Gathered, subject: Subject) -> None:
    """What an engineer states for this place; it goes before what the type says."""
    for row in stated_inputs(subject):
        spec, source = SPECS.get(row.name), stated_source(row)
        if spec is None or not spec.may_be_stated:
            continue
        if row.word:
            found.put(row.name, Stated(row.word, source), row)
        elif row.value is not None:
            found.number(row.name, row.value, source, row)


def _measurements(found: Gathered, subject: Subject, measured: Latest) -> None:
    values = measured.values
    for name, quantity in LENGTHS.items():
        if row := values.get(quantity):
            found.number(name, row.value, _where(row), row.measurement)
    for name, quantity in COUNTS.items():
        if row := values.get(quantity):
            found.number(name, row.value, _where(row), row.measurement)
    for name, quantity in UNCERTAINTIES.items():
        if row := values.get(quantity):
            found.number(name, row.uncertainty, _where(row), row.measurement)
    for name, quantity in WORDS.items():
        if row := values.get(quantity):
            found.word(name, row.word, _where(row), row.measurement)
    if isinstance(subject, Repair):
        _embodied(found, subject, measured)
    if measured.finding is not None:
        depth = earlier_depth_mm(measured.finding)
        found.number("earlier_depth", depth, "blend-outs recorded at this location")


def _embodied(found: Gathered, repair: Repair, measured: Latest) -> None:
    """What the repair itself records: sizes nobody measured, and what it removed."""
    source = f"{repair}, as embodied"
    if "remaining_thickness" not in found.values:
        found.number("remaining_thickness", repair.remaining_thickness_mm, source)
    found.number("blend_depth", repair.blend_depth_mm, source)
    answer = repair.finding_rows.filter(finding=measured.finding).first()
    if answer is not None and answer.damage_removed != "unknown":
        gone = "yes" if answer.damage_removed == "yes" else "no"
        found.word("damage_removed", gone, source)


def _where(row: MeasuredValue) -> str:
    measured = row.measurement
    stage = measured.stage.replace("_", " ")
    return (
        f"measurement {measured.number}, {stage}, {measured.measured_on}: {row.entered}"
    )


def _remaining_flaw(found: Gathered, subject: Subject) -> None:
    """The flaw the type's file assumes to remain in a blend, unless one is adopted."""
    if subject.geometry is None or "assumed_flaw" in found.values:
        return
    flaws = geometry_from_toml(subject.geometry.content).rogue_flaws
    for flaw in flaws:
        if flaw.where == BLEND:
            source = f"{flaw.shape}: {flaw.source}"
            found.number("assumed_flaw", flaw.size_mm, source)


def _half_along(found: Gathered) -> float:
    """Half of what the damage measures along the section, uncertainty included."""
    sizes = [
        value.value
        for name in ("crack_length", "blend_length", "hole_diameter")
        if isinstance(value := found.values.get(name), Sourced)
    ]
    more = found.values.get("crack_length_uncertainty")
    extra = more.value if isinstance(more, Sourced) else 0.0
    return (max(sizes, default=0.0) + extra) / 2


def _skin(found: Gathered, subject: Subject, skin: Skin, operator: Operator) -> None:
    panel, fitted = skin.panel, skin.fitted
    rows: tuple[UsedRow, ...] = (panel, *((fitted,) if fitted else ()))
    source = f"panel {panel.label}: {panel.source}"
    found.word("pressurised", "yes" if panel.pressurised else "no", source, panel)
    found.word("load_kind", panel.load_kind, panel.load_source or source, panel)
    found.number("thickness", skin.thickness_mm, skin.thickness_source, *rows)
    found.number("radius", panel.radius_mm, source, panel)
    found.number("panel_length", skin.length_across_crack_mm, source, panel)
    loads = panel.load_source or source
    found.number("ultimate_running_load", panel.ultimate_load_n_per_mm, loads, panel)
    found.number("limit_longitudinal_stress", panel.limit_stress_mpa, loads, panel)
    found.number("mean_longitudinal_stress", panel.mean_stress_mpa, loads, panel)
    if not panel.pressurised and panel.section.wrap_mm is None:
        found.number("limit_flight_stress", panel.limit_stress_mpa, loads, panel)
    _cycle(found, panel)
    material = fitted.material if fitted and fitted.material else panel.material
    _clad(found, panel, fitted, material)
    if material is not None and skin.thickness_mm is not None:
        for name, value, used in _of_material(material, operator, skin.thickness_mm):
            found.put(name, value, material, used)


@of_the_fleet
def _of_material(
    material: Material, operator: Operator, thickness_mm: float
) -> list[Given]:
    return list(material_inputs(material, operator, thickness_mm))


def _cycle(found: Gathered, panel: Panel) -> None:
    """The cycle of a flight from the panel's spectrum, where it states one."""
    if panel.spectrum is None:
        return
    content = json.loads(panel.spectrum.content)
    top, ratio = (content.get(key) for key in CYCLE_KEYS)
    source = f"{panel.spectrum}: {panel.spectrum.source}"
    found.number("cycle_max_stress", top, source, panel.spectrum)
    found.number("cycle_ratio", ratio, source, panel.spectrum)


def _clad(
    found: Gathered,
    panel: Panel,
    fitted: PanelOnAircraft | None,
    material: Material | None,
) -> None:
    """Whether the skin is clad; a fitted panel's own cladding is not on the type's."""
    source = f"panel {panel.label}: {panel.source}"
    if fitted is not None and fitted.material is not None:
        clad = "yes" if "clad" in fitted.material.form else "no"
        found.word("clad", clad, fitted.source, fitted)
    elif panel.clad_mm is not None:
        found.word("clad", "yes" if panel.clad_mm > 0 else "no", source, panel)
        found.number("clad_thickness", panel.clad_mm, source, panel)
    elif material is not None:
        found.word("clad", "yes" if "clad" in material.form else "no", source, panel)


def _pressures(found: Gathered, subject: Subject) -> None:
    made = subject.aircraft.variant.aircraft_type
    source = f"type {made.code}: {made.pressures_source}"
    found.number("normal_pressure", made.normal_differential_mpa, source)
    found.number("external_pressure", made.external_suction_mpa, source)
    found.number("relief_pressure", made.relief_differential_mpa, source)
    found.number("ceiling", made.ceiling_ft, source)


def _policies(
    found: Gathered, subject: Subject, operator: Operator, as_of: dt.date
) -> None:
    made = subject.aircraft.variant.aircraft_type
    rows = _policy_rows(made)
    for name, key in POLICIES.items():
        if row := rows.get(key):
            found.put(name, _policy(row), row)
    largest = policy(
        operator, LARGEST_INTERVAL.format(criticality=subject.criticality), as_of
    )
    if largest is not None:
        source = f"operator's largest interval of the class ({largest.source})"
        found.number("class_maximum", float(largest.value), source, largest)


@of_the_fleet
def _policy_rows(made: AircraftType) -> dict[str, FatiguePolicy]:
    held = made.fatigue_policies.filter(replaced_by__isnull=True).order_by("pk")
    return {row.name: row for row in held}


@of_the_fleet
def _adopted(operator: Operator) -> dict[str, AdoptedValue]:
    """Adopted values that are no property of a material."""
    return adopted_values(operator, None)


def _policy(row: FatiguePolicy) -> scatter.FatiguePolicy:
    return scatter.FatiguePolicy(
        Sourced(row.factor, "-", row.source, grade_of(row.grade)),
        row.multiplies,
        row.log_life_deviation,
        row.specimens,
        row.reliability,
        row.confidence,
        row.spectrum_severity_inside,
    )


def _counters(
    found: Gathered,
    subject: Subject,
    measured: Latest,
    skin: Skin | None,
    choice: Choice,
    as_of: dt.date,
) -> None:
    cycles, source = subject.at_cycles, f"counters of {subject}"
    if cycles is None:
        standing = aircraft_standing(subject.aircraft, as_of=as_of)
        cycles, source = standing.counters.cycles, f"usage to {standing.current_to}"
    base = f"since release of {subject}" if isinstance(subject, Repair) else SINCE_NEW
    fitted = skin.fitted if skin else None
    flown = cycles
    if fitted is not None and fitted.reason == "replaced":
        base = f"since the panel was fitted on {fitted.from_on}"
        known = cycles is not None and fitted.at_cycles is not None
        flown = (cycles or 0) - (fitted.at_cycles or 0) if known else None
    finding = measured.finding
    if finding is not None and finding.damage_type != "crack" and base == SINCE_NEW:
        base = f"since rework of {finding}"
    found.number("accumulated_cycles", _float(cycles), source)
    found.number("skin_cycles", _float(flown), source)
    found.word("life_base", base, "by the evaluation")
    found.word("life_used_reason", choice.life_used_reason, "the engineer's reason")
    limit, _, stated = validity_limits(subject.aircraft)
    found.number("validity_cycles", _float(limit), stated)


def _float(count: int | None) -> float | None:
    return None if count is None else float(count)


def used_rows(found: Gathered) -> Iterator[UsedRow]:
    """The rows read, in a stable order."""
    for _, row in sorted(
        found.rows.items(), key=lambda item: (item[0][0].__name__, item[0][1])
    ):
        yield row
