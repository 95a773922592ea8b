"""A migration step that changes a column together with the check on it."""

from __future__ import annotations

from typing import Any

from django.db.migrations.operations import AlterField


class AlterChecked(AlterField):
    """Change a `Word`, `Count` or `Measure` and the words or bounds of its check.

    Django alters the checks of its own kinds of columns only. SQLite builds the table
    anew and so gets the new check by itself; PostgreSQL would keep the old one.
    """

    def database_forwards(
        self, app_label: str, schema_editor: Any, from_state: Any, to_state: Any
    ) -> None:
        super().database_forwards(app_label, schema_editor, from_state, to_state)
        connection = schema_editor.connection
        model = to_state.apps.get_model(app_label, self.model_name)
        if connection.vendor != "postgresql" or not self.allow_migrate_model(
            connection.alias, model
        ):
            return
        field = model._meta.get_field(self.name)
        table, column = model._meta.db_table, field.column
        named = [rule.name for rule in model._meta.constraints]
        for name in schema_editor._constraint_names(
            model, [column], check=True, exclude=named
        ):
            schema_editor.execute(schema_editor._delete_check_sql(model, name))
        schema_editor.execute(
            schema_editor._create_check_sql(
                model, f"{table}_{column}_check", field.db_check(connection)
            )
        )
