"""What a substantiation has to review: findings, repairs and joints within reach.

14 CFR 26.41 has the damage-tolerance evaluation cover the repair and the structure that
it affects; how far that reaches is the operator's policy, with its source.
"""

from __future__ import annotations

import datetime as dt
import math
from collections.abc import Iterable
from dataclasses import dataclass

from fleet.location.parts import Box
from fleet.location.sections import Section as SectionGeometry
from fleet.models import Joint, Policy
from fleet.selectors.people import policy
from repairs.models import Finding, Repair, Substantiation
from repairs.selectors.neighbours import (
    REACH_BAYS,
    Item,
    Patch,
    gap_between,
    near_within,
    patch_of,
    section_geometry,
    true_x,
)

REVIEW_REACH = "review_reach_mm"

Neighbour = Finding | Repair | Joint


@dataclass(frozen=True)
class Within:
    """A finding, repair or joint within reach, and the nearest gap [mm]."""

    item: Neighbour
    gap_mm: float

    @property
    def key(self) -> tuple[type[Neighbour], int]:
        return type(self.item), self.item.pk


def review_reach(substantiation: Substantiation, day: dt.date) -> Policy | None:
    """The operator's reach for the review in force that day [mm], with its source."""
    return policy(substantiation.operator, REVIEW_REACH, day)


def reviewed_from(substantiation: Substantiation) -> list[Item]:
    """What the reach is measured from: findings covered, repairs using the folder."""
    return [*findings_covered(substantiation), *repairs_using(substantiation)]


def findings_covered(substantiation: Substantiation) -> list[Finding]:
    rows = substantiation.finding_rows.filter(withdrawn=False)
    related = ("finding__section", "finding__geometry", "finding__panel")
    found = rows.select_related(*related, "finding__aircraft__variant")
    return [row.finding for row in found]


def repairs_using(substantiation: Substantiation) -> list[Repair]:
    """Repairs that name any revision of the folder, but those off the aircraft."""
    rows = Repair.objects.filter(
        substantiation__operator=substantiation.operator_id,
        substantiation__number=substantiation.number,
    ).exclude(state__in=("removed", "superseded", "cancelled"))
    related = ("section", "geometry", "panel", "aircraft__variant", "operator")
    return list(rows.select_related(*related).order_by("pk"))


def within_reach(items: Iterable[Item], reach_mm: float | None) -> list[Within]:
    """Everything within reach of any of the items, nearest first, they left out.

    Without a reach, one bay is looked over. What has no place has no neighbours.
    """
    origins = list(items)
    own = {(type(item), item.pk) for item in origins}
    found: dict[tuple[type[Neighbour], int], Within] = {}
    for item in origins:
        for near in _around(item, reach_mm):
            known = found.get(near.key)
            if near.key in own or (known and known.gap_mm <= near.gap_mm):
                continue
            found[near.key] = near
    return sorted(found.values(), key=lambda near: (near.gap_mm, str(near.item)))


def _around(item: Item, reach_mm: float | None) -> list[Within]:
    section = section_geometry(item)
    if section is None:
        return []
    reach = reach_mm if reach_mm is not None else REACH_BAYS * section.frame_pitch_mm
    records = [Within(near.item, near.distance_mm) for near in near_within(item, reach)]
    return [*records, *_joints(item, section, reach)]


def _joints(item: Item, section: SectionGeometry, reach: float) -> list[Within]:
    """Production joints of the geometry the place was read with."""
    rows = Joint.objects.filter(geometry=item.geometry, section=item.section)
    patch, variant = patch_of(item), item.aircraft.variant.code
    found = []
    for row in rows:
        box = Box(row.map1_mm, row.map2_mm, row.s1_mm, row.s2_mm)
        middle = item.map_mm if item.map_mm is not None else row.map1_mm
        theirs = _on_variant(section, box, variant)
        along, across = gap_between(patch, theirs, section, middle)
        gap = math.hypot(along, across or 0.0)
        if gap <= reach:
            found.append(Within(row, gap))
    return found


def _on_variant(section: SectionGeometry, box: Box, variant: str) -> Patch:
    low = true_x(section, box.map1_mm, variant)
    high = true_x(section, box.map2_mm, variant)
    return Patch(low, high, box.s1_mm, box.s2_mm)
