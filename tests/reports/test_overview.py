"""The morning page."""

from __future__ import annotations

import pytest
from django.core.management import call_command

from fleet.models import Role
from reports.selectors.overview import PANELS, panels_for
from tests import due_rows as make
from tests.factories import FIXTURES, user_make
from tests.placed_rows import finding_make, fleet_make
from tests.queries import assert_same_queries

pytestmark = pytest.mark.django_db
PLACE = {"x": (1e4, 1e4), "s": (0.0, 1.0)}


@pytest.fixture
def fleet(settings):
    settings.FRAMEBAY_TODAY = make.TODAY.isoformat()
    return fleet_make()


@pytest.fixture
def reader(client, fleet):
    client.force_login(user_make(fleet.operator, "engineer"))
    return client


def said(client) -> str:
    response = client.get("/")
    assert response.status_code == 200
    return " ".join(response.content.decode().split())


def row(words: str, count: int) -> str:
    return f'{words}</a></th><td class="num">{count}</td>'


def test_findings_are_counted_by_state_and_to_be_placed(reader, fleet):
    aircraft = fleet.aircraft["Q7-AAA"]
    for state in ("reported", "deferred", "deferred", "accepted", "closed", "voided"):
        finding_make(fleet.placing, aircraft, state=state, **PLACE)
    finding_make(fleet.placing, aircraft, x=None)
    text = said(reader)
    assert row("reported", 2) in text
    assert row("deferred", 2) in text
    assert row("accepted, damage remains", 1) in text
    assert 'to be placed</a></th><td class="num soon">1</td>' in text
    assert row("closed", 1) not in text


def test_each_number_leads_to_its_list(reader):
    text = said(reader)
    for address in ("/due/", "/findings/?state=reported", "/safe-life/", "/aircraft/"):
        assert f'href="{address}"' in text


def test_aircraft_with_the_oldest_data_lead(reader, fleet):
    make.fly(make.aircraft("Q7-FLY", of=fleet.operator), 92)  # to 2024-12-31
    text = said(reader).partition("oldest data first")[2]
    assert text.index("Q7-AAA") < text.index("Q7-FLY")
    assert "2024-12-31" in text


def test_the_page_costs_the_same_for_more_of_everything(reader, fleet):
    def grow():
        for n in range(4):
            aircraft = make.aircraft(f"Q7-G{n}", of=fleet.operator)
            make.fly(aircraft, 5)
            finding_make(fleet.placing, aircraft, **PLACE)
            make.part(of=fleet.operator)

    make.part(of=fleet.operator)
    make.fly(make.aircraft("Q7-OLD", of=fleet.operator), 5)
    assert_same_queries(reader, "/", grow, ceiling=40)


def test_every_panel_is_shown_once_to_every_role():
    for role in Role.values:
        assert sorted(panels_for([role])) == sorted(PANELS)
    assert panels_for(["planner"])[0] == "due"
    assert panels_for(["auditor", "engineer"])[0] == "entries"


def test_the_type_page_gives_numbers_with_unit_source_and_grade(reader, fleet):
    call_command("load_materials", str(FIXTURES / "materials.toml"))
    code = fleet.placing.aircraft_type.code
    page = reader.get(f"/types/{code}/?section=WING-L")
    text = " ".join(page.content.decode().split())
    assert page.status_code == 200
    assert "<h2>Left wing" in text
    assert "8 stringers" in text
    assert "adopted demo value" in text
    assert reader.get("/types/NONE/").status_code == 404


def test_the_aircraft_type_page_names_materials_from_memory(client):
    content = FIXTURES / "ard52.toml"
    call_command("load_materials", str(FIXTURES / "materials.toml"))
    call_command("load_geometry", str(content), "--publish")
    client.force_login(make.user())
    text = client.get("/types/ARD-52/").content.decode()
    assert "from memory, unverified" in text
    assert "8.2 psi" in text
    assert "34,000 FC" in text
