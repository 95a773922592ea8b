"""The pages of findings: the form in plain HTML, the list, one finding, its steps."""

from __future__ import annotations

import datetime as dt
import io
import re

import pytest
from django.core.files.uploadedfile import SimpleUploadedFile
from django.urls import reverse
from PIL import Image

from fleet.models import Aircraft, AircraftPeriod
from repairs.models import Finding, Measurement
from tests.factories import NOW, aircraft_make, authorise, signed
from tests.placed_rows import event_make
from tests.queries import assert_same_queries
from tests.record_rows import FOUND, assessed, found

pytestmark = pytest.mark.django_db
STEPS = ("place", "measure", "assess", "close", "link", "void", "photographs")


@pytest.fixture(autouse=True)
def _on_the_day(settings):
    settings.FRAMEBAY_TODAY = "2025-01-01"


@pytest.fixture
def recorder(client, world):
    client.force_login(world.users["recorder"])
    return client


def filled(response) -> dict[str, str]:
    """What a browser would send back: every field of the form as it is shown."""
    context = response.context
    page = context.get("page")
    forms = [page.form, page.dimensions] if page else context["forms"]
    data = {}
    for form in forms:
        for field in form:
            value = field.value()
            choices = getattr(field.field, "choices", None)
            if value is None and isinstance(choices, list):
                value = choices[0][0]
            if value not in (None, "", False) and not isinstance(value, list):
                data[field.html_name] = str(getattr(value, "pk", value))
    return data


def start(client, world, **changes) -> dict[str, str]:
    """The form after aircraft, type and location were given and shown."""
    said = {
        "aircraft": world.aircraft.pk,
        "damage_type": "dent",
        "found_on": FOUND.isoformat(),
        "place_entered": "STA 640+10, 4 in below S-7R",
    } | changes
    response = client.post(reverse("finding_new"), {**said, "step": "show"})
    assert response.status_code == 200
    return filled(response)


SIZES = {
    "d-length_mm": "2.4 in",
    "d-width_mm": "1.8",
    "d-depth_mm": "0.040",
    "d-worked_out": "45",
}


def test_a_finding_is_logged_through_the_form(recorder, world):
    said = start(recorder, world)
    assert said["at_cycles"] == "10080"
    response = recorder.post(reverse("finding_new"), {**said, **SIZES, "step": "save"})
    finding = Finding.objects.get()
    assert response.url == reverse("finding", args=[finding.pk])
    assert finding.place_text == "STA 640+10, 4 in below S-7R"
    assert finding.counters_source == "usage, as of 2024-12-20"
    assert finding.entered_by == world.users["recorder"]
    values = finding.measurements.get().values
    assert values.get(quantity="width_mm").entered == "1.8 in"
    assert values.get(quantity="depth_mm").worked_out == 45
    assert not finding.questions.exists()


def test_choosing_the_type_shows_its_dimensions_and_keeps_what_was_typed(
    recorder, world
):
    response = recorder.post(
        reverse("finding_new"),
        {
            "aircraft": world.aircraft.pk,
            "damage_type": "crack",
            "place_entered": "STA 650 S-7R",
            "description": "seen at the ramp",
            "d-length_mm": "0.5 in",
            "step": "show",
        },
    )
    page = response.content.decode()
    assert "ength, tip to tip" in page
    assert "seen at the ramp" in page
    assert 'value="0.5 in"' in page
    assert "STA 640+10 S-7R" in page
    assert "errorlist" not in page


def test_sending_the_form_twice_records_once(recorder, world):
    said = {**start(recorder, world), **SIZES, "step": "save"}
    urls = {recorder.post(reverse("finding_new"), said).url for _ in range(2)}
    assert len(urls) == 1
    assert Finding.objects.count() == 1


def test_a_location_that_cannot_be_read_is_shown_with_its_code_and_kept(
    recorder, world
):
    said = {**start(recorder, world, place_entered="STA 9999 S-7R"), **SIZES}
    response = recorder.post(reverse("finding_new"), {**said, "step": "save"})
    page = response.content.decode()
    assert "E_STA_RANGE" in page
    assert 'value="STA 9999 S-7R"' in page
    assert 'value="2.4 in"' in page
    assert not Finding.objects.exists()
    recorder.post(reverse("finding_new"), {**said, "unplaced": "on", "step": "save"})
    finding = Finding.objects.get()
    assert finding.section is None
    assert finding.place_entered == "STA 9999 S-7R"


