"""The list of evaluations that want a person, and its counts."""

from __future__ import annotations

import itertools

import pytest

from fleet.services.history import Writing
from repairs.models import Approval, Evaluation
from repairs.selectors.evaluation_list import evaluation_counts, evaluations_open
from tests.factories import NOW, authorise, operator_make, user_make
from tests.placed_rows import finding_make, fleet_make
from tests.queries import assert_same_queries

pytestmark = pytest.mark.django_db
_number = itertools.count(1)


@pytest.fixture
def fleet():
    return fleet_make()


@pytest.fixture
def engineer(fleet):
    return user_make(fleet.operator, "engineer")


@pytest.fixture
def evaluated(fleet):
    """An evaluation of a new finding in a state."""

    def made(state="reported", outcome="computed", **columns) -> Evaluation:
        finding = finding_make(
            fleet.placing,
            fleet.aircraft["Q7-AAA"],
            x=(1e4, 1e4),
            s=(0.0, 1.0),
            state=state,
        )
        texts = ("inputs", "outputs", "applicability", "note", "libraries")
        row = Evaluation(
            operator=fleet.operator,
            number=f"E-{next(_number):04d}",
            outcome=outcome,
            use="found_damage",
            method_version=1,
            schema_version=1,
            content_digest="d1",
            ultimate_kept="not_shown",
            source_from_memory=False,
            **dict.fromkeys(texts, "{}"),
            **{"finding": finding} | columns,
        )
        with Writing(actor=None, action="evaluation_make", at=NOW) as w:
            return w.create(row)

    return made


@pytest.fixture
def sign(fleet, engineer):
    authorisation = authorise(engineer.person, fleet.operator, "check")

    def signed(evaluation: Evaluation, meaning: str) -> None:
        with Writing(actor=engineer, action="approval_sign", at=NOW) as w:
            w.create(
                Approval(
                    operator=fleet.operator,
                    evaluation=evaluation,
                    meaning=meaning,
                    statement="as shown",
                    content="content",
                    content_digest=evaluation.content_digest,
                    signer=engineer,
                    signer_person=engineer.person,
                    signer_name=str(engineer),
                    authorisation=authorisation,
                    authorisation_number=authorisation.number,
                    signed_at=NOW,
                )
            )

    return signed


def test_each_stands_where_its_signatures_put_it(evaluated, sign, engineer):
    evaluated()
    sign(evaluated(), "checked")
    sign(evaluated(), "approved")
    evaluated(outcome="not_covered")
    counts = {"unchecked": 1, "checked": 1, "engineer": 1}
    assert evaluation_counts(engineer) == counts
    for standing, count in counts.items():
        assert evaluations_open(engineer, standing).count() == count
    assert evaluations_open(engineer).count() == 3


def test_a_rejected_one_is_unchecked_again(evaluated, sign, engineer):
    row = evaluated()
    sign(row, "checked")
    sign(row, "rejected")
    assert list(evaluations_open(engineer, "unchecked")) == [row]


def test_damage_that_is_gone_or_decided_asks_no_engineer(evaluated, engineer):
    for state in ("closed", "voided", "duplicate"):
        evaluated(state)
    evaluated("accepted", outcome="not_covered")
    assert evaluation_counts(engineer) == {"unchecked": 0, "checked": 0, "engineer": 0}


def test_one_that_was_replaced_is_not_listed(evaluated, engineer):
    first = evaluated()
    second = evaluated(finding=first.finding, replaces=first)
    assert list(evaluations_open(engineer)) == [second]


def test_the_page_shows_what_was_asked_for(client, evaluated, engineer):
    computed, uncovered = evaluated(), evaluated(outcome="not_covered")
    client.force_login(engineer)
    text = client.get("/evaluations/?standing=engineer").content.decode()
    assert uncovered.number in text
    assert computed.number not in text
    assert "unapproved calculation" in text


def test_another_operators_evaluations_are_not_listed(client, evaluated):
    row = evaluated()
    client.force_login(user_make(operator_make("OTH", "Other Air"), "engineer", "x"))
    text = client.get("/evaluations/").content.decode()
    assert row.number not in text
    assert "No evaluation waits here" in text


def test_the_page_costs_the_same_for_more(client, evaluated, engineer):
    client.force_login(engineer)
    evaluated()
    assert_same_queries(
        client, "/evaluations/", lambda: [evaluated() for _ in range(5)], ceiling=8
    )
