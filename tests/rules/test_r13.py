"""R13: no regulated record is ever deleted.

Basis: company practice, from the record-keeping duties of M.A.305 and 14 CFR 91.417
(records are kept, corrected by further records, and transferred with the aircraft).
"""

from __future__ import annotations

import ast
from pathlib import Path

import pytest
from django.apps import apps
from django.conf import settings
from django.db import models
from django.db.models import ProtectedError

from fleet.digests import guarded_tables
from tests.record_rows import found, world_make

ROOT = Path(settings.BASE_DIR)
SOURCES = sorted(
    path
    for app in ("fleet", "repairs", "reports")
    for path in (ROOT / app).rglob("*.py")
    if "migrations" not in path.parts
)
# What deletes rows of the database, and why it may.
MAY_DELETE = {
    "fleet/services/second_factor.py": "removes keys of devices, which are no records",
    "fleet/services/restoring.py": "empties the database that a backup replaces",
}
RAW = ("DELETE FROM ", "TRUNCATE ")
MEASURED_DECIDED_SIGNED = {
    "fleet_usagerecord",
    "repairs_accomplishment",
    "repairs_approval",
    "repairs_disposition",
    "repairs_evaluation",
    "repairs_measurement",
}


def test_every_key_protects_the_record_it_names():
    loose = [
        f"{model._meta.label}.{field.name}"
        for app in settings.RECORDED_APPS
        for model in apps.get_app_config(app).get_models()
        for field in model._meta.concrete_fields
        if field.is_relation and field.remote_field.on_delete is not models.PROTECT
    ]
    assert loose == []


def deletions(path: Path) -> list[str]:
    """Lines of a module that call `.delete()` or state that rows are removed."""
    tree = ast.parse(path.read_text(encoding="utf-8"))
    calls = [
        str(node.lineno)
        for node in ast.walk(tree)
        if isinstance(node, ast.Call)
        and isinstance(node.func, ast.Attribute)
        and node.func.attr in ("delete", "_raw_delete")
    ]
    texts = [
        str(node.lineno)
        for node in ast.walk(tree)
        if isinstance(node, ast.Constant)
        and isinstance(node.value, str)
        and node.value.startswith(RAW)
    ]
    return calls + texts


def test_the_program_holds_no_call_that_deletes_a_row():
    found_there = [
        f"{name}:{line}"
        for path in SOURCES
        if (name := path.relative_to(ROOT).as_posix()) not in MAY_DELETE
        for line in deletions(path)
    ]
    assert found_there == []


def test_the_search_for_deletions_sees_one(tmp_path):
    module = tmp_path / "module.py"
    module.write_text('rows.delete()\ncursor.execute("DELETE FROM x")\n')
    assert deletions(module) == ["1", "2"]


def test_what_was_measured_decided_done_or_signed_is_guarded_by_triggers():
    assert guarded_tables().keys() >= MEASURED_DECIDED_SIGNED


@pytest.mark.django_db
def test_a_record_that_others_name_cannot_be_deleted_even_from_the_shell():
    finding = found(world_make())
    with pytest.raises(ProtectedError):
        finding.aircraft.delete()
    with pytest.raises(ProtectedError):
        finding.delete()
