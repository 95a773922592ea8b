"""Starting the site or a command must not wait for what few calculations use."""

from __future__ import annotations

import subprocess
import sys

import pytest

from tests.bench.throwaway import ROOT

START = """
import os, sys
os.environ["DJANGO_SETTINGS_MODULE"] = "fleet.site.settings"
import django
django.setup()
from django.urls import get_resolver
get_resolver().url_patterns
import repairs.management.commands.reevaluate
print(sorted({"numba", "llvmlite", "matplotlib", "pandas"} & set(sys.modules)))
"""


@pytest.mark.parametrize("jit", ["0", "1"])
def test_no_compiler_and_no_drawing_library_is_imported_at_start(jit, tmp_path):
    environment = {"FRAMEBAY_DATA": str(tmp_path), "NUMBA_DISABLE_JIT": jit}
    told = subprocess.run(
        [sys.executable, "-c", START],
        cwd=ROOT,
        env=environment,
        check=True,
        capture_output=True,
        text=True,
    )
    assert told.stdout.strip() == "[]"
