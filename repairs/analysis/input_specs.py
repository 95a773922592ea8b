"""What methods may ask for: name, title, kind, unit, and where each is entered.

The few values with a default are published factors and a company rule; they carry
their source and can be replaced by an adopted value of the same name.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from enum import StrEnum

from repairs.analysis.growth.laws import GrowthLaw
from repairs.analysis.inspection.known import Detection
from repairs.analysis.loads import shell as loads
from repairs.analysis.scatter.factors import FatiguePolicy
from repairs.analysis.spectra.recorded import RecordedSpectrum
from repairs.analysis.stress_life.curves import StressLifeFamily
from repairs.analysis.surroundings import Surroundings
from repairs.analysis.types import Grade, Sourced, Stated

TOUGHNESS_UNIT = "MPa*sqrt(mm)"
CLEARANCE_RULE = Sourced(
    3.0,
    "-",
    "company rule of this program, not published: edge disturbances of a thin shell "
    "have died out after about 3 sqrt(R t)",
    Grade.RECORDED,
)


class Where(StrEnum):
    """Where an input is entered; what is *stated* an engineer enters with its source.

    A panel's number may be stated for one place too, and then goes before the type's.
    """

    TYPE = "on the aircraft type, in its geometry file"
    PANEL = (
        "on the panel, in the type's geometry file, or as a stated input of the "
        "finding or repair, with its document"
    )
    STATED = "as a stated input of the finding or repair, with its document"
    MEASURE = "in a measurement of the finding"
    SPREAD = "in a measurement of the finding, after ± behind the size"
    MATERIAL = "on the panel's material, in the materials file, or as an adopted value"
    FINDING = "on the finding"
    REPAIR = "on the repair, as embodied"
    ADOPTED = "as an adopted value"
    STRESS_LIFE = "as fatigue policy stress_life in the type's geometry file"
    THRESHOLD = "as fatigue policy growth_threshold in the type's geometry file"
    REPEAT = "as fatigue policy growth_repeat in the type's geometry file"
    DETECTABLE = "as a detectable size of the aircraft type, for the method chosen"
    FLAW = "as an adopted value; else the published flaw of the location is used"
    COUNTERS = "in the finding's counters or the aircraft's usage"
    SKIN_COUNTERS = (
        "in the finding's counters, less those at the fit of a replaced panel"
    )
    VALIDITY = "on the variant, in the type's geometry file, or on the aircraft"
    OPERATOR = "as a policy of the operator"
    EARLIER = "as the blend depth of each earlier blend-out here"
    GEOMETRY = "by placing the finding on a published geometry"
    PERIOD = "on the aircraft, in the period of its operator"
    EVALUATION = "by the evaluation"
    ASKED = "when the evaluation is made"


@dataclass(frozen=True, slots=True)
class InputSpec:
    """One input: what it is called, what it is, its unit and where it is entered.

    `words` are the answers a stated word may have; empty: any that the record gives.
    """

    name: str
    title: str
    kind: type
    unit: str
    where: Where
    default: Sourced | None = None
    words: tuple[str, ...] = ()

    @property
    def expected(self) -> str:
        """Which numbers can be true of it, in words; empty where any can."""
        if self.name in MAY_BE_NEGATIVE:
            return ""
        return "zero or more" if self._may_be_zero else "more than zero"

    @property
    def _may_be_zero(self) -> bool:
        return self.where is Where.SPREAD or self.name in MAY_BE_ZERO

    def takes(self, value: float) -> bool:
        """Return whether a number can be true of it."""
        if not self.expected:
            return True
        return value > 0 or (value == 0 and self._may_be_zero)

    @property
    def may_be_stated(self) -> bool:
        """Whether an engineer may state it for one finding or repair."""
        return self.where in (Where.PANEL, Where.STATED)


YES_NO = ("yes", "no")
_WORDS: dict[Where, tuple[tuple[str, str], ...]] = {
    Where.FINDING: (
        ("damage_type", "damage type"),
        ("element", "structural item"),
        ("repair_kind", "kind of repair"),
        ("criticality", "PSE, FCS or secondary"),
    ),
    Where.PANEL: (
        ("pressurised", "panel is pressurised"),
        ("clad", "panel is clad"),
    ),
    Where.MEASURE: (
        ("crack_direction", "direction of the crack"),
        ("crack_origin", "where the crack starts"),
        ("crack_through", "crack is through the thickness"),
        ("damage_direction", "direction of the damage"),
        ("damage_removed", "all damage removed"),
        ("hole_load", "whether a fastener loads the hole"),
        ("hole_cracked", "whether cracks start at the hole"),
        ("both_sides", "cracks on both sides of the hole"),
        ("stop_drilled", "crack is stop-drilled"),
        ("nick_at", "nick lies at an edge or a hole"),
        ("through_clad", "damage is through the cladding"),
        ("creased", "dent is creased"),
        ("dent_cracked", "dent is cracked, by a non-destructive test"),
        ("dent_over", "what the dent lies over"),
        ("fasteners_pulled", "fasteners pulled or loose"),
        ("material_removed", "material removed"),
        ("corrosion_type", "type of corrosion"),
        ("cause_removed", "what wears it is removed"),
        ("penetrated", "skin penetrated"),
    ),
    Where.PERIOD: (("regime", "rules the aircraft is under"),),
    Where.EVALUATION: (("life_base", "what life counts from"),),
    Where.ASKED: (("life_used_reason", "why life already used is not counted"),),
}
_STATED_WORDS: tuple[tuple[str, str, tuple[str, ...]], ...] = (
    (
        "load_kind",
        "kind of load the structure carries",
        ("tension", "compression", "shear", "bending", "torsion", "pressure"),
    ),
    ("centre_stiffener", "stiffener at the middle of the crack",
     ("mid_bay", "intact_stiffener", "broken_stiffener")),
    ("member_failed", "member has failed", YES_NO),
    ("member_holes", "fastener holes in the damaged flange or web", YES_NO),
    ("member_of_panel_material", "member is of the skin panel's material", YES_NO),
    ("below_last_term", "cycles below the last term of a stress-life curve",
     ("none_counts", "slope_continued", "slope_doubled")),
    ("retardation", "retardation shown beside the life",
     ("none", "wheeler", "willenborg")),
    ("stress_state", "stress state at the crack front, for retardation",
     ("plane_stress", "plane_strain")),
)  # fmt: skip
_NUMBERS: dict[Where, tuple[tuple[str, str, str], ...]] = {
    Where.MEASURE: (
        ("crack_length", "crack length, tip to tip", "mm"),
        ("crack_depth", "crack depth, where it is not through", "mm"),
        ("edge_crack_length", "crack length from the edge of the hole", "mm"),
        ("crack_count", "number of cracks", "-"),
        ("ligament", "distance to the next hole or crack", "mm"),
        ("hole_diameter", "hole diameter after trimming", "mm"),
        ("edge_distance", "hole centre to nearest free edge", "mm"),
        ("strip_width", "width of the strip with the hole or edge", "mm"),
        ("stop_hole_diameter", "diameter of the stop hole", "mm"),
        ("damage_length", "length of the damage", "mm"),
        ("damage_width", "width of the damage", "mm"),
        ("damage_depth", "greatest depth of the damage", "mm"),
        ("root_radius", "root radius", "mm"),
        ("fastener_distance", "distance to nearest fastener", "mm"),
        ("damage_edge_distance", "distance to nearest edge", "mm"),
        ("remaining_edge_distance", "edge distance left after the blend", "mm"),
        ("remaining_thickness", "smallest thickness left", "mm"),
        ("blend_length", "full length of the blend", "mm"),
    ),
    Where.SPREAD: (
        ("crack_length_uncertainty", "uncertainty of the crack length", "mm"),
        ("crack_depth_uncertainty", "uncertainty of the crack depth", "mm"),
        ("edge_crack_uncertainty", "uncertainty of the length from the hole", "mm"),
        ("damage_depth_uncertainty", "uncertainty of the damage's depth", "mm"),
        ("gauge_uncertainty", "uncertainty of the smallest thickness left", "mm"),
    ),
    Where.REPAIR: (("blend_depth", "depth of this blend", "mm"),),
    Where.EARLIER: (
        ("earlier_depth", "depth of earlier blends at the location", "mm"),
    ),
    Where.PANEL: (
        ("thickness", "skin thickness before the damage", "mm"),
        ("clad_thickness", "cladding of one side", "mm"),
        ("radius", "shell radius", "mm"),
        ("panel_length", "panel length along the crack", "mm"),
        ("panel_width", "panel width across the section", "mm"),
        ("ultimate_running_load", "recorded ultimate running load", "N/mm"),
        ("limit_flight_stress", "stress across the crack from limit flight loads",
         "MPa"),
        ("limit_longitudinal_stress", "limit stress along the section", "MPa"),
        ("mean_longitudinal_stress", "1 g stress along the section", "MPa"),
        ("limit_shear_stress", "limit shear stress of the skin", "MPa"),
        ("mean_shear_stress", "1 g shear stress of the skin", "MPa"),
        ("flight_smallest_share", "smallest stress of a flight over 1 g", "-"),
        ("flight_largest_share", "largest stress of a flight over 1 g", "-"),
        ("cycle_max_stress", "largest stress of a flight", "MPa"),
        ("cycle_ratio", "stress ratio of a flight's cycle", "-"),
        ("frame_area", "section area of a frame", "mm2"),
        ("frame_pitch", "frame pitch", "mm"),
        ("stringer_area", "section area of a stringer", "mm2"),
        ("stringer_pitch", "stringer pitch", "mm"),
    ),
    Where.STATED: (
        ("load_transfer", "share of the strip's load that the fastener takes", "-"),
        ("bearing_strength", "bearing ultimate strength Fbru at this e/D", "MPa"),
        ("hole_pitch", "pitch of the row of holes", "mm"),
        ("corner_stress_ratio", "stress at the cut-out corner over the panel's", "-"),
        ("stiffened_bulging", "bulging factor on K between stiffeners", "-"),
        ("fastener_pitch", "fastener pitch along a stiffener", "mm"),
        ("fastener_diameter", "fastener diameter", "mm"),
        ("fastener_flexibility", "flexibility of one fastener", "mm/N"),
        ("fastener_strength", "shear strength of one fastener", "N"),
        ("stiffener_strength", "strength of the stiffener's material", "MPa"),
        ("stiffener_modulus", "modulus of the stiffener", "MPa"),
        ("member_area", "section area of the member", "mm2"),
        ("member_lost_area", "area lost by the damage", "mm2"),
        ("member_inertia", "second moment of area, damaged", "mm4"),
        ("member_extreme_fibre", "distance to the extreme fibre, damaged", "mm"),
        ("member_length", "free length of the member", "mm"),
        ("member_fixity", "end fixity coefficient", "-"),
        ("member_width", "width of the flange or web that is damaged", "mm"),
        ("member_thickness", "thickness of the flange or web", "mm"),
        ("member_limit_force", "limit axial force, tension positive", "N"),
        ("member_limit_moment", "limit bending moment", "N*mm"),
        ("member_limit_shear", "limit shear force", "N"),
        ("member_crippling", "crippling strength of the section", "MPa"),
        ("member_yield", "tension yield strength of the member", "MPa"),
        ("member_ultimate", "tension ultimate strength of the member", "MPa"),
        ("member_compression_yield", "compression yield strength of the member",
         "MPa"),
        ("member_shear_strength", "shear ultimate strength of the member", "MPa"),
        ("member_modulus", "modulus of elasticity of the member", "MPa"),
        ("member_poisson", "Poisson's ratio of the member", "-"),
        ("member_toughness", "fracture toughness of the member", TOUGHNESS_UNIT),
        ("neighbour_count", "members that take over from a failed one, 1 or 2", "-"),
        ("neighbour_strength", "strength of each of them", "N"),
        ("neighbour_limit_force", "limit force each of them carries already", "N"),
        ("dynamic_factor", "factor on the load as a member fails", "-"),
        ("wheeler_exponent", "Wheeler's exponent, fitted", "-"),
        ("shut_off_ratio", "overload ratio that stops the crack", "-"),
        ("below_join_life", "longest life tested, from which a curve is continued",
         "cycles"),
    ),
    Where.MATERIAL: (
        ("yield_strength", "tension yield strength Fty", "MPa"),
        ("tension_strength", "tension ultimate strength Ftu", "MPa"),
        ("compression_yield", "compression yield strength Fcy", "MPa"),
        ("shear_strength", "shear ultimate strength Fsu", "MPa"),
        ("modulus", "modulus of elasticity E", "MPa"),
        ("poisson", "Poisson's ratio", "-"),
        ("toughness", "fracture toughness Kc", TOUGHNESS_UNIT),
        ("growth_threshold", "growth threshold at R = 0", TOUGHNESS_UNIT),
    ),
    Where.DETECTABLE: (
        ("detectable_length", "detectable size with the hidden part", "mm"),
    ),
    Where.FLAW: (("assumed_flaw", "depth of the flaw assumed to remain", "mm"),),
    Where.TYPE: (
        ("normal_pressure", "normal operating differential", "MPa"),
        ("external_pressure", "external aerodynamic pressure", "MPa"),
        ("relief_pressure", "relief-valve differential", "MPa"),
        ("ceiling", "maximum operating altitude", "ft"),
    ),
    Where.COUNTERS: (
        ("accumulated_cycles", "flight cycles accumulated", "cycles"),
    ),
    Where.SKIN_COUNTERS: (
        ("skin_cycles", "flight cycles this skin has flown", "cycles"),
    ),
    Where.VALIDITY: (("validity_cycles", "limit of validity", "cycles"),),
    Where.OPERATOR: (
        ("class_maximum", "operator's largest interval of this class", "cycles"),
        ("detection_target", "chance of detection asked of a plan", "-"),
    ),
    Where.ADOPTED: (
        ("clad_life_factor", "life of bare over life of clad", "-"),
        ("clearance_multiple", "clearance from edges in sqrt(R t)", "-"),
        ("residual_pressure_factor", "residual, pressure alone", "-"),
        ("ultimate_factor", "ultimate over limit load", "-"),
        ("proof_factor", "relief valve alone", "-"),
    ),
}  # fmt: skip
MAY_BE_NEGATIVE = (
    "external_pressure",
    "limit_flight_stress",
    "limit_longitudinal_stress",
    "mean_longitudinal_stress",
    "limit_shear_stress",
    "mean_shear_stress",
    "flight_smallest_share",
    "flight_largest_share",
    "cycle_max_stress",
    "cycle_ratio",
    "member_limit_force",
    "member_limit_moment",
    "member_limit_shear",
    "neighbour_limit_force",
)
"""Loads and ratios, which have a direction."""
MAY_BE_ZERO = (
    "clad_thickness",
    "earlier_depth",
    "blend_depth",
    "load_transfer",
    "member_lost_area",
    "fastener_flexibility",
    "wheeler_exponent",
    "growth_threshold",
    "ceiling",
    "accumulated_cycles",
    "skin_cycles",
)
"""What may be nothing; every uncertainty may too."""
_DEFAULTS = {
    "clearance_multiple": CLEARANCE_RULE,
    "residual_pressure_factor": loads.RESIDUAL_PRESSURE_FACTOR,
    "ultimate_factor": loads.ULTIMATE_FACTOR,
}
_OTHERS: tuple[InputSpec, ...] = (
    InputSpec("surroundings", "what lies round the location", Surroundings, "",
              Where.GEOMETRY),
    InputSpec("spectrum", "load spectrum, in place of one cycle", RecordedSpectrum, "",
              Where.PANEL),
    InputSpec("growth_law", "crack growth law", GrowthLaw, "", Where.MATERIAL),
    InputSpec("second_growth_law", "second growth law", GrowthLaw, "", Where.MATERIAL),
    InputSpec("stress_life", "stress-life curves", StressLifeFamily, "",
              Where.MATERIAL),
    InputSpec("stress_life_policy", "scatter factor on mean stress-life",
              FatiguePolicy, "", Where.STRESS_LIFE),
    InputSpec("growth_policy", "factor on growth life to a threshold", FatiguePolicy,
              "", Where.THRESHOLD),
    InputSpec("detection", "detection curve of the method", Detection, "",
              Where.DETECTABLE),
    InputSpec("repeat_policy", "factor on growth life to a repeat interval",
              FatiguePolicy, "", Where.REPEAT),
)  # fmt: skip


def _specs() -> Iterable[InputSpec]:
    for where, pairs in _WORDS.items():
        for name, title in pairs:
            yield InputSpec(name, title, Stated, "", where)
    for name, title, words in _STATED_WORDS:
        yield InputSpec(name, title, Stated, "", Where.STATED, words=words)
    for where, rows in _NUMBERS.items():
        for name, title, unit in rows:
            yield InputSpec(name, title, Sourced, unit, where, _DEFAULTS.get(name))
    yield from _OTHERS


SPECS: dict[str, InputSpec] = {spec.name: spec for spec in _specs()}
