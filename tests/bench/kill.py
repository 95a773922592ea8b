"""Kill the server or the database in the middle of writing, many times, and look.

python -m tests.bench.kill [--times 200] [--server postgres://...] [--crash]

Two people send findings with a photograph over HTTP while, at a random instant, the
server's process is killed (SIGKILL); on PostgreSQL in turn also its database sessions
are ended, and with --crash one session's process is killed, upon which PostgreSQL ends
all of them and recovers: give that a server of its own. After each time: every finding
that was confirmed is there with its history, number, photograph and form key; nothing
is there by half; and a form that got no answer, sent again, is recorded exactly once.
"""

from __future__ import annotations

import argparse
import contextlib
import http.client
import io
import os
import random
import re
import signal
import socket
import sys
import threading
import time
import uuid
from collections import Counter
from dataclasses import dataclass, field
from socketserver import ThreadingMixIn
from typing import Any
from wsgiref.simple_server import WSGIRequestHandler, WSGIServer

from tests.bench.throwaway import close, throwaway

TODAY = "2025-01-01"
SECRET = "k" * 32
MEASURED = ("length", "width", "depth")
AIRCRAFT = 40
KNOWN = "Say for each earlier finding whether it is the same damage."
"""Answered to a finding near another one: nothing was recorded, nothing is wrong."""
FULL_EVERY = 25
"""Times between verifications of everything; between them, of what is new."""


@dataclass
class Sent:
    """One form: what it carries, and where the server said its finding is."""

    marker: str
    body: bytes
    led_to: str = ""
    asked: bool = False


@dataclass
class Tally:
    """What happened in all."""

    confirmed: int = 0
    unanswered: int = 0
    recorded_unanswered: int = 0
    recorded_again: int = 0
    asked: int = 0
    ways: Counter[str] = field(default_factory=Counter)
    wrong: list[str] = field(default_factory=list)


class Threaded(ThreadingMixIn, WSGIServer):
    daemon_threads = True


class Quiet(WSGIRequestHandler):
    def log_message(self, *_: Any) -> None:
        pass


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--times", type=int, default=200)
    parser.add_argument("--server", default="", help="a PostgreSQL server; else SQLite")
    parser.add_argument("--crash", action="store_true", help="kill a session's process")
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument(
        "--longest", type=float, default=0.8, help="seconds until it is killed, at most"
    )
    parser.add_argument(
        "--minutes", type=float, default=60, help="stop sooner after so many"
    )
    options = parser.parse_args()
    os.environ["FRAMEBAY_TODAY"] = TODAY
    with throwaway(options.server):
        import django

        django.setup()
        began, tally = time.monotonic(), Run(options).go()
    took = time.monotonic() - began
    print(
        f"{tally.ways.total()} kills ({dict(tally.ways)}) in {took:.0f} s: "
        f"{tally.confirmed} confirmed, {tally.unanswered} without an answer, of which "
        f"{tally.recorded_unanswered} had been recorded whole and "
        f"{tally.recorded_again} were when sent again, {tally.asked} asked back; "
        f"{len(tally.wrong)} wrong"
    )
    for told in tally.wrong:
        print(" ", told)
    sys.exit(1 if tally.wrong else 0)


