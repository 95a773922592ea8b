"""Published detectable sizes by method: hints beside the field, never a default.

A size is used only after somebody entered it for the operator's own method, access and
material, with a source. Where a trial exists its curve goes before any of these. The
abstracts of the two reviews say "defect size"; it is taken as a length.
"""

from __future__ import annotations

from dataclasses import dataclass

from repairs.analysis.inspection.detection import SizeMeaning, Technique
from repairs.analysis.types import INCH, Grade, Reference

HANDBOOK = Reference(
    "JSSG-2006 Table XXXII, as quoted in the USAF Damage Tolerant Design Handbook, "
    "1.3.7.2.3",
    Grade.QUOTED,
)
JSSG = Reference("JSSG-2006", Grade.MEMORY)
PENETRANT_REVIEW = Reference("DSTO-TR-2623 (2011), abstract", Grade.PRINT)
MAGNETIC_REVIEW = Reference("DSTO-TR-2794 (2013), abstract", Grade.PRINT)
NASA = Reference("NASA-STD-5009, table of standard NDE sizes", Grade.MEMORY)
PRACTICE = Reference("typical practice", Grade.MEMORY)
SHOWN_90_95 = "90 % found with 95 % confidence"
REVIEWED = "consistent with 90 % found on average in a review of trials"
ASSUMED = "assumed to be left after the inspection"
TYPICAL = "typical, without trial"


@dataclass(frozen=True, slots=True)
class PublishedSize:
    """A size somebody published for a method; `most` where a range is given.

    `depth` belongs to a part-through crack, at the same time as its length.
    """

    techniques: tuple[Technique, ...]
    where: str
    meaning: SizeMeaning
    length: float
    most: float | None
    depth: float | None
    stands_for: str
    reference: Reference


def _inches(
    techniques: tuple[Technique, ...],
    where: str,
    meaning: SizeMeaning,
    length: float,
    stands_for: str,
    reference: Reference,
    *,
    most: float | None = None,
    depth: float | None = None,
) -> PublishedSize:
    return PublishedSize(
        techniques,
        where,
        meaning,
        length * INCH,
        None if most is None else most * INCH,
        None if depth is None else depth * INCH,
        stands_for,
        reference,
    )


def _standard(
    technique: Technique,
    through: float,
    shallow: tuple[float, float],
    deep: tuple[float, float],
    at_edge: float,
    corner: tuple[float, float] | None,
) -> tuple[PublishedSize, ...]:
    """Return one method's rows of the standard's table: half-lengths made lengths [in].

    `shallow`, `deep` and `corner` are (depth, length), half-length but at a corner.
    """
    one = (technique,)
    ends, edge = SizeMeaning.TIP_TO_TIP, SizeMeaning.FROM_EDGE
    rows = [
        _inches(one, "open surface, through", ends, 2 * through, SHOWN_90_95, NASA),
        *(
            _inches(one, "open surface, part through", ends, 2 * c, SHOWN_90_95, NASA,
                    depth=a)
            for a, c in (shallow, deep)
        ),
        _inches(one, "edge or hole, through", edge, at_edge, SHOWN_90_95, NASA),
    ]  # fmt: skip
    if corner is not None:
        depth, length = corner
        rows.append(
            _inches(one, "edge or hole, corner", edge, length, SHOWN_90_95, NASA,
                    depth=depth)
        )  # fmt: skip
    return tuple(rows)


_T, _S = Technique, SizeMeaning
PUBLISHED_SIZES: tuple[PublishedSize, ...] = (
    _inches(
        (_T.PENETRANT, _T.ULTRASONIC),
        "depot, accessible, through crack",
        _S.BEYOND_COVER,
        0.25,
        ASSUMED,
        HANDBOOK,
    ),
    _inches(
        (_T.DETAILED_VISUAL,),
        "depot, close visual, through crack",
        _S.BEYOND_COVER,
        2.0,
        ASSUMED,
        JSSG,
    ),
    PublishedSize(
        (_T.PENETRANT,),
        "post-emulsifiable, general procedure of an air force",
        _S.TIP_TO_TIP,
        3.0,
        None,
        None,
        REVIEWED,
        PENETRANT_REVIEW,
    ),
    PublishedSize(
        (_T.MAGNETIC_PARTICLE,),
        "wet fluorescent, continuous, general procedure of an air force",
        _S.TIP_TO_TIP,
        2.0,
        None,
        None,
        REVIEWED,
        MAGNETIC_REVIEW,
    ),
    *_standard(
        _T.EDDY_CURRENT_SURFACE,
        0.05,
        (0.020, 0.100),
        (0.050, 0.050),
        0.10,
        (0.075, 0.075),
    ),
    *_standard(_T.PENETRANT, 0.10, (0.025, 0.125), (0.075, 0.075), 0.15, (0.10, 0.15)),
    *_standard(_T.MAGNETIC_PARTICLE, 0.125, (0.038, 0.188), (0.075, 0.125), 0.25, None),
    *(
        _inches((technique,), "as is usual", meaning, low, TYPICAL, PRACTICE, most=high)
        for technique, meaning, low, high in (
            (_T.GENERAL_VISUAL, _S.BEYOND_COVER, 2.0, 4.0),
            (_T.DETAILED_VISUAL, _S.BEYOND_COVER, 0.5, 1.0),
            (_T.EDDY_CURRENT_LOW_FREQUENCY, _S.BEYOND_COVER, 0.2, 0.5),
            (_T.EDDY_CURRENT_BOLT_HOLE, _S.FROM_EDGE, 0.03, 0.1),
        )
    ),
)
"""What is published, for a hint; most of it from memory and so barred from approval."""


def published_for(technique: Technique) -> tuple[PublishedSize, ...]:
    """Return what is published for a method, best known first; may be empty."""
    rank = {Grade.PRINT: 0, Grade.QUOTED: 1}
    return tuple(
        sorted(
            (row for row in PUBLISHED_SIZES if technique in row.techniques),
            key=lambda row: rank.get(row.reference.grade, 2),
        )
    )
