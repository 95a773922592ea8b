"""Every finding of the demo evaluated as the record stands today."""

from __future__ import annotations

import datetime as dt
from collections import Counter
from collections.abc import Callable
from itertools import groupby

from fleet.models import DetectableSize
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from repairs.models import Finding, Use
from repairs.services.evaluation_prepare import choice_from
from repairs.services.evaluations import evaluation_write
from reports.demo.fleet import DEMO_TODAY
from reports.demo.load_base import Loaded
from reports.demo.records import Scenario

EVALUATED_AT = dt.datetime.combine(DEMO_TODAY, dt.time(8), dt.UTC)
HEAD, OPEN_SKIN = "fastener head", "open skin"


def evaluations_load(
    loaded: Loaded, scenario: Scenario, say: Callable[[str], None]
) -> Counter[str]:
    """One evaluation a finding, entered aircraft by aircraft; outcomes counted.

    Damage that was reworked is gone: the question is structure without known crack.
    """
    reworked = {loaded.rows[f.key].pk for f in scenario.findings if f.reworked}
    sizes = {(s.method, s.detail): s for s in DetectableSize.objects.all()}
    outcomes: Counter[str] = Counter()
    findings = Finding.objects.select_related(
        "aircraft__variant__aircraft_type", "operator", "section", "panel__material"
    ).order_by("aircraft__registration", "pk")
    for aircraft, rows in groupby(findings, key=lambda finding: finding.aircraft):
        with Writing(
            actor=loaded.users["engineer"],
            action="evaluation_make",
            at=EVALUATED_AT,
            operator=loaded.operator,
            stream=stream_of(aircraft),
        ) as w:
            for finding in rows:
                gone = finding.pk in reworked
                use = Use.NO_KNOWN_CRACK if gone else Use.FOUND_DAMAGE
                choice = choice_from(finding, use=use, detectable=_size(finding, sizes))
                made = evaluation_write(
                    w, subject=finding, choice=choice, as_of=DEMO_TODAY
                )
                outcomes[made.outcome] += 1
        say(f"evaluated {aircraft.registration}: {sum(outcomes.values())} so far")
    return outcomes


def _size(
    finding: Finding, sizes: dict[tuple[str, str], DetectableSize]
) -> DetectableSize | None:
    """What the finding's own method sees where it was used."""
    method = finding.detection_method
    hidden = sizes.get((method, HEAD)) if method.startswith("eddy") else None
    return hidden or sizes.get((method, OPEN_SKIN))
