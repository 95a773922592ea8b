"""Signatures: whose, under what, bound to what, and what breaks them.

14 CFR 91.417 asks for signature and certificate number, AMC M.A.305(e)(a)(4) for the
traceability of amendments. From memory: FAA AC 120-78B, and EU 910/2014, Article 26,
by which a signature is linked to its signer alone and shows any later change.
"""

from __future__ import annotations

import datetime as dt
import html
import io
import json

import pytest
from django.core.exceptions import ValidationError
from django.core.management import CommandError, call_command
from django.db import connection
from django.test import Client
from django.urls import reverse

from fleet.canonical import canonical, digest
from fleet.models import HistoryEntry, User
from fleet.selectors.verify import problems
from fleet.services.signing import PASSWORD as BY_PASSWORD
from fleet.services.signing import PROGRAM, Proof, identity_prove
from fleet.triggers import triggers_remove
from repairs.models import Accomplishment, Approval, Disposition, Finding
from repairs.selectors.signatures import approvals_verified, content_of
from repairs.services.approvals import approval_sign
from tests.factories import NOW, PASSWORD, TODAY, authorise, program, signed
from tests.record_rows import DATA, FOUND, assessed, found
from tests.repairs.test_dispositions import decide
from tests.repairs.test_repair_pages import filled

pytestmark = pytest.mark.django_db


@pytest.fixture(autouse=True)
def _on_the_day(settings):
    settings.FRAMEBAY_TODAY = str(TODAY)


def proof_of(user: User) -> Proof:
    return identity_prove(user=user, password=PASSWORD, code="", day=TODAY)


def approve(world, subject, **changes) -> Approval:
    given = {
        "subject": subject,
        "meaning": "approved",
        "proof": proof_of(world.users["signatory"]),
        "shown_digest": digest(content_of(subject)),
        "on": TODAY,
        "actor": world.users["signatory"],
        "at": NOW,
    }
    return approval_sign(**(given | changes))


def alter(table: str, key: int, **columns: object) -> None:
    """Past the program: triggers gone, by SQL."""
    connection.check_constraints()  # PostgreSQL alters no table with some pending
    triggers_remove(connection, [table])
    given = ", ".join(f"{name} = %s" for name in columns)
    with connection.cursor() as cursor:
        cursor.execute(
            f"UPDATE {table} SET {given} WHERE id = %s",
            [*columns.values(), key],
        )


def changed_in(subject) -> list[str]:
    return [
        word
        for one in approvals_verified(type(subject).objects.get(pk=subject.pk))
        for word in one.changed
    ]


