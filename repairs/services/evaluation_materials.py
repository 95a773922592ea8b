"""A material's recorded numbers as inputs: strength, toughness, curves, growth laws."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from dataclasses import replace

from fleet.models import AdoptedValue, Material, MaterialProperty, Operator
from fleet.models.materials import Grade as RecordedGrade
from repairs.analysis.growth.laws import FormanLaw, RecordedLaw, WalkerLaw
from repairs.analysis.inputs import TOUGHNESS_UNIT, Value
from repairs.analysis.stress_life.curves import StressLifeCurve, StressLifeFamily
from repairs.analysis.types import KSI, Grade, Reference, Sourced

TOUGHNESS = "fracture_toughness_mpa_root_mm"
STRENGTHS = {
    "yield_strength": ("tension_yield_mpa", "MPa"),
    "tension_strength": ("tension_ultimate_mpa", "MPa"),
    "compression_yield": ("compression_yield_mpa", "MPa"),
    "shear_strength": ("shear_ultimate_mpa", "MPa"),
    "modulus": ("elastic_modulus_mpa", "MPa"),
    "poisson": ("poisson_ratio", "-"),
    "toughness": (TOUGHNESS, TOUGHNESS_UNIT),
    "growth_threshold": ("growth_threshold_mpa_root_mm", TOUGHNESS_UNIT),
}
"""A material's numbers as inputs: the quantity on record, and its unit.

Typical toughness stands on record under names of its own, for it holds for one sheet
of one thickness and width: none is read here, an engineer adopts one.
"""
BASES = ("a", "s", "b")
"""A-basis before B-basis: a single load path is assumed until someone shows else."""
TYPICAL = ("elastic_modulus_mpa", "poisson_ratio")
"""What handbooks give as typical only."""

_CURVE = re.compile(
    r"stress_life_kt([\d.]+)_"
    r"(a1|a2|a3|a4_ksi|a4_mpa|standard_error|thickness_mm|ratio_min|ratio_max)"
)
_COEFFICIENTS = {"a1", "a2", "a3"}
_LAW = re.compile(
    r"(walker|forman|paris)_([a-z0-9]+)_"
    r"(c_mm_mpa_root_mm|m|gamma|kc_mpa_root_mm|rank)"
)
_CONSTANTS = {
    "walker": {"c_mm_mpa_root_mm", "m", "gamma", "rank"},
    "forman": {"c_mm_mpa_root_mm", "m", "kc_mpa_root_mm", "rank"},
    "paris": {"c_mm_mpa_root_mm", "m", "rank"},
}
"""What each law is made of, in the order of preference: only the first holds at any
stress ratio up to failure."""

Used = Material | AdoptedValue
Given = tuple[str, Value, Used]


def grade_of(stored: str) -> Grade:
    """The grade of a stored row."""
    return Grade(RecordedGrade(stored).value)


def material_inputs(
    material: Material, operator: Operator, thickness_mm: float
) -> Iterator[Given]:
    """Inputs of a material at a thickness, each with the row it was read from.

    An adopted value goes before the recorded one.
    """
    rows = list(material.properties.order_by("pk"))
    adopted = adopted_values(operator, material)
    for name, (quantity, unit) in STRENGTHS.items():
        if quantity in adopted:
            yield name, adopted_number(adopted[quantity], unit), adopted[quantity]
        elif row := _strength(rows, quantity, thickness_mm):
            yield name, _number(row, unit), material
        elif quantity in TYPICAL:
            yield from _stiffness_of_bare(material, name, thickness_mm)
    for name, law in zip(
        ("growth_law", "second_growth_law"), _laws(rows), strict=False
    ):
        yield name, law, material
    holder, curves = _curves_of(material, rows)
    if curves:
        family = StressLifeFamily(
            str(holder), holder.form, "clad" in holder.form, tuple(curves)
        )
        yield "stress_life", family, holder


def _stiffness_of_bare(
    material: Material, name: str, thickness_mm: float
) -> Iterator[Given]:
    """Stiffness that only the bare form has on record; its source says so."""
    (quantity, unit), bare = STRENGTHS[name], _bare(material)
    rows = bare.properties.order_by("pk") if bare else ()
    if bare and (row := _strength(rows, quantity, thickness_mm)):
        number = _number(row, unit)
        yield name, replace(number, source=f"{bare}: {number.source}"), bare


def adopted_values(
    operator: Operator, material: Material | None
) -> dict[str, AdoptedValue]:
    """Values the operator adopted and a second person confirmed, by quantity.

    One that replaces another counts from its own confirmation; till then the one
    before it does.
    """
    rows = operator.adopted_values.filter(second_person__isnull=False).order_by("pk")
    if material is None:
        rows = rows.filter(material__isnull=True)
    else:
        rows = rows.filter(
            material__name=material.name,
            material__temper=material.temper,
            material__form=material.form,
        )
    return {row.quantity: row for row in rows}


def adopted_number(row: AdoptedValue, unit: str) -> Sourced:
    """An adopted value as a sourced number, in the unit it was adopted in."""
    where = ", ".join(
        part
        for part in (
            row.document,
            f"rev {row.revision}" if row.revision else "",
            f"page {row.page}" if row.page else "",
        )
        if part
    )
    source = f"adopted from {where} on {row.adopted_on} by {row.person}"
    return Sourced(row.value, row.unit or unit, source, Grade.ADOPTED)


def _strength(
    rows: Iterable[MaterialProperty], quantity: str, thickness_mm: float
) -> MaterialProperty | None:
    """The row of the best basis whose thickness range holds the thickness.

    Of several grain directions the weakest: which way the sheet lies is not recorded.
    """
    bases = (*BASES, "typical") if quantity in TYPICAL else BASES
    fitting = [
        row
        for row in rows
        if row.quantity == quantity
        and row.basis in bases
        and row.thickness_min_mm <= thickness_mm
        and (row.thickness_max_mm is None or thickness_mm <= row.thickness_max_mm)
    ]
    return min(
        fitting, key=lambda row: (bases.index(row.basis), row.value), default=None
    )


def _number(row: MaterialProperty, unit: str) -> Sourced:
    words = [row.source, row.get_basis_display()]
    if row.direction:
        words.append(row.direction)
    return Sourced(row.value, unit, ", ".join(words), grade_of(row.seen))


def _laws(rows: Iterable[MaterialProperty]) -> list[RecordedLaw]:
    """Growth laws: Walker's, then Forman's, then Paris', each in order of rank."""
    found: dict[tuple[str, str], dict[str, MaterialProperty]] = {}
    for row in rows:
        if match := _LAW.fullmatch(row.quantity):
            found.setdefault((match[1], match[2]), {})[match[3]] = row
    kinds = list(_CONSTANTS)
    whole = [
        (kinds.index(kind), law["rank"].value, _law(kind, law))
        for (kind, _), law in found.items()
        if law.keys() == _CONSTANTS[kind]
    ]
    return [law for _, _, law in sorted(whole, key=lambda item: item[:2])]


