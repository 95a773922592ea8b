"""The inputs methods may ask for: name, title, unit, and where each is entered.

There is no default of a load, a scatter factor or a detectable size. The few values
with a default are published factors and a company rule; they carry their source and
can be replaced by an adopted value of the same name.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import asdict, dataclass

from repairs.analysis.errors import (
    UNKNOWN_INPUT,
    WRONG_KIND,
    WRONG_UNIT,
    InputError,
)
from repairs.analysis.growth.laws import WalkerLaw
from repairs.analysis.loads import shell as loads
from repairs.analysis.scatter.factors import FatiguePolicy
from repairs.analysis.stress_life.curves import StressLifeFamily
from repairs.analysis.surroundings import Surroundings
from repairs.analysis.types import Grade, MissingInput, Sourced, Stated

Value = Sourced | Stated | StressLifeFamily | WalkerLaw | FatiguePolicy | Surroundings

TOUGHNESS_UNIT = "MPa*sqrt(mm)"
CLEARANCE_RULE = Sourced(
    3.0,
    "-",
    "company rule of this program, not published: edge disturbances of a thin shell "
    "have died out after about 3 sqrt(R t)",
    Grade.RECORDED,
)

_TYPE = "on the aircraft type"
_PANEL = "on the panel, in the type's geometry or as a panel on this aircraft"
_MEASURE = "in a measurement of the finding"
_MATERIAL = "on the panel's material, or as an adopted value"
_POLICY = "as a fatigue policy of the aircraft type"
_FINDING = "on the finding"


@dataclass(frozen=True, slots=True)
class InputSpec:
    """One input: what it is called, what it is, its unit and where it is entered."""

    name: str
    title: str
    kind: type
    unit: str
    where: str
    default: Sourced | None = None


def _number(
    name: str, title: str, unit: str, where: str, default: Sourced | None = None
) -> InputSpec:
    return InputSpec(name, title, Sourced, unit, where, default)


def _word(name: str, title: str, where: str) -> InputSpec:
    return InputSpec(name, title, Stated, "", where)


SPECS: dict[str, InputSpec] = {
    spec.name: spec
    for spec in (
        _word("element", "structural item", _FINDING),
        _word("pressurised", "panel is pressurised", _PANEL),
        _word("crack_direction", "direction of the crack", _MEASURE),
        _word("crack_origin", "where the crack starts", _MEASURE),
        _word("damage_removed", "all damage removed", _MEASURE),
        _word("clad", "panel is clad", _PANEL),
        _word("hole_load", "whether a fastener loads the hole", _MEASURE),
        _word("hole_cracked", "whether cracks start at the hole", _MEASURE),
        _word("both_sides", "cracks on both sides of the hole", _MEASURE),
        _word("life_base", "what life counts from", "by the evaluation"),
        InputSpec(
            "surroundings",
            "what lies round the location",
            Surroundings,
            "",
            "by placing the finding on a published geometry",
        ),
        _number("crack_length", "crack length, tip to tip", "mm", _MEASURE),
        _number("crack_length_uncertainty", "its uncertainty", "mm", _MEASURE),
        _number("edge_crack_length", "crack length from hole edge", "mm", _MEASURE),
        _number("edge_crack_uncertainty", "its uncertainty", "mm", _MEASURE),
        _number("hole_diameter", "hole diameter after trimming", "mm", _MEASURE),
        _number("edge_distance", "hole centre to nearest free edge", "mm", _MEASURE),
        _number("strip_width", "width of the strip with the hole", "mm", _MEASURE),
        _number("remaining_thickness", "smallest thickness left", "mm", _MEASURE),
        _number("gauge_uncertainty", "uncertainty of the gauge", "mm", _MEASURE),
        _number("blend_length", "full length of the blend", "mm", _MEASURE),
        _number("blend_depth", "depth of this blend", "mm", _MEASURE),
        _word(
            "life_used_reason",
            "why life already used is not counted",
            "when the evaluation is made",
        ),
        _number(
            "clad_life_factor",
            "life of bare over life of clad",
            "-",
            "as an adopted value",
        ),
        _number(
            "earlier_depth",
            "depth of earlier blends at the location",
            "mm",
            "on the earlier repairs here",
        ),
        _number("thickness", "skin thickness before the damage", "mm", _PANEL),
        _number("clad_thickness", "cladding of one side", "mm", _PANEL),
        _number("radius", "shell radius", "mm", _PANEL),
        _number("panel_length", "panel length along the section", "mm", _PANEL),
        _number(
            "ultimate_running_load", "recorded ultimate running load", "N/mm", _PANEL
        ),
        _number("limit_flight_stress", "stress from limit flight loads", "MPa", _PANEL),
        _number("cycle_max_stress", "largest stress of a flight", "MPa", _PANEL),
        _number("cycle_ratio", "stress ratio of a flight's cycle", "-", _PANEL),
        _number("normal_pressure", "normal operating differential", "MPa", _TYPE),
        _number("external_pressure", "external aerodynamic pressure", "MPa", _TYPE),
        _number("relief_pressure", "relief-valve differential", "MPa", _TYPE),
        _number("ceiling", "maximum operating altitude", "ft", _TYPE),
        _number("yield_strength", "tension yield strength Fty", "MPa", _MATERIAL),
        _number("tension_strength", "tension ultimate strength Ftu", "MPa", _MATERIAL),
        _number("toughness", "fracture toughness Kc", TOUGHNESS_UNIT, _MATERIAL),
        InputSpec("growth_law", "crack growth law", WalkerLaw, "", _MATERIAL),
        InputSpec("second_growth_law", "second growth law", WalkerLaw, "", _MATERIAL),
        InputSpec("stress_life", "stress-life curves", StressLifeFamily, "", _MATERIAL),
        InputSpec(
            "stress_life_policy",
            "scatter factor on mean stress-life",
            FatiguePolicy,
            "",
            f"{_POLICY} named stress_life",
        ),
        InputSpec(
            "growth_policy",
            "factor on growth life to a threshold",
            FatiguePolicy,
            "",
            f"{_POLICY} named growth_threshold",
        ),
        InputSpec(
            "repeat_policy",
            "factor on growth life to a repeat interval",
            FatiguePolicy,
            "",
            f"{_POLICY} named growth_repeat",
        ),
        _number(
            "detectable_length",
            "detectable size with the hidden part",
            "mm",
            "as a detectable size of the aircraft type, for the method chosen",
        ),
        _number(
            "assumed_flaw",
            "depth of the flaw assumed to remain",
            "mm",
            "as an adopted value; else the published flaw of the location is used",
        ),
        _number(
            "accumulated_cycles",
            "flight cycles accumulated",
            "cycles",
            "in the finding's counters or the aircraft's usage",
        ),
        _number(
            "skin_cycles",
            "flight cycles this skin has flown",
            "cycles",
            "in the finding's counters, less those at the fit of a replaced panel",
        ),
        _number(
            "validity_cycles",
            "limit of validity",
            "cycles",
            "on the variant or the aircraft",
        ),
        _number(
            "class_maximum",
            "operator's largest interval of this class",
            "cycles",
            "as a policy of the operator",
        ),
        _number(
            "clearance_multiple",
            "clearance from edges in sqrt(R t)",
            "-",
            "as an adopted value",
            CLEARANCE_RULE,
        ),
        _number(
            "residual_pressure_factor",
            "residual, pressure alone",
            "-",
            "as an adopted value",
            loads.RESIDUAL_PRESSURE_FACTOR,
        ),
        _number(
            "ultimate_factor",
            "ultimate over limit load",
            "-",
            "as an adopted value",
            loads.ULTIMATE_FACTOR,
        ),
        _number(
            "proof_factor",
            "relief valve alone",
            "-",
            "as an adopted value",
        ),
    )
}


class Inputs:
    """The inputs of one evaluation, each of a known name, kind and unit."""

    def __init__(self, values: Mapping[str, Value]) -> None:
        for name, value in values.items():
            if name not in SPECS:
                raise InputError(
                    UNKNOWN_INPUT.format(name=name, known=", ".join(SPECS))
                )
            spec = SPECS[name]
            if not isinstance(value, spec.kind):
                raise InputError(
                    WRONG_KIND.format(
                        name=name, read=value, expected=spec.kind.__name__
                    )
                )
            if isinstance(value, Sourced) and value.unit != spec.unit:
                raise InputError(
                    WRONG_UNIT.format(name=name, read=value.unit, expected=spec.unit)
                )
        self._values = dict(values)

    def __contains__(self, name: str) -> bool:
        return name in self._values or SPECS[name].default is not None

    def number(self, name: str) -> Sourced:
        """Return a number that is known to be there."""
        found = self.maybe(name)
        if found is None:
            raise InputError(f"Input {name} is needed and missing.")
        return found

    def maybe(self, name: str) -> Sourced | None:
        """Return a number, its published default, or None."""
        value = self._values.get(name, SPECS[name].default)
        return value if isinstance(value, Sourced) else None

    def word(self, name: str) -> str | None:
        """Return a stated word, or None."""
        value = self._values.get(name)
        return value.value if isinstance(value, Stated) else None

    def law(self, name: str = "growth_law") -> WalkerLaw | None:
        """Return a growth law, or None."""
        value = self._values.get(name)
        return value if isinstance(value, WalkerLaw) else None

    def family(self) -> StressLifeFamily | None:
        """Return the stress-life curves, or None."""
        value = self._values.get("stress_life")
        return value if isinstance(value, StressLifeFamily) else None

    def policy(self, name: str) -> FatiguePolicy | None:
        """Return a fatigue policy, or None."""
        value = self._values.get(name)
        return value if isinstance(value, FatiguePolicy) else None

    def surroundings(self) -> Surroundings | None:
        """Return what lies round the location, or None."""
        value = self._values.get("surroundings")
        return value if isinstance(value, Surroundings) else None

    def missing(self, names: tuple[str, ...]) -> tuple[MissingInput, ...]:
        """Return those of the names that are not there, with where to enter them."""
        specs = (SPECS[name] for name in names if name not in self)
        return tuple(MissingInput(s.name, s.title, s.where) for s in specs)

    def as_data(self) -> dict[str, object]:
        """Return all inputs given as plain data, by name."""
        return {
            name: {"kind": type(value).__name__, **asdict(value)}
            for name, value in sorted(self._values.items())
        }
