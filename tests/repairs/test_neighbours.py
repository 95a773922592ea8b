"""What is near a location: the query against trying every row by hand."""

from __future__ import annotations

import math
import random

import pytest

from repairs.models import Finding
from repairs.selectors.neighbours import LONG_MM, Patch, in_patch, neighbours
from tests.factories import operator_make, user_make
from tests.placed_rows import INCH, finding_make, fleet_make, repair_make

pytestmark = pytest.mark.django_db
BAY = math.radians(9) * 56 * INCH


@pytest.fixture
def fleet():
    return fleet_make()


@pytest.fixture
def engineer(fleet):
    return user_make(fleet.operator, "engineer")


def dent(fleet, sta, bay, *, mark="Q7-AAA", size=20.0, **changes):
    x, s = sta * INCH, bay * BAY
    return finding_make(
        fleet.placing,
        fleet.aircraft[mark],
        x=(x, x + size),
        s=(s, s + size),
        **changes,
    )


def numbers(found):
    return [near.item.number for near in found]


def meets(patch, row, wrap):
    """Whether two rectangles share a point, tried turn by turn."""
    if row.x1_mm > patch.x2_mm or row.x2_mm < patch.x1_mm:
        return False
    if row.s1_mm is None:
        return True
    return any(
        row.s1_mm <= patch.s2_mm + n * wrap and row.s2_mm >= patch.s1_mm + n * wrap
        for n in range(-3, 4)
    )


def test_the_query_agrees_with_trying_every_row(fleet):
    chance = random.Random(20)
    wrap = fleet.placing.sections["FUS"].wrap_mm
    aircraft = fleet.aircraft["Q7-AAA"]
    for n in range(120):
        x = chance.uniform(2000, 26000)
        s = chance.uniform(-wrap / 2, wrap / 2)
        long = chance.choice([0.0, 30.0, LONG_MM, 700.0, 9000.0])
        across = None if n % 15 == 0 else (s, s + chance.choice([0.0, 40.0, 3000.0]))
        finding_make(fleet.placing, aircraft, x=(x, min(x + long, 26900)), s=across)
    rows = list(Finding.objects.all())
    for _ in range(40):
        x, s = chance.uniform(2000, 26000), chance.uniform(-wrap / 2, wrap / 2)
        patch = Patch(x, x + chance.uniform(0, 900), s, s + chance.uniform(0, 2500))
        found = set(
            Finding.objects.filter(in_patch(patch, wrap)).values_list("pk", flat=True)
        )
        assert found == {row.pk for row in rows if meets(patch, row, wrap)}


def test_near_means_within_the_reach_and_nearest_comes_first(fleet, engineer):
    here = dent(fleet, 640, 6)
    far = dent(fleet, 640 + 19.9, 6)
    near = dent(fleet, 640 - 10, 6)
    dent(fleet, 640 + 40, 6)
    found = neighbours(here, user=engineer, reach_mm=20 * INCH).here
    assert numbers(found) == [near.number, far.number]
    assert found[0].along_mm == pytest.approx(-(10 * INCH - 20))
    assert found[1].along_mm == pytest.approx(19.9 * INCH - 20)
    assert found[0].across_mm == 0.0


def test_the_gap_across_is_a_true_arc_at_the_station(fleet, engineer):
    """At STA 150 the radius is 38 in: (56 - 20)/180 per inch from STA 60."""
    here = dent(fleet, 150, 6, size=0.0)
    other = dent(fleet, 150, 9, size=0.0)
    (near,) = neighbours(here, user=engineer, reach_mm=20 * INCH).here
    assert near.item.number == other.number
    assert near.distance_mm == pytest.approx(math.radians(27) * 38 * INCH)


def test_what_lies_across_the_keel_is_near(fleet, engineer):
    here = dent(fleet, 640, 19.5)
    other = dent(fleet, 640, -19.5)
    (near,) = neighbours(here, user=engineer).here
    assert near.item.number == other.number
    assert near.across_mm == pytest.approx(BAY - 20.0)


def test_true_distance_counts_and_not_the_map(fleet, engineer):
    """STA 560 and 580 are 20 in apart on the base variant, whatever the plug."""
    here = dent(fleet, 559, 5)
    other = dent(fleet, 561, 5)
    (near,) = neighbours(here, user=engineer).here
    assert near.item.number == other.number
    assert near.along_mm == pytest.approx(2 * INCH - 20)


def test_repairs_count_and_gone_or_mistaken_records_do_not(fleet, engineer):
    here = dent(fleet, 640, 6)
    x, s = 645 * INCH, 6 * BAY
    aircraft = fleet.aircraft["Q7-AAA"]
    on = repair_make(fleet.placing, aircraft, x=(x, x + 200), s=(s, s + 200))
    repair_make(
        fleet.placing, aircraft, x=(x, x + 200), s=(s, s + 200), state="cancelled"
    )
    dent(fleet, 641, 6, state="duplicate")
    dent(fleet, 641, 6, state="voided")
    assert numbers(neighbours(here, user=engineer).here) == [on.number]


