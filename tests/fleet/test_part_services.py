"""Safe-life parts through their services, and the life they add up to."""

from __future__ import annotations

import datetime as dt

import pytest

from fleet.due import Counter, Counters, DueState
from fleet.models import PartState
from fleet.selectors.parts import part_life, part_lives
from fleet.services.history import Writing
from fleet.services.part_records import (
    life_limit_key,
    life_limit_put_in_force,
    part_earlier_life,
    part_number_record,
    part_overhaul,
    part_record,
)
from fleet.services.parts import (
    PartRefused,
    part_install,
    part_reconfigure,
    part_remove,
)
from tests import due_rows as make
from tests.due_rows import AT, FIRST, TODAY, day, fly

pytestmark = pytest.mark.django_db


def at(cycles: int, *, minutes: int | None = None) -> Counters:
    minutes = cycles * 48 if minutes is None else minutes
    return Counters(minutes, cycles, cycles)


def limit(entered: str, *, in_force: bool = True, **columns):
    columns = {
        "part_number": make.part_number(),
        "base": "birth",
        "document": make.document(),
        "page": "12",
        "effective_from": dt.date(2010, 1, 1),
    } | columns
    row = life_limit_key(actor=None, at=AT, entered=entered, **columns)
    if in_force:
        with Writing(actor=None, action="life_limit_put_in_force", at=AT) as w:
            life_limit_put_in_force(w, limit=row)
    return row


def install(
    part, aircraft, cycles, *, on=FIRST, config="base", position="MLG LH", release=""
):
    return part_install(
        actor=None,
        at=AT,
        part=part,
        aircraft=aircraft,
        position=position,
        configuration=make.configuration(config),
        on=on,
        counters=at(cycles),
        release_reference=release,
    )


def remove(
    part, cycles, *, on, reason="check", release="release certificate 2", **more
):
    return part_remove(
        actor=None,
        at=AT,
        part=part,
        on=on,
        counters=at(cycles),
        reason=reason,
        release_reference=release,
        **more,
    )


def problems(call, *args, **kwargs) -> list[str]:
    with pytest.raises(PartRefused) as refused:
        call(*args, **kwargs)
    return refused.value.problems


