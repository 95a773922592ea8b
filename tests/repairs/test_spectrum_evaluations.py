"""Evaluations of wing panels by their spectrum, from the record to the kept result."""

from __future__ import annotations

import datetime as dt
import json
import math

import pytest
from django.core.exceptions import ValidationError
from django.urls import reverse

from fleet.models import Person, Spectrum
from fleet.services.materials import demo_values_load
from repairs.analysis.types import Use
from repairs.measured import Typed
from repairs.models import Finding
from repairs.selectors.evaluations import evaluations_of, evaluations_stale
from repairs.services.evaluation_gathered import Choice
from repairs.services.evaluation_prepare import Prepared, evaluation_prepare
from repairs.services.evaluations import evaluation_make, method_versions
from repairs.services.spectra import spectrum_data, spectrum_record, spectrum_revise
from repairs.services.stated import Document, input_state, input_take_back
from tests.factories import FIXTURES, NOW, TODAY
from tests.record_rows import World, found

pytestmark = pytest.mark.django_db
LOWER, UPPER = "right wing WS 60 S-4 lower skin", "right wing WS 60 S-4 upper skin"
CRACK = (
    Typed("length_mm", "0.94 ± 0.02 in"),
    Typed("direction", "circumferential"),
    Typed("origin", "skin"),
)
POINTS = (-30.0, 120.0, 40.0, 100.0)
SHORT = {"flights": 1, "repeats": True, "residue": "repeating"}
MEMO = Document("memo 7", "2")


@pytest.fixture
def wing(world: World) -> World:
    demo_values_load(
        path=FIXTURES / "materials.toml",
        operator=world.operator,
        person=world.engineer.person or Person(),
        second_person=world.users["signatory"].person or Person(),
        on=TODAY,
        actor=None,
        at=NOW,
    )
    return world


def cracked(world: World, place: str = LOWER) -> Finding:
    surface = "lower" if "lower" in place else "upper"
    return found(
        world,
        damage_type="crack",
        typed=CRACK,
        element="skin",
        place_entered=place,
        surface=surface,
    )


def prepared(finding: Finding) -> Prepared:
    choice = Choice(Use.FOUND_DAMAGE)
    return evaluation_prepare(subject=finding, choice=choice, as_of=TODAY)


def answer(made: Prepared, method: str = "unpressurised-skin-crack"):
    return next(a.result for a in made.assessment.answers if a.result.method == method)


def recorded(world: World, name: str = "short", factor: float = 1.0) -> Spectrum:
    table = "\n".join(["stress_mpa", *(str(factor * point) for point in POINTS)])
    data = spectrum_data("sequence", SHORT, table)
    return spectrum_record(
        name=name, data=data, source="report 9", actor=world.engineer, at=NOW
    )


def state(world: World, finding: Finding, row: Spectrum):
    return input_state(
        subject=finding,
        name="spectrum",
        entered=str(row.pk),
        document=MEMO,
        actor=world.engineer,
        at=NOW,
        on=TODAY,
    )


def test_a_wing_panel_brings_its_sequence_into_the_calculation(wing):
    made = prepared(cracked(wing))
    spectrum = made.inputs.spectrum()
    assert spectrum is not None
    assert spectrum.name == "ARD-52 wing lower inboard rev 1"
    result = answer(made)
    assert result.life_cycles is not None
    assert result.source_from_memory
    shown = " ".join(line.formula for line in result.note)
    assert "standard transport wing sequence" in shown
    rows = {type(row) for row in made.gathered.rows.values()}
    assert Spectrum in rows
    kept = json.loads(made.texts["inputs"])["spectrum"]
    assert kept["digest"] == spectrum.digest
    assert "seed of the drawn order" in dict(kept["choices"])


def test_an_upper_panel_has_no_sequence(wing):
    made = prepared(cracked(wing, UPPER))
    assert made.inputs.spectrum() is None
    assert made.inputs.word("load_kind") == "compression"


