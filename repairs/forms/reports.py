"""Forms of an occurrence report: the answer, what was sent, what followed."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from typing import Any
from zoneinfo import ZoneInfo

from django import forms

from fleet.forms.fields import DayField
from repairs.selectors.report_rules import FollowUp
from repairs.services.reports import AHEAD

LONG = forms.Textarea(attrs={"rows": 18})
SHOWN = [("", "open, the overdue first"), ("all", "all")]


class ReportFilter(forms.Form):
    show = forms.ChoiceField(required=False, choices=SHOWN)


class TimeOfDayField(forms.TimeField):
    """A time of day as 14:30, in the operator's time."""

    widget = forms.TimeInput(format="%H:%M", attrs={"type": "time"})


class MomentForm(forms.Form):
    """A day and a time of it, in the time zone of the operator."""

    DAY_AND_TIME: tuple[str, str]

    def __init__(
        self, *args: Any, zone: ZoneInfo, until: dt.datetime, **kwargs: Any
    ) -> None:
        super().__init__(*args, **kwargs)
        self.zone, self.until = zone, until

    def clean(self) -> dict[str, Any]:
        data = super().clean() or self.cleaned_data
        day, time = self.DAY_AND_TIME
        if day in data and time in data:
            said = self.moment(day, time).astimezone(dt.UTC)
            if said > self.until:
                self.add_error(day, AHEAD.format(moment=said, now=self.until))
        return data

    def moment(self, day: str, time: str) -> dt.datetime:
        data = self.cleaned_data
        at = data[time] or dt.time()
        return dt.datetime.combine(data[day], at, tzinfo=self.zone)


class OpenReportForm(forms.Form):
    """Under which rules it is asked."""

    regime = forms.ChoiceField(label="under which rules")

    def __init__(self, *args: Any, regimes: Sequence[str], **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.fields["regime"].choices = [  # type: ignore[attr-defined]
            (regime, regime) for regime in regimes
        ]


class DecideReportForm(MomentForm):
    """The answer, and from when the clock runs."""

    DAY_AND_TIME = ("detected_on", "detected_time")
    reportable = forms.ChoiceField(
        choices=[("", "choose"), ("yes", "yes"), ("no", "no")], label="is it reportable"
    )
    reason = forms.CharField(
        label="why", widget=forms.Textarea(attrs={"rows": 3}),
        help_text="It stays with the answer.",
    )  # fmt: skip
    detected_on = DayField(
        label="detected on",
        help_text="The clock counts from here. Only the day is known at first, so its "
        "beginning is taken; give the time if it is known.",
    )
    detected_time = TimeOfDayField(label="at, local time", required=False)


class SendReportForm(MomentForm):
    """What was sent, when, to whom; the text is kept as it is here."""

    DAY_AND_TIME = ("sent_on", "sent_time")
    sent_on = DayField(label="sent on")
    sent_time = TimeOfDayField(label="at, local time")
    reference = forms.CharField(
        label="reference", help_text="The number it has at the receiver or with you."
    )
    recipients = forms.CharField(
        label="sent to",
        help_text="Authority, design approval holder, owner: by name.",
    )
    content = forms.CharField(
        label="the report",
        strip=False,
        widget=LONG,
        help_text="Made from the record; put in what is not known yet, or send it as "
        "it is: it may not wait. Name no person who reported.",
    )


class SupplementForm(SendReportForm):
    """More on a report that was sent."""

    answers = forms.ChoiceField(label="it is", required=False)

    def __init__(self, *args: Any, waiting: Sequence[FollowUp], **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.waiting = {str(one.policy.pk): one for one in waiting}
        self.fields["answers"].choices = [  # type: ignore[attr-defined]
            ("", "an addition or correction"),
            *((key, f"{x.words}, due {x.on}") for key, x in self.waiting.items()),
        ]
        self.order_fields(["answers", *self.fields])


class CloseReportForm(forms.Form):
    reason = forms.CharField(
        label="what came of it", widget=forms.Textarea(attrs={"rows": 3})
    )