class TestLife:
    def test_a_part_swapped_between_aircraft_adds_its_stints(self):
        """(19,870 - 12,450) + (14,905 - 8,112) = 14,213 of 30,000; remaining 15,787;
        ends when B shows 30,692 FC."""
        limit("30,000 FC")
        first = make.aircraft("Q7-TSA", opening_cycles=12_450)
        second = make.aircraft("Q7-TSB", opening_cycles=14_905)
        part = make.part()
        install(part, first, 12_450, on=dt.date(2015, 1, 1))
        remove(part, 19_870, on=dt.date(2019, 1, 1))
        install(part, second, 8_112, on=dt.date(2019, 6, 1))
        life = part_life(part, as_of=day(-1))
        assert life.facts.total.cycles == 14_213
        (line,) = life.status().lines
        assert (line.due, line.remaining) == (30_000, 15_787)
        assert life.carrier_end(Counter.CYCLES) == 30_692
        then = part_life(part, as_of=dt.date(2019, 3, 1))
        assert then.facts.total.cycles == 7_420
        assert then.current is None

    def test_usage_of_the_carrying_aircraft_counts_and_forecasts(self):
        limit("25,100 FC")
        aircraft, part = make.aircraft(), make.part()
        install(part, aircraft, 0, on=dt.date(2012, 1, 1))
        fly(aircraft, 20)
        status = part_life(part, as_of=day(19)).status()
        assert status.lines[0].remaining == 100 - 80
        assert status.forecast == day(19) + dt.timedelta(days=5)

    def test_the_most_restrictive_limit_met_governs_unless_a_fraction_is_cited(self):
        """6,000 in X (20,000), 4,000 in Y (16,000), then Z (25,000): 6,000 left; with
        the fraction cited 0.45 x 25,000 = 11,250."""
        rows = {}
        for code, amount in (("x", 20_000), ("y", 16_000), ("z", 25_000)):
            rows[code] = limit(f"{amount} FC", configuration=make.configuration(code))
        aircraft, part = make.aircraft(opening_cycles=10_000), make.part()
        install(part, aircraft, 0, on=dt.date(2012, 1, 1), config="x")
        for code, cycles, year in (("y", 6_000, 2014), ("z", 10_000, 2016)):
            part_reconfigure(
                actor=None,
                at=AT,
                part=part,
                configuration=make.configuration(code),
                on=dt.date(year, 1, 1),
                counters=at(cycles),
                reason="weight variant changed",
            )
        assert part_life(part, as_of=day(-1)).status().lines[0].remaining == 6_000
        for row in rows.values():
            row.carry_over = "linear"
            row.save()
        life = part_life(part, as_of=day(-1))
        assert life.status().lines[0].remaining == 11_250
        assert life.lines[0].consumed_percent == 55

    def test_a_gap_blocks_and_counts_as_due(self):
        limit("30,000 FC")
        aircraft, part = make.aircraft(), make.part()
        install(part, aircraft, 20_000, on=dt.date(2012, 1, 1))
        earlier(part, "gap", "blocked", at(0), from_on=day(-300), to_on=day(-86))
        life = part_life(part, as_of=TODAY)
        assert life.status().state is DueState.CANNOT_COMPUTE
        assert not life.complete
        assert f"gap in the back-to-birth record {day(-300)}" in life.status().note

    def test_an_assumed_life_counts_and_is_shown_as_assumed(self):
        limit("30,000 FC")
        aircraft, part = make.aircraft(), make.part()
        install(part, aircraft, 20_000, on=dt.date(2012, 1, 1))
        earlier(
            part,
            "gap",
            "assumed_maximum",
            at(1_500),
            evidence="fleet leader's cycles over 214 days",
            acceptance="authority letter 7",
            accepted_by=make.person(),
            second_person=make.person(),
        )
        life = part_life(part, as_of=day(-1))
        assert life.facts.total.cycles == 6_500
        assert life.notes == ("life assumed: fleet leader's cycles over 214 days",)

    def test_a_gap_is_never_plainly_counted_nor_assumed_by_one_person(self):
        part = make.part()
        with pytest.raises(Exception, match="never plainly counted"):
            earlier(part, "gap", "counted", at(10))
        one = make.person()
        with pytest.raises(Exception, match="two people"):
            earlier(
                part,
                "gap",
                "assumed_maximum",
                at(10),
                acceptance="letter",
                accepted_by=one,
                second_person=one,
            )
        assert (
            "read: accepted by nobody"
            in problems(earlier, part, "gap", "assumed_maximum", at(10))[0]
        )

    def test_a_part_without_a_recorded_limit_counts_as_due(self):
        aircraft, part = make.aircraft(), make.part()
        limit("30,000 FC")
        install(part, aircraft, 24_000)
        part.part_number.life_limits.update(state="rejected")
        status = part_life(part, as_of=FIRST).status()
        assert status.note == (
            "cannot be computed: no life limit is recorded for part number ARD-FIT-1"
        )

    def test_calendar_life_from_manufacture_runs_in_store_too(self):
        limit("15 years")
        life = part_life(make.part(), as_of=TODAY)
        assert life.due.on == dt.date(2025, 1, 1)
        assert life.status().state is DueState.DUE

    def test_a_clock_from_first_installation_waits_in_store(self):
        limit("10 years", base="first_fitted")
        part = make.part()
        assert part_life(part, as_of=TODAY).due.on is None
        install(part, make.aircraft(), 25_000, on=day(5))
        assert part_life(part, as_of=TODAY).due.on == dt.date(2034, 10, 6)

    def test_a_limit_since_overhaul_restarts_and_total_life_does_not(self):
        limit("30,000 FC")
        limit("5,000 FC", base="overhaul")
        aircraft, part = make.aircraft(), make.part()
        missing = part_life(part, as_of=TODAY).status()
        assert "at the last overhaul is recorded" in missing.note
        overhaul(part, at(0))
        install(part, aircraft, 24_000, on=dt.date(2024, 9, 1))
        life = part_life(part, as_of=day(-1))
        assert [line.ends_at for line in life.lines] == [30_000, 5_000]
        assert life.due.at.cycles == 5_000

    def test_a_smaller_limit_governs_before_it_is_keyed_again(self):
        limit("30,000 FC")
        limit("20,000 FC", in_force=False)
        life = part_life(make.part(), as_of=TODAY)
        assert life.due.at.cycles == 20_000
        assert life.notes == ("life limit awaits blind re-entry",)

    def test_a_larger_limit_waits_until_it_is_keyed_again(self):
        held = limit("30,000 FC")
        new = limit("40,000 FC", in_force=False, replaces=held)
        part = make.part()
        assert part_life(part, as_of=TODAY).due.at.cycles == 30_000
        with Writing(actor=None, action="life_limit_put_in_force", at=AT) as w:
            life_limit_put_in_force(w, limit=new)
        assert part_life(part, as_of=TODAY).due.at.cycles == 40_000

    @pytest.mark.parametrize("count", [1, 20])
    def test_queries_do_not_grow_with_the_parts(
        self, count, django_assert_max_num_queries
    ):
        limit("30,000 FC")
        parts = [make.part() for _ in range(count)]
        for n, part in enumerate(parts):
            install(part, make.aircraft(f"Q7-T{n:02d}"), 25_000)
        with django_assert_max_num_queries(7):
            assert len(part_lives(parts, as_of=day(3))) == count


