"""Recording load spectra: service, command and pages."""

from __future__ import annotations

import json
from io import StringIO

import pytest
from django.core.exceptions import ValidationError
from django.core.files.uploadedfile import SimpleUploadedFile
from django.core.management import CommandError, call_command
from django.urls import reverse

from fleet.canonical import digest
from fleet.models import HistoryEntry, Spectrum
from repairs.services.spectra import (
    spectrum_data,
    spectrum_record,
    spectrum_revise,
)
from tests.factories import NOW
from tests.forms import form_on
from tests.queries import assert_same_queries

pytestmark = pytest.mark.django_db
POINTS = "stress_mpa\n0\n120\n40\n100\n"
LEVELS = "level_mpa;exceedances\n20;100\n40;10\n60;0\n"
SEQUENCE = {"flights": 2, "repeats": True, "residue": "repeating"}
WING = {
    "mean_flight_stress_mpa": 70.0,
    "ground_ratio": -0.5,
    "ground_ratio_source": "report 3, page 4",
    "ground_ratio_grade": "quoted",
    "seed": 1973,
    "halves": "same_level",
}
SENT = {
    "name": "beam",
    "source": "report 12, page 3",
    "flights": "2",
    "repeats": "yes",
    "residue": "repeating",
    "clip_above_mpa": "",
    "clip_below_mpa": "",
    "omit_below_range_mpa": "",
    "table": POINTS,
}


def record(world, name="beam", **changed) -> Spectrum:
    data = spectrum_data("sequence", {**SEQUENCE, **changed}, POINTS)
    return spectrum_record(
        name=name, data=data, source="report 12", actor=world.engineer, at=NOW
    )


def test_a_spectrum_is_kept_as_canonical_text_with_every_choice(world):
    row = record(world)
    content = json.loads(row.content)
    assert content["points_mpa"] == [0.0, 120.0, 40.0, 100.0]
    assert content["clip_above_mpa"] is None
    assert row.content_digest == digest(row.content)
    assert HistoryEntry.objects.last().action == "spectrum_record"


def test_a_name_is_recorded_once_and_then_revised(world):
    row = record(world)
    with pytest.raises(ValidationError, match="revise it, or name this one"):
        record(world)
    data = spectrum_data("sequence", {**SEQUENCE, "clip_above_mpa": 110.0}, POINTS)
    told = {"data": data, "source": "report 13", "actor": world.engineer, "at": NOW}
    later = spectrum_revise(row=row, **told)
    assert (later.name, later.revision, later.replaces) == ("beam", 2, row)
    with pytest.raises(ValidationError, match="was revised before: beam rev 2"):
        spectrum_revise(row=row, **told)
    with pytest.raises(ValidationError, match="nothing to revise"):
        spectrum_revise(row=later, **told)


def test_equal_contents_have_equal_digests_whatever_their_names(world):
    assert record(world).content_digest == record(world, "other").content_digest


@pytest.mark.parametrize(
    ("kind", "given", "table", "words"),
    [
        ("sequence", SEQUENCE, "stress_mpa\n0\nabc\n", "Line 3, column stress_mpa"),
        ("sequence", SEQUENCE, "", "Give the table of stresses"),
        ("sequence", {**SEQUENCE, "residue": ""}, POINTS, "lacks 'residue'"),
        ("sequence", {**SEQUENCE, "repeats": False}, POINTS, "one-off"),
        ("exceedance", {}, "level_mpa;exceedances\n20;x\n", "Line 2, column exc"),
        ("wing_sequence", {**WING, "ground_ratio": 3.0}, "", "Ground stress over"),
        ("wing_sequence", WING, POINTS, "takes no table"),
        ("cycle", {"cycle_ratio": 0.0}, "", "either cycle_max_mpa or"),
        ("pressure", {"share_of_normal": 1.2}, "", "lacks 'ground_share_of_normal'"),
    ],
)
def test_what_is_wrong_is_said_and_nothing_kept(world, kind, given, table, words):
    with pytest.raises(ValidationError, match=words):
        spectrum_record(
            name="bad",
            data=spectrum_data(kind, given, table),
            source="report",
            actor=world.engineer,
            at=NOW,
        )
    assert not Spectrum.objects.filter(name="bad").exists()


def test_a_source_is_needed(world):
    data = spectrum_data("sequence", SEQUENCE, POINTS)
    with pytest.raises(ValidationError, match="Say where it is from"):
        spectrum_record(
            name="beam", data=data, source=" ", actor=world.engineer, at=NOW
        )


def run(*args: str, **options: object) -> str:
    out = StringIO()
    call_command("load_spectrum", *args, stdout=out, **options)
    return out.getvalue()


def test_the_command_reads_a_table_and_a_dry_run_keeps_nothing(db, tmp_path):
    file = tmp_path / "levels.csv"
    file.write_text(LEVELS)
    args = [
        "fin", str(file), "--kind=exceedance", "--source=report 5", "--flights=10",
        "--mean-mpa=70", "--ground-mpa=-20", "--seed=3", "--residue=repeating",
        "--counted-at=upper_edge", "--omit-below-range-mpa=5",
    ]  # fmt: skip
    said = run(*args, "--dry-run")
    assert "cycles per flight" in said
    assert "Ranges below 5 MPa are left out" in said
    assert not Spectrum.objects.filter(name="fin").exists()
    assert "Recorded as fin rev 1." in run(*args)
    with pytest.raises(CommandError, match="revise it"):
        run(*args)
    args[args.index("--seed=3")] = "--seed=4"
    assert "Recorded as fin rev 2." in run(*args, "--revise")


