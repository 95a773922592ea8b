"""A migration step that makes many tables at once."""

from __future__ import annotations

from typing import Any

from django.db.migrations.operations import CreateModel
from django.db.migrations.operations.base import Operation


class CreateTables(Operation):
    """All tables of an app in one step, each with its constraints and indexes.

    Step by step, Django renders the state of all models anew after each table, and
    SQLite rebuilds a table for each constraint added later, at every first start and
    every test run. Here the state is rendered once. Foreign keys may point to tables
    further down the list.
    """

    reduces_to_sql = True
    reversible = True

    def __init__(self, tables: list[CreateModel]) -> None:
        self.tables = tables

    def deconstruct(self) -> tuple[str, list[Any], dict[str, Any]]:
        return type(self).__name__, [], {"tables": self.tables}

    def state_forwards(self, app_label: str, state: Any) -> None:
        state.__dict__.pop("apps", None)  # rendered anew when next asked for, once
        for table in self.tables:
            table.state_forwards(app_label, state)

    def database_forwards(
        self, app_label: str, schema_editor: Any, from_state: Any, to_state: Any
    ) -> None:
        for table in self.tables:
            model = to_state.apps.get_model(app_label, table.name)
            if self.allow_migrate_model(schema_editor.connection.alias, model):
                schema_editor.create_model(model)

    def database_backwards(
        self, app_label: str, schema_editor: Any, from_state: Any, to_state: Any
    ) -> None:
        for table in reversed(self.tables):
            model = from_state.apps.get_model(app_label, table.name)
            if self.allow_migrate_model(schema_editor.connection.alias, model):
                schema_editor.delete_model(model)

    def describe(self) -> str:
        return f"Create {len(self.tables)} tables"