class TestBound:
    """EU 910/2014, Article 26(d), from memory: any later change is detectable."""

    def test_the_text_holds_record_meaning_statement_name_authorisation_time(
        self, world
    ):
        disposition = decide(world)
        row = approve(world, disposition, statement="Read and approved.")
        text = json.loads(row.content)
        assert text["record"] == json.loads(content_of(disposition))["record"]
        signature = text["signature"]
        assert signature["meaning"] == "approved"
        assert signature["statement"] == "Read and approved."
        assert signature["name"] == world.approver.name
        assert signature["authorisation"]["number"] == f"A-{world.approver.pk}"
        assert signature["authorisation"]["scope"] == "approve"
        assert signature["signing_time"] == "2025-01-01T09:00:00.000000+00:00"
        assert signature["identity"] == BY_PASSWORD
        assert row.content_digest == digest(row.content)
        assert changed_in(disposition) == []

    @pytest.mark.parametrize(
        ("column", "value", "word"),
        [
            ("meaning", "rejected", "the meaning"),
            ("statement", "as agreed", "the statement"),
            ("signer_name", "Robin Nobody", "the name"),
            ("authorisation_number", "A-999", "the authorisation number"),
            ("signed_at", dt.datetime(2024, 6, 1, tzinfo=dt.UTC), "the signing time"),
            ("second_factor", True, "the second factor"),
            ("document_number", "ARD-RDA-1", "the document"),
            ("content_digest", "0" * 64, "the signed text"),
        ],
    )
    def test_a_signature_altered_later_shows_what_was_altered(
        self, world, column, value, word
    ):
        disposition = decide(world)
        row = approve(world, disposition)
        alter("repairs_approval", row.pk, **{column: value})
        assert changed_in(disposition) == [word]

    def test_signing_for_another_person_later_shows(self, world):
        disposition = decide(world)
        row = approve(world, disposition)
        alter("repairs_approval", row.pk, signer_person_id=world.certifier.pk)
        assert changed_in(disposition) == ["the person"]

    @pytest.mark.parametrize(
        ("column", "value"), [("number", "A-1"), ("scope", "check"), ("source", "none")]
    )
    def test_an_authorisation_rewritten_later_shows(self, world, column, value):
        disposition = decide(world)
        row = approve(world, disposition)
        alter("fleet_authorisation", row.authorisation_id, **{column: value})
        assert changed_in(disposition) == ["the authorisation"]

    def test_a_record_altered_later_shows_under_every_signature(self, world):
        disposition = decide(world)
        approve(world, disposition)
        alter("repairs_disposition", disposition.pk, reason="as you like")
        assert changed_in(disposition) == ["the record", "the record"]

    def test_a_text_rewritten_with_its_digest_still_shows(self, world):
        disposition = decide(world)
        row = approve(world, disposition)
        text = json.loads(row.content)
        text["record"]["reason"] = "as you like"
        forged = canonical(text)
        alter("repairs_approval", row.pk, content=forged, content_digest=digest(forged))
        assert changed_in(disposition) == ["the record"]

    def test_one_from_before_the_text_held_the_signature_is_read_still(self, world):
        disposition = decide(world)
        row = approve(world, disposition)
        text = content_of(disposition)
        alter("repairs_approval", row.pk, content=text, content_digest=digest(text))
        last = approvals_verified(disposition)[-1]
        assert (last.agrees, last.identity) == (True, "not recorded")

    def test_the_command_names_each_and_fails(self, world):
        disposition = decide(world)
        out = io.StringIO()
        call_command("verify_signatures", stdout=out)
        assert "2 signatures agree with their records." in out.getvalue()
        alter("repairs_disposition", disposition.pk, reason="as you like")
        with pytest.raises(CommandError, match="1 of 2 signatures no longer agree"):
            call_command("verify_signatures", stdout=out)
        assert f"disposition {disposition}, prepared by" in out.getvalue()
        assert "changed after signing: the record" in out.getvalue()

    def test_a_signature_that_holds_leaves_the_history_whole(self, world):
        approve(world, decide(world))
        assert list(problems()) == []


class TestAuthority:
    def test_a_lapsed_authorisation_leaves_old_signatures_valid_and_readable(
        self, world
    ):
        disposition = decide(world)
        row = approve(world, disposition)
        granted = row.authorisation
        granted.valid_to = TODAY
        granted.save()
        (_, kept) = approvals_verified(disposition)
        assert kept.agrees
        assert kept.row.authorisation_number == granted.number
        later = TODAY + dt.timedelta(days=1)
        with pytest.raises(ValidationError, match="was valid to 2025-01-01"):
            approve(world, decide(world, assessed(world)), on=later)

    def test_who_signs_in_person_is_authorised_on_the_day_of_signing_too(self, world):
        """A decision of last month is not signed under what has lapsed since."""
        granted = world.assessor.authorisations.get()
        granted.valid_to = FOUND
        granted.save()
        finding = found(world)
        with pytest.raises(ValidationError, match="was valid to 2024-12-20"):
            assess(world, finding, proof_of(world.engineer))
        assess(world, finding, program(world.assessor))

    def test_a_proof_is_good_for_its_own_login_only(self, world):
        with pytest.raises(RuntimeError, match="and for no other"):
            approve(world, decide(world), actor=world.engineer)

    def test_what_the_program_enters_says_so(self, world):
        finding = assessed(world)
        (one,) = approvals_verified(finding)
        assert (one.identity, one.row.second_factor) == (PROGRAM, False)
        entry = HistoryEntry.objects.get(action="finding_assess")
        assert entry.origin == PROGRAM


def assess(world, finding, proof):
    from repairs.services.assessing import finding_assess

    return finding_assess(
        finding=finding,
        proof=proof,
        on=FOUND,
        data=DATA,
        actor=world.engineer,
        at=NOW,
    )


