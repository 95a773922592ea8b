"""What an engineer of the demo states and has measured again for a few findings.

One finding for each kind of calculation that needs more than a type's record holds.
Documents and numbers are invented and say so; the finding is the first of its kind.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass

from repairs.measured import Hole
from reports.demo.records import DemoFinding, Dimension

INVENTED = "stress memo {number} (invented for the demonstration)"
PLANTED = "-P"
"""Keys of planted findings have it: they tell stories of their own."""


@dataclass(frozen=True, slots=True)
class DemoStated:
    """The inputs of one finding by name, as typed, and what was measured for them.

    `method` is the calculation they complete.
    """

    method: str
    memo: str
    fits: Callable[[DemoFinding], bool]
    inputs: tuple[tuple[str, str], ...]
    measured: tuple[Dimension, ...] = ()
    holes: tuple[Hole, ...] = ()

    @property
    def document(self) -> str:
        """The document all of them are from."""
        return INVENTED.format(number=self.memo)

    def of(self, findings: Iterable[DemoFinding]) -> DemoFinding | None:
        """The first finding of the kind; None where a seed drew none."""
        return next((finding for finding in findings if self.fits(finding)), None)


def crack(
    direction: str, *origins: str, element: str = "skin", holes: int = 0
) -> Callable[[DemoFinding], bool]:
    """What tells a kind of crack; two holes stand for any number above one."""

    def fits(finding: DemoFinding) -> bool:
        said = {one.quantity: one.entered for one in finding.dimensions}
        return (
            finding.damage_type == "crack"
            and PLANTED not in finding.key
            and finding.element == element
            and said["direction"] == direction
            and said["origin"] in origins
            and min(int(said.get("crack_count", "0")), 2) == holes
        )

    return fits


FLIGHT = (
    ("limit_flight_stress", "105 MPa"),
    ("cycle_max_stress", "62 MPa"),
    ("cycle_ratio", "0.1"),
)
AT_HOLE = (Dimension("edge_distance_mm", "12 mm"),)
STATED: tuple[DemoStated, ...] = (
    DemoStated(
        "loaded-fastener-hole",
        "SM-101",
        crack("longitudinal", "fastener hole", holes=1),
        (("load_transfer", "0.35"), ("bearing_strength", "690 MPa")),
        (
            *AT_HOLE,
            Dimension("strip_width_mm", "20 mm"),
            Dimension("edge_crack_length_mm", "2.5 ± 0.3 mm"),
            Dimension("both_sides", "no"),
        ),
    ),
    DemoStated(
        "row-of-cracked-holes",
        "SM-102",
        crack("longitudinal", "fastener hole", holes=2),
        (("load_transfer", "0.35"), ("bearing_strength", "690 MPa")),
        (*AT_HOLE, Dimension("edge_crack_length_mm", "1.2 ± 0.3 mm")),
        (
            Hole(1, 0.0, 1.0, 4.8, 20.0),
            Hole(2, 0.8, 1.2, 4.8, 20.0),
            Hole(3, 0.0, 0.0, 4.8, None),
        ),
    ),
    DemoStated(
        "stiffened-skin-crack",
        "SM-103",
        crack("longitudinal", "skin", "scratch"),
        (
            ("centre_stiffener", "mid bay"),
            ("stiffener_modulus", "72000 MPa"),
            ("stiffener_strength", "440 MPa"),
            ("fastener_pitch", "25 mm"),
            ("fastener_diameter", "4.8 mm"),
            ("fastener_flexibility", "0.00003 mm/N"),
            ("fastener_strength", "2600 N"),
        ),
    ),
    DemoStated(
        "pressurised-skin-circumferential-crack",
        "SM-104",
        crack("circumferential", "skin", "scratch"),
        (
            ("limit_longitudinal_stress", "75 MPa"),
            ("mean_longitudinal_stress", "30 MPa"),
            ("flight_smallest_share", "-0.2"),
            ("flight_largest_share", "1.5"),
        ),
    ),
    DemoStated(
        "damaged-member-section",
        "SM-105",
        crack("radial", "cut-out corner", element="frame_web"),
        (
            ("member_failed", "no"),
            ("load_kind", "tension"),
            ("member_of_panel_material", "no"),
            ("member_yield", "370 MPa"),
            ("member_ultimate", "440 MPa"),
            ("member_area", "160 mm2"),
            ("member_lost_area", "20 mm2"),
            ("member_limit_force", "16000 N"),
        ),
    ),
    DemoStated(
        "open-or-trimmed-hole",
        "SM-106",
        lambda finding: finding.damage_type == "hole" and "FR 47" in finding.location,
        FLIGHT,
    ),
)
