"""The density map's numbers from rows in the database."""

from __future__ import annotations

import datetime as dt
import json
import math

import pytest
from django.core.management import CommandError, call_command
from django.http import QueryDict

from fleet.models import UsageRecord
from fleet.services.history import Writing
from reports.density import CYCLES, HOURS, YEARS
from reports.forms.density import DensityForm
from reports.selectors.density import density_data
from reports.selectors.exposure import DensityFilter
from tests.factories import BEGAN, NOW, TODAY, operator_make, user_make
from tests.placed_rows import INCH, event_make, finding_make, fleet_make

pytestmark = pytest.mark.django_db
BAY = math.radians(9) * 56 * INCH
CELL_M2 = 20 * INCH * BAY / 1e6
DAY = dt.timedelta(days=1)


def fly(aircraft, first, days, *, cycles=5, minutes=300):
    """The same number of flights on each of so many days."""
    rows = [
        UsageRecord(
            aircraft=aircraft,
            day=first + n * DAY,
            grain="day",
            minutes=minutes,
            cycles=cycles,
            landings=cycles,
            source="as tested",
        )
        for n in range(days)
    ]
    with Writing(actor=None, action="usage_import", at=NOW) as w:
        w.create_many(rows)


@pytest.fixture
def fleet():
    """Two base aircraft and a stretched one, 100 days and 500, 500 and 500 FC each."""
    made = fleet_make()
    for aircraft in made.aircraft.values():
        fly(aircraft, BEGAN, 100)
    return made


@pytest.fixture
def engineer(fleet):
    return user_make(fleet.operator, "engineer")


def dent(fleet, sta, bay, *, mark="Q7-AAA", day=10, size=0.0, **changes):
    x, s = sta * INCH, bay * BAY
    return finding_make(
        fleet.placing,
        fleet.aircraft[mark],
        x=(x, x + size),
        s=(s, s + size),
        found_on=BEGAN + day * DAY,
        **changes,
    )


def data_of(fleet, user, **asked):
    section = fleet.placing.sections[asked.pop("section", "FUS")]
    asked = DensityFilter(fleet.placing.aircraft_type, section, **asked)
    return density_data(asked, fleet.placing.geometry, user=user, as_of=TODAY)


def cell(data, frame, stringer):
    lattice = data.density.lattice
    return list(lattice.frames).index(frame), list(lattice.stringers).index(stringer)


def test_a_cell_counts_what_lies_about_its_frame_and_stringer(fleet, engineer):
    for sta, bay in ((640, 6), (631, 5.6), (649, 6.4)):
        dent(fleet, sta, bay)
    dent(fleet, 652, 6)
    data = data_of(fleet, engineer)
    assert data.density.counts[cell(data, "FR 28", "S-7R")] == 3
    assert data.density.counts[cell(data, "FR 29", "S-7R")] == 1
    assert (data.events, data.damages) == (4, 4)


def test_exposure_is_area_times_what_each_variant_flew(fleet, engineer):
    """Two base aircraft and one stretched: 1,500 FC; in the plug 500."""
    data = data_of(fleet, engineer)
    exposure = data.density.exposure
    assert data.amount == 1500
    assert exposure[cell(data, "FR 20", "S-7R")] == pytest.approx(1500 * CELL_M2)
    assert exposure[cell(data, "FR 24A", "S-7R")] == pytest.approx(500 * CELL_M2)


def test_hours_and_years_count_the_same_days(fleet, engineer):
    hours = data_of(fleet, engineer, denominator=HOURS)
    assert hours.amount == pytest.approx(3 * 100 * 5.0)
    years = data_of(fleet, engineer, denominator=YEARS)
    assert years.amount == pytest.approx(3 * 100 / 365.25)
    assert data_of(fleet, engineer, denominator=CYCLES).amount == 1500


def test_numerator_and_denominator_share_the_period(fleet, engineer):
    for day in (4, 10, 19, 20, 60):
        dent(fleet, 640, 6, day=day)
    data = data_of(fleet, engineer, from_on=BEGAN + 10 * DAY, to_on=BEGAN + 19 * DAY)
    assert data.density.counted == 2
    assert data.amount == 3 * 10 * 5


