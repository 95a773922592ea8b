"""What was measured of the damage, and what a repair recorded, as inputs."""

from __future__ import annotations

from repairs.analysis.inputs import Value
from repairs.analysis.types import Sourced, Stated
from repairs.models import MeasuredValue, Repair
from repairs.selectors.edges import earlier_depth_mm
from repairs.selectors.latest import Latest
from repairs.services.evaluation_gathered import Gathered
from repairs.services.evaluation_holes import row_inputs
from repairs.services.evaluation_place import Subject

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
    "remaining_edge_distance": "remaining_edge_distance_mm",
    "blend_length": "blend_length_mm",
    "blend_depth": "blend_depth_mm",
}
UNCERTAINTIES = {
    "crack_length_uncertainty": "length_mm",
    "edge_crack_uncertainty": "edge_crack_length_mm",
    "crack_depth_uncertainty": "depth_mm",
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
    "cause_removed": "cause_removed",
    "penetrated": "penetrated",
    "damage_removed": "damage_removed",
    "hole_load": "hole_load",
    "both_sides": "both_sides",
}

OF_CRACKS = frozenset(
    {
        "crack_length",
        "crack_length_uncertainty",
        "crack_depth",
        "crack_depth_uncertainty",
    }
)
OF_HOLES = frozenset({"edge_distance", "crack_direction"})
"""The edge distance of a crack or hole is its hole's, of other damage its own; a hole
may have cracks too.
"""
BY_DAMAGE = OF_CRACKS | {
    "damage_length",
    "damage_width",
    "damage_depth",
    "damage_depth_uncertainty",
    "damage_direction",
    "damage_edge_distance",
}

AT_A_HOLE = "fastener_hole"


def subject_words(subject: Subject, measured: Latest) -> dict[str, Value]:
    """What the subject itself says: damage or repair, item hit, cracks at a hole."""
    damage = measured.finding.damage_type if measured.finding else ""
    words = {
        "damage_type": damage,
        "repair_kind": subject.kind if isinstance(subject, Repair) else "",
        "element": subject.element,
        "criticality": subject.criticality,
        "crack_origin": measured.word("origin") if damage == "crack" else "",
        "hole_cracked": _cracked_hole(damage, measured),
    }
    return {name: Stated(word, str(subject)) for name, word in words.items() if word}


def _cracked_hole(damage: str, measured: Latest) -> str:
    """Whether cracks start at a hole; blank where nobody looked."""
    if damage == "hole":
        return measured.word("radiating_cracks")
    cracked = damage == "crack" and measured.word("origin") == AT_A_HOLE
    return "yes" if cracked else "no"


def measurements(found: Gathered, subject: Subject, measured: Latest) -> None:
    """What was measured last of each size that this damage has."""
    finding, values = measured.finding, measured.values
    damage = finding.damage_type if finding else ""
    for name, quantity in (LENGTHS | COUNTS).items():
        if (row := values.get(quantity)) and _is_of(name, damage):
            found.number(name, row.value, _where(row), row.measurement)
    for name, quantity in UNCERTAINTIES.items():
        if (row := values.get(quantity)) and _is_of(name, damage):
            found.number(name, row.uncertainty, _where(row), row.measurement)
    for name, quantity in WORDS.items():
        if (row := values.get(quantity)) and _is_of(name, damage):
            found.word(name, row.word, _where(row), row.measurement)
    if isinstance(subject, Repair):
        _embodied(found, subject, measured)
    if finding is None:
        return
    if damage == "crack" and measured.word("origin") == AT_A_HOLE:
        row_inputs(found, finding)
    depth = earlier_depth_mm(finding)
    found.number("earlier_depth", depth, "blend-outs recorded at this location")


def _is_of(name: str, damage: str) -> bool:
    """Whether an input is a size of this damage: a dent has no crack length."""
    if name in OF_HOLES:
        return damage in ("crack", "hole")
    return (name in OF_CRACKS) == (damage == "crack") or name not in BY_DAMAGE


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


def half_along(found: Gathered) -> float:
    """Half of what the damage measures along the section, uncertainty included."""
    sizes = [
        value.value
        for name in ("crack_length", "damage_length", "blend_length", "hole_diameter")
        if isinstance(value := found.values.get(name), Sourced)
    ]
    more = found.values.get("crack_length_uncertainty")
    extra = more.value if isinstance(more, Sourced) else 0.0
    return (max(sizes, default=0.0) + extra) / 2
