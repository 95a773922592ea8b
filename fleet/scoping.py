"""Which rows a person may see: those of the operators they belong to."""

from __future__ import annotations

from functools import reduce
from operator import or_
from typing import TYPE_CHECKING, Any, Self

from django.db.models import Q, QuerySet

if TYPE_CHECKING:
    from fleet.models import User


class ScopedQuerySet(QuerySet[Any]):
    """Rows reached from an operator by one of the model's `operator_paths`."""

    def visible_to(self, user: User) -> Self:
        """Rows of the operators whose member `user` is today; no query of its own."""
        if user.sees_all_operators:
            return self
        operators = user.operator_ids()
        paths = self.model.operator_paths
        return self.filter(
            reduce(or_, (Q(**{f"{path}__in": operators}) for path in paths))
        )

    def of_operator(self, operator_id: int) -> Self:
        paths = self.model.operator_paths
        return self.filter(reduce(or_, (Q(**{path: operator_id}) for path in paths)))
