"""Loading and publishing a geometry, and the place columns read against it."""

from __future__ import annotations

import io
import json
from pathlib import Path

import pytest
from django.core.exceptions import ValidationError
from django.core.management import CommandError, call_command

from fleet.location import LocationRefused
from fleet.models import (
    AircraftType,
    Cutout,
    Frame,
    FrameStation,
    GeometryRevision,
    HistoryEntry,
    Joint,
    Panel,
    Section,
    Stringer,
    Variant,
    Zone,
)
from fleet.selectors.structure import geometry_in_force, geometry_of, place_find
from fleet.services.materials import materials_load
from fleet.services.structure import geometry_load, geometry_publish, place_columns
from tests.factories import FIXTURES, NOW, TODAY, aircraft_make, operator_make

CONTENT = (FIXTURES / "ard52.toml").read_text(encoding="utf-8")


def loaded(content: str = CONTENT) -> GeometryRevision:
    return geometry_load(content=content, actor=None, at=NOW)


def published(content: str = CONTENT) -> GeometryRevision:
    return geometry_publish(revision=loaded(content), actor=None, at=NOW, on=TODAY)


@pytest.fixture
def _materials(db: None) -> None:
    materials_load(path=FIXTURES / "materials.toml", actor=None, at=NOW)


@pytest.mark.django_db
def test_panel_materials_must_be_recorded_first() -> None:
    with pytest.raises(ValidationError) as caught:
        loaded()
    assert "Panel material “2024 T3 clad sheet”" in caught.value.messages[0]
    assert len(caught.value.messages) == 3
    assert not AircraftType.objects.exists()


@pytest.mark.usefixtures("_materials")
def test_every_part_of_the_file_becomes_rows() -> None:
    revision = loaded()
    assert (revision.number, revision.state) == (1, "draft")
    counts = {m.__name__: m.objects.count() for m in (Section, Variant, Joint, Zone)}
    assert counts == {"Section": 13, "Variant": 2, "Joint": 10, "Zone": 37}
    fuselage = Section.objects.get(code="FUS")
    assert Frame.objects.filter(section=fuselage).count() == 50
    # 48 frames on both variants, two plug frames on one of them.
    assert FrameStation.objects.filter(frame__section=fuselage).count() == 98
    assert Stringer.objects.filter(section=fuselage).count() == 40
    assert Panel.objects.filter(section=fuselage).count() == 32
    assert Cutout.objects.filter(section=fuselage, kind="window").count() == 66
    door = Cutout.objects.get(label="AFT CARGO")
    assert door.door_section is not None
    assert door.door_section.code == "DOOR-CARGO"


@pytest.mark.usefixtures("_materials")
def test_panel_rows_carry_the_engineering_columns() -> None:
    loaded()
    panel = Panel.objects.get(label="CROWN 500-700")
    assert str(panel.material) == "2024 T3 clad sheet"
    assert (panel.thickness_mm, panel.clad_mm) == (1.2, 0.06)
    assert (panel.mean_stress_mpa, panel.limit_stress_mpa) == (25.0, 62.5)
    assert panel.ultimate_load_n_per_mm is None
    assert panel.pressurised
    radome = Panel.objects.get(label="RADOME")
    assert (radome.material, radome.clad_mm) == (None, 0.0)
    variant = Variant.objects.get(code="base")
    assert (variant.validity_cycles, variant.validity_minutes) == (34_000, 1_920_000)


@pytest.mark.usefixtures("_materials")
def test_the_same_file_loads_once() -> None:
    first = loaded()
    entries = HistoryEntry.objects.count()
    assert loaded() == first
    assert HistoryEntry.objects.count() == entries


@pytest.mark.usefixtures("_materials")
def test_publishing_supersedes_the_revision_before() -> None:
    first = published()
    changed = CONTENT.replace("normal_psi = 8.2", "normal_psi = 8.1")
    assert changed != CONTENT
    second = published(changed)
    first.refresh_from_db()
    assert (first.state, second.state, second.number) == (
        "superseded",
        "published",
        2,
    )
    assert geometry_in_force(second.aircraft_type) == second
    assert geometry_of(second.aircraft_type) is not None
    # 8.1 psi in MPa, 1 psi = 6.894757 kPa (NIST SP 811).
    type_ = AircraftType.objects.get()
    assert type_.normal_differential_mpa == pytest.approx(8.1 * 6.894757e-3, rel=1e-6)


@pytest.mark.usefixtures("_materials")
def test_only_a_draft_is_published() -> None:
    revision = published()
    with pytest.raises(ValidationError, match="Only a draft is published"):
        geometry_publish(revision=revision, actor=None, at=NOW, on=TODAY)


@pytest.mark.usefixtures("_materials")
def test_a_changed_factor_becomes_a_revision_of_its_policy() -> None:
    loaded()
    second = loaded(CONTENT.replace("factor = 5.0", "factor = 6.0"))
    policies = second.aircraft_type.fatigue_policies.filter(name="stress_life")
    assert [(p.revision, p.factor) for p in policies] == [(1, 5.0), (2, 6.0)]
    newest = policies.last()
    assert newest is not None
    assert newest.replaces == policies.first()
    assert (
        second.aircraft_type.fatigue_policies.filter(name="growth_repeat").count() == 1
    )


@pytest.mark.usefixtures("_materials")
def test_a_section_keeps_its_reference_size() -> None:
    loaded()
    changed = CONTENT.replace("reference_in = 24\n", "reference_in = 25\n")
    assert changed != CONTENT
    with pytest.raises(ValidationError, match="places would move"):
        loaded(changed)
    assert GeometryRevision.objects.count() == 1


