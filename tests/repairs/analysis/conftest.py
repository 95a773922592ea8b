"""A run of this whole folder compares or writes the file of outside checks."""

from __future__ import annotations

from pathlib import Path

import pytest

from tests.outside import FILE, difference, kept_text

HERE = Path(__file__).parent
STALE = (
    "\n{file} is not what this run computed: {what}.\n"
    "Write it anew: python -m pytest tests/repairs/analysis --record-outside"
)


def _whole(config: pytest.Config) -> bool:
    """Whether every test of this folder was asked for."""
    narrowed = config.option.keyword or config.option.markexpr or config.option.lf
    roots = [Path(arg.split("::")[0]).resolve() for arg in config.args]
    return not narrowed and any(
        root == HERE or root in HERE.parents for root in roots if root.is_dir()
    )


@pytest.hookimpl(trylast=True)
def pytest_sessionfinish(session: pytest.Session, exitstatus: int) -> None:
    if exitstatus != 0 or not _whole(session.config):
        return
    if session.config.getoption("--record-outside"):
        FILE.write_text(kept_text())
    elif what := difference():
        print(STALE.format(file=FILE.name, what=what))
        session.exitstatus = pytest.ExitCode.TESTS_FAILED