def test_a_cracks_life_is_that_of_every_cycle_in_turn(wing):
    """A loop of the test's own: two rainflow cycles of the block, Forman's law of the
    recorded plate, the secant of the recorded width, no line of the program."""
    finding = cracked(wing)
    state(wing, finding, recorded(wing))
    made = prepared(finding)
    result, law = answer(made), made.inputs.law()
    assert law is not None
    lengths = [line.value for line in result.note if line.symbol == "2a"]
    width = [line.value for line in result.note if line.symbol == "W"][-1]
    half, end = 0.96 * 25.4 / 2, lengths[-1] / 2
    assert law.exponent == 2.88  # 2024-T351 plate, Kc of the fit 63.2 MPa√m
    c, kc = 5.0e-6 / 1000 ** ((2.88 - 1) / 2), 63.2 * 1000**0.5
    flights = 0
    while half < end:
        for top, low in ((120.0, -30.0), (100.0, 40.0)):
            shape = math.sqrt(math.pi * half / math.cos(math.pi * half / width))
            ratio = max(low / top, 0.0)
            span = shape * (top - max(low, 0.0))
            half += c * span**2.88 / ((1 - ratio) * kc - span)
        flights += 1
    assert result.lives[-1].cycles == pytest.approx(flights, rel=5e-3)


def test_equal_content_gives_one_life_under_two_names(wing):
    finding = cracked(wing)
    lives = []
    for name in ("one", "other"):
        state(wing, finding, recorded(wing, name))
        lives.append(answer(prepared(finding)).lives)
    assert lives[0] == lives[1]


def test_a_constant_cycle_stated_goes_before_the_panels_sequence(wing):
    finding = cracked(wing)
    for name, entered in (("cycle_max_stress", "80 MPa"), ("cycle_ratio", "0")):
        input_state(
            subject=finding,
            name=name,
            entered=entered,
            document=MEMO,
            actor=wing.engineer,
            at=NOW,
            on=TODAY,
        )
    made = prepared(finding)
    assert made.inputs.spectrum() is None
    assert not answer(made).source_from_memory


def test_a_stated_spectrum_may_be_taken_back(wing):
    finding = cracked(wing)
    row = state(wing, finding, recorded(wing))
    assert prepared(finding).inputs.spectrum().name == "short rev 1"
    input_take_back(
        stated=row, reason="wrong place", actor=wing.engineer, at=NOW, on=TODAY
    )
    assert prepared(finding).inputs.spectrum().name.startswith("ARD-52 wing lower")


def test_the_wing_sequence_is_not_stated_off_the_wings_lower_surface(wing):
    row = Spectrum.objects.get(name="ARD-52 wing lower inboard")
    upper = cracked(wing, UPPER)
    with pytest.raises(ValidationError, match="lower surface of a transport's wing"):
        state(wing, upper, row)
    state(wing, upper, recorded(wing))
    with pytest.raises(ValidationError, match="No spectrum in force"):
        input_state(
            subject=upper,
            name="spectrum",
            entered="short",
            document=MEMO,
            actor=wing.engineer,
            at=NOW,
            on=TODAY,
        )


def test_a_revision_makes_evaluations_stale_and_is_read_by_the_next(wing):
    finding = cracked(wing)
    row = recorded(wing)
    state(wing, finding, row)
    told = {"subject": finding, "choice": Choice(Use.FOUND_DAMAGE), "as_of": TODAY}
    later = NOW + dt.timedelta(minutes=1)
    evaluation_make(**told, actor=wing.engineer, at=later)

    def stale() -> bool:
        return evaluations_stale(evaluations_of(finding), method_versions()).exists()

    assert not stale()
    table = "stress_mpa\n0\n150\n"
    spectrum_revise(
        row=row,
        data=spectrum_data("sequence", SHORT, table),
        source="report 10",
        actor=wing.engineer,
        at=later,
    )
    assert stale()
    assert prepared(finding).inputs.spectrum().name == "short rev 2"


def test_the_form_offers_spectra_in_force(wing, client):
    finding = cracked(wing)
    recorded(wing)
    client.force_login(wing.engineer)
    address = reverse("input_state", args=[finding.pk, "spectrum"])
    page = client.get(address).content.decode()
    assert "short rev 1" in page
    row = Spectrum.objects.get(name="short")
    sent = {"entered": str(row.pk), "document": "memo 7", "page": "2", "revision": ""}
    client.post(address, sent)
    evaluate = client.get(reverse("evaluation_new", args=[finding.pk]))
    assert "short rev 1" in evaluate.content.decode()
