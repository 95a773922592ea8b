"""Constraints that span columns, named `<table>_<rule>`."""

from __future__ import annotations

from collections.abc import Sequence
from functools import reduce
from operator import and_, or_

from django.db.models import CheckConstraint, F, Q, UniqueConstraint


def check(table: str, rule: str, condition: Q, message: str) -> CheckConstraint:
    return CheckConstraint(
        name=f"{table}_{rule}", condition=condition, violation_error_message=message
    )


def unique(
    table: str, rule: str, *fields: str, when: Q | None = None
) -> UniqueConstraint:
    return UniqueConstraint(fields=fields, name=f"{table}_{rule}", condition=when)


def exactly_one(table: str, rule: str, *fields: str) -> CheckConstraint:
    """Of several possible parents, one and only one is named."""
    options = [_only(field, fields) for field in fields]
    listed = ", ".join(fields)
    return check(table, rule, reduce(or_, options), f"Name exactly one of: {listed}.")


def at_most_one(table: str, rule: str, *fields: str) -> CheckConstraint:
    none = reduce(and_, (Q(**{f"{field}__isnull": True}) for field in fields))
    options = [_only(field, fields) for field in fields]
    listed = ", ".join(fields)
    return check(
        table, rule, reduce(or_, options, none), f"Name at most one of: {listed}."
    )


def all_or_none(table: str, rule: str, *fields: str) -> CheckConstraint:
    """Several columns that only make sense together."""
    given = reduce(and_, (Q(**{f"{field}__isnull": False}) for field in fields))
    missing = reduce(and_, (Q(**{f"{field}__isnull": True}) for field in fields))
    listed = ", ".join(fields)
    return check(table, rule, given | missing, f"Give all of {listed}, or none.")


def not_before(table: str, rule: str, later: str, earlier: str) -> CheckConstraint:
    """`later` is not below `earlier`; an unknown one passes."""
    return check(
        table,
        rule,
        Q(**{f"{later}__gte": F(earlier)}) | Q(**{f"{later}__isnull": True}),
        f"{later.replace('_', ' ')} lies before {earlier.replace('_', ' ')}.",
    )


def has_text(table: str, field: str) -> CheckConstraint:
    return check(table, f"has_{field}", ~Q(**{field: ""}), f"Give the {field}.")


def _only(field: str, fields: Sequence[str]) -> Q:
    return reduce(and_, (Q(**{f"{name}__isnull": name != field}) for name in fields))
