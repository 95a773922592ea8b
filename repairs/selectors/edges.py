"""How far a repair reaches beyond its damage, and what was blended before."""

from __future__ import annotations

from django.db.models import QuerySet

from repairs.models import Finding, MeasuredValue, Repair
from repairs.selectors.neighbours import in_patch, patch_of

LARGEST = ("length_mm", "width_mm", "diameter_mm", "hole_diameter_mm")


def edge_margin_mm(repair: Repair, finding: Finding) -> float | None:
    """Least distance from the damage's edge to the repair's edge; None: not known.

    Negative when the damage reaches beyond the repair. The damage's largest dimension
    is taken both ways, since its direction is not always recorded.
    """
    if repair.section_id is None or repair.section_id != finding.section_id:
        return None
    half = _largest_mm(finding)
    sides = [_along(repair, finding, half), _across(repair, finding, half)]
    known = [side for side in sides if side is not None]
    return min(known) if len(known) == len(sides) else None


def earlier_blends(finding: Finding) -> list[Repair]:
    """Blend-outs that stand at a finding's location; their depths add up."""
    return list(_earlier(finding).order_by("released_on"))


def _earlier(finding: Finding) -> QuerySet[Repair]:
    if finding.section is None:
        return Repair.objects.none()
    rows = Repair.objects.filter(
        in_patch(patch_of(finding), finding.section.wrap_mm),
        aircraft=finding.aircraft_id,
        section=finding.section_id,
        kind="blend",
        state="embodied",
    )
    return rows.exclude(finding_rows__finding=finding)


def earlier_depth_mm(finding: Finding) -> float | None:
    """Their summed depth: 0 without any, None when one was not recorded."""
    depths = list(_earlier(finding).order_by().values_list("blend_depth_mm", flat=True))
    if None in depths:
        return None
    return sum(depth for depth in depths if depth is not None)


def _largest_mm(finding: Finding) -> float | None:
    """The largest size measured last, halved: from the damage's middle to its edge."""
    rows = MeasuredValue.objects.filter(
        measurement__finding=finding, quantity__in=LARGEST, value__isnull=False
    )
    sizes = [row.value for row in rows if row.value is not None]
    return max(sizes) / 2 if sizes else None


def stated_extent(
    low: float | None, high: float | None, size: float | None
) -> tuple[float, float] | None:
    """The extent along one axis: as placed, or that size about its middle."""
    if low is None or high is None:
        return None
    return _edges(low, high, _half(size)) or (low, high)


def _along(repair: Repair, finding: Finding, half: float | None) -> float | None:
    inner = _edges(finding.x1_mm, finding.x2_mm, half)
    outer = _edges(repair.x1_mm, repair.x2_mm, _half(repair.length_mm))
    return _margin(inner, outer)


def _across(repair: Repair, finding: Finding, half: float | None) -> float | None:
    inner = _edges(finding.s1_mm, finding.s2_mm, half)
    outer = _edges(repair.s1_mm, repair.s2_mm, _half(repair.width_mm))
    return _margin(inner, outer)


def _half(size: float | None) -> float | None:
    return None if size is None else size / 2


def _edges(
    low: float | None, high: float | None, half: float | None
) -> tuple[float, float] | None:
    """The stated extent, or one of that size about its middle if that is larger."""
    if low is None or high is None:
        return None
    if half is None:
        return (low, high) if high > low else None
    middle = (low + high) / 2
    return min(low, middle - half), max(high, middle + half)


def _margin(
    inner: tuple[float, float] | None, outer: tuple[float, float] | None
) -> float | None:
    if inner is None or outer is None:
        return None
    return min(inner[0] - outer[0], outer[1] - inner[1])
