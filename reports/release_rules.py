"""Why a record stands between an aircraft and its release: each rule, and its basis.

The paragraphs are the published ones that state the rule; an operator under another
regime has its own with the same sense. Grades: quoted, where the wording was seen;
memory, where it is to be read in print first; practice, where no paragraph states it.
"""

from __future__ import annotations

from dataclasses import dataclass

BASIS_WORDS = {
    "quoted": "{basis}",
    "memory": "{basis}, from memory",
    "practice": "{basis}",
}
PRACTICE = "trade practice"


@dataclass(frozen=True)
class Rule:
    """What the rule says, where it stands written, and what would lift the stop."""

    words: str
    basis: str
    lifted_by: str
    grade: str = "quoted"

    @property
    def basis_words(self) -> str:
        return BASIS_WORDS[self.grade].format(basis=self.basis)


STOPS: dict[str, Rule] = {
    "validity": Rule(
        "No operation beyond the limit of validity.",
        "14 CFR 26.21 and 121.1115",
        "A higher limit from its holder, recorded on the aircraft with its source.",
        "memory",
    ),
    "to_rectify": Rule(
        "Damage that seriously hazards flight safety is rectified before further "
        "flight.",
        "M.A.403(a)",
        "The released repair or replacement that answers it, or another disposition.",
    ),
    "crack": Rule(
        "A crack in PSE or FCS, or where nobody stated which, flies on only with an "
        "approval of the design approval holder that covers it.",
        "M.A.403(b)",
        "A disposition that cites that approval with its limit and inspections, or "
        "the repair.",
    ),
    "to_be_placed": Rule(
        "Damage is known by its location on the structure.",
        "AMC M.A.305(c)2(b)",
        "A location that can be read; then its assessment.",
    ),
    "not_assessed": Rule(
        "Authorised staff decide from maintenance data whether damage hazards flight "
        "safety.",
        "M.A.403(b)",
        "Its assessment against cited data, and a disposition.",
    ),
    "not_decided": Rule(
        "Authorised staff decide from maintenance data which rectification is needed "
        "before further flight, and which may be deferred.",
        "M.A.403(b)",
        "A disposition.",
    ),
    "questions": Rule(
        "A doubt raised on entry is answered before the damage is judged.",
        PRACTICE,
        "An answer to each question.",
        "practice",
    ),
    "deferral": Rule(
        "Deferred damage is rectified within the limit of its deferral.",
        "M.A.403(c)",
        "The rectification, or a new signed disposition that cites data for a later "
        "limit.",
    ),
    "deferral_unlimited": Rule(
        "A deferral has a limit from maintenance data.",
        "M.A.403(c)",
        "A disposition with its limit, or the rectification.",
    ),
    "rectified": Rule(
        "Work done is certified before release.",
        "145.A.50(a)",
        "The closing of the finding by certifying staff.",
    ),
    "in_work": Rule(
        "Maintenance that was begun is completed and certified before release.",
        "145.A.50(a)",
        "The release of the repair, or its cancellation.",
    ),
    "no_data": Rule(
        "No release of a repair without reference to approved data.",
        "14 CFR 121.379(b)",
        "The approval data recorded with the repair, or its replacement.",
    ),
    "other_serial": Rule(
        "Approved data hold for the serials that they name.",
        "14 CFR 121.379(b)",
        "Approval data that hold for this serial, or the applicability put right.",
    ),
    "stage_1": Rule(
        "A repair to fatigue-critical structure has stage 1 of its approval before "
        "return to service.",
        "AMC 20-20A App. 3 Annex 1",
        "The approval of stage 1.",
    ),
    "differs": Rule(
        "A repair is as its approved data require.",
        "14 CFR 121.379(b)",
        "An answer to the difference that cites its document, or the rework.",
    ),
    "inspection_missing": Rule(
        "A required inspection is made by someone other than who did the work.",
        "14 CFR 121.371(c), 145.A.48",
        "The recorded inspection.",
    ),
    "inspection_rejected": Rule(
        "A rejection is overruled only within the line of inspection.",
        "14 CFR 121.369",
        "A later inspection that accepts the work, or the overruling by authorised "
        "inspection staff.",
    ),
    "category_c": Rule(
        "A category C repair is replaced before its limit.",
        "AMC 20-20A App. 3",
        "Its replacement, or another category by a new approved evaluation.",
    ),
    "stage": Rule(
        "Stage 2 of the approval comes before its clock or temporary limit ends; the "
        "threshold that it approves is a limit until stage 3.",
        "AMC 20-20A App. 3 Annex 1",
        "The approval of the next stage.",
    ),
    "overdue": Rule(
        "No flight when a task exceeds its interval with any approved variation.",
        "NL-2011-001",
        "The inspection, recorded; or an approved variation.",
    ),
    "unaccounted": Rule(
        "What is missing is never taken as passed.",
        PRACTICE,
        "An answer whether the requirement applies to this aircraft.",
        "practice",
    ),
    "life": Rule(
        "A life-limited part flies on no longer than its limit, and its life is known "
        "from its first day.",
        "GM M.A.305(d), 14 CFR 43.10",
        "Its removal, or the record that closes the gap, accepted.",
    ),
    "phase": Rule(
        "Each required phase of an event's inspection is closed before further flight.",
        PRACTICE,
        "The phase, done and signed.",
        "practice",
    ),
    "event": Rule(
        "An event is followed by its inspection before further flight.",
        PRACTICE,
        "The phases of its inspection recorded and done, or the event closed with its "
        "reason.",
        "practice",
    ),
    "engineering": Rule(
        "What a survey found without a record is answered by its day.",
        PRACTICE,
        "The answer to the item of the survey.",
        "practice",
    ),
}

OPEN_ITEMS: dict[str, str] = {
    "deferred": "deferred, within its limit",
    "accepted": "accepted, damage remains",
    "due": "due or due soon",
    "planned": "planned repair",
    "steps": "a later part of the repair is still to be done",
    "hides": "hides damage not shown to be removed",
    "event_done": "event still open, its inspection done",
    "report_undecided": "not decided whether it is reportable",
    "report_unsent": "reportable, not sent",
}
"""What stands open and is no release stop. Reports have clocks of their own: they never
wait for a release, and a release does not wait for them."""
