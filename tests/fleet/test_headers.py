"""What every answer tells the browser, and what the settings are when served.

OWASP Application Security Verification Standard 4.0.3, V14.4; Django's deployment
checklist.
"""

from __future__ import annotations

import os
import subprocess
import sys
from pathlib import Path

import pytest

from tests.factories import operator_make, user_make

ROOT = Path(__file__).parents[2]
KEY = "a-key-of-the-environment-that-is-long-enough-and-has-many-signs-0123456789"


@pytest.mark.django_db
def test_every_answer_keeps_other_sites_out(client):
    client.force_login(user_make(operator_make(), "engineer"))
    for page in ("/account/", "/people/", "/nothing-here/"):
        answer = client.get(page)
        policy = answer["Content-Security-Policy"]
        for rule in (
            "default-src 'none'",
            "script-src 'self'",
            "style-src 'self'",
            "form-action 'self'",
            "frame-ancestors 'none'",
            "base-uri 'none'",
        ):
            assert rule in policy, (page, rule)
        assert "unsafe" not in policy
        assert answer["X-Content-Type-Options"] == "nosniff", page
        assert answer["X-Frame-Options"] == "DENY", page
        assert answer["Referrer-Policy"] == "same-origin", page
        assert answer["Cross-Origin-Opener-Policy"] == "same-origin", page
        assert answer["Cross-Origin-Resource-Policy"] == "same-origin", page
        assert "camera=()" in answer["Permissions-Policy"], page


def run(
    tmp_path: Path, *command: str, **environment: str
) -> subprocess.CompletedProcess:
    kept = {"PATH": os.environ["PATH"], "FRAMEBAY_DATA": str(tmp_path)}
    return subprocess.run(
        [sys.executable, "manage.py", *command],
        cwd=ROOT,
        env=kept | environment,
        capture_output=True,
        text=True,
        check=False,
    )


def test_served_over_tls_the_deployment_check_finds_nothing(tmp_path):
    """Django's own checklist; the data folder is empty, the key from outside."""
    served = {"FRAMEBAY_HTTPS": "1", "FRAMEBAY_HOSTS": "records.example"}
    found = run(
        tmp_path,
        *("check", "--deploy", "--fail-level", "WARNING"),
        **served,
        FRAMEBAY_SECRET_KEY=KEY,
    )
    assert found.returncode == 0, found.stderr
    assert "no issues" in found.stdout
    assert not (tmp_path / "secret_key").exists()


def test_a_setting_that_cannot_be_read_says_how_to_mend_it(tmp_path):
    found = run(tmp_path, "check", FRAMEBAY_SIGN_IN_LIMIT="many")
    assert "FRAMEBAY_SIGN_IN_LIMIT is 'many'; write a whole number" in found.stderr
    kept = tmp_path / "secret_key"  # made at first use, as no key came from outside
    assert kept.stat().st_mode & 0o077 == 0
    assert len(kept.read_text()) >= 50  # Django's own check, security.W009
