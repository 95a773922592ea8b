"""The people and organisations of the demo; all invented."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass

OPERATOR = "Brackenfold Regional"
SECOND_OPERATOR = "Ostermoor Air Link"
MAINTENANCE = "Hollin Aero Works"
DESIGN_HOLDER = "Ardlune Aircraft"
DESIGN_ORGANISATION = "Tarrant Structures"
LESSOR = "Wexcombe Leasing"

ORGANISATIONS = (
    ("operator", OPERATOR),
    ("operator", SECOND_OPERATOR),
    ("maintenance", MAINTENANCE),
    ("design_approval_holder", DESIGN_HOLDER),
    ("design_approval_holder", DESIGN_ORGANISATION),
    ("owner", LESSOR),
)

ROLES = (
    "recorder",
    "engineer",
    "certifier",
    "signatory",
    "planner",
    "manager",
    "auditor",
    "administrator",
)


@dataclass(frozen=True, slots=True)
class DemoPerson:
    """A person; with a role, the login of that name belongs to them."""

    key: str
    name: str
    organisation: str
    role: str = ""


@dataclass(frozen=True, slots=True)
class DemoAuthorisation:
    person: str
    number: str
    scope: str
    valid_from: dt.date
    valid_to: dt.date | None = None


PEOPLE = (
    DemoPerson("recorder", "Ines Vauquelin", OPERATOR, "recorder"),
    DemoPerson("engineer", "Maud Carrick", OPERATOR, "engineer"),
    DemoPerson("certifier", "Owen Lathbury", MAINTENANCE, "certifier"),
    DemoPerson("signatory", "Henrike Solberg", DESIGN_ORGANISATION, "signatory"),
    DemoPerson("planner", "Joris Pennywell", OPERATOR, "planner"),
    DemoPerson("manager", "Adaeze Thornley", OPERATOR, "manager"),
    DemoPerson("auditor", "Silvan Orme", OPERATOR, "auditor"),
    DemoPerson("administrator", "Perrin Ashgrove", OPERATOR, "administrator"),
    DemoPerson("outsider", "Lotte Brandreth", SECOND_OPERATOR, "engineer"),
    DemoPerson("line_1", "Rurik Aldane", MAINTENANCE),
    DemoPerson("line_2", "Piet Halloran", MAINTENANCE),
    DemoPerson("line_3", "Nuria Castell", MAINTENANCE),
    DemoPerson("hangar_1", "Edda Wrayburn", MAINTENANCE),
    DemoPerson("hangar_2", "Tobias Fenwright", MAINTENANCE),
    DemoPerson("inspector", "Marit Eskdale", MAINTENANCE),
    DemoPerson("keen", "Tamsin Orrell", MAINTENANCE),
    DemoPerson("lapsed", "Gareth Ullswater", MAINTENANCE),
)

LAPSED_ON = dt.date(2023, 6, 30)
"""The last day of one certifier's authorisation; he signed the next morning."""

AUTHORISATIONS = (
    DemoAuthorisation("engineer", "BR-E-011", "assess", dt.date(2005, 1, 1)),
    DemoAuthorisation("certifier", "HA-C-204", "certify", dt.date(2005, 1, 1)),
    DemoAuthorisation("signatory", "TS-S-007", "approve", dt.date(2005, 1, 1)),
    DemoAuthorisation("inspector", "HA-I-118", "inspect", dt.date(2005, 1, 1)),
    DemoAuthorisation("lapsed", "HA-C-191", "certify", dt.date(2017, 7, 1), LAPSED_ON),
)

PASSWORD = "cleat-rivet-gusset-52"