def test_a_location_without_a_place_across_is_near_along(fleet, engineer):
    here = dent(fleet, 640, 6)
    x = 645 * INCH
    vague = finding_make(fleet.placing, fleet.aircraft["Q7-AAA"], x=(x, x), s=None)
    found = neighbours(here, user=engineer, opposite=True)
    (near,) = found.here
    assert near.item.number == vague.number
    assert near.across_mm is None
    assert found.opposite == []


def test_the_other_side_is_mirrored_at_the_crown(fleet, engineer):
    here = dent(fleet, 640, 6)
    mirrored = dent(fleet, 641, -6)
    found = neighbours(here, user=engineer, opposite=True)
    assert numbers(found.opposite) == [mirrored.number]
    assert found.here == []


def test_the_other_side_of_a_wing_is_the_other_wing(fleet, engineer):
    aircraft = fleet.aircraft["Q7-AAA"]
    where = {"x": (4000.0, 4020.0), "s": (900.0, 950.0), "surface": "upper"}
    here = finding_make(fleet.placing, aircraft, section="WING-L", **where)
    other = finding_make(fleet.placing, aircraft, section="WING-R", **where)
    found = neighbours(here, user=engineer, opposite=True)
    assert numbers(found.opposite) == [other.number]


def test_sisters_show_the_same_and_the_next_bays_by_the_shared_axis(fleet, engineer):
    """STA 600 is 640 in from the datum on the stretched variant, yet the same bay."""
    here = dent(fleet, 606, 6.2)
    same = dent(fleet, 646, 6.2, mark="Q7-AAS")
    dent(fleet, 606, 6.2, mark="Q7-AAS")
    next_bay = dent(fleet, 586, 7.2, mark="Q7-AAB")
    found = neighbours(here, user=engineer).sisters
    assert {item.number for item in found} == {same.number, next_bay.number}


def test_sisters_wrap_round_the_crown(fleet, engineer):
    here = dent(fleet, 640, 0.2)
    other = dent(fleet, 640, -0.4, mark="Q7-AAB")
    assert [i.number for i in neighbours(here, user=engineer).sisters] == [other.number]


def test_another_operator_sees_nothing(fleet):
    here = dent(fleet, 640, 6)
    dent(fleet, 641, 6)
    dent(fleet, 640, 6, mark="Q7-AAB")
    outsider = user_make(operator_make("OTH", "Other Air"), "engineer", "outsider")
    found = neighbours(here, user=outsider, opposite=True)
    assert (found.here, found.opposite, found.sisters) == ([], [], [])


def test_a_finding_to_be_placed_has_no_neighbours(fleet, engineer):
    row = finding_make(fleet.placing, fleet.aircraft["Q7-AAA"], x=None)
    assert neighbours(row, user=engineer).here == []


def test_the_number_of_queries_does_not_grow(
    fleet, engineer, django_assert_max_num_queries
):
    here = dent(fleet, 640, 6)
    for n in range(20):
        dent(fleet, 640 + n / 2, 6, mark=("Q7-AAA", "Q7-AAB")[n % 2])
    row = Finding.objects.select_related("aircraft", "section", "geometry").get(
        pk=here.pk
    )
    list(engineer.open_memberships)
    with django_assert_max_num_queries(6):
        found = neighbours(row, user=engineer, opposite=True)
        text = [
            (near.item.number, near.item.aircraft.registration) for near in found.here
        ]
        assert len(text) == 10
        assert len({item.aircraft.registration for item in found.sisters}) == 1


def doubler(fleet, sta, bay, **changes):
    x, s = sta * INCH, bay * BAY
    return repair_make(
        fleet.placing, fleet.aircraft["Q7-AAA"], x=(x, x), s=(s, s), **changes
    )


def test_a_repair_placed_at_a_point_reaches_as_far_as_its_size(fleet, engineer):
    """A doubler 24 in long about STA 640 ends at STA 652, 8 in from STA 660."""
    large = doubler(fleet, 640, 6, length_mm=24 * INCH, width_mm=4 * INCH)
    here = dent(fleet, 660, 6)
    (near,) = neighbours(here, user=engineer, reach_mm=10 * INCH).here
    assert near.item.number == large.number
    assert near.along_mm == pytest.approx(-8 * INCH)
    (back,) = neighbours(large, user=engineer, reach_mm=10 * INCH).here
    assert (back.item.number, back.along_mm) == (here.number, pytest.approx(8 * INCH))


def test_two_doublers_that_overlap_are_no_distance_apart(fleet, engineer):
    one = doubler(fleet, 640, 6, length_mm=10 * INCH)
    doubler(fleet, 646, 6, length_mm=8 * INCH)
    (near,) = neighbours(one, user=engineer).here
    assert near.distance_mm == 0.0
