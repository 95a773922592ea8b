"""Load the drawn demo through the program's own services, in order of entry."""

from __future__ import annotations

from collections.abc import Callable

from reports.demo.load_base import (
    Loaded,
    fleet_steps,
    people_load,
    policies_load,
    type_load,
)
from reports.demo.load_decisions import decision_steps
from reports.demo.load_evaluations import evaluations_load
from reports.demo.load_findings import finding_steps
from reports.demo.load_folders import folders_load
from reports.demo.load_parts import part_numbers_load, part_steps
from reports.demo.load_repairs import repair_steps
from reports.demo.load_stated import stated_load
from reports.demo.people import PASSWORD
from reports.demo.records import Scenario
from reports.demo.standing import marker_set
from reports.demo.timeline import steps_run


def demo_load(scenario: Scenario, *, say: Callable[[str], None]) -> Loaded:
    """The whole demo into an empty database; `say` is told how far it is."""
    say("people, materials and the aircraft type")
    loaded = people_load(PASSWORD)
    policies_load(loaded)
    variants = type_load(loaded)
    part_numbers_load(loaded, scenario)
    steps = [
        *fleet_steps(loaded, variants, scenario.logbooks),
        *part_steps(loaded, scenario),
        *finding_steps(loaded, scenario),
        *decision_steps(loaded, scenario),
        *repair_steps(loaded, scenario),
    ]
    steps_run(steps, say)
    stated_load(loaded, scenario)
    evaluations_load(loaded, scenario, say)
    folders_load(loaded, scenario, say)
    marker_set(loaded, scenario.seed)
    return loaded
