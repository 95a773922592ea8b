"""Structure maps from the record: a finding's surroundings and a whole section."""

from __future__ import annotations

import math
from xml.etree import ElementTree

import pytest

from fleet.drawing.symbols import SYMBOLS
from fleet.services.history import Writing
from repairs.models import DamageType, Finding, MeasuredValue, Measurement
from repairs.selectors.maps import finding_map_svg, item_map_svg, marks_of
from tests.factories import NOW, TODAY, operator_make, user_make
from tests.placed_rows import INCH, finding_make, fleet_make, repair_make

pytestmark = pytest.mark.django_db
BAY = math.radians(9) * 56 * INCH


@pytest.fixture
def fleet():
    return fleet_make()


@pytest.fixture
def engineer(fleet):
    return user_make(fleet.operator, "engineer")


def dent(fleet, sta, bay, *, mark="Q7-AAA", **changes):
    x, s = sta * INCH, bay * BAY
    return finding_make(
        fleet.placing, fleet.aircraft[mark], x=(x, x), s=(s, s), **changes
    )


def links(svg):
    return {
        node.get("href"): node.get("class")
        for node in ElementTree.fromstring(svg).iter("a")
    }


def test_every_damage_type_of_the_record_has_a_mark():
    assert set(DamageType.values) == set(SYMBOLS)


def test_a_finding_is_drawn_with_all_that_is_recorded_about_it(fleet, engineer):
    here = dent(fleet, 640, 6)
    near = dent(fleet, 660, 8, damage_type="crack", state="assessed")
    closed = dent(fleet, 620, 4, state="closed")
    dent(fleet, 900, 6)
    dent(fleet, 640, 6, state="duplicate")
    dent(fleet, 640, 6, mark="Q7-AAB")
    x, s = 650 * INCH, 9 * BAY
    repair = repair_make(
        fleet.placing, fleet.aircraft["Q7-AAA"], x=(x, x + 300), s=(s, s + 200)
    )
    drawn = links(finding_map_svg(here, user=engineer))
    assert drawn == {
        f"/findings/{here.pk}/": "finding-item focus",
        f"/findings/{near.pk}/": "finding-item",
        f"/findings/{closed.pk}/": "finding-item faded",
        f"/repairs/{repair.pk}/": "repair-item",
    }


def test_the_window_is_seen_as_one_stands_before_it(fleet, engineer):
    right = finding_map_svg(dent(fleet, 640, 8), user=engineer)
    left = finding_map_svg(dent(fleet, 640, -8), user=engineer)
    assert "RH side seen from outside, nose to the right" in right
    assert "LH side seen from outside, nose to the left" in left


def test_a_finding_to_be_placed_has_no_map(fleet, engineer):
    row = finding_make(fleet.placing, fleet.aircraft["Q7-AAA"], x=None)
    assert finding_map_svg(row, user=engineer) == ""


def test_a_finding_without_a_place_across_is_named_and_shows_the_whole_girth(
    fleet, engineer
):
    x = 640 * INCH
    row = finding_make(fleet.placing, fleet.aircraft["Q7-AAA"], x=(x, x), s=None)
    svg = finding_map_svg(row, user=engineer)
    assert f"not drawn: {row.number}" in svg
    assert "unrolled" in svg


def test_a_wing_shows_the_skin_of_the_finding(fleet, engineer):
    where = {"x": (4000.0, 4000.0), "s": (900.0, 900.0), "section": "WING-L"}
    aircraft = fleet.aircraft["Q7-AAA"]
    here = finding_make(fleet.placing, aircraft, surface="lower", **where)
    finding_make(fleet.placing, aircraft, surface="upper", **where)
    svg = finding_map_svg(here, user=engineer)
    assert list(links(svg)) == [f"/findings/{here.pk}/"]
    assert "lower skin seen from below" in svg


def test_a_repair_is_drawn_at_its_recorded_size(fleet, engineer):
    x, s = 640 * INCH, 6 * BAY
    repair = repair_make(
        fleet.placing,
        fleet.aircraft["Q7-AAA"],
        x=(x, x),
        s=(s, s),
        length_mm=500.0,
        width_mm=250.0,
    )
    root = ElementTree.fromstring(item_map_svg(repair, user=engineer))
    outer = next(n for n in root.iter("rect") if "repair" in n.get("class", ""))
    assert float(outer.get("width")) / float(outer.get("height")) == pytest.approx(
        2.0, abs=0.01
    )


