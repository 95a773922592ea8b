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


def definitions(vendor: str, table: str, key: str = "id") -> dict[str, str]:
    """Name of each trigger of the table to the statement that makes it."""
    message = MESSAGE.format(table=table)
    return {
        f"{table}_{rule}": f"CREATE TRIGGER {table}_{rule} "
        + body.format(table=table, message=message, key=key)
        for rule, body in statements(vendor).items()
    }


def triggers_install(connection: Any, tables: dict[str, str]) -> None:
    """Put the triggers on the tables, each named with its key column."""
    with connection.cursor() as cursor:
        if connection.vendor == "postgresql":
            cursor.execute(POSTGRESQL_FUNCTION)
        for table, key in tables.items():
            for sql in definitions(connection.vendor, table, key).values():
                cursor.execute(sql)


def triggers_remove(connection: Any, tables: Iterable[str]) -> None:
    on_table = connection.vendor == "postgresql"
    with connection.cursor() as cursor:
        for table in tables:
            for rule in statements(connection.vendor):
                suffix = f" ON {table}" if on_table else ""
                cursor.execute(f"DROP TRIGGER IF EXISTS {table}_{rule}{suffix}")


def triggers_at_work(connection: Any, tables: dict[str, str]) -> set[str]:
    """Names of the triggers that are there, switched on and say what they should."""
    with connection.cursor() as cursor:
        if connection.vendor == "postgresql":
            cursor.execute(
                "SELECT tgname FROM pg_trigger JOIN pg_proc ON pg_proc.oid = tgfoid "
                "WHERE tgenabled IN ('O', 'A') AND tgqual IS NULL "
                "AND proname = 'fleet_refuse_change' "
                "AND strpos(%s, prosrc) > 0",
                [POSTGRESQL_FUNCTION],
            )
            return {name for (name,) in cursor.fetchall()}
        cursor.execute("SELECT name, sql FROM sqlite_master WHERE type = 'trigger'")
        present = set(cursor.fetchall())
    expected = (
        made
        for table, key in tables.items()
        for made in definitions(connection.vendor, table, key).items()
    )
    return {name for name, sql in expected if (name, sql) in present}


def installer(
    tables: Iterable[str], keys: dict[str, str] | None = None
) -> Callable[[Any, Any], None]:
    """A migration step that puts the triggers on `tables`."""

    def install(apps: Any, schema_editor: Any) -> None:
        keyed = {table: (keys or {}).get(table, "id") for table in tables}
        triggers_install(schema_editor.connection, keyed)

    return install


def remover(tables: Iterable[str]) -> Callable[[Any, Any], None]:
    """The reverse step."""

    def remove(apps: Any, schema_editor: Any) -> None:
        triggers_remove(schema_editor.connection, tables)

    return remove
