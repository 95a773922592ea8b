"""What a signer reads before signing: the content in words, then its exact text.

A signer must know what is signed and act deliberately, and the signature is bound to
that content (FAA AC 120-78 series, from memory; 14 CFR 91.417 for the signature).
"""

from __future__ import annotations

import html
import json
import re

import pytest
from django.urls import reverse

from fleet.canonical import digest
from fleet.services.materials import demo_values_load
from repairs.selectors.signatures import content_of
from repairs.selectors.signed_words import LEFT_OUT, TITLES, content_in_words
from repairs.services.approvals import approval_sign
from tests.factories import FIXTURES, NOW, TODAY, program
from tests.folder_rows import folders_make
from tests.record_rows import found
from tests.repair_rows import plan, record
from tests.repairs.test_dispositions import decide
from tests.repairs.test_evaluations import cracked

pytestmark = pytest.mark.django_db


@pytest.fixture(autouse=True)
def _on_the_day(settings):
    settings.FRAMEBAY_TODAY = str(TODAY)


def subject_of(world, what):
    """A record of the kind with rows of its own."""
    if what == "disposition":
        return decide(world)
    if what == "repair":
        return record(world)
    folders = folders_make(world)
    if what == "evaluation":
        demo_values_load(
            path=FIXTURES / "materials.toml",
            operator=world.operator,
            person=world.assessor,
            second_person=world.approver,
            on=TODAY,
            actor=world.engineer,
            at=NOW,
        )
        return folders.evaluation(cracked(world))
    folder = folders.ready()
    folders.fatigue(folder)
    return folder


def page_of(client, world, what):
    subject = subject_of(world, what)
    client.force_login(world.users["signatory"])
    answer = client.get(reverse(f"{what}_sign", args=[subject.pk]))
    assert answer.status_code == 200
    return subject, answer.content.decode()


def exact_text(page: str) -> str:
    return html.unescape(re.search(r'<pre class="exact">(.*?)</pre>', page, re.S)[1])


SUBJECTS = ("disposition", "repair", "substantiation", "evaluation")


@pytest.mark.parametrize("what", SUBJECTS)
def test_the_exact_text_bound_is_on_the_page_in_full(client, world, what):
    subject, page = page_of(client, world, what)
    text = exact_text(page)
    assert text == content_of(subject)
    assert f'name="shown_digest" value="{digest(text)}"' in page


@pytest.mark.parametrize("what", SUBJECTS)
def test_the_words_come_first_then_the_exact_text_then_the_form(client, world, what):
    _, page = page_of(client, world, what)
    words = page.index("Calculation note" if what == "evaluation" else "Not stated:")
    assert words < page.index("<details>") < page.index('name="meaning"')


def test_the_form_proposes_what_nobody_has_signed_and_no_rejection(client, world):
    """An evaluation is checked, then approved (trade practice: two people)."""
    evaluation, page = page_of(client, world, "evaluation")
    assert 'value="checked" selected' in page
    approval_sign(
        subject=evaluation,
        meaning="checked",
        proof=program(world.approver),
        shown_digest=digest(content_of(evaluation)),
        on=TODAY,
        actor=world.users["signatory"],
        at=NOW,
    )
    page = client.get(reverse("evaluation_sign", args=[evaluation.pk]))
    assert 'value="approved" selected' in page.content.decode()


def values(content) -> list[tuple[str, object]]:
    """Every name and value of a text, however deep."""
    if isinstance(content, dict):
        return [
            found
            for name, value in content.items()
            for found in (
                values(value) if isinstance(value, dict | list) else [(name, value)]
            )
        ]
    return [found for one in content if isinstance(one, dict | list)
            for found in values(one)]  # fmt: skip


@pytest.mark.parametrize("what", ["disposition", "repair", "substantiation"])
def test_each_column_signed_is_told_in_words_or_left_to_the_exact_text(world, what):
    """Nothing is lost between the text and its words but keys, digests and what the
    location says; those are in the exact text."""
    subject = subject_of(world, what)
    content = content_of(subject)
    parts = content_in_words(subject, content, "in")
    assert set(json.loads(content)) <= set(TITLES)
    columns = json.loads(content)["record"]
    read = {name: value for name, value in columns.items() if name not in LEFT_OUT}
    said = [name for name, value in read.items() if value not in (None, "")]
    assert len(parts[0].lines) == len(said)
    assert len(parts[0].not_stated.split(", ")) == len(read) - len(said)
    cells = [cell for part in parts for row in part.rows for cell in row]
    shown = " ".join([*cells, *(value for part in parts for _, value in part.lines)])
    for name, value in values(json.loads(content)):
        if isinstance(value, str) and " " in value and name not in LEFT_OUT:
            assert value in shown