def earlier(part, kind, treatment, counters, *, evidence="stores card 3", **columns):
    return part_earlier_life(
        actor=None,
        at=AT,
        part=part,
        kind=kind,
        treatment=treatment,
        counters=counters,
        evidence=evidence,
        **columns,
    )


def overhaul(part, life):
    part_overhaul(
        actor=None,
        at=AT,
        part=part,
        on=dt.date(2024, 8, 1),
        life=life,
        document=make.document(),
    )


class TestRefusals:
    def test_only_a_part_in_store_with_its_release_is_installed(self):
        limit("30,000 FC")
        aircraft = make.aircraft()
        part = make.part("0447", state="quarantined", release_reference="")
        assert problems(install, part, aircraft, 25_000) == [
            "s/n 0447 is quarantined; only a part in store is installed.",
            "s/n 0447 has no release reference; record its release certificate before "
            "installing.",
        ]

    def test_one_serial_is_in_one_place_and_one_position_holds_one(self):
        limit("30,000 FC")
        aircraft, part = make.aircraft(), make.part("0447")
        install(part, aircraft, 25_000)
        assert problems(install, part, make.aircraft("Q7-TSB"), 25_000)[0] == (
            "s/n 0447 is installed; only a part in store is installed."
        )
        assert problems(install, make.part(), aircraft, 25_000) == [
            "MLG LH of Q7-TSA holds s/n 0447 since 2024-10-01; remove it first."
        ]

    def test_a_part_without_life_left_in_the_target_configuration(self):
        limit("30,000 FC", configuration=make.configuration("x"))
        limit("5,000 FC", configuration=make.configuration("y"))
        aircraft, part = make.aircraft(), make.part("0447")
        install(part, aircraft, 19_000, on=dt.date(2015, 1, 1), config="x")
        remove(part, 25_000, on=dt.date(2020, 1, 1))
        assert problems(install, part, aircraft, 25_000, config="y") == [
            "s/n 0447 has no life left in configuration y: ends at 5,000 FC, "
            "accumulated 6,000 FC."
        ]
        install(part, aircraft, 25_000, config="x")

    def test_a_part_with_a_broken_record(self):
        limit("30,000 FC")
        (problem,) = problems(
            install, make.part("0447", chain="broken"), make.aircraft(), 25_000
        )
        assert (
            problem == "s/n 0447 is not installed: the back-to-birth record is broken."
        )

    def test_removal_counters_do_not_run_backwards(self):
        limit("30,000 FC")
        part = make.part()
        install(part, make.aircraft(), 25_000)
        found = problems(remove, part, 24_999, on=day(-1), reason=" ")
        assert found[0].startswith("2024-09-30 lies before 2024-10-01")
        assert "24,999 FC at removal is below 25,000 FC" in found[2]
        assert found[-1] == "Say why the part was removed."

    def test_counters_of_the_aircraft_are_needed(self):
        limit("30,000 FC")
        with pytest.raises(PartRefused, match="Give the aircraft's flight cycles"):
            part_install(
                actor=None,
                at=AT,
                part=make.part(),
                aircraft=make.aircraft(),
                position="MLG LH",
                configuration=make.configuration(),
                on=FIRST,
                counters=Counters(minutes=1, landings=1),
            )

    def test_what_is_not_installed_cannot_be_removed(self):
        assert problems(remove, make.part("0447"), 1, on=FIRST) == [
            "s/n 0447 is not installed, so it cannot be removed."
        ]


def test_an_expired_part_goes_aside_and_not_back():
    limit("30,000 FC")
    part = make.part("0447")
    install(part, make.aircraft(), 25_000)
    remove(part, 25_010, on=day(2), state=PartState.EXPIRED, release="")
    assert part.state == "expired"
    assert "is life expired" in problems(install, part, make.aircraft("Q7-TSB"), 1)[0]


def test_part_numbers_and_serials_are_recorded_in_store():
    number = part_number_record(
        actor=None, at=AT, operator=make.operator(), number="ARD-9", title="Side stay"
    )
    part = part_record(
        actor=None,
        at=AT,
        part_number=number,
        serial="17",
        manufactured_on=None,
        release_reference="certificate 9",
    )
    assert (part.state, str(part)) == ("in_store", "s/n 17")
