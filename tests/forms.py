"""The forms of a page as a browser would send them back."""

from __future__ import annotations

from html.parser import HTMLParser
from typing import Any

from django.test import Client


class Forms(HTMLParser):
    """`posted` holds, for each form that is posted, its address and its fields."""

    def __init__(self, html: str) -> None:
        super().__init__()
        self.posted: list[tuple[str, dict[str, Any]]] = []
        self._fields: dict[str, Any] | None = None
        self._select = self._text = ""
        self.feed(html)

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        has = dict(attrs)
        if tag == "form":
            self._fields = {} if has.get("method") == "post" else None
            if self._fields is not None:
                self.posted.append((has.get("action") or "", self._fields))
        if self._fields is None:
            return
        name = has.get("name") or ""
        if tag == "select":
            self._select = name
        elif tag == "option" and self._select:
            if "selected" in has or self._select not in self._fields:
                self._fields[self._select] = has.get("value") or ""
        elif tag == "textarea":
            self._text, self._fields[name] = name, ""
        elif tag == "input" and name and has.get("type") != "file":
            ticked = has.get("type") not in ("checkbox", "radio") or "checked" in has
            if ticked:
                self._fields[name] = has.get("value") or ""

    def handle_endtag(self, tag: str) -> None:
        if tag == "form":
            self._fields = None
        elif tag == "select":
            self._select = ""
        elif tag == "textarea":
            self._text = ""

    def handle_data(self, data: str) -> None:
        if self._text and self._fields is not None:
            self._fields[self._text] += data.removeprefix("\n")


def form_on(client: Client, address: str, which: int = 0) -> dict[str, Any]:
    """The fields of a posted form of the page; the sign-out form is not counted."""
    answer = client.get(address)
    assert answer.status_code == 200, (address, answer.status_code)
    return form_in(answer, which)


def form_in(answer: Any, which: int = 0) -> dict[str, Any]:
    posted = Forms(answer.content.decode()).posted
    return [fields for action, fields in posted if action != "/sign-out/"][which]