def test_findings_outside_an_aircrafts_data_are_drawn_beside_and_in_no_rate(
    fleet, engineer
):
    """Before the data begin, and after the last day before the first gap."""
    dent(fleet, 640, 6, day=-400)
    dent(fleet, 640, 6, day=100)
    dent(fleet, 640, 6, day=99)
    data = data_of(fleet, engineer)
    assert data.density.counted == 1
    assert data.beside.outside_data == 2
    assert data.outside == {cell(data, "FR 28", "S-7R"): 2}


def test_usage_beyond_a_gap_is_in_no_exposure(fleet, engineer):
    fly(fleet.aircraft["Q7-AAA"], BEGAN + 200 * DAY, 50)
    assert data_of(fleet, engineer).amount == 1500


def test_an_aircraft_without_usage_has_no_exposure_and_its_findings_are_beside(
    engineer, fleet
):
    data = data_of(fleet, engineer, to_on=BEGAN - DAY)
    assert data.in_rates == []
    assert data.fleet_rate is None
    assert not data.density.exposed.any()


def test_what_is_not_outer_skin_or_not_placed_is_counted_beside(fleet, engineer):
    dent(fleet, 640, 6)
    dent(fleet, 640, 6, element="frame_web")
    dent(fleet, 640, 6, element="unknown")
    dent(fleet, 640, 6, surface="inner")
    dent(fleet, 640, 6, surface="")
    x = 640 * INCH
    aircraft = fleet.aircraft["Q7-AAA"]
    on = BEGAN + 10 * DAY
    finding_make(fleet.placing, aircraft, x=(x, x), s=None, found_on=on)
    finding_make(fleet.placing, aircraft, x=None, found_on=on)
    data = data_of(fleet, engineer)
    assert data.density.counted == 1
    assert vars(data.beside) == {
        "to_be_placed": 1,
        "outside_data": 0,
        "no_across": 1,
        "other_elements": 2,
        "other_surfaces": 2,
        "no_exposure": 0,
    }


def test_duplicates_and_voided_findings_are_nowhere(fleet, engineer):
    dent(fleet, 640, 6, state="duplicate")
    dent(fleet, 640, 6, state="voided")
    data = data_of(fleet, engineer)
    assert data.density.counted == 0
    assert sum(vars(data.beside).values()) == 0


def test_a_hailstorm_counts_once_in_each_cell_and_once_for_the_fleet(fleet, engineer):
    event = event_make(fleet.aircraft["Q7-AAA"])
    for sta, bay in ((640, 6), (641, 6), (660, 6)):
        dent(fleet, sta, bay, event=event, cluster_count=10)
    dent(fleet, 640, 6)
    data = data_of(fleet, engineer)
    assert data.density.counts[cell(data, "FR 28", "S-7R")] == 2
    assert data.density.counts[cell(data, "FR 29", "S-7R")] == 1
    assert data.events == 2
    assert data.damages == 31
    whole = data.density.exposure.sum() / 1000
    assert data.fleet_rate == pytest.approx(
        (2 / whole, 0.2422 / whole, 7.2247 / whole), rel=1e-3
    )


def test_a_long_finding_counts_in_every_cell_it_touches(fleet, engineer):
    x, s = 640 * INCH, 6 * BAY
    finding_make(
        fleet.placing,
        fleet.aircraft["Q7-AAA"],
        x=(x, x + 40 * INCH),
        s=(s, s + BAY),
        found_on=BEGAN + 10 * DAY,
    )
    data = data_of(fleet, engineer)
    assert data.density.counted == 6
    assert data.events == 1
    assert data.density.counts[cell(data, "FR 30", "S-8R")] == 1


