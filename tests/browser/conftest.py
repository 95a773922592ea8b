"""A real browser against a real server on a database of its own."""

from __future__ import annotations

import hashlib
import json
import os
import shutil
import socket
import subprocess
import sys
import tarfile
import time
import urllib.error
import urllib.request
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any, NoReturn

import pytest

from tests.browser.chromium import BROWSERS, FLAGS
from tests.factories import PASSWORD, TODAY

ROOT = Path(__file__).parents[2]
AXE = "axe-core@4.14.1"
AXE_SHA256 = "e6b0ce02b84d892e2e33e403485e7f3d6c29e2be6df65daf44d89ba564139745"
START_SECONDS = 60


@dataclass(frozen=True)
class Visit:
    """One page to look at, and as whom."""

    name: str
    role: str
    address: str


@dataclass(frozen=True)
class Site:
    """The running server and what it serves."""

    origin: str
    visits: dict[str, Visit]


def pytest_collection_modifyitems(items: list[pytest.Item]) -> None:
    here = Path(__file__).parent
    for item in items:
        if here in item.path.parents:
            item.add_marker(pytest.mark.browser)


def go_without(reason: str) -> NoReturn:
    """Skip with the reason, or fail where everything is required to run."""
    if os.environ.get("FRAMEBAY_REQUIRE_ALL") == "1":
        pytest.fail(reason)
    pytest.skip(reason)


@pytest.fixture(scope="session")
def site(tmp_path_factory: pytest.TempPathFactory) -> Iterator[Site]:
    """The site with one of each record, served by a process of its own."""
    data = tmp_path_factory.mktemp("browser")
    environment = os.environ | {
        "FRAMEBAY_DATA": str(data),
        "FRAMEBAY_TODAY": TODAY.isoformat(),
        "DATABASE_URL": f"sqlite:///{data / 'framebay.sqlite3'}",
        "DJANGO_SETTINGS_MODULE": "fleet.site.settings",
    }
    filled = subprocess.run(
        [sys.executable, "-m", "tests.browser.world"],
        cwd=ROOT,
        env=environment,
        capture_output=True,
        text=True,
        check=False,
    )
    assert filled.returncode == 0, filled.stderr[-2_000:]
    visits = [Visit(**one) for one in json.loads(filled.stdout.splitlines()[-1])]
    origin = f"http://127.0.0.1:{_free_port()}"
    log = data / "server.log"
    with log.open("w") as said:
        server = subprocess.Popen(
            [sys.executable, "manage.py", "runserver", "--noreload", origin[7:]],
            cwd=ROOT,
            env=environment,
            stdout=said,
            stderr=said,
        )
    try:
        _await(origin, server, log)
        yield Site(origin, {visit.name: visit for visit in visits})
    finally:
        server.terminate()
        server.wait(10)


def _free_port() -> int:
    with socket.socket() as one:
        one.bind(("127.0.0.1", 0))
        port: int = one.getsockname()[1]
        return port


def _await(origin: str, server: subprocess.Popen[bytes], log: Path) -> None:
    until = time.monotonic() + START_SECONDS
    while time.monotonic() < until and server.poll() is None:
        try:
            urllib.request.urlopen(f"{origin}/sign-in/", timeout=5)
        except (urllib.error.URLError, ConnectionError, TimeoutError):
            time.sleep(0.2)
        else:
            return
    pytest.fail(f"the server did not start:\n{log.read_text()[-2_000:]}")


@pytest.fixture(scope="module")
def chromium() -> Iterator[Any]:
    """A browser found on the machine; nothing is downloaded.

    For a module only: its event loop keeps other tests from the database.
    """
    try:
        from playwright.sync_api import sync_playwright
    except ImportError:
        go_without("playwright is not installed")
    found = next(filter(None, map(shutil.which, BROWSERS)), None)
    if found is None:
        go_without(f"no browser on the path: {', '.join(BROWSERS)}")
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=found, args=FLAGS)
        yield browser
        browser.close()


@pytest.fixture(scope="module")
def signed_in(site: Site, chromium: Any) -> Callable[[str], Any]:
    """Cookies of a role, from signing in through the form once."""
    kept: dict[str, Any] = {}

    def cookies(role: str) -> Any:
        if role not in kept:
            with chromium.new_context() as context:
                page = context.new_page()
                page.goto(f"{site.origin}/sign-in/")
                page.get_by_label("Username").fill(role)
                page.get_by_label("Password").fill(PASSWORD)
                page.get_by_role("button", name="Sign in").click()
                page.wait_for_url(f"{site.origin}/")
                kept[role] = context.storage_state()
        return kept[role]

    return cookies


@pytest.fixture(scope="session")
def axe(pytestconfig: pytest.Config) -> str:
    """The accessibility checker's script: fetched once, pinned, for tests only."""
    assert pytestconfig.cache is not None
    directory = pytestconfig.cache.mkdir("axe")
    package = directory / f"{AXE.replace('@', '-')}.tgz"
    if not package.exists():
        _fetch(directory)
    digest = hashlib.sha256(package.read_bytes()).hexdigest()
    assert digest == AXE_SHA256, f"{package.name} is not the package that was pinned"
    with tarfile.open(package) as archive:
        script = archive.extractfile("package/axe.min.js")
        assert script is not None
        return script.read().decode()


def _fetch(directory: Path) -> None:
    npm = shutil.which("npm")
    if npm is None:
        go_without(f"{AXE} could not be fetched: npm is not installed")
    try:
        done = subprocess.run(
            [npm, "pack", AXE, "--silent", "--pack-destination", str(directory)],
            cwd=directory,
            capture_output=True,
            text=True,
            timeout=120,
            check=False,
        )
    except subprocess.TimeoutExpired:
        go_without(f"{AXE} could not be fetched within 120 s")
    if done.returncode:
        go_without(f"{AXE} could not be fetched: {done.stderr.strip()[-300:]}")
