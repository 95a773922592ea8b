"""Which dimensions each damage type is measured by. Pure: no Django, no database.

A quantity's unit is the end of its name. What `needed` marks must be known before a
finding can be assessed; what `after_rework` marks must be known once it was reworked.
The sets follow the trade's definitions of the damage types; a dent's width is its
second longest dimension, at 90 degrees to its length.
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum


class Kind(StrEnum):
    """What is typed in."""

    LENGTH = "length"
    AREA = "area"
    COUNT = "count"
    ANGLE = "angle"
    NUMBER = "number"
    WORD = "word"


@dataclass(frozen=True, slots=True)
class Dimension:
    """One thing to measure; `words` are (stored, shown) pairs of a choice."""

    quantity: str
    label: str
    kind: Kind = Kind.LENGTH
    needed: bool = False
    after_rework: bool = False
    words: tuple[tuple[str, str], ...] = ()
    unit: str = ""
    help: str = ""


@dataclass(frozen=True, slots=True)
class Ratio:
    """A ratio the technician works out on the spot, asked beside `kept_with`."""

    name: str
    label: str
    numerator: str
    denominator: str
    kept_with: str


YES_NO = (("yes", "yes"), ("no", "no"))
RATIO_TOLERANCE = 0.02
"""Share by which a ratio worked out on the spot may differ from the typed sizes."""


def _length(quantity: str, label: str, **more: bool | str) -> Dimension:
    return Dimension(f"{quantity}_mm", label, **more)  # type: ignore[arg-type]


def _word(
    quantity: str, label: str, *words: str, needed: bool = False, after: bool = False
) -> Dimension:
    pairs = tuple((word.replace(" ", "_").replace("-", "_"), word) for word in words)
    return Dimension(quantity, label, Kind.WORD, needed, after, pairs or YES_NO)


def _count(quantity: str, label: str, *, needed: bool = False) -> Dimension:
    return Dimension(f"{quantity}_count", label, Kind.COUNT, needed)


LENGTH = _length("length", "length", needed=True, help="longest dimension")
WIDTH = _length("width", "width", needed=True, help="at 90° to the length")
SIDE_WIDTH = _length("width", "width")
DEPTH = _length("depth", "greatest depth", needed=True)
OPTIONAL_DEPTH = _length("depth", "depth")
EDGE = _length("edge_distance", "distance to nearest edge", help="from the damage")
HOLE_CENTRE_EDGE = _length("edge_distance", "hole centre to nearest free edge")
FASTENER_DISTANCE = _length("fastener_distance", "distance to nearest fastener")
AFTER_REWORK = (
    _length("remaining_thickness", "remaining thickness, smallest measured",
            after_rework=True),
    _length("original_thickness", "original thickness, measured beside it"),
    _length("blend_length", "blend length"),
    _length("blend_width", "blend width"),
    _word("damage_removed", "all damage removed", "yes", "no", after=True),
)  # fmt: skip
THROUGH_CLAD = _word("through_clad", "through the cladding")
STRESS_DIRECTION = _word(
    "direction", "direction", "longitudinal", "circumferential", "diagonal"
)
AREA = Dimension("area_mm2", "area", Kind.AREA)

DIMENSIONS: dict[str, tuple[Dimension, ...]] = {
    "dent": (
        LENGTH, WIDTH, DEPTH,
        _length("edge_radius", "smallest radius of its edge"),
        _word("creased", "creased"),
        _word("cracked", "cracked, by a non-destructive test"),
        _word("fasteners_pulled", "fasteners pulled or loose"),
        _word("over", "lies over", "mid-bay", "frame", "stringer", "both"),
        _word("material_removed", "material removed"),
        EDGE, FASTENER_DISTANCE,
        _length("next_dent", "distance to the next dent"),
    ),
    "scratch": (LENGTH, DEPTH, SIDE_WIDTH, STRESS_DIRECTION, THROUGH_CLAD, EDGE,
                FASTENER_DISTANCE, *AFTER_REWORK),
    "gouge": (LENGTH, DEPTH, SIDE_WIDTH,
              _length("root_radius", "root radius"),
              STRESS_DIRECTION, THROUGH_CLAD, EDGE, FASTENER_DISTANCE, *AFTER_REWORK),
    "nick": (
        _length("depth", "depth from the edge", needed=True),
        _length("length", "length along the edge", needed=True),
        _word("at", "lies at", "edge", "hole"),
        _length("strip_width", "width of the strip with the edge"),
        _length("blend_depth", "depth of the blend from the edge"),
        _length("remaining_edge_distance", "edge distance left after the blend"),
        _length("hole_diameter", "diameter of the hole beside it"),
        *AFTER_REWORK,
    ),
    "crack": (
        _length("length", "length, tip to tip", needed=True),
        _word("direction", "direction", "longitudinal", "circumferential", "diagonal",
              "radial", needed=True),
        _word("origin", "origin", "fastener hole", "edge", "cut-out corner", "skin",
              "scratch", "dent", "corrosion pit", "weld", "other", needed=True),
        _word("through", "through the thickness"),
        _length("depth", "depth, where it is not through"),
        _length("remaining_thickness", "smallest thickness left, where it starts in "
                "corrosion"),
        _count("crack", "number of cracks"),
        _length("edge_crack_length", "length from the edge of the hole"),
        _length("hole_diameter", "diameter of the hole"),
        _word("both_sides", "on both sides of the hole"),
        _word("hole_load", "a fastener loads the hole", "loaded", "open"),
        _length("ligament", "distance to the next hole or crack"),
        _count("adjacent_holes_inspected", "adjacent holes inspected"),
        HOLE_CENTRE_EDGE,
        _length("strip_width", "width of the strip with the hole or edge"),
        _count("layers", "layers cracked"),
        _word("stop_drilled", "stop-drilled"),
        _length("stop_hole_diameter", "diameter of the stop hole"),
        _word("confirmed", "confirmed by a non-destructive test"),
    ),
    "corrosion": (
        LENGTH, WIDTH, DEPTH,
        _word("corrosion_type", "type", "surface", "pitting", "exfoliation",
              "intergranular", "stress corrosion", "crevice", "galvanic", "filiform",
              "microbial", "fretting"),
        _word("degree", "degree", "light", "moderate", "severe"),
        _word("source", "leak or moisture source found"),
        _word("protection", "protection", "intact", "damaged", "missing"),
        _word("level", "programme level", "1", "2", "3"),
        EDGE, FASTENER_DISTANCE,
        *AFTER_REWORK,
        _count("earlier_blends", "earlier blends here"),
    ),
    "hole": (
        LENGTH, WIDTH,
        _word("edges", "edges", "smooth", "ragged"),
        _word("radiating_cracks", "radiating cracks"),
        _length("edge_crack_length", "longest radiating crack, from the hole's edge"),
        _word("direction", "its direction", "longitudinal", "circumferential",
              "diagonal"),
        _word("both_sides", "radiating cracks on both sides"),
        _word("substructure_hit", "structure behind it hit"),
        _length("hole_diameter", "diameter after trimming", after_rework=True),
        HOLE_CENTRE_EDGE,
        _length("strip_width", "width of the strip with the hole"),
        _word("hole_load", "a fastener loads the hole", "loaded", "open"),
        _word("damage_removed", "all damage removed", "yes", "no", after=True),
    ),
    "crease": (
        LENGTH,
        _length("height", "out-of-plane height", needed=True),
        _count("wave", "number of waves"),
        _length("wave_pitch", "pitch of the waves"),
        STRESS_DIRECTION,
        _count("bay", "bays affected"),
        _word("fasteners_pulled", "fasteners pulled or loose"),
        _word("permanent", "permanent"),
    ),
    "delamination": (
        LENGTH, WIDTH, AREA, OPTIONAL_DEPTH,
        _count("ply", "deepest ply"),
        _count("level", "number of levels"),
        EDGE, FASTENER_DISTANCE,
        _length("next_delamination", "distance to the next one"),
    ),
    "disbond": (
        LENGTH, WIDTH, AREA,
        _word("interface", "interface", "skin to core", "skin to stringer", "doubler",
              "other"),
        Dimension("bond_length_percent", "share of the bond length", Kind.NUMBER,
                  unit="%"),
        _word("moisture", "moisture found"),
    ),
    "impact": (
        LENGTH, WIDTH, DEPTH,
        Dimension("since_impact_hours", "time since the impact", Kind.NUMBER, unit="h",
                  help="a dent in composite relaxes"),
        _word("far_side_damage", "damage on the far side"),
        _word("fibre_break", "fibres broken"),
        _word("both_sides_inspected", "both sides inspected"),
        Dimension("delaminated_area_mm2", "delaminated area", Kind.AREA),
        _word("category", "damage category", "1", "2", "3", "4", "5"),
    ),
    "lightning": (
        _length("diameter", "largest burn or pit", needed=True),
        DEPTH,
        _count("point", "entry and exit points"),
        _word("point_kind", "kind", "entry", "exit", "swept"),
        _count("melted_fastener", "melted fasteners"),
        _word("bonding_damage", "mesh or bonding damaged"),
        Dimension("resistance_milliohm", "bonding resistance", Kind.NUMBER, unit="mΩ"),
    ),
    "heat": (
        LENGTH, WIDTH, AREA,
        Dimension("temperature_degc", "estimated temperature", Kind.NUMBER, unit="°C"),
        Dimension("duration_minutes", "duration", Kind.NUMBER, unit="min"),
        Dimension("conductivity_percent_iacs", "lowest conductivity", Kind.NUMBER,
                  unit="% IACS"),
        _word("paint", "paint", "unchanged", "discoloured", "blistered", "burnt off"),
        _word("distortion", "distorted"),
        _word("resin_char", "resin charred"),
    ),
    "wear": (
        DEPTH,
        _length("length", "length"), SIDE_WIDTH, AREA,
        _length("clearance", "clearance to the mating part"),
        _word("cause_removed", "cause removed"),
        *AFTER_REWORK,
    ),
    "fastener": (
        _count("fastener", "fasteners affected", needed=True),
        _word("condition", "condition", "missing", "loose", "sheared", "working"),
        _length("diameter", "fastener diameter"),
        _length("hole_elongation", "hole elongation"),
        _word("adjacent_rows_checked", "adjacent rows checked"),
    ),
    "bird_strike": (
        LENGTH, WIDTH, DEPTH,
        _word("penetrated", "penetrated"),
        _word("internal_opened", "internal structure opened and checked"),
        _word("remains", "remains found"),
    ),
}  # fmt: skip
"""Damage type to its dimensions, in the order they are asked."""

WIDTH_OVER_DEPTH = Ratio(
    "width_over_depth", "width over depth, as worked out on the spot",
    "width_mm", "depth_mm", "depth_mm",
)  # fmt: skip
LENGTH_OVER_WIDTH = Ratio(
    "length_over_width", "length over width", "length_mm", "width_mm", "width_mm"
)
ASKED_RATIOS: dict[str, Ratio] = dict.fromkeys(
    ("dent", "bird_strike", "impact"), WIDTH_OVER_DEPTH
)
"""Damage types whose technician is asked for a ratio as well as for the sizes."""

SIZE_ORDER = (
    "length_mm", "diameter_mm", "hole_diameter_mm", "area_mm2", "depth_mm",
    "fastener_count",
)  # fmt: skip
"""The first of these that is known speaks for the size of the damage."""


def dimension(damage_type: str, quantity: str) -> Dimension:
    """The dimension of a damage type; KeyError when the type has no such dimension."""
    for one in DIMENSIONS[damage_type]:
        if one.quantity == quantity:
            return one
    raise KeyError(quantity)


def missing(damage_type: str, stage: str, known: set[str]) -> list[Dimension]:
    """What must be known at this stage of measuring and is not."""
    return [
        one
        for one in DIMENSIONS[damage_type]
        if (one.needed or (one.after_rework and stage == "after_rework"))
        and one.quantity not in known
    ]


def ratios(damage_type: str, sizes: dict[str, float]) -> list[tuple[Ratio, float]]:
    """Ratios that follow from the sizes; a size of nought gives none."""
    asked = ASKED_RATIOS.get(damage_type)
    wanted = [r for r in (LENGTH_OVER_WIDTH, asked) if r is not None]
    return [
        (r, sizes[r.numerator] / sizes[r.denominator])
        for r in wanted
        if r.numerator in sizes and sizes.get(r.denominator)
    ]