class Run:
    """The world, and one kill after another."""

    def __init__(self, options: argparse.Namespace) -> None:
        from django.conf import settings

        from tests.factories import aircraft_make
        from tests.record_rows import world_make

        settings.PASSWORD_HASHERS = ["django.contrib.auth.hashers.MD5PasswordHasher"]
        self.options, self.chance = options, random.Random(options.seed)
        self.world, self.tally = world_make(), Tally()
        self.aircraft = [
            aircraft_make(self.world.operator, self.world.variant, f"Q7-{n:03d}").pk
            for n in range(AIRCRAFT)
        ]
        self.form, self.cookie = self._form()
        with socket.create_server(("127.0.0.1", 0)) as free:
            self.port = free.getsockname()[1]
        self.verified = 0
        self.ways = ["server"]
        if options.server:
            self.ways += ["sessions ended"] + ["database crash"] * options.crash

    def go(self) -> Tally:
        unanswered: list[Sent] = []
        last = time.monotonic() + 60 * self.options.minutes
        for n in range(self.options.times):
            if time.monotonic() > last:
                break
            way = self.ways[n % len(self.ways)]
            unanswered = self._once(way, unanswered)
            self.tally.ways[way] += 1
            if n % FULL_EVERY == 0:
                self._verify_all()
                print(f"  {n + 1}: {self.tally.confirmed} confirmed", file=sys.stderr)
        self._verify_all()
        return self.tally

    def _once(self, way: str, again: list[Sent]) -> list[Sent]:
        """Start, write, kill, look; returns the forms that got no answer."""
        close()
        server = os.fork()
        if server == 0:
            self._serve()
        self._await()
        before = [sent for sent in again if self._recorded(sent.marker)]
        self.tally.recorded_unanswered += len(before)
        for sent in again:
            self._send(sent)
            count = self._recorded(sent.marker)
            if sent.led_to and count != 1:
                self.tally.wrong.append(f"{sent.marker} sent again: {count} records")
        self.tally.recorded_again += len(
            [sent for sent in again if sent.led_to and sent not in before]
        )
        lost = [sent for sent in again if not (sent.led_to or sent.asked)]
        ended, sent_forms = threading.Event(), list[Sent]()
        people = [
            threading.Thread(target=self._person, args=(ended, sent_forms))
            for _ in range(2)
        ]
        for person in people:
            person.start()
        time.sleep(self.chance.uniform(0.0, self.options.longest))
        self._kill(way, server)
        ended.set()
        os.kill(server, signal.SIGKILL)
        os.waitpid(server, 0)
        for person in people:
            person.join()
        self._look([sent for sent in sent_forms if sent.led_to])
        unanswered = [s for s in sent_forms if not (s.led_to or s.asked)]
        self.tally.unanswered += len(unanswered)
        return unanswered + lost

    def _serve(self) -> None:
        from fleet.site.wsgi import application

        os.dup2(os.open(os.devnull, os.O_WRONLY), 2)
        httpd = Threaded(("127.0.0.1", self.port), Quiet)
        httpd.set_app(application)
        httpd.serve_forever(poll_interval=0.02)

    def _await(self) -> None:
        for _ in range(1_000):
            with contextlib.suppress(OSError):
                socket.create_connection(("127.0.0.1", self.port)).close()
                return
            time.sleep(0.01)

    def _kill(self, way: str, server: int) -> None:
        if way == "server":
            os.kill(server, signal.SIGKILL)
            return
        import psycopg

        with psycopg.connect(self.options.server, autocommit=True) as connection:
            sessions = connection.execute(
                "SELECT pid FROM pg_stat_activity WHERE datname = %s",
                [os.environ["DATABASE_URL"].rsplit("/", 1)[1]],
            ).fetchall()
            for (pid,) in sessions if way == "sessions ended" else ():
                connection.execute("SELECT pg_terminate_backend(%s)", [pid])
        if way == "database crash" and sessions:
            os.kill(sessions[0][0], signal.SIGKILL)

    def _person(self, ended: threading.Event, sent_forms: list[Sent]) -> None:
        while not ended.is_set():
            sent = self._new()
            sent_forms.append(sent)
            self._send(sent)

    def _new(self) -> Sent:
        from django.core.files.uploadedfile import SimpleUploadedFile
        from django.test.client import BOUNDARY, encode_multipart
        from PIL import Image

        marker, drawn = f"marker {uuid.uuid4()}", io.BytesIO()
        size = (self.chance.randrange(8, 64), self.chance.randrange(8, 64))
        colour = tuple(self.chance.randrange(256) for _ in range(3))
        Image.new("RGB", size, colour).save(drawn, "PNG")
        filled = self.form | {
            "description": marker,
            "aircraft": str(self.chance.choice(self.aircraft)),
            "place_entered": self._place(),
            "client_key": str(uuid.uuid4()),
            "form_key": str(uuid.uuid4()),
            "csrfmiddlewaretoken": SECRET,
            "photographs": SimpleUploadedFile("dent.png", drawn.getvalue()),
        }
        return Sent(marker, encode_multipart(BOUNDARY, filled))

    def _place(self) -> str:
        """Anywhere on the skin, so that few findings are taken for one another."""
        station, stringer = self.chance.randrange(500, 700), self.chance.randrange(3, 9)
        return f"STA {station} S-{stringer}{self.chance.choice('LR')}"

    def _send(self, sent: Sent) -> None:
        from django.test.client import MULTIPART_CONTENT

        asked = http.client.HTTPConnection("127.0.0.1", self.port, timeout=30)
        headers = {"Content-Type": MULTIPART_CONTENT, "Cookie": self.cookie}
        try:
            asked.request("POST", "/findings/new/", sent.body, headers)
            answer = asked.getresponse()
            page = answer.read().decode()
        except (OSError, http.client.HTTPException):
            return
        finally:
            asked.close()
        if answer.status == 302:
            sent.led_to = answer.headers["Location"]
        elif KNOWN in page:
            sent.asked = True
            self.tally.asked += 1
        elif answer.status < 500:
            told = re.findall(r'class="errorlist[^>]*>(.*?)</ul>', page, re.S)
            self.tally.wrong.append(f"{answer.status} to {sent.marker}: {told}")

    def _form(self) -> tuple[dict[str, str], str]:
        """The filled form, and the cookies of somebody signed in."""
        from django.test import Client
        from django.test.utils import (
            setup_test_environment,
            teardown_test_environment,
        )

        from tests.repairs.test_finding_pages import SIZES, start

        client = Client()
        client.force_login(self.world.users["recorder"])
        setup_test_environment()  # which lets the form be read from the page
        filled = start(client, self.world)
        teardown_test_environment()
        session = client.cookies["sessionid"].value
        form = {**filled, **SIZES, "step": "save"}
        return form, f"sessionid={session}; csrftoken={SECRET}"

    def _recorded(self, marker: str) -> int:
        from repairs.models import Finding

        return _patiently(Finding.objects.filter(description=marker).count)

    def _look(self, confirmed: list[Sent]) -> None:
        """Every confirmed finding is whole, and what is new agrees with its history."""
        self.tally.confirmed += len(confirmed)
        for sent in confirmed:
            told = _patiently(lambda sent=sent: whole(sent))
            self.tally.wrong += [f"{sent.marker} at {sent.led_to}: {told}"] * bool(told)
        found, self.verified = _patiently(lambda: new_problems(self.verified))
        self.tally.wrong += found

    def _verify_all(self) -> None:
        from fleet.selectors.verify import problems

        self.tally.wrong += _patiently(lambda: list(problems(files=True)))


