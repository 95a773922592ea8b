"""Which browser is driven, and how it is started."""

from __future__ import annotations

BROWSERS = ("chromium", "chromium-browser", "google-chrome")
FLAGS = ["--no-sandbox", "--disable-gpu", "--disable-background-networking"]