def _law(kind: str, law: dict[str, MaterialProperty]) -> RecordedLaw:
    coefficient, exponent = law["c_mm_mpa_root_mm"].value, law["m"].value
    reference = Reference(law["m"].source, grade_of(law["m"].seen))
    remark = law["m"].direction
    if kind == "forman":
        end = law["kc_mpa_root_mm"].value
        return FormanLaw(coefficient, exponent, end, reference, remark)
    gamma = law["gamma"].value if kind == "walker" else 1.0
    return WalkerLaw(coefficient, exponent, gamma, reference, remark)


def _bare(material: Material) -> Material | None:
    """The newest bare form of a clad sheet."""
    bare = material.form.replace("clad", "bare")
    if bare == material.form:
        return None
    return Material.objects.filter(
        name=material.name, temper=material.temper, form=bare
    ).last()


def _curves_of(
    material: Material, rows: Iterable[MaterialProperty]
) -> tuple[Material, list[StressLifeCurve]]:
    """The material's own curves, else those of the bare form of the same alloy."""
    own = _curves(rows)
    if own:
        return material, own
    bare = _bare(material)
    if bare is None:
        return material, []
    return bare, _curves(bare.properties.order_by("pk"))


def _curves(rows: Iterable[MaterialProperty]) -> list[StressLifeCurve]:
    found: dict[float, dict[str, MaterialProperty]] = {}
    for row in rows:
        if match := _CURVE.fullmatch(row.quantity):
            found.setdefault(float(match[1]), {})[match[2]] = row
    return [_curve(kt, row) for kt, row in sorted(found.items()) if _whole(row)]


def _whole(row: dict[str, MaterialProperty]) -> bool:
    return row.keys() >= _COEFFICIENTS and bool(row.keys() & {"a4_ksi", "a4_mpa"})


def _curve(kt: float, row: dict[str, MaterialProperty]) -> StressLifeCurve:
    in_ksi = "a4_ksi" in row
    last = row["a4_ksi" if in_ksi else "a4_mpa"]
    return StressLifeCurve(
        kt,
        row["a1"].value,
        row["a2"].value,
        row["a3"].value,
        last.value,
        KSI if in_ksi else 1.0,
        last.source,
        grade_of(last.seen),
        _known(row, "standard_error"),
        _ratios(row),
        _known(row, "thickness_mm"),
    )


def _known(row: dict[str, MaterialProperty], name: str) -> float | None:
    return row[name].value if name in row else None


def _ratios(row: dict[str, MaterialProperty]) -> tuple[float, float] | None:
    low, high = _known(row, "ratio_min"), _known(row, "ratio_max")
    return None if low is None or high is None else (low, high)