def whole(sent: Sent) -> str:
    """What is missing of a confirmed finding, or ''."""
    from fleet.kept_files import attachment_path, file_digest
    from fleet.models import HistoryItem, SentForm
    from repairs.models import Finding

    pk = int(sent.led_to.rstrip("/").rsplit("/", 1)[1])
    finding = Finding.objects.filter(pk=pk, description=sent.marker).first()
    if finding is None:
        return "the finding is lost"
    item = HistoryItem.objects.filter(table="repairs_finding", first_pk=pk).first()
    if item is None:
        return "it has no history"
    if not SentForm.objects.filter(entry=item.entry_id).exists():
        return "its form's key is lost"
    photograph = finding.photographs.select_related("attachment").get()
    for sha256 in (
        photograph.attachment.sha256,
        photograph.attachment.original_sha256,
    ):
        path = attachment_path(sha256)
        if not path.is_file() or file_digest(path) != sha256:
            return "its photograph is lost"
    if finding.measurements.get().values.count() < len(MEASURED):
        return "its measurement is not whole"
    return ""


def new_problems(after: int) -> tuple[list[str], int]:
    """Disagreements among the entries after that one, and the rows they tell of."""
    from fleet.digests import entry_digest, items_digest, recorded_models
    from fleet.models import (
        HistoryEntry,
        HistoryHead,
        HistoryItem,
        RecordNumber,
        SentForm,
    )
    from fleet.selectors.verify_rows import Read, some_rows_problems
    from repairs.models import Finding

    found, before = [], HistoryEntry.objects.filter(sequence=after).first()
    keys: dict[str, set[int]] = {}
    for entry in HistoryEntry.objects.filter(sequence__gt=after).order_by("sequence"):
        items = list(entry.items.order_by("number"))
        follows = before is None or (
            entry.sequence == before.sequence + 1
            and entry.previous_digest == before.digest
        )
        digests = (entry_digest(entry), items_digest(items))
        if not follows or digests != (entry.digest, entry.items_digest):
            found.append(f"entry {entry.sequence} does not agree")
        for item in items:
            keys.setdefault(item.table, set()).update(
                range(item.first_pk, item.last_pk + 1)
            )
        before = entry
    for model in recorded_models():
        told = keys.get(model._meta.db_table, set())
        found += some_rows_problems(model, told, Read())
        if told:
            newer = model._base_manager.filter(pk__gt=max(told)).exists()
            found += [f"{model._meta.db_table}: a row that no entry tells of"] * newer
    head = HistoryHead.objects.get()
    last = before.sequence if before else 0
    if head.sequence != last or HistoryItem.objects.filter(entry_id__gt=last).exists():
        found.append("the head does not name the last entry")
    if SentForm.objects.filter(entry=None).exists():
        found.append("a form's key without what it wrote")
    numbers = set(Finding.objects.values_list("number", flat=True))
    given = RecordNumber.objects.filter(kind="F").values_list("last", flat=True).first()
    if given is not None and f"F-{given:04d}" not in numbers:
        found.append(f"F-{given:04d} was given and is not there")
    return found, last


def _patiently(ask: Any) -> Any:
    """Ask again while PostgreSQL recovers."""
    from django.db import InterfaceError, OperationalError

    for _ in range(300):
        try:
            return ask()
        except (InterfaceError, OperationalError):
            close()
            time.sleep(0.1)
    return ask()


if __name__ == "__main__":
    main()
