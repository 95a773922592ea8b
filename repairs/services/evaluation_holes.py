"""A row of holes as measured, one by one: how many cracks, the largest, the closest.

An empty length is no crack or not measured, so that it counts for nothing: neither as
a crack nor as sound metal in a ligament.
"""

from __future__ import annotations

from collections.abc import Iterator
from itertools import pairwise

from repairs.analysis.types import Sourced
from repairs.models import Finding, HoleCrack, Measurement
from repairs.services.evaluation_gathered import Gathered

LARGEST = ("edge_crack_length", "hole_diameter")
"""Of these the larger of row and measured size counts, of others the smaller."""


def row_inputs(found: Gathered, finding: Finding) -> None:
    """What the holes measured last say of their row; one query."""
    rows = list(
        HoleCrack.objects.filter(
            measurement__finding=finding, measurement__replaced_by__isnull=True
        )
        .select_related("measurement")
        .order_by("measurement__number", "hole_number")
    )
    if not rows:
        return
    measured = rows[-1].measurement
    holes = [row for row in rows if row.measurement_id == measured.pk]
    source = f"measurement {measured.number}, {measured.measured_on}"
    cracks = [(length, hole) for hole in holes for length in _lengths(hole) if length]
    if cracks and "crack_count" not in found.values:
        words = f"{source}: lengths recorded at {len(holes)} holes of the row"
        found.number("crack_count", float(len(cracks)), words, measured)
    _keep(found, "edge_crack_length", cracks, source, measured)
    sizes = [(row.hole_diameter_mm, row) for row in holes if row.hole_diameter_mm]
    _keep(found, "hole_diameter", sizes, source, measured)
    pitches = [(row.pitch_to_next_mm, row) for row in holes if row.pitch_to_next_mm]
    _keep(found, "hole_pitch", pitches, source, measured)
    _keep(found, "ligament", list(_ligaments(holes)), source, measured)
    if "both_sides" not in found.values and (both := _both_sides(holes)):
        found.word("both_sides", both, f"{source}: holes of the row", measured)


def _lengths(hole: HoleCrack) -> tuple[float | None, float | None]:
    return hole.fore_length_mm, hole.aft_length_mm


def _ligaments(holes: list[HoleCrack]) -> Iterator[tuple[float, HoleCrack]]:
    """Room from tip to tip to the next hole, where all that shortens it is known."""
    for one, following in pairwise(holes):
        if following.hole_number != one.hole_number + 1:
            continue
        aft, fore = one.aft_length_mm, following.fore_length_mm
        across, next_across = one.hole_diameter_mm, following.hole_diameter_mm
        pitch = one.pitch_to_next_mm
        known = None not in (aft, fore, across, next_across, pitch)
        if known and aft is not None and fore is not None and pitch is not None:
            half = ((across or 0.0) + (next_across or 0.0)) / 2
            yield pitch - half - aft - fore, one


def _both_sides(holes: list[HoleCrack]) -> str:
    """Whether a hole is cracked on both sides; nothing where a side is not known."""
    if any(all(_lengths(hole)) for hole in holes):
        return "yes"
    known = all(length is not None for hole in holes for length in _lengths(hole))
    return "no" if known else ""


def _keep(
    found: Gathered,
    name: str,
    sizes: list[tuple[float, HoleCrack]],
    source: str,
    measured: Measurement,
) -> None:
    """Keep the worst size of the row, unless a worse one was measured by itself."""
    if not sizes:
        return
    worst = max if name in LARGEST else min
    size, hole = worst(sizes, key=lambda item: item[0])
    before = found.values.get(name)
    if isinstance(before, Sourced) and worst(before.value, size) == before.value:
        return
    word = "largest" if name in LARGEST else "smallest"
    found.number(name, size, f"{source}: {word} of the row, at {hole}", measured)
