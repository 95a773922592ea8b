"""Records are written by `Writing` and nothing else, so that none escapes the history.

Reads the program's own source: every call that writes rows, wherever it stands.
"""

from __future__ import annotations

import ast
from pathlib import Path

from django.conf import settings

ROOT = Path(settings.BASE_DIR)
WRITES = frozenset(
    {
        "abulk_create",
        "acreate",
        "asave",
        "bulk_create",
        "bulk_update",
        "get_or_create",
        "save",
        "save_base",
        "update_or_create",
    }
)
# Words that are also methods of sets, dictionaries, pictures and `Writing` itself.
ON_ROWS = frozenset({"create", "update", "delete"})
ROW_SOURCES = frozenset({"objects", "_default_manager", "_base_manager"})
# Module and call, with the reason why it may write past the history.
MAY_WRITE = {
    "fleet/services/history.py": "is the history's one writer",
    "fleet/services/numbers.py": "record numbers, checked by their uniqueness",
    "fleet/services/seals.py": "a seal stands outside the history it seals",
    "fleet/services/sending.py": "sent forms point at the entry they made",
    "fleet/services/restoring.py": "puts back rows together with their history",
    "fleet/services/second_factor.py": "keys of devices, no records; the user's is one",
    "repairs/services/recalculation_parts.py": "a worker's hold on a share",
    "fleet/services/documents.py:save": "saves a picture, not a row",
}


def row_writes(source: str) -> list[tuple[int, str]]:
    """Line and name of every call that writes rows past `Writing`."""
    found = []
    for node in ast.walk(ast.parse(source)):
        if not (isinstance(node, ast.Call) and isinstance(node.func, ast.Attribute)):
            continue
        name = node.func.attr
        if name in WRITES or (name in ON_ROWS and _on_rows(node.func.value)):
            found.append((node.lineno, name))
    return found


def _on_rows(value: ast.expr) -> bool:
    """Whether the expression goes through a manager, or filters rows."""
    return any(
        isinstance(node, ast.Attribute)
        and node.attr in ROW_SOURCES | {"filter", "exclude", "all"}
        for node in ast.walk(value)
    )


def test_no_module_but_the_named_ones_writes_rows():
    past = []
    for app in ("fleet", "repairs", "reports"):
        for path in sorted((ROOT / app).rglob("*.py")):
            name = path.relative_to(ROOT).as_posix()
            if "migrations" in path.parts or name in MAY_WRITE:
                continue
            past += [
                f"{name}:{line} {call}"
                for line, call in row_writes(path.read_text(encoding="utf-8"))
                if f"{name}:{call}" not in MAY_WRITE
            ]
    assert past == []


def test_every_exception_is_still_needed():
    for name in MAY_WRITE:
        path = ROOT / name.partition(":")[0]
        assert row_writes(path.read_text(encoding="utf-8")) or "cursor" in (
            path.read_text(encoding="utf-8")
        ), name


def test_the_search_sees_every_way_of_writing_rows():
    ways = (
        "row.save()",
        "Model.objects.create(a=1)",
        "Model.objects.filter(a=1).update(a=2)",
        "operator.findings.all().delete()",
        "Model._default_manager.bulk_create(rows)",
        "Model.objects.select_for_update().get_or_create(a=1)",
    )
    for way in ways:
        assert row_writes(way), way
    for harmless in ("known.update(a=1)", "w.create(row)", "seen.add(1)"):
        assert row_writes(harmless) == [], harmless