@pytest.mark.parametrize(
    ("direction", "along", "across"),
    [
        ("longitudinal", 300.0, 0.0),
        ("circumferential", 0.0, 300.0),
        ("", 300.0, 300.0),
    ],
)
def test_a_finding_is_drawn_at_its_last_measured_size(fleet, direction, along, across):
    row = dent(fleet, 640, 6, damage_type="crack")
    for number, length in ((1, 100.0), (2, 300.0)):
        with Writing(actor=None, action="measurement_record", at=NOW) as w:
            measuring = w.create(
                Measurement(
                    finding=row, number=number, stage="repeat", measured_on=TODAY
                )
            )
            values = [("length_mm", {"value": length})]
            values += [("direction", {"word": direction})] if direction else []
            w.create_many(
                [
                    MeasuredValue(
                        measurement=measuring, quantity=name, status="known", **known
                    )
                    for name, known in values
                ]
            )
    (mark,) = marks_of([row])
    assert mark.along[1] - mark.along[0] == pytest.approx(along)
    assert mark.across[1] - mark.across[0] == pytest.approx(across)


def test_drawing_takes_three_queries_however_much_is_there(
    fleet, engineer, django_assert_num_queries
):
    here = dent(fleet, 640, 6)
    for n in range(12):
        dent(fleet, 640 + n, 6 + n / 3)
    row = Finding.objects.select_related(
        "aircraft__variant", "section", "geometry"
    ).get(pk=here.pk)
    list(engineer.open_memberships)
    with django_assert_num_queries(3):
        finding_map_svg(row, user=engineer)


# -- the page --------------------------------------------------------------------------


def test_the_page_of_a_type_shows_the_structure_alone(client, fleet, engineer):
    dent(fleet, 640, 6)
    client.force_login(engineer)
    answer = client.get("/types/ARD-52/FUS/map/")
    text = answer.content.decode()
    assert answer.status_code == 200
    assert "AFT CARGO" in text
    assert "plugs of all variants shown" in text
    assert "/findings/" not in text.split("<svg")[1]


def test_the_page_of_an_aircraft_shows_its_damage(client, fleet, engineer):
    here = dent(fleet, 640, 6)
    other = dent(fleet, 640, 6, mark="Q7-AAB")
    client.force_login(engineer)
    aircraft = fleet.aircraft["Q7-AAA"]
    text = client.get(f"/types/ARD-52/FUS/map/?aircraft={aircraft.pk}").content.decode()
    assert f'href="/findings/{here.pk}/"' in text
    assert f'href="/findings/{other.pk}/"' not in text
    assert f"{here.number} dent" in text
    assert "FR 24A" not in text


def test_the_page_of_a_wing_offers_its_skins(client, fleet, engineer):
    client.force_login(engineer)
    text = client.get("/types/ARD-52/WING-L/map/?skin=lower").content.decode()
    assert "lower skin seen from below" in text
    assert "<option selected>lower</option>" in text


def test_another_operators_aircraft_is_not_found(client, fleet):
    outsider = user_make(operator_make("OTH", "Other Air"), "engineer", "outsider")
    client.force_login(outsider)
    aircraft = fleet.aircraft["Q7-AAA"]
    address = "/types/ARD-52/FUS/map/"
    assert client.get(f"{address}?aircraft={aircraft.pk}").status_code == 404
    text = client.get(address).content.decode()
    assert "Q7-AAA" not in text


@pytest.mark.parametrize(
    "address",
    [
        "/types/ARD-52/NOSE/map/",
        "/types/XX/FUS/map/",
        "/types/ARD-52/FUS/map/?aircraft=first",
        "/types/ARD-52/FUS/map/?aircraft=99999",
    ],
)
def test_what_does_not_exist_is_not_found(client, fleet, engineer, address):
    client.force_login(engineer)
    assert client.get(address).status_code == 404


def test_without_a_sign_in_there_is_no_map(client, fleet):
    assert client.get("/types/ARD-52/FUS/map/").status_code == 302


def test_the_number_of_queries_does_not_grow(
    client, fleet, engineer, django_assert_max_num_queries
):
    client.force_login(engineer)
    aircraft = fleet.aircraft["Q7-AAA"]

    def counted():
        with django_assert_max_num_queries(15) as queries:
            client.get(f"/types/ARD-52/FUS/map/?aircraft={aircraft.pk}")
        return len(queries)

    dent(fleet, 640, 6)
    counted()  # the first page of a session also marks when it began
    one = counted()
    for n in range(20):
        dent(fleet, 300 + 20 * n, 6)
    assert counted() == one