def test_the_command_takes_the_wing_sequence_by_its_choices(db):
    said = run(
        "wing", "--kind=wing_sequence", "--source=report 6", "--seed=1",
        "--mean-flight-stress-mpa=70", "--ground-ratio=-0.5", "--halves=drawn_apart",
        "--ground-ratio-source=report 3", "--ground-ratio-grade=quoted",
        "--truncate-above=III", "--omit-below=VIII",
    )  # fmt: skip
    assert "not for a fuselage" in said
    assert "Gusts above level III" in said
    content = json.loads(Spectrum.objects.get(name="wing").content)
    assert (content["truncate_above"], content["omit_below"]) == ("III", "VIII")


@pytest.mark.parametrize(
    ("args", "words"),
    [
        (["x", "--kind=cycle", "--seed=1"], "--seed say nothing"),
        (["x", "nowhere.csv", "--kind=sequence"], "could not be read"),
        (["x", "--kind=cycle", "--cycle-max-mpa=9", "--cycle-ratio=0"], "Say where"),
        (["x", "--kind=cycle", "--cycle-max-mpa=9", "--cycle-ratio=0", "--revise",
          "--source=r"], "No spectrum is named x"),
    ],
)  # fmt: skip
def test_the_command_says_what_is_wrong(db, args, words):
    with pytest.raises(CommandError, match=words):
        run(*args)


def test_a_page_reads_first_and_records_after(world, client):
    client.force_login(world.engineer)
    address = reverse("spectrum_new", args=["sequence"])
    page = client.post(address, {**SENT, "step": "read"}).content.decode()
    assert "nothing is saved yet" in page
    assert "Cycles of a flight" in page
    assert not Spectrum.objects.filter(name="beam").exists()
    answer = client.post(address, {**SENT, "step": "save"}, follow=True)
    row = Spectrum.objects.get(name="beam")
    assert answer.redirect_chain[-1][0] == reverse("spectrum", args=[row.pk])
    page = answer.content.decode()
    for words in ("residue of counting", "report 12, page 3", "<svg", "By nothing yet"):
        assert words in page
    assert "beam" in client.get(reverse("spectrum_list")).content.decode()


def test_a_file_is_read_into_the_table_and_may_then_be_recorded(world, client):
    client.force_login(world.engineer)
    file = SimpleUploadedFile("beam.csv", POINTS.encode())
    sent = {**SENT, "table": "", "upload": file, "step": "read"}
    page = client.post(reverse("spectrum_new", args=["sequence"]), sent)
    assert "stress_mpa\n0\n120" in page.content.decode().replace("\r", "")


def test_nothing_typed_is_lost_when_a_line_is_wrong(world, client):
    client.force_login(world.engineer)
    sent = {**SENT, "table": "stress_mpa\n0\n1O0\n", "step": "save"}
    page = client.post(reverse("spectrum_new", args=["sequence"]), sent)
    text = page.content.decode()
    assert "Line 3, column stress_mpa reads" in text
    for kept in ("1O0", "report 12, page 3", 'value="beam"', "Not saved"):
        assert kept in text
    assert not Spectrum.objects.filter(name="beam").exists()


def test_a_revision_starts_from_what_is_recorded(world, client):
    row = record(world, clip_above_mpa=110.0)
    client.force_login(world.engineer)
    address = reverse("spectrum_revise", args=[row.pk])
    page = client.get(address).content.decode()
    assert "120.0" in page
    assert 'value="110.0"' in page
    sent = form_on(client, address) | {"clip_above_mpa": "105", "step": "save"}
    client.post(address, sent)
    later = Spectrum.objects.get(replaces=row)
    assert json.loads(later.content)["clip_above_mpa"] == 105.0
    old = client.get(reverse("spectrum", args=[row.pk])).content.decode()
    assert "revised since" in old


def test_every_kind_has_its_form_and_its_page(world, client):
    client.force_login(world.engineer)
    given = {
        "cycle": {"cycle_max_mpa": 90.0, "cycle_ratio": -0.2},
        "pressure": {
            "share_of_normal": 0.9,
            "ground_share_of_normal": 0.0,
            "ground": "doors open",
        },
        "wing_sequence": WING,
        "exceedance": {
            "counted_at": "upper_edge",
            "flights": 10,
            "mean_mpa": 70.0,
            "ground_mpa": -20.0,
            "seed": 3,
            "residue": "repeating",
        },
    }
    for kind, choices in given.items():
        new = client.get(reverse("spectrum_new", args=[kind]))
        assert new.status_code == 200
        data = spectrum_data(kind, choices, LEVELS if kind == "exceedance" else "")
        row = spectrum_record(
            name=kind, data=data, source="report", actor=world.engineer, at=NOW
        )
        for name in ("spectrum", "spectrum_revise"):
            assert client.get(reverse(name, args=[row.pk])).status_code == 200, kind
    assert client.get(reverse("spectrum_new", args=["gusts"])).status_code == 404


def test_the_list_costs_the_same_for_one_and_for_many(world, client):
    client.force_login(world.engineer)
    record(world, "first")

    def grow() -> None:
        for number in range(15):
            record(world, f"more {number}")

    assert_same_queries(client, reverse("spectrum_list"), grow)