def test_a_long_finding_over_the_keel_and_past_an_absent_plug(fleet, engineer):
    """STA 550 to 590 on the base variant: FR 23 and 25 have skin, 24A has none."""
    x, s = 545 * INCH, 19 * BAY
    finding_make(
        fleet.placing,
        fleet.aircraft["Q7-AAA"],
        x=(x, x + 40 * INCH),
        s=(s, s + 2 * BAY),
        found_on=BEGAN + 10 * DAY,
    )
    data = data_of(fleet, engineer)
    touched = {
        (data.density.lattice.frames[i], data.density.lattice.stringers[j])
        for i, j in zip(*data.density.counts.nonzero(), strict=True)
    }
    assert {name for name, _ in touched} == {"FR 23", "FR 24", "FR 24B", "FR 25"}
    assert {name for _, name in touched} == {"S-20R", "S-21", "S-20L"}


def test_the_stretched_aircrafts_places_are_counted_by_label(fleet, engineer):
    """STA 600 is 640 in from the datum on the stretched variant."""
    dent(fleet, 600, 6)
    dent(fleet, 640, 6, mark="Q7-AAS")
    data = data_of(fleet, engineer)
    assert data.density.counts[cell(data, "FR 26", "S-7R")] == 2


def test_filters_reach_numerator_and_denominator(fleet, engineer):
    dent(fleet, 640, 6, damage_type="crack", cause="fatigue")
    dent(fleet, 640, 6, mark="Q7-AAB")
    dent(fleet, 680, 6, mark="Q7-AAS")
    one = fleet.aircraft["Q7-AAA"]
    assert data_of(fleet, engineer, aircraft=[one]).amount == 500
    assert data_of(fleet, engineer, aircraft=[one]).density.counted == 1
    stretched = data_of(fleet, engineer, variant="S")
    assert (stretched.amount, stretched.density.counted) == (500, 1)
    cracks = data_of(fleet, engineer, damage_types=["crack"])
    assert (cracks.amount, cracks.density.counted) == (1500, 1)
    assert data_of(fleet, engineer, cause="fatigue").density.counted == 1
    assert data_of(fleet, engineer, cause="wear").density.counted == 0


def test_a_wing_counts_one_skin_at_a_time(fleet, engineer):
    aircraft, on = fleet.aircraft["Q7-AAA"], BEGAN + 10 * DAY
    for surface in ("upper", "upper", "lower"):
        finding_make(
            fleet.placing,
            aircraft,
            section="WING-L",
            surface=surface,
            x=(4000.0, 4000.0),
            s=(900.0, 900.0),
            found_on=on,
        )
    upper = data_of(fleet, engineer, section="WING-L")
    lower = data_of(fleet, engineer, section="WING-L", skin="lower")
    assert (upper.density.counted, lower.density.counted) == (2, 1)
    assert upper.beside.other_surfaces == 1


def test_flights_without_hours_are_named(fleet, engineer):
    with Writing(actor=None, action="usage_import", at=NOW) as w:
        w.create_many(
            [
                UsageRecord(
                    aircraft=fleet.aircraft["Q7-AAA"],
                    day=BEGAN + 100 * DAY,
                    grain="day",
                    minutes=None,
                    cycles=3,
                    cycles_without_minutes=3,
                    landings=3,
                    source="as tested",
                )
            ]
        )
    data = data_of(fleet, engineer, denominator=HOURS)
    assert data.flights_without_hours == 3
    assert data.amount == pytest.approx(1500)


def test_another_operators_aircraft_are_in_neither_part(fleet, engineer):
    dent(fleet, 640, 6)
    outsider = user_make(operator_make("OTH", "Other Air"), "engineer", "outsider")
    data = data_of(fleet, outsider)
    assert (data.amount, data.density.counted, data.windows) == (0, 0, [])


def test_the_number_of_queries_does_not_grow(
    fleet, engineer, django_assert_max_num_queries
):
    def counted():
        with django_assert_max_num_queries(13) as queries:
            data_of(fleet, engineer)
        return len(queries)

    dent(fleet, 640, 6)
    list(engineer.open_memberships)
    one = counted()
    for n in range(20):
        dent(fleet, 300 + 20 * n, 6, mark=("Q7-AAA", "Q7-AAS")[n % 2])
    assert counted() == one


# -- page and command -----------------------------------------------------------------