def test_an_offer_takes_the_place_of_the_location(recorder, world):
    said = start(recorder, world, place_entered="STA 650 S-7")
    response = recorder.post(reverse("finding_new"), {**said, "step": "show"})
    offers = re.findall(r'name="offer" value="([^"]+)"', response.content.decode())
    assert offers == ["STA 650 S-7L", "STA 650 S-7R"]
    taken = recorder.post(reverse("finding_new"), {**said, "offer": offers[1]})
    assert filled(taken)["place_entered"] == offers[1]


@pytest.mark.parametrize(
    ("text", "offered"),
    [
        ("STA 640-12 S-9L", ["STA 628 S-9L"]),
        ("STA 64 0 S-9L", ["STA 640 S-9L"]),
        ("STA 64O S-9L", ["STA 640 S-9L"]),
        ("door S-7L", []),
    ],
)
def test_an_offer_keeps_the_rest_of_the_location(recorder, world, text, offered):
    said = start(recorder, world, place_entered=text)
    response = recorder.post(reverse("finding_new"), {**said, "step": "show"})
    found = re.findall(r'name="offer" value="([^"]+)"', response.content.decode())
    assert found == offered


def test_files_that_a_refused_form_loses_are_asked_for_again(recorder, world):
    said = {**start(recorder, world), **SIZES, "d-depth_mm": "about 1", "step": "save"}
    url, lost = reverse("finding_new"), "Files cannot be kept over this"
    assert lost not in recorder.post(url, said).content.decode()
    photograph = SimpleUploadedFile("dent.jpg", b"any", "image/jpeg")
    text = recorder.post(url, {**said, "photographs": photograph}).content.decode()
    assert text.count(lost) == 1
    assert text.count("Not saved.") == 1


def test_a_size_that_cannot_be_read_is_said_beside_its_field(recorder, world):
    said = {**start(recorder, world), **SIZES, "d-depth_mm": "about 1"}
    response = recorder.post(reverse("finding_new"), {**said, "step": "save"})
    form = response.context["page"].dimensions
    assert list(form.errors) == ["depth_mm"]
    assert "“about 1”" in response.content.decode()


def test_a_find_in_the_future_is_refused(recorder, world):
    said = {**start(recorder, world), **SIZES, "found_on": "2025-01-02"}
    response = recorder.post(reverse("finding_new"), {**said, "step": "save"})
    assert "lies after today, 2025-01-01" in response.content.decode()


def test_a_likely_double_is_asked_about_before_saving(recorder, world):
    earlier = found(world)
    said = {**start(recorder, world), **SIZES, "step": "save"}
    response = recorder.post(reverse("finding_new"), said)
    assert "Known already?" in response.content.decode()
    assert Finding.objects.count() == 1
    answer = {f"link-{earlier.pk}": "different"}
    recorder.post(reverse("finding_new"), {**said, **answer})
    later = Finding.objects.exclude(pk=earlier.pk).get()
    link = later.links.get()
    assert (link.earlier, link.kind) == (earlier, "different")


def test_a_photograph_is_kept_whole_and_shown_without_its_metadata(recorder, world):
    image = Image.new("RGB", (40, 20), "red")
    exif = Image.Exif()
    exif[0x0112] = 6  # orientation: to be turned by 90 degrees
    exif[0x010F] = "camera of somebody"
    sent = io.BytesIO()
    image.save(sent, "JPEG", exif=exif)
    said = {**start(recorder, world), **SIZES, "step": "save"}
    upload = SimpleUploadedFile("dent.jpg", sent.getvalue(), "image/jpeg")
    recorder.post(reverse("finding_new"), {**said, "photographs": upload})
    photograph = Finding.objects.get().photographs.get()
    response = recorder.get(reverse("attachment", args=[photograph.attachment_id]))
    assert response["Content-Type"] == "image/jpeg"
    assert response["X-Content-Type-Options"] == "nosniff"
    shown = Image.open(io.BytesIO(b"".join(response.streaming_content)))
    assert shown.size == (20, 40)
    assert not shown.getexif()


