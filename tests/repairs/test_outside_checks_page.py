"""The page of checks against the outside: what it says, filters, and of a lost file."""

from __future__ import annotations

import json

import pytest
from django.urls import reverse

from repairs.selectors.outside_checks import checks_shown, difference_text
from tests.record_rows import world_make

ROWS = [
    {
        "method": "Bulging factor",
        "source": "USAF handbook, Table 11.3.13",
        "given": "l = 1",
        "published": 1.5,
        "computed": 1.4925,
        "unit": "-",
        "tolerance": "1 %",
        "route": "print",
    },
    {
        "method": "Bulging factor",
        "source": "a paper",
        "given": "l = 2",
        "published": 2.0,
        "computed": 2.0,
        "unit": "-",
        "tolerance": "1 %",
        "route": "memory",
    },
    {
        "method": "Net section",
        "source": "a textbook, example 3",
        "given": "W = 100 mm",
        "published": 250.0,
        "computed": 251.0,
        "unit": "MPa",
        "tolerance": "±2",
        "route": "quoted",
    },
]


@pytest.fixture
def folder(settings, tmp_path):
    settings.FIXTURES = tmp_path
    return tmp_path


@pytest.fixture
def file(folder):
    path = folder / "outside_checks.json"
    path.write_text(json.dumps(ROWS), encoding="utf-8")
    return path


@pytest.mark.parametrize(
    ("published", "computed", "said"),
    [
        (1.5, 1.4925, "−0.50 %"),
        (2.0, 2.0, "0.00 %"),
        (-4.0, -3.0, "+25.00 %"),
        (0.0, 0.01, "0.01"),
    ],
)
def test_the_difference_is_in_per_cent_of_the_published(published, computed, said):
    assert difference_text(published, computed) == said


@pytest.mark.usefixtures("file")
def test_checks_are_grouped_by_method_and_memory_is_counted():
    shown = checks_shown()
    assert [(g.method, len(g.rows), g.from_memory) for g in shown.groups] == [
        ("Bulging factor", 2, 1),
        ("Net section", 1, 0),
    ]
    assert (shown.count, shown.from_memory, shown.problem) == (3, 1, "")
    assert shown.groups[1].rows[0].route == (
        "printed in a public text that quotes the source"
    )


@pytest.mark.usefixtures("file")
def test_filters_narrow_by_words_and_route():
    assert checks_shown("bulging L = 2").count == 1
    assert checks_shown(route="memory").count == 1
    assert checks_shown("nothing like it").groups == ()


def test_a_file_that_is_missing_or_broken_is_said_in_words(folder):
    assert "is not there" in checks_shown().problem
    (folder / "outside_checks.json").write_text("[{", encoding="utf-8")
    assert "cannot be read" in checks_shown().problem


@pytest.mark.django_db
@pytest.mark.usefixtures("file")
def test_engineers_read_it_and_recorders_do_not(client):
    world = world_make()
    client.force_login(world.engineer)
    text = client.get(reverse("checks")).content.decode()
    assert "3 values, 2 methods" in text
    assert "from memory of the source, unverified" in text
    assert "−0.50 %" in text
    filtered = client.get(reverse("checks"), {"route": "quoted"}).content.decode()
    assert "1 values" not in filtered
    assert "Bulging factor" not in filtered
    client.force_login(world.users["recorder"])
    assert client.get(reverse("checks")).status_code == 403
