"""From the record to the inputs of a calculation, and the rows they were read from.

What the record does not say is left out: the method names it as missing. The panel on
this aircraft goes before the type's panel, an adopted value before a recorded one.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterator

from fleet.models import AdoptedValue, Operator
from fleet.selectors.kept import of_the_fleet
from repairs.analysis.inputs import SPECS
from repairs.analysis.types import Stated, Use
from repairs.selectors.latest import Latest
from repairs.selectors.stated import stated_inputs, stated_source
from repairs.services.evaluation_detection import detection_of
from repairs.services.evaluation_gathered import Choice, Gathered, UsedRow
from repairs.services.evaluation_materials import (
    STRENGTHS,
    adopted_number,
    adopted_values,
    grade_of,
)
from repairs.services.evaluation_measured import (
    half_along,
    measurements,
    subject_words,
)
from repairs.services.evaluation_members import without_panel
from repairs.services.evaluation_panel import less_blended, skin_inputs
from repairs.services.evaluation_place import Subject, skin_under, surroundings_of
from repairs.services.evaluation_spectrum import (
    CYCLE,
    LARGEST,
    SPECTRUM,
    spectrum_inputs,
)
from repairs.services.evaluation_structure import stiffener_inputs
from repairs.services.evaluation_type import (
    counters,
    policies,
    pressures,
    remaining_flaw,
    rules,
)

ADOPTABLE = (
    "clearance_multiple",
    "residual_pressure_factor",
    "ultimate_factor",
    "proof_factor",
    "clad_life_factor",
    "assumed_flaw",
)
ADOPTABLE_WORDS = {
    **{name: (SPECS[name].title, SPECS[name].unit) for name in ADOPTABLE},
    **{
        quantity: (SPECS[name].title, unit)
        for name, (quantity, unit) in STRENGTHS.items()
    },
}
"""What may be adopted, with its words and the unit it is adopted in."""
OF_MATERIAL = frozenset(quantity for quantity, _ in STRENGTHS.values())


def gather(
    subject: Subject, measured: Latest, choice: Choice, *, as_of: dt.date
) -> Gathered:
    """Everything the record says that any method may ask for."""
    found = Gathered(subject_words(subject, measured))
    operator = subject.operator
    measurements(found, subject, measured)
    skin = skin_under(subject)
    if skin is not None:
        skin_inputs(found, subject, skin, operator)
        less_blended(found)
    pressures(found, subject)
    rules(found, subject, as_of)
    for name, row in _adopted(operator).items():
        if name in ADOPTABLE:
            found.put(name, adopted_number(row, SPECS[name].unit), row)
    policies(found, subject, operator, as_of)
    counters(found, subject, measured, skin, choice, as_of)
    if choice.detectable is not None:
        size = choice.detectable
        length = size.length_mm + size.hidden_mm
        source = f"{size.method.replace('_', ' ')}, {size.detail}: {size.source}"
        found.number("detectable_length", length, source, size,
                     grade=grade_of(size.grade))  # fmt: skip
        if (detection := detection_of(size)) is not None:
            found.put("detection", detection, size)
    remaining_flaw(found, subject)
    half = half_along(found)
    stiffener_inputs(found, subject, half)
    as_found = choice.use is Use.FOUND_DAMAGE
    around = surroundings_of(subject, half, as_found=as_found)
    if around is not None:
        found.put("surroundings", around)
    stated = _stated(found, subject)
    without_panel(found.values, subject.element, stated)
    return found


@of_the_fleet
def _adopted(operator: Operator) -> dict[str, AdoptedValue]:
    """Adopted values that are no property of a material."""
    return adopted_values(operator, None)


def _stated(found: Gathered, subject: Subject) -> set[str]:
    """What an engineer states for this place goes before the type's; the names."""
    names = set()
    for row in stated_inputs(subject):
        spec, source = SPECS.get(row.name), stated_source(row)
        if spec is None or not spec.may_be_stated:
            continue
        names.add(row.name)
        if row.word:
            found.put(row.name, Stated(row.word, source), row)
        elif row.value is not None:
            found.number(row.name, row.value, source, row)
        elif row.spectrum_id is not None:
            spectrum_inputs(found, row.spectrum_id, row, stated=source)
            names.update(CYCLE)
    if LARGEST in names and SPECTRUM not in names:
        found.values.pop(SPECTRUM, None)
    return names


def used_rows(found: Gathered) -> Iterator[UsedRow]:
    """The rows read, in a stable order."""
    for _, row in sorted(
        found.rows.items(), key=lambda item: (item[0][0].__name__, item[0][1])
    ):
        yield row
