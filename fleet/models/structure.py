"""An aircraft type's structure: sections, frames, stringers, panels, cut-outs, joints.

A geometry is published as a whole and never altered; the next revision is a new set of
rows. `map_mm` is the axis that every variant shares, `x_mm` the true distance on one.
"""

from __future__ import annotations

from django.db import models
from django.db.models import Q

from fleet.constraints import all_or_none, check, not_before, unique
from fleet.fields import (
    MM_HIGH,
    Count,
    Measure,
    Word,
    optional_counter,
    optional_measure,
    text,
)
from fleet.models.materials import Material, Spectrum


class Criticality(models.TextChoices):
    PRINCIPAL = "principal", "PSE"
    FATIGUE_CRITICAL = "fatigue_critical", "FCS"
    SECONDARY = "secondary", "secondary"
    UNKNOWN = "unknown", "unknown"


def map_mm() -> Measure:
    return Measure(low=-MM_HIGH, high=MM_HIGH)


class LoadKind(models.TextChoices):
    """What a panel mainly carries; it chooses the checks. Empty: not stated."""

    TENSION = "tension", "tension"
    COMPRESSION = "compression", "compression"
    SHEAR = "shear", "shear"
    BENDING = "bending", "bending"
    TORSION = "torsion", "torsion"
    PRESSURE = "pressure", "pressure"


class AircraftType(models.Model):
    """A type with its cabin pressures; the units are those people write in."""

    code = models.TextField(unique=True)
    name = models.TextField()
    entry_unit = Word(words=("in", "mm"))
    normal_differential_mpa = optional_measure(0, 1)
    relief_differential_mpa = optional_measure(0, 1, help_text="Relief valve, highest.")
    external_suction_mpa = optional_measure(0, 1, help_text="External aerodynamic.")
    ceiling_ft = Count(low=0, high=100_000, null=True, blank=True)
    pressures_source = text()

    class Meta:
        ordering = ["code"]

    def __str__(self) -> str:
        return self.code


class Variant(models.Model):
    """A build of the type, with its design service goal and limit of validity."""

    aircraft_type = models.ForeignKey(
        AircraftType, on_delete=models.PROTECT, related_name="variants"
    )
    code = models.TextField()
    name = models.TextField()
    design_goal_cycles = optional_counter()
    design_goal_minutes = optional_counter()
    validity_cycles = optional_counter(help_text="Limit of validity, flight cycles.")
    validity_minutes = optional_counter(help_text="Limit of validity, flight time.")
    source = text()

    class Meta:
        ordering = ["aircraft_type", "code"]
        constraints = [unique("fleet_variant", "once", "aircraft_type", "code")]

    def __str__(self) -> str:
        return self.name


class GeometryRevision(models.Model):
    """One revision of a type's geometry, with the very file it was read from."""

    class State(models.TextChoices):
        DRAFT = "draft", "draft"
        PUBLISHED = "published", "published"
        SUPERSEDED = "superseded", "superseded"

    aircraft_type = models.ForeignKey(
        AircraftType, on_delete=models.PROTECT, related_name="geometries"
    )
    number = Count(low=1, high=10_000)
    state = Word(choices=State)
    source = text()
    content = models.TextField(help_text="The geometry file, as read.")
    file_digest = models.TextField()
    published_on = models.DateField(null=True, blank=True)

    class Meta:
        ordering = ["aircraft_type", "number"]
        constraints = [
            unique("fleet_geometryrevision", "once", "aircraft_type", "number"),
            unique(
                "fleet_geometryrevision",
                "one_published",
                "aircraft_type",
                when=Q(state="published"),
            ),
        ]

    def __str__(self) -> str:
        return f"revision {self.number}"


class Section(models.Model):
    """Fuselage, left wing, fin and so on; the same over every revision."""

    aircraft_type = models.ForeignKey(
        AircraftType, on_delete=models.PROTECT, related_name="sections"
    )
    code = models.TextField()
    name = models.TextField()
    kind = Word(words=("shell", "surface"))
    side = Word(words=("L", "R"), blank=True, default="")
    datum_text = models.TextField()
    reference_radius_mm = optional_measure(1, 100_000)
    wrap_mm = optional_measure(1, 1_000_000, help_text="Empty: an open surface.")

    class Meta:
        ordering = ["aircraft_type", "pk"]
        constraints = [
            unique("fleet_section", "once", "aircraft_type", "code"),
            check(
                "fleet_section",
                "shell_wraps",
                Q(
                    kind="shell",
                    wrap_mm__isnull=False,
                    reference_radius_mm__isnull=False,
                )
                | Q(kind="surface", wrap_mm__isnull=True),
                "A shell has a radius and a wrap; an open surface has no wrap.",
            ),
        ]

    def __str__(self) -> str:
        return self.name


class Frame(models.Model):
    """A frame or rib."""

    geometry = models.ForeignKey(
        GeometryRevision, on_delete=models.PROTECT, related_name="frames"
    )
    section = models.ForeignKey(
        Section, on_delete=models.PROTECT, related_name="frames"
    )
    label = models.TextField()
    station_label = models.TextField()
    map_mm = map_mm()
    ordinal = Count(low=0, high=9_999)
    plug = models.BooleanField(default=False)
    area_mm2 = optional_measure(0, 1e6)
    append_only = True

    class Meta:
        ordering = ["geometry", "section", "ordinal"]
        constraints = [
            unique("fleet_frame", "once", "geometry", "section", "label"),
            unique("fleet_frame", "one_ordinal", "geometry", "section", "ordinal"),
        ]

    def __str__(self) -> str:
        return self.label


