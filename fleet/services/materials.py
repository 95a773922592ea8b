"""Loading materials from their file, and adopting values."""

from __future__ import annotations

import datetime as dt
from pathlib import Path

from django.core.exceptions import ValidationError

from fleet.material_file import (
    MaterialEntry,
    MaterialFile,
    MaterialFileError,
    materials_from_toml,
)
from fleet.models import (
    AdoptedValue,
    Material,
    MaterialProperty,
    Operator,
    Person,
    User,
)
from fleet.services.history import Writing

NO_FILE = "There is no materials file at {path}."
NO_MATERIAL = "Adopted value of {name}: the material is not recorded; load it first."


def materials_load(*, path: Path, actor: User | None, at: dt.datetime) -> int:
    """Load a materials file; how many materials were new or changed.

    The same file again changes nothing; a material that reads otherwise becomes the
    next revision of itself.
    """
    changed = 0
    with Writing(actor=actor, action="materials_load", at=at, origin=path.name) as w:
        for entry in _file(path).materials:
            newest = material_newest(entry.name, entry.temper, entry.form)
            if newest is not None and _same(newest, entry):
                continue
            changed += 1
            _write(w, entry, newest)
    return changed


def demo_values_load(
    *,
    path: Path,
    operator: Operator,
    person: Person,
    second_person: Person,
    on: dt.date,
    actor: User | None,
    at: dt.datetime,
) -> int:
    """Adopt the demonstration values for an operator, once; how many were new."""
    new = 0
    with Writing(actor=actor, action="demo_values_load", at=at, operator=operator) as w:
        for entry in _file(path).adopted:
            material = material_newest(entry.name, entry.temper, entry.form)
            if material is None:
                raise ValidationError(NO_MATERIAL.format(name=entry.name))
            known = operator.adopted_values.filter(
                material=material, quantity=entry.quantity, value=entry.value
            )
            if known.exists():
                continue
            new += 1
            w.create(
                AdoptedValue(
                    operator=operator,
                    material=material,
                    quantity=entry.quantity,
                    value=entry.value,
                    unit=entry.unit,
                    document=entry.document,
                    page=entry.page,
                    revision=entry.revision,
                    person=person,
                    second_person=second_person,
                    adopted_on=on,
                )
            )
    return new


def material_newest(name: str, temper: str, form: str) -> Material | None:
    """The newest revision of a material; one query."""
    return Material.objects.filter(name=name, temper=temper, form=form).last()


def _file(path: Path) -> MaterialFile:
    if not path.is_file():
        raise ValidationError(NO_FILE.format(path=path.name))
    try:
        return materials_from_toml(path.read_text("utf-8"))
    except MaterialFileError as error:
        raise ValidationError(error.problems) from error


def _same(material: Material, entry: MaterialEntry) -> bool:
    recorded = set(
        material.properties.values_list(
            "quantity", "value", "basis", "direction", "thickness_min_mm",
            "thickness_max_mm", "source", "seen",
        )
    )  # fmt: skip
    return recorded == {
        (
            p.quantity, p.value, p.basis, p.direction, p.thickness_min_mm,
            p.thickness_max_mm, p.source, p.seen,
        )
        for p in entry.properties
    }  # fmt: skip


def _write(w: Writing, entry: MaterialEntry, newest: Material | None) -> None:
    material = w.create(
        Material(
            name=entry.name,
            temper=entry.temper,
            form=entry.form,
            revision=newest.revision + 1 if newest else 1,
            replaces=newest,
        )
    )
    for row in entry.properties:
        w.create(
            MaterialProperty(
                material=material,
                quantity=row.quantity,
                value=row.value,
                basis=row.basis,
                direction=row.direction,
                thickness_min_mm=row.thickness_min_mm,
                thickness_max_mm=row.thickness_max_mm,
                source=row.source,
                seen=row.seen,
            )
        )