def test_the_page_shows_map_hot_spots_and_numbers(client, fleet, engineer):
    for n in range(12):
        dent(fleet, 640, 6, day=n)
    dent(fleet, 800, -6, surface="inner")
    client.force_login(engineer)
    answer = client.get("/density/")
    text = answer.content.decode()
    assert answer.status_code == 200
    assert "FR 28, S-7R: 12 found" in text
    assert "STA 640, S-7R" in text
    assert "1,500 FC by 3 aircraft" in text
    assert "1 on another surface or none stated" in text
    assert "style=" not in text


def test_filters_stay_in_the_address_and_on_the_page(client, fleet, engineer):
    dent(fleet, 640, 6, damage_type="crack")
    dent(fleet, 640, 6)
    client.force_login(engineer)
    query = "?section=FUS&damage=crack&aircraft=Q7-AAA&rate=years&colour=plain"
    text = client.get(f"/density/{query}").content.decode()
    assert "FR 28, S-7R: 1 found" in text
    assert "findings per m² and aircraft-year" in text
    assert 'value="crack" id="id_damage_4" checked' in text
    assert 'value="Q7-AAA" id="id_aircraft_0" checked' in text


def test_a_wrong_filter_is_named_and_nothing_is_drawn(client, fleet, engineer):
    client.force_login(engineer)
    text = client.get("/density/?start=2024-05-01&end=2024-01-01").content.decode()
    assert "The period ends on 2024-01-01, before it begins on 2024-05-01." in text
    assert "<svg" not in text


def test_an_outsider_sees_an_empty_map(client, fleet):
    dent(fleet, 640, 6)
    outsider = user_make(operator_make("OTH", "Other Air"), "engineer", "outsider")
    client.force_login(outsider)
    text = client.get("/density/").content.decode()
    assert "FR 28, S-7R" not in text
    assert "no exposure" in text
    assert "Q7-AAA" not in text


def test_without_a_sign_in_there_is_no_map(client, fleet):
    assert client.get("/density/").status_code == 302


def test_without_any_geometry_the_page_says_how_to_begin(client):
    client.force_login(user_make(operator_make(), "manager"))
    assert b"load_geometry" in client.get("/density/").content


def test_the_form_falls_back_to_a_section_of_the_chosen_type(fleet, engineer):
    form = DensityForm(QueryDict("section=NOWHERE"), user=engineer)
    assert form.is_valid()
    assert form.cleaned_data["section"].code == "FUS"


def test_the_command_writes_a_figure_and_the_same_numbers(fleet, tmp_path, capsys):
    for n in range(12):
        dent(fleet, 640, 6, day=n)
    picture = tmp_path / "map.png"
    call_command(
        "density_map",
        type="ARD-52",
        section="FUS",
        output=str(picture),
        format="json",
        replicas=49,
        as_of=TODAY,
    )
    told = json.loads(capsys.readouterr().out)
    assert picture.read_bytes().startswith(b"\x89PNG")
    assert told["exposure"] == {"unit": "FC", "total": 1500.0}
    assert told["count"] == {"events": 12, "cells": 12, "damages": 12}
    (row,) = told["cells"]
    assert (row["frame"], row["stringer"], row["count"]) == ("FR 28", "S-7R", 12)
    assert row["rate"] == pytest.approx(12 / (CELL_M2 * 1.5))
    assert told["hot_spots"][0]["p"] == pytest.approx(0.02)


@pytest.mark.parametrize(
    ("wrong", "says"),
    [
        ({"type": "XX-1"}, "--type: 'XX-1' is not known; known are ARD-52"),
        ({"section": "FUSE"}, "--section: 'FUSE' is not known; known are FUS"),
        ({"aircraft": ["Q7-ZZZ"]}, "--aircraft: .*Q7-ZZZ"),
        ({"damage_type": ["rust"]}, "--damage-type: .*rust"),
        ({"to": "yesterday"}, "--to: "),
        ({"output": "map.xyz"}, "--output map.xyz"),
    ],
)
def test_the_command_names_what_is_wrong(fleet, wrong, says):
    options = {"type": "ARD-52", "section": "FUS", "replicas": 9, "as_of": TODAY}
    with pytest.raises(CommandError, match=says):
        call_command("density_map", **(options | wrong))
