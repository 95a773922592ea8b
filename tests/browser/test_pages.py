"""Every page in a real browser: quiet, inside its width, readable, printable."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from typing import Any

import pytest

from tests.site_pages import FORM, PAGES, READ

LOOKED_AT = [n for n, p in PAGES.items() if p.kind in (FORM, READ) and p.looks]
DESK, PHONE = "desk", "phone in the dark"
SCREENS = {
    DESK: {"viewport": {"width": 1280, "height": 900}, "color_scheme": "light"},
    PHONE: {"viewport": {"width": 390, "height": 844}, "color_scheme": "dark"},
}
TOO_WIDE = """() => {
  const wide = document.documentElement.clientWidth;
  if (document.documentElement.scrollWidth <= wide) return [];
  const scrolls = e => e && (getComputedStyle(e).overflowX !== 'visible' ||
    scrolls(e.parentElement));
  return [...document.querySelectorAll('body *')]
    .filter(e => e.getBoundingClientRect().right > wide + 1)
    .filter(e => !scrolls(e.parentElement))
    .slice(0, 4).map(e => e.outerHTML.slice(0, 160));
}"""
AXE_RUN = """() => axe.run(document, {resultTypes: ['violations']}).then(r =>
  r.violations.map(v => `${v.id}: ${v.help} ` +
    v.nodes.slice(0, 3).map(n => n.html.slice(0, 160)).join(' | ')))"""


@contextmanager
def opened(
    chromium: Any, state: Any, origin: str, address: str, screen: Any
) -> Iterator[Any]:
    """The page; whatever the browser complained about fails the test at the end."""
    said: list[str] = []
    with chromium.new_context(storage_state=state, **screen) as context:
        page = context.new_page()
        page.on("console", lambda m: said.append(m.text) if m.type == "error" else None)
        page.on("pageerror", lambda error: said.append(str(error)))
        answer = page.goto(f"{origin}{address}")
        assert answer.status == 200, address
        yield page
        assert said == [], address


@pytest.mark.parametrize("screen", SCREENS)
@pytest.mark.parametrize("name", LOOKED_AT)
def test_a_page_is_quiet_fits_is_accessible_and_prints(
    name, screen, site, chromium, signed_in, axe
):
    visit = site.visits[name]
    state = signed_in(visit.role)
    with opened(chromium, state, site.origin, visit.address, SCREENS[screen]) as page:
        assert page.evaluate(TOO_WIDE) == []
        page.evaluate(axe)
        assert page.evaluate(AXE_RUN) == []
        if screen == DESK:
            prints(page)


def prints(page: Any) -> None:
    """On paper there is no navigation, and there is something to read."""
    page.emulate_media(media="print")
    assert not page.locator("header.top").is_visible()
    assert page.locator("h1").first.is_visible()
    printed = page.pdf()
    assert printed.startswith(b"%PDF-")
    assert len(printed) > 5_000


def test_signing_in_is_accessible_and_says_what_went_wrong(site, chromium, axe):
    screen = SCREENS[PHONE]
    with opened(chromium, None, site.origin, "/sign-in/", screen) as page:
        page.evaluate(axe)
        assert page.evaluate(AXE_RUN) == []
        page.get_by_label("Username").fill("nobody")
        page.get_by_label("Password").fill("nothing")
        page.get_by_role("button", name="Sign in").click()
        assert page.get_by_role("alert").is_visible()