@pytest.mark.parametrize("what", ["disposition", "repair", "substantiation"])
def test_the_words_hold_no_column_and_no_key(world, what):
    subject = subject_of(world, what)
    for part in content_in_words(subject, content_of(subject), "in"):
        names = [name for name, _ in part.lines] + list(part.head)
        said = [value for _, value in part.lines]
        said += [cell for row in part.rows for cell in row]
        assert not [name for name in names if "_" in name or name.endswith(" id")]
        assert not [value for value in said if "0x" in value or "at_minutes" in value]
        assert part.title == part.title.capitalize()


def test_a_repair_is_signed_in_the_trades_words(client, world):
    """604,000 minutes are 10,066 hours and 40 minutes."""
    _, page = page_of(client, world, "repair")
    words = page[: page.index("<details>")]
    for told in (
        "external doubler",
        "A, permanent",
        "10,066:40 FH",
        "10,080 FC",
        str(world.certifier),
        "SRM 53-10-12 rev 14",
        world.aircraft.registration,
    ):
        assert told in words, told
    assert "PSE" in words


def test_a_folder_is_signed_with_its_effects_and_what_is_known_of_its_findings(
    client, world
):
    """Worded as entered: the effects answered, and of each finding its damage, place,
    last measured size and criticality (trade practice for a damage report)."""
    folder, page = page_of(client, world, "substantiation")
    words = page[: page.index("<details>")]
    (row,) = folder.finding_rows.all()
    length = row.finding.measurements.last().values.get(quantity="length_mm")
    covered = words[words.index("Findings covered, as recorded now") :]
    covered = html.unescape(covered.partition("</section>")[0])
    for told in (
        row.finding.number,
        row.finding.get_damage_type_display(),
        row.finding.place_text,
        length.entered,
        row.finding.get_criticality_display(),
    ):
        assert f"{told}" in covered, told
    effects = words[words.index("<h2>Effects") :].partition("</section>")[0]
    signed = json.loads(exact_text(page))["effects"]
    assert len(signed) == folder.effects.count() == effects.count("<tr><td>")
    for one in folder.effects.all():
        assert one.get_touches_display() in effects
        assert one.get_answer_display() in effects
        assert html.escape(one.note) in effects
        said = {"touches": one.touches, "answer": one.answer, "note": one.note}
        assert said in signed


def test_what_an_evaluation_signs_is_shown_by_its_results_and_note(client, world):
    _, page = page_of(client, world, "evaluation")
    words = page[: page.index("<details>")]
    for told in (
        "Result",
        "Applicability",
        "Calculation note",
        "unapproved calculation",
    ):
        assert told.lower() in words.lower()


def test_a_finding_is_told_with_its_dimensions_as_entered(world):
    row = found(world)
    parts = content_in_words(row, content_of(row), "in")
    titles = [part.title for part in parts]
    assert titles[0] == "Record"
    sizes = {row[1]: row[2] for part in parts if part.title == "Dimensions"
             for row in part.rows}  # fmt: skip
    values = row.measurements.get().values.filter(status="known")
    assert len(sizes) == row.measurements.get().values.count()
    for value in values.exclude(entered=""):
        assert any(value.entered in told for told in sizes.values())


@pytest.mark.parametrize("what", ["substantiation", "disposition"])
def test_more_rows_cost_no_more_queries(world, django_assert_max_num_queries, what):
    subject = subject_of(world, what)
    content = content_of(subject)
    grown = json.loads(content)
    for name, part in grown.items():
        if isinstance(part, list):
            grown[name] = part * 20
    with django_assert_max_num_queries(12) as before:
        content_in_words(subject, content, "in")
    with django_assert_max_num_queries(12) as after:
        content_in_words(subject, json.dumps(grown), "in")
    assert len(after) == len(before)


@pytest.mark.parametrize(
    ("address", "made"),
    [
        ("finding_assess", found),
        ("finding_close", found),
        ("repair_inspect", plan),
    ],
)
def test_a_record_is_read_above_each_form_that_signs_it(client, world, address, made):
    subject = made(world)
    client.force_login(world.engineer)
    page = client.get(reverse(address, args=[subject.pk])).content.decode()
    assert exact_text(page) == content_of(subject)
    assert page.index("<details>") < page.index('name="password"')
