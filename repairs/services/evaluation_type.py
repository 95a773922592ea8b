"""What the type, the operator's policies and the counters say, as inputs."""

from __future__ import annotations

import datetime as dt

from fleet.location.geometry import geometry_from_toml
from fleet.models import AircraftType, FatiguePolicy, Operator
from fleet.selectors.counters import aircraft_standing
from fleet.selectors.kept import of_the_fleet
from fleet.selectors.people import policy
from fleet.selectors.validity import validity_limits
from repairs.analysis.inspection.intervals import SINCE_NEW
from repairs.analysis.loads.panel_loads import FEET_45000
from repairs.analysis.scatter import factors as scatter
from repairs.analysis.types import Sourced
from repairs.models import Repair
from repairs.selectors.latest import Latest
from repairs.services.evaluation_detection import DETECTION_TARGET
from repairs.services.evaluation_gathered import Choice, Gathered
from repairs.services.evaluation_materials import grade_of
from repairs.services.evaluation_place import Skin, Subject

POLICIES = {
    "stress_life_policy": "stress_life",
    "growth_policy": "growth_threshold",
    "repeat_policy": "growth_repeat",
}
LARGEST_INTERVAL = "largest_interval_{criticality}"
"""Policy key of the operator's largest interval of a class, in flight cycles."""

BLEND = "blend"
"""Where the type's file states the flaw that is assumed to remain."""


def pressures(found: Gathered, subject: Subject) -> None:
    made = subject.aircraft.variant.aircraft_type
    source = f"type {made.code}: {made.pressures_source}"
    found.number("normal_pressure", made.normal_differential_mpa, source)
    found.number("external_pressure", made.external_suction_mpa, source)
    found.number("relief_pressure", made.relief_differential_mpa, source)
    found.number("ceiling", made.ceiling_ft, source)


def rules(found: Gathered, subject: Subject, as_of: dt.date) -> None:
    """The rules that the aircraft is under on a day, by the period of its operator.

    Read only for a type that flies so high that the rules differ.
    """
    ceiling = subject.aircraft.variant.aircraft_type.ceiling_ft
    if ceiling is None or ceiling <= FEET_45000:
        return
    held = subject.aircraft.periods.select_related("operator")
    period = held.filter(from_on__lte=as_of).order_by("from_on").last()
    if period is not None and (period.to_on is None or as_of <= period.to_on):
        source = f"period of {period.operator} from {period.from_on}"
        found.word("regime", period.regime, source)


def policies(
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
    target = policy(operator, DETECTION_TARGET, as_of)
    if target is not None:
        source = f"operator's target of detection ({target.source})"
        found.number("detection_target", float(target.value), source, target)


@of_the_fleet
def _policy_rows(made: AircraftType) -> dict[str, FatiguePolicy]:
    held = made.fatigue_policies.filter(replaced_by__isnull=True).order_by("pk")
    return {row.name: row for row in held}


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


def counters(
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


def remaining_flaw(found: Gathered, subject: Subject) -> None:
    """The flaw the type's file assumes to remain in a blend, unless one is adopted."""
    if subject.geometry is None or "assumed_flaw" in found.values:
        return
    flaws = geometry_from_toml(subject.geometry.content).rogue_flaws
    for flaw in flaws:
        if flaw.where == BLEND:
            source = f"{flaw.shape}: {flaw.source}"
            found.number("assumed_flaw", flaw.size_mm, source)