class TestOnPages:
    @pytest.fixture
    def signatory(self, client, world) -> Client:
        client.force_login(world.users["signatory"])
        return client

    def said(self, client: Client, url: str) -> dict[str, str]:
        said = filled(client.get(url).context["form"])
        return said | {"meaning": "approved", "document_kind": ""}

    def test_the_exact_text_its_digest_and_the_signer_are_shown_first(
        self, signatory, world
    ):
        disposition = decide(world)
        page = signatory.get(reverse("disposition_sign", args=[disposition.pk])).text
        assert digest(content_of(disposition)) in page
        assert "Within the manual&#x27;s limits." in page
        assert f"You sign as {world.approver}" in page
        assert f"A-{world.approver.pk}" in page

    def test_a_wrong_password_keeps_the_rest_and_never_comes_back(
        self, signatory, world
    ):
        disposition = decide(world)
        url = reverse("disposition_sign", args=[disposition.pk])
        said = self.said(signatory, url) | {"statement": "Read twice."}
        page = signatory.post(url, {**said, "password": "not-my-word"}).text
        assert "This is not your password; nothing was signed." in html.unescape(page)
        assert "Read twice." in page
        assert "not-my-word" not in page
        assert disposition.approvals.count() == 1

    def test_guessing_at_the_signature_locks_signing_and_signing_in(
        self, signatory, world
    ):
        disposition = decide(world)
        url = reverse("disposition_sign", args=[disposition.pk])
        said = self.said(signatory, url)
        for _ in range(5):
            signatory.post(url, {**said, "password": "guess"})
        page = signatory.post(url, signed(said)).text
        assert "Too many wrong passwords; nothing is signed until" in page
        assert disposition.approvals.count() == 1
        entry = {"username": "signatory", "password": PASSWORD}
        assert Client().post("/sign-in/", entry).status_code == 429

    def test_a_change_since_the_page_was_shown_is_refused(self, signatory, world):
        disposition = decide(world)
        url = reverse("disposition_sign", args=[disposition.pk])
        said = self.said(signatory, url)
        alter("repairs_disposition", disposition.pk, reason="as you like")
        page = signatory.post(url, signed(said)).text
        assert "has changed since the page was shown" in page

    def test_the_block_tells_name_authorisation_both_times_and_how(
        self, signatory, world
    ):
        world.operator.time_zone = "Europe/Madrid"
        world.operator.save()
        disposition = decide(world)
        url = reverse("disposition_sign", args=[disposition.pk])
        signatory.post(url, signed(self.said(signatory, url)))
        row = disposition.approvals.get(meaning="approved")
        page = signatory.get(reverse("disposition", args=[disposition.pk])).text
        for words in (
            world.approver.name,
            f"A-{world.approver.pk}",
            "approve design data",
            f"{row.signed_at:%Y-%m-%d %H:%M} UTC",
            " CE",  # CET, or CEST in summer
            BY_PASSWORD,
            "second factor: no",
            "agrees with what was signed",
            row.content_digest[:12],
        ):
            assert words in page, words
        assert PROGRAM in page  # the decision itself, which the test entered

    def test_a_broken_signature_stands_out_on_the_page(self, signatory, world):
        disposition = decide(world)
        alter("repairs_disposition", disposition.pk, reason="as you like")
        page = signatory.get(reverse("disposition", args=[disposition.pk])).text
        assert "changed after signing: the record" in page

    def test_no_form_lets_anybody_choose_who_signs(self, client, world):
        """14 CFR 91.417(a)(1)(iii): the signature is of the person approving."""
        client.force_login(world.engineer)
        for name, finding in (
            ("finding_assess", found(world)),
            ("finding_close", found(world)),
            ("disposition_new", assessed(world)),
        ):
            form = client.get(reverse(name, args=[finding.pk])).context
            fields = {
                field
                for one in form.get("forms", [form.get("form")])
                for field in one.fields
            }
            assert "password" in fields, name
            assert not fields & {"person", "decided_by", "signer"}, name

    def test_a_login_without_a_person_signs_nothing(self, signatory, world):
        disposition = decide(world)
        url = reverse("disposition_sign", args=[disposition.pk])
        said = self.said(signatory, url)
        User.objects.filter(pk=world.users["signatory"].pk).update(person=None)
        page = signatory.post(url, signed(said)).text
        assert "Your login has no person behind it" in page

    def test_the_time_of_signing_is_the_servers(self, signatory, world):
        """No form asks for it: a time that is sent is not read."""
        disposition = decide(world)
        url = reverse("disposition_sign", args=[disposition.pk])
        said = self.said(signatory, url) | {"signed_at": "2001-01-01 00:00"}
        before = dt.datetime.now(dt.UTC)
        signatory.post(url, signed(said))
        row = disposition.approvals.get(meaning="approved")
        assert before <= row.signed_at <= dt.datetime.now(dt.UTC)