def test_what_is_no_image_is_refused_whatever_its_name(recorder, world):
    said = {**start(recorder, world), **SIZES, "step": "save"}
    upload = SimpleUploadedFile("dent.jpg", b"<script>alert(1)</script>", "image/jpeg")
    response = recorder.post(reverse("finding_new"), {**said, "photographs": upload})
    assert "Its content is judged, not its name" in response.content.decode()
    assert not Finding.objects.exists()


def test_the_page_shows_place_drawing_sizes_and_history(recorder, world):
    finding = found(world)
    page = recorder.get(reverse("finding", args=[finding.pk])).content.decode()
    for words in (
        "STA 640+10, 4 in below S-7R",
        "<svg",
        "0.040 in (1.02 mm)",
        "width over depth",
        "finding recorded",
        "10,080 FC",
    ):
        assert words in page


def test_a_finding_to_be_placed_says_so_on_list_and_page(recorder, world):
    finding = found(world, place_entered="somewhere aft")
    listed = recorder.get(reverse("finding_list")).content.decode()
    assert "1 to be placed" in listed
    assert "somewhere aft" in listed
    page = recorder.get(reverse("finding", args=[finding.pk])).content.decode()
    assert "could not be read" in page
    recorder.post(
        reverse("finding_place", args=[finding.pk]),
        {"place_entered": "STA 650 S-7R", "step": "save"},
    )
    finding.refresh_from_db()
    assert finding.place_text == "STA 640+10 S-7R"


def test_placing_shows_what_is_wrong_with_a_location(recorder, world):
    finding = found(world, place_entered="somewhere aft")
    response = recorder.post(
        reverse("finding_place", args=[finding.pk]), {"place_entered": "STA 9999"}
    )
    assert "E_STA_RANGE" in response.content.decode()
    assert Finding.objects.get().section is None


def test_measuring_again_adds_a_measurement(recorder, world):
    finding = found(world)
    url = reverse("finding_measure", args=[finding.pk])
    said = filled(recorder.get(url)) | {"d-length_mm": "3 in", "stage": "repeat"}
    assert recorder.post(url, said).status_code == 302
    row = Measurement.objects.get(finding=finding, number=2)
    assert row.values.get().value == pytest.approx(76.2)
    page = recorder.get(reverse("finding", args=[finding.pk])).content.decode()
    assert "+15.24 mm" in page  # 3 in - 2.4 in


def test_the_first_measuring_is_as_found_and_the_next_a_repeat(recorder, world):
    bare, measured = found(world, typed={}), found(world)
    asked = [
        filled(recorder.get(reverse("finding_measure", args=[one.pk])))["stage"]
        for one in (bare, measured)
    ]
    assert asked == ["as_found", "repeat"]


def test_assessing_through_the_form(client, world):
    finding = found(world)
    client.force_login(world.engineer)
    url = reverse("finding_assess", args=[finding.pk])
    said = filled(client.get(url))
    said |= {"document_reference": "SRM 53-10-12", "document_page": "p. 101"}
    response = client.post(url, signed(said))
    assert response.url == reverse("finding", args=[finding.pk])
    finding.refresh_from_db()
    assert finding.state == "assessed"


def test_a_question_is_answered_from_the_page(client, world):
    finding = found(world, found_on=dt.date(2024, 12, 10), at=None)
    finding = found(world, place_entered="STA 640+30 S-7R")
    question = finding.questions.get()
    client.force_login(world.engineer)
    assert question.asked in client.get(
        reverse("finding", args=[finding.pk])
    ).content.decode().replace("&#x27;", "'").replace("&quot;", '"')
    client.post(
        reverse("finding_answer", args=[question.pk]), {"answer": "yes, measured so"}
    )
    question.refresh_from_db()
    assert question.answer == "yes, measured so"


@pytest.mark.parametrize(
    ("filters", "shown"),
    [
        ({"state": "open"}, {"F-0001", "F-0002"}),
        ({"damage_type": "crack"}, set()),
        ({"placed": "no"}, {"F-0002"}),
        ({"text": "4 in below"}, {"F-0001"}),
        ({"found_from": "2025-01-01"}, set()),
        ({"section": "fus"}, {"F-0001"}),
    ],
)
def test_the_list_is_filtered_by_its_address(recorder, world, filters, shown):
    found(world)
    found(world, place_entered="somewhere aft")
    lines = recorder.get(reverse("finding_list"), filters).context["lines"]
    assert {line.finding.number for line in lines} == shown


