"""Database triggers that refuse to change or remove rows of append-only tables.

On SQLite a third trigger stops `INSERT OR REPLACE`, which would bypass the other two.
A migration that rebuilds an append-only table must end by installing them again.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from typing import Any

MESSAGE = "rows of {table} are never changed or removed; add a new row"

SQLITE = {
    "no_update": "BEFORE UPDATE ON {table} BEGIN SELECT RAISE(ABORT, '{message}'); END",
    "no_delete": "BEFORE DELETE ON {table} BEGIN SELECT RAISE(ABORT, '{message}'); END",
    "no_replace": (
        "BEFORE INSERT ON {table} "
        "WHEN EXISTS (SELECT 1 FROM {table} WHERE {key} = NEW.{key}) "
        "BEGIN SELECT RAISE(ABORT, '{message}'); END"
    ),
}
POSTGRESQL = {
    "no_change": (
        "BEFORE UPDATE OR DELETE ON {table} FOR EACH ROW "
        "EXECUTE FUNCTION fleet_refuse_change()"
    ),
    "no_truncate": (
        "BEFORE TRUNCATE ON {table} FOR EACH STATEMENT "
        "EXECUTE FUNCTION fleet_refuse_change()"
    ),
}
POSTGRESQL_FUNCTION = """
CREATE OR REPLACE FUNCTION fleet_refuse_change() RETURNS trigger AS $$
BEGIN
    RAISE EXCEPTION 'rows of % are never changed or removed; add a new row',
        TG_TABLE_NAME USING ERRCODE = 'integrity_constraint_violation';
END $$ LANGUAGE plpgsql
"""


def statements(vendor: str) -> dict[str, str]:
    return POSTGRESQL if vendor == "postgresql" else SQLITE


def trigger_names(vendor: str, tables: Iterable[str]) -> set[str]:
    return {f"{table}_{rule}" for table in tables for rule in statements(vendor)}


def installer(
    tables: Iterable[str], keys: dict[str, str] | None = None
) -> Callable[[Any, Any], None]:
    """A migration step that puts the triggers on `tables`."""

    def install(apps: Any, schema_editor: Any) -> None:
        connection = schema_editor.connection
        with connection.cursor() as cursor:
            if connection.vendor == "postgresql":
                cursor.execute(POSTGRESQL_FUNCTION)
            for table in tables:
                for rule, body in statements(connection.vendor).items():
                    text = body.format(
                        table=table,
                        message=MESSAGE.format(table=table),
                        key=(keys or {}).get(table, "id"),
                    )
                    cursor.execute(f"CREATE TRIGGER {table}_{rule} {text}")

    return install


def remover(tables: Iterable[str]) -> Callable[[Any, Any], None]:
    """The reverse step."""

    def remove(apps: Any, schema_editor: Any) -> None:
        connection = schema_editor.connection
        on_table = connection.vendor == "postgresql"
        with connection.cursor() as cursor:
            for table in tables:
                for rule in statements(connection.vendor):
                    suffix = f" ON {table}" if on_table else ""
                    cursor.execute(f"DROP TRIGGER {table}_{rule}{suffix}")

    return remove
