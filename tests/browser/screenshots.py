"""Draw the README's pictures from the demo that is being served.

python manage.py demo --serve        in one terminal
python -m tests.browser.screenshots  in another
"""

from __future__ import annotations

import shutil
from pathlib import Path
from urllib.parse import urlencode

from playwright.sync_api import Page, sync_playwright

from reports.demo.people import PASSWORD
from tests.browser.chromium import BROWSERS, FLAGS

ORIGIN = "http://127.0.0.1:8000"
FOLDER = Path(__file__).parents[2] / "fixtures" / "screenshots"
WIDE = {"width": 1280, "height": 1000}
CRACK = "STA 650, 3.9 in below S-14L"  # as the demo writes it; numbers may change


def pictures(page: Page) -> None:
    page.goto(f"{ORIGIN}/sign-in/")
    page.fill("[name=username]", "engineer")
    page.fill("[name=password]", PASSWORD)
    page.click("main button")
    for name, address in (("due", "/due/"), ("density", "/density/")):
        page.goto(ORIGIN + address)
        page.screenshot(path=FOLDER / f"{name}.png")
    page.goto(f"{ORIGIN}/findings/?{urlencode({'text': CRACK})}")
    page.click("main tbody a")
    page.screenshot(path=FOLDER / "finding.png")


def main() -> None:
    path = next(found for name in BROWSERS if (found := shutil.which(name)))
    FOLDER.mkdir(exist_ok=True)
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=path, args=FLAGS)
        pictures(browser.new_page(viewport=WIDE))
        browser.close()


if __name__ == "__main__":
    main()