@pytest.mark.usefixtures("_materials")
def test_a_bad_file_names_every_error_and_writes_nothing(tmp_path: Path) -> None:
    bad = (
        CONTENT.replace("pitch_in = 20", "pitch_in = -20", 1)
        .replace("normal_psi = 8.2", "normal_psi = 0")
        .replace('section = "NAC-1"', 'section = "NAC-9"')
    )
    with pytest.raises(ValidationError) as caught:
        loaded(bad)
    text = "\n".join(caught.value.messages)
    for word in ("pitch_in", "normal_psi", "NAC-9"):
        assert word in text
    assert not AircraftType.objects.exists()
    path = tmp_path / "bad.toml"
    path.write_text(bad)
    with pytest.raises(CommandError, match="NAC-9"):
        call_command("load_geometry", str(path))


@pytest.mark.usefixtures("_materials")
def test_place_columns_are_rows_of_the_geometry_in_force() -> None:
    revision = published()
    variant = Variant.objects.get(code="S")
    aircraft = aircraft_make(operator_make(), variant)
    found = place_find(
        aircraft_type=revision.aircraft_type, variant="S", text="STA 600 S-9R"
    )
    columns = place_columns(aircraft, found)
    assert columns["geometry"] == revision
    assert columns["section"].code == "FUS"
    assert columns["panel"].label == "UPPER SIDE R 500-700"
    assert columns["zone"].code == "232"
    assert columns["x1_mm"] == pytest.approx(640 * 25.4)
    assert columns["map_mm"] == pytest.approx(640 * 25.4)
    assert (columns["place_entered"], columns["place_text"]) == (
        "STA 600 S-9R",
        "STA 600 S-9R",
    )
    assert columns["surface"] == "outer"


@pytest.mark.usefixtures("_materials")
def test_without_a_geometry_in_force_every_text_is_refused() -> None:
    revision = loaded()
    with pytest.raises(LocationRefused, match="has no geometry in force"):
        place_find(aircraft_type=revision.aircraft_type, variant="base", text="STA 1")


# -- manage.py locate ---------------------------------------------------------


def located(*arguments: str) -> tuple[int, str]:
    out = io.StringIO()
    try:
        call_command("locate", *arguments, stdout=out)
    except SystemExit as leaving:
        return int(leaving.code or 0), out.getvalue()
    return 0, out.getvalue()


@pytest.mark.usefixtures("_materials")
def test_locate_answers_in_json() -> None:
    published()
    status, text = located("ARD-52", "STA 512+6 S-14L", "--format", "json")
    answer = json.loads(text)
    assert status == 0
    assert (answer["canonical"], answer["section"], answer["codes"]) == (
        "STA 500+18 S-14L",
        "FUS",
        [],
    )
    assert (answer["x1_in"], answer["x1_mm"]) == (518.0, 13157.2)
    assert (answer["panel"], answer["zone"]) == ("LOWER SIDE L 500-700", "131")
    assert (answer["thickness_mm"], answer["material"]) == (1.6, "2024 T3 clad sheet")
    assert answer["bay"] == "FR 21–22, S-13L to S-14L"
    assert answer["element"] == "skin"


@pytest.mark.usefixtures("_materials")
def test_locate_takes_a_variant() -> None:
    published()
    base = json.loads(located("ARD-52", "STA 600 S-9R", "--format", "json")[1])
    other = located("ARD-52", "STA 600 S-9R", "--variant", "S", "--format", "json")
    assert json.loads(other[1])["x1_in"] - base["x1_in"] == 40.0
    with pytest.raises(CommandError, match="it has base, S"):
        located("ARD-52", "STA 600", "--variant", "T")


@pytest.mark.usefixtures("_materials")
def test_locate_refuses_with_status_one_and_the_offers() -> None:
    published()
    status, text = located("ARD-52", "STA 2400 S-12L", "--format", "json")
    answer = json.loads(text)
    assert status == 1
    assert answer["code"] == "E_STA_RANGE"
    assert answer["codes"] == ["E_STA_RANGE"]
    assert answer["offers"] == ["STA 240", "STA 1040"]
    assert answer["canonical"] is None
    status, text = located("ARD-52", "STA 640 S-12")
    assert status == 1
    assert "E_SIDE_MISSING" in text
    assert "S-12L; S-12R" in text


@pytest.mark.usefixtures("_materials")
def test_locate_prints_lines_for_people() -> None:
    published()
    status, text = located("ARD-52", "STA 420+600mm S-9L")
    assert status == 0
    assert "canonical: STA 440+3.622 S-9L" in text
    assert "codes: W_OFFSET_GE_PITCH" in text
    assert "thickness: 1.4 mm" in text


@pytest.mark.django_db
def test_locate_without_the_type_names_the_command_that_loads_it() -> None:
    with pytest.raises(CommandError, match=r"load_geometry FILE --publish"):
        located("ARD-52", "STA 640")


@pytest.mark.usefixtures("_materials")
def test_load_geometry_publishes_from_the_command_line() -> None:
    out = io.StringIO()
    path = str(FIXTURES / "ard52.toml")
    call_command("load_geometry", path, "--publish", stdout=out)
    call_command("load_geometry", path, "--publish", stdout=out)
    assert out.getvalue() == "ARD-52: revision 1, published\n" * 2
    with pytest.raises(CommandError, match="could not be read"):
        call_command("load_geometry", path + "x")
