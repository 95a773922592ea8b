"""Which damage, or which repair, asks which methods: data, read from top to bottom."""

from __future__ import annotations

from dataclasses import dataclass

from repairs.analysis.inputs import Inputs
from repairs.analysis.methods.member_common import MEMBERS

COVERAGE_KEY = "coverage"
COVERAGE_VERSION = 1
"""Goes up whenever a damage asks for other methods than before."""


@dataclass(frozen=True, slots=True)
class Coverage:
    """Which damage, or which repair, asks which methods.

    Every group must be answered; inside a group the methods stand in order of
    preference. `when` narrows by words of the record: a word that is not recorded does
    not narrow; one that is `stated` must be recorded.
    """

    damage: tuple[str, ...]
    groups: tuple[tuple[str, ...], ...]
    when: tuple[tuple[str, tuple[str, ...]], ...] = ()
    repairs: tuple[str, ...] = ()
    stated: tuple[tuple[str, tuple[str, ...]], ...] = ()

    def holds(self, inputs: Inputs) -> bool:
        """Return whether the record asks for these methods."""
        repair, damage = inputs.word("repair_kind"), inputs.word("damage_type")
        asked = repair in self.repairs if repair else damage in self.damage
        return (
            asked
            and all(inputs.word(name) in words for name, words in self.stated)
            and all(
                inputs.word(name) in (None, "unknown", *words)
                for name, words in self.when
            )
        )


PLAIN_ITEMS = ("skin", "fairing", "other")
AWAY_FROM_EDGES = ("skin", "scratch", "dent", "corrosion_pit", "weld", "other")
OF_SKIN = ("element", ("skin",))
OF_CRACK = ("damage_type", ("crack",))
RENEWED = ("replacement",)
"""Repairs whose skin is as the type has it, without the crack."""
GONE = ("damage_removed", ("yes",))
STILL_THERE = ("damage_removed", ("no",))
ROUND_BLENDS = ("corrosion", "scratch", "gouge", "wear", "lightning", "heat")
COVERAGE: tuple[Coverage, ...] = (
    Coverage(
        ("crack",),
        (
            (
                "stop-drilled-crack",
                "stiffened-skin-crack",
                "pressurised-skin-longitudinal-crack",
                "pressurised-skin-circumferential-crack",
                "pressurised-skin-skew-crack",
            ),
        ),
        (
            ("element", PLAIN_ITEMS),
            ("crack_origin", AWAY_FROM_EDGES),
            ("pressurised", ("yes",)),
            OF_CRACK,
        ),
        repairs=RENEWED,
    ),
    Coverage(
        ("crack",),
        (("stop-drilled-crack", "stiffened-skin-crack", "unpressurised-skin-crack"),),
        (
            ("element", PLAIN_ITEMS),
            ("crack_origin", AWAY_FROM_EDGES),
            ("pressurised", ("no",)),
            OF_CRACK,
        ),
        repairs=RENEWED,
    ),
    Coverage(
        (), (("stop-drilled-crack",),), (OF_SKIN, OF_CRACK), repairs=("stop_drill",)
    ),
    Coverage(
        ("crack",),
        (("edge-crack",),),
        (("element", PLAIN_ITEMS), ("crack_origin", ("edge", "cut_out_corner"))),
    ),
    Coverage(
        ("crack",),
        (
            ("open-or-trimmed-hole", "loaded-fastener-hole"),
            ("row-of-cracked-holes",),
        ),
        (OF_SKIN, ("crack_origin", ("fastener_hole",))),
    ),
    Coverage(
        ("hole",),
        (("open-or-trimmed-hole", "loaded-fastener-hole"),),
        (OF_SKIN,),
    ),
    Coverage(
        ("crack",),
        (("crack-in-corroded-skin",),),
        (OF_SKIN, ("crack_origin", ("corrosion_pit",))),
    ),
    Coverage(
        ("corrosion", "scratch", "gouge", "wear"),
        (("corrosion-blend-out",),),
        (OF_SKIN,),
        stated=(GONE,),
    ),
    Coverage(("nick",), (("nick-blended",),), (OF_SKIN,), stated=(GONE,)),
    Coverage(("corrosion",), (("corrosion-as-found",),), (OF_SKIN, STILL_THERE)),
    Coverage(("scratch", "gouge"), (("scratch-as-found",),), (OF_SKIN, STILL_THERE)),
    Coverage(("nick",), (("nick-as-found",),), (OF_SKIN, STILL_THERE)),
    Coverage(("wear",), (("wear-as-found",),), (OF_SKIN, STILL_THERE)),
    Coverage(
        (),
        (("corrosion-blend-out",),),
        (OF_SKIN, ("damage_type", ROUND_BLENDS)),
        repairs=("blend",),
    ),
    Coverage(
        (),
        (("nick-blended",),),
        (OF_SKIN, ("damage_type", ("nick",))),
        repairs=("blend",),
    ),
    Coverage(
        ("corrosion", "scratch", "gouge", "wear"),
        (("thinned-panel-buckling",),),
        (OF_SKIN,),
        repairs=("blend",),
        stated=(("load_kind", ("compression", "shear")),),
    ),
    Coverage(("dent",), (("dent-screening",),), (OF_SKIN,)),
    Coverage(("crease",), (("crease-screening",),), (OF_SKIN,)),
    Coverage(("bird_strike",), (("bird-strike-screening",),), (OF_SKIN,)),
    Coverage(("lightning",), (("lightning-screening",),), (OF_SKIN,)),
    Coverage(("heat",), (("heat-screening",),), (OF_SKIN,)),
    Coverage(
        ("crack", "hole", "corrosion", "scratch", "gouge", "nick", "wear"),
        (
            ("failed-member", "damaged-member-section"),
            ("cracked-member-flange",),
            ("cracked-member-hole",),
        ),
        (("element", MEMBERS),),
        repairs=("blend",),
    ),
)


def groups_for(inputs: Inputs) -> tuple[tuple[str, ...], ...]:
    """Return the groups of methods that a record asks for, each once, in order."""
    groups = [g for row in COVERAGE if row.holds(inputs) for g in row.groups]
    return tuple(dict.fromkeys(groups))