class FrameStation(models.Model):
    """Where a frame stands on one variant; no row, no such frame there."""

    frame = models.ForeignKey(Frame, on_delete=models.PROTECT, related_name="stations")
    variant = models.ForeignKey(
        Variant, on_delete=models.PROTECT, related_name="frame_stations"
    )
    x_mm = map_mm()
    append_only = True

    class Meta:
        ordering = ["frame", "variant"]
        constraints = [unique("fleet_framestation", "once", "frame", "variant")]

    def __str__(self) -> str:
        return f"{self.x_mm:.1f} mm"


class Stringer(models.Model):
    """A stringer, at the section's reference radius."""

    geometry = models.ForeignKey(
        GeometryRevision, on_delete=models.PROTECT, related_name="stringers"
    )
    section = models.ForeignKey(
        Section, on_delete=models.PROTECT, related_name="stringers"
    )
    label = models.TextField()
    s_mm = map_mm()
    ordinal = Count(low=0, high=9_999)
    area_mm2 = optional_measure(0, 1e6)
    append_only = True

    class Meta:
        ordering = ["geometry", "section", "ordinal"]
        constraints = [
            unique("fleet_stringer", "once", "geometry", "section", "label"),
            unique("fleet_stringer", "one_ordinal", "geometry", "section", "ordinal"),
        ]

    def __str__(self) -> str:
        return self.label


class Zone(models.Model):
    """A maintenance zone of three digits."""

    aircraft_type = models.ForeignKey(
        AircraftType, on_delete=models.PROTECT, related_name="zones"
    )
    code = models.TextField()
    title = models.TextField()

    class Meta:
        ordering = ["aircraft_type", "code"]
        constraints = [unique("fleet_zone", "once", "aircraft_type", "code")]

    def __str__(self) -> str:
        return self.code


class Extent(models.Model):
    """A patch of a section on the map axis."""

    geometry = models.ForeignKey(
        GeometryRevision, on_delete=models.PROTECT, related_name="%(class)ss"
    )
    section = models.ForeignKey(
        Section, on_delete=models.PROTECT, related_name="%(class)ss"
    )
    label = models.TextField()
    map1_mm = map_mm()
    map2_mm = map_mm()
    s1_mm = map_mm()
    s2_mm = map_mm()

    class Meta:
        abstract = True

    def __str__(self) -> str:
        return self.label


def extent_constraints(table: str) -> list[models.BaseConstraint]:
    return [
        unique(table, "once", "geometry", "section", "label"),
        not_before(table, "along_ordered", "map2_mm", "map1_mm"),
        not_before(table, "across_ordered", "s2_mm", "s1_mm"),
    ]


class Cutout(Extent):
    """A door, window or hatch opening, with the reinforced surround."""

    kind = Word(words=("door", "cargo_door", "window", "hatch", "access"))
    surround_thickness_mm = optional_measure(0.01, 500)
    surround_width_mm = optional_measure(0, 10_000)
    door_section = models.ForeignKey(
        Section, on_delete=models.PROTECT, null=True, blank=True, related_name="fills"
    )
    append_only = True

    class Meta:
        ordering = ["geometry", "section", "map1_mm", "pk"]
        constraints = [
            *extent_constraints("fleet_cutout"),
            all_or_none(
                "fleet_cutout",
                "surround_whole",
                "surround_thickness_mm",
                "surround_width_mm",
            ),
        ]


class Joint(Extent):
    """A lap or butt joint between skin panels."""

    kind = Word(words=("lap", "butt"))
    append_only = True

    class Meta:
        ordering = ["geometry", "section", "map1_mm", "pk"]
        constraints = extent_constraints("fleet_joint")


class Panel(Extent):
    """One skin part. What is unknown stays empty, and nothing is computed from it."""

    material = models.ForeignKey(
        Material, on_delete=models.PROTECT, null=True, blank=True, related_name="panels"
    )
    spectrum = models.ForeignKey(
        Spectrum, on_delete=models.PROTECT, null=True, blank=True, related_name="panels"
    )
    thickness_mm = optional_measure(0.01, 500)
    clad_mm = optional_measure(0, 10, help_text="Cladding, each side; 0 = bare.")
    radius_mm = optional_measure(1, 100_000)
    limit_stress_mpa = optional_measure(0, 5_000, help_text="Limit, along the section.")
    mean_stress_mpa = optional_measure(
        -5_000, 5_000, help_text="1 g, along the section."
    )
    ultimate_load_n_per_mm = optional_measure(0, 1e6)
    load_kind = Word(choices=LoadKind, blank=True, default="")
    load_source = text()
    criticality = Word(choices=Criticality)
    criticality_source = text()
    zone = models.ForeignKey(
        Zone, on_delete=models.PROTECT, null=True, blank=True, related_name="panels"
    )
    pressurised = models.BooleanField(default=False)
    content_digest = models.TextField(help_text="Over the engineering columns.")
    source = text()
    append_only = True

    class Meta:
        ordering = ["geometry", "section", "map1_mm", "pk"]
        constraints = extent_constraints("fleet_panel")
        indexes = [
            models.Index(
                fields=["geometry", "section", "map1_mm"], name="fleet_panel_at"
            )
        ]
