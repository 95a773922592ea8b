"""Groups of columns that findings and repairs share."""

from __future__ import annotations

from django.db import models
from django.db.models import Q

from fleet.constraints import all_or_none, check, not_before
from fleet.fields import MM_HIGH, Count, Word, optional_measure, text
from fleet.models import Criticality, GeometryRevision, Panel, Section, Zone


class Surface(models.TextChoices):
    OUTER = "outer", "outer surface"
    INNER = "inner", "inner surface"
    UPPER = "upper", "upper surface"
    LOWER = "lower", "lower surface"
    INTERNAL = "internal", "internal structure"


class Element(models.TextChoices):
    """The structural item hit; unknown is a value."""

    SKIN = "skin", "skin"
    STRINGER = "stringer", "stringer"
    FRAME_CAP = "frame_cap", "frame cap"
    FRAME_WEB = "frame_web", "frame web"
    SHEAR_CLIP = "shear_clip", "shear clip"
    FLOOR_BEAM = "floor_beam", "floor beam"
    SEAT_TRACK = "seat_track", "seat track"
    BULKHEAD = "bulkhead", "bulkhead"
    SPAR_CAP = "spar_cap", "spar cap"
    SPAR_WEB = "spar_web", "spar web"
    RIB = "rib", "rib"
    KEEL_BEAM = "keel_beam", "keel beam"
    DOOR_STRUCTURE = "door_structure", "door structure"
    FITTING = "fitting", "fitting"
    FAIRING = "fairing", "fairing"
    OTHER = "other", "other"
    UNKNOWN = "unknown", "unknown"


class RepairCategory(models.TextChoices):
    A = "a", "A, permanent"
    B = "b", "B, permanent with supplemental inspections"
    C = "c", "C, time-limited"
    PENDING = "pending", "pending"
    NOT_APPLICABLE = "not_applicable", "not applicable"


class Place(models.Model):
    """Where on the aircraft: as written, as canonical text, as coordinates.

    Along is mm from the section's datum on this aircraft's variant (`map_mm` on the
    axis all variants share); across is mm at the reference radius from the crown,
    right positive. A place not yet found on the structure has text only.
    """

    section = models.ForeignKey(
        Section, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    geometry = models.ForeignKey(
        GeometryRevision,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="+",
    )
    place_entered = models.TextField(help_text="As written.")
    place_text = text(help_text="Canonical text; empty: to be placed.")
    place_codes = text(help_text="Warnings of the reader, accepted by the user.")
    reader_version = text()
    x1_mm = optional_measure(-MM_HIGH, MM_HIGH)
    x2_mm = optional_measure(-MM_HIGH, MM_HIGH)
    map_mm = optional_measure(-MM_HIGH, MM_HIGH)
    s1_mm = optional_measure(-100_000, MM_HIGH)
    s2_mm = optional_measure(-100_000, MM_HIGH)
    bl_mm = optional_measure(-100_000, 100_000, help_text="Butt line, right positive.")
    wl_mm = optional_measure(-100_000, 100_000, help_text="Water line.")
    along_half = Count(low=-9_999, high=9_999, null=True, blank=True)
    around_half = Count(low=-9_999, high=9_999, null=True, blank=True)
    surface = Word(choices=Surface, blank=True, default="")
    panel = models.ForeignKey(
        Panel, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    zone = models.ForeignKey(
        Zone, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )

    class Meta:
        abstract = True


def place_constraints(table: str) -> list[models.BaseConstraint]:
    nothing = Q(
        section__isnull=True,
        geometry__isnull=True,
        place_text="",
        x1_mm__isnull=True,
        x2_mm__isnull=True,
        map_mm__isnull=True,
        s1_mm__isnull=True,
        along_half__isnull=True,
        panel__isnull=True,
    )
    placed = Q(
        section__isnull=False,
        geometry__isnull=False,
        x1_mm__isnull=False,
        x2_mm__isnull=False,
        map_mm__isnull=False,
        along_half__isnull=False,
    ) & ~Q(place_text="")
    return [
        check(
            table,
            "place_whole",
            nothing | placed,
            "A place has a section and coordinates, or text only.",
        ),
        all_or_none(table, "across_whole", "s1_mm", "s2_mm", "around_half"),
        not_before(table, "x_ordered", "x2_mm", "x1_mm"),
        not_before(table, "s_ordered", "s2_mm", "s1_mm"),
    ]


class StructuralItem(models.Model):
    """Which part of the structure, how critical it is and who says so."""

    element = Word(choices=Element, default="unknown")
    element_label = text(help_text="As S-14L, FR 31.")
    criticality = Word(choices=Criticality, default="unknown")
    criticality_source = text()
    ata = text(help_text="ATA chapter and section, as 53-10.")

    class Meta:
        abstract = True