def test_a_decision_carries_its_own_signature(world):
    disposition = decide(world)
    row = Disposition.objects.get(pk=disposition.pk).approvals.get()
    assert (row.meaning, row.signer_person) == ("prepared", world.assessor)
    assert row.statement == f"{disposition} decided: accept as is"


def test_closed_and_assessed_are_signed_by_whoever_is_signed_in(world):
    finding = found(world)
    assess(world, finding, proof_of(world.engineer))
    row = Approval.objects.get(finding=finding)
    assert (row.signer, row.signer_person) == (world.engineer, world.assessor)
    assert Finding.objects.get(pk=finding.pk).state == "assessed"


class TestPaper:
    """What another did is a record with its document, and no signature."""

    def record(self, world, requirement, proof, **columns):
        from fleet.due import Counters
        from repairs.services.accomplishments import accomplishment_record

        return accomplishment_record(
            actor=proof.user,
            at=NOW,
            today=TODAY,
            subject=requirement.subjects.get(),
            done_on=FOUND,
            counters=Counters(604_000, 10_080, 10_080),
            result="no_finding",
            proof=proof,
            **columns,
        )

    @pytest.fixture
    def requirement(self, world):
        from repairs.services.inspections import requirement_raise
        from repairs.services.requirement_draft import LimitEntry, RequirementDraft

        return requirement_raise(
            draft=RequirementDraft(
                operator=world.operator,
                title="Look at the keel",
                requirement_class="operator",
                finding=found(world),
                area="keel",
                criteria="no crack",
                method="detailed_visual",
                effective_on=FOUND,
                limits=(LimitEntry("threshold", "10,100 FC", base="new"),),
                aircraft=(world.aircraft,),
            ),
            actor=world.engineer,
            at=NOW,
        )

    def test_anothers_work_without_its_paper_is_refused(self, world, requirement):
        proof = proof_of(world.users["certifier"])
        with pytest.raises(Exception, match="name the release document"):
            self.record(world, requirement, proof, done_by=world.assessor)
        assert not Accomplishment.objects.filter(
            subject__requirement=requirement
        ).exists()

    def test_anothers_work_with_its_paper_is_recorded_unsigned(
        self, world, requirement
    ):
        from tests.one_of_each import _document

        proof = proof_of(world.users["certifier"])
        paper = _document(world, "release", "CRS-7")
        made = self.record(
            world, requirement, proof, done_by=world.assessor, release_document=paper
        )
        assert made.row.done_by == world.assessor
        assert made.row.entered_by == world.users["certifier"]
        assert not Approval.objects.filter(accomplishment=made.row).exists()
        entry = HistoryEntry.objects.get(action="accomplishment_record")
        assert entry.origin == BY_PASSWORD

    def test_ones_own_work_is_signed_as_performed(self, world, requirement):
        proof = proof_of(world.users["certifier"])
        made = self.record(world, requirement, proof, done_by=world.certifier)
        row = Approval.objects.get(accomplishment=made.row)
        assert (row.meaning, row.signer_person) == ("performed", world.certifier)
        assert [one.agrees for one in approvals_verified(made.row)] == [True]

    def test_ones_own_work_needs_an_authorisation_to_inspect(self, world, requirement):
        with pytest.raises(ValidationError, match="held no authorisation"):
            self.record(
                world, requirement, proof_of(world.engineer), done_by=world.assessor
            )
        authorise(world.assessor, world.operator, "ndt")
        self.record(
            world, requirement, proof_of(world.engineer), done_by=world.assessor
        )
