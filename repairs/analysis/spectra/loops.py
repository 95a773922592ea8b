"""The loops of counting, each one source for Python lists and for compiled arrays.

They fill the sequences they are given and return how much they filled. Only plain
statements stand here, so that both ways do the same.
"""

from __future__ import annotations

from collections.abc import MutableSequence, Sequence


def turning_points(points: Sequence[float], out: MutableSequence[float]) -> int:
    """Fill `out` with the reversals of `points`, ends included, and return how many.

    Equal neighbours are one point.
    """
    out[0] = last = points[0]
    filled = 0
    rising = falling = False
    for value in points:
        if value == last:
            continue
        up = value > last
        if (up and not rising) or (not up and not falling):
            filled += 1
        rising, falling = up, not up
        out[filled] = last = value
    return filled + 1


def closed_cycles(
    points: Sequence[float],
    first: MutableSequence[float],
    second: MutableSequence[float],
    counts: MutableSequence[float],
    held: MutableSequence[float],
    repeating: bool,
) -> int:
    """Fill in the cycles of a history in the order they close; return how many.

    `held` takes the points that no cycle has used up yet. A point further the same way
    takes the place of the one before: what that one closed is closed all the same.
    """
    held[0] = last = points[0]
    found = top = 0
    rising = falling = False
    for value in points:
        if value == last:
            continue
        up = value > last
        if (up and not rising) or (not up and not falling):
            top += 1
        rising, falling = up, not up
        held[top] = last = value
        while top >= 2:
            older, newer = held[top - 2], held[top - 1]
            if abs(value - newer) < abs(newer - older):
                break
            first[found] = older
            second[found] = newer
            if top == 2 and not repeating:  # the range holds the starting point
                counts[found] = 0.5
                held[0] = newer
                top = 1
            else:
                counts[found] = 1.0
                top -= 2
            held[top] = value
            found += 1
    for left in range(top):
        first[found] = held[left]
        second[found] = held[left + 1]
        counts[found] = 0.5
        found += 1
    return found


def kept_reversals(
    points: Sequence[float], kept: MutableSequence[float], smallest: float
) -> int:
    """Fill `kept` with the reversals left without small ranges; return how many.

    A range below `smallest` between two that are no smaller goes with both its points;
    then the small ranges at both ends go.
    """
    top = 0
    for value in points:
        kept[top] = value
        top += 1
        while top >= 4:
            inner = abs(kept[top - 2] - kept[top - 3])
            if (
                inner >= smallest
                or inner > abs(kept[top - 3] - kept[top - 4])
                or inner > abs(value - kept[top - 2])
            ):
                break
            kept[top - 3] = value
            top -= 2
    while top > 2 and abs(kept[top - 1] - kept[top - 2]) < smallest:
        top -= 1
    start = 0
    while top - start > 2 and abs(kept[start + 1] - kept[start]) < smallest:
        start += 1
    for place in range(start, top):
        kept[place - start] = kept[place]
    return top - start