def test_another_operators_finding_is_not_found(client, world):
    finding = found(world)
    question = found(world, place_entered="STA 640+30 S-7R").questions.get()
    client.force_login(world.outsider)
    assert client.get(reverse("finding", args=[finding.pk])).status_code == 404
    for step in STEPS:
        url = reverse(f"finding_{step}", args=[finding.pk])
        assert client.get(url).status_code == 404, step
    answer = reverse("finding_answer", args=[question.pk])
    assert client.post(answer, {"answer": "x"}).status_code == 404
    assert "F-0001" not in client.get(reverse("finding_list")).content.decode()
    page = client.get(reverse("finding_new"), {"aircraft": world.aircraft.pk})
    assert page.context["page"].aircraft is None


def test_an_outsider_gets_no_attachment(client, world):
    finding = found(world)
    client.force_login(world.engineer)
    png = io.BytesIO()
    Image.new("RGB", (4, 4)).save(png, "PNG")
    url = reverse("finding_photographs", args=[finding.pk])
    client.post(
        url,
        {"photographs": SimpleUploadedFile("a.png", png.getvalue()), "role": "close"},
    )
    kept = finding.photographs.get().attachment_id
    assert client.get(reverse("attachment", args=[kept])).status_code == 200
    client.force_login(world.outsider)
    assert client.get(reverse("attachment", args=[kept])).status_code == 404


def test_a_reader_may_look_but_not_write(client, world):
    finding = found(world)
    client.force_login(world.users["auditor"])
    assert client.get(reverse("finding", args=[finding.pk])).status_code == 200
    assert client.get(reverse("finding_new")).status_code == 403
    for step in STEPS:
        url = reverse(f"finding_{step}", args=[finding.pk])
        assert client.get(url).status_code == 403, step


def test_the_list_costs_the_same_for_one_and_for_twenty(recorder, world):
    found(world)
    assert_same_queries(
        recorder,
        reverse("finding_list"),
        lambda: [found(world) for _ in range(19)],
    )


def test_the_page_costs_the_same_among_more_neighbours(client, world):
    finding = assessed(world)
    found(world)
    client.force_login(world.engineer)
    assert_same_queries(
        client,
        reverse("finding", args=[finding.pk]),
        lambda: [found(world) for _ in range(8)],
        ceiling=50,
    )


def test_the_present_operator_acts_on_damage_of_an_earlier_period(client, world):
    finding = found(world)
    present = world.outsider.open_memberships[0].operator
    aircraft = world.aircraft
    AircraftPeriod.objects.filter(aircraft=aircraft).update(to_on=FOUND)
    AircraftPeriod.objects.create(
        aircraft=aircraft,
        operator=present,
        registration="Q7-OTH",
        regime="EASA",
        from_on=FOUND + dt.timedelta(days=1),
        entered_at=NOW,
    )
    Aircraft.objects.filter(pk=aircraft.pk).update(operator=present)
    authorise(world.outsider.person, present, "assess")
    url = reverse("finding_assess", args=[finding.pk])
    client.force_login(world.engineer)
    assert client.get(url).status_code == 403
    client.force_login(world.outsider)
    said = filled(client.get(url))
    said |= {"document_reference": "SRM 53-10-12", "document_page": "p. 101"}
    assert client.post(url, signed(said)).status_code == 302
    finding.refresh_from_db()
    assert (finding.state, finding.operator) == ("assessed", world.operator)


def test_an_event_is_told_in_words_and_is_the_aircrafts_own(recorder, world):
    """Trade practice: a finding follows an event of its own aircraft."""
    other = aircraft_make(world.operator, world.variant, "Q7-AAB")
    own, _ = event_make(world.aircraft), event_make(other)
    url = reverse("finding_new")
    page = recorder.get(url, {"aircraft": world.aircraft.pk}).context["page"]
    (told,) = [str(label) for _, label in page.form.fields["event"].choices][1:]
    assert told == f"{own.number} hail, Q7-AAA, {own.happened_on}"
