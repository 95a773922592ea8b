"""Aircraft joining and leaving, their periods, states and panels."""

from __future__ import annotations

import datetime as dt

from fleet.models import (
    Aircraft,
    AircraftPeriod,
    AircraftSpan,
    AircraftType,
    Configuration,
    Document,
    Material,
    Operator,
    Organisation,
    Panel,
    PanelOnAircraft,
    User,
    Variant,
)
from fleet.services.history import Writing


def configuration_add(
    *,
    aircraft_type: AircraftType,
    code: str,
    name: str,
    at: dt.datetime,
    actor: User | None = None,
) -> Configuration:
    """A model, weight variant or role that life limits may depend on."""
    with Writing(actor=actor, action="configuration_add", at=at) as w:
        return w.create(
            Configuration(aircraft_type=aircraft_type, code=code, name=name)
        )


def aircraft_add(
    *,
    operator: Operator,
    variant: Variant,
    serial_number: str,
    registration: str,
    data_from: dt.date,
    opening_minutes: int,
    opening_cycles: int,
    opening_landings: int,
    opening_source: str,
    at: dt.datetime,
    opening_pressurisations: int | None = None,
    manufactured_on: dt.date | None = None,
    configuration: Configuration | None = None,
    state: str = "in_service",
    camo: Organisation | None = None,
    owner: Organisation | None = None,
    actor: User | None = None,
    rekeyed_by: User | None = None,
) -> Aircraft:
    """An aircraft with its opening counters, first period and first state."""
    aircraft = Aircraft(
        operator=operator,
        variant=variant,
        serial_number=serial_number,
        registration=registration,
        manufactured_on=manufactured_on,
        data_from=data_from,
        opening_minutes=opening_minutes,
        opening_cycles=opening_cycles,
        opening_landings=opening_landings,
        opening_pressurisations=opening_pressurisations,
        opening_source=opening_source,
        opening_keyed_by=actor,
        opening_rekeyed_by=rekeyed_by,
    )
    with Writing(actor=actor, action="aircraft_add", at=at, operator=operator) as w:
        w.create(aircraft)
        w.create(
            AircraftPeriod(
                aircraft=aircraft,
                operator=operator,
                registration=registration,
                camo=camo,
                owner=owner,
                regime=operator.regime,
                from_on=data_from,
                at_minutes=opening_minutes,
                at_cycles=opening_cycles,
                at_landings=opening_landings,
                at_pressurisations=opening_pressurisations,
            )
        )
        w.create(
            AircraftSpan(
                aircraft=aircraft,
                state=state,
                configuration=configuration,
                from_on=data_from,
            )
        )
    return aircraft


def aircraft_leave(
    *,
    aircraft: Aircraft,
    left_on: dt.date,
    reason: str,
    at: dt.datetime,
    actor: User | None = None,
) -> None:
    """The aircraft is handed back: its period and state end, its records stay."""
    with Writing(
        actor=actor,
        action="aircraft_leave",
        at=at,
        operator=aircraft.operator,
        stream=stream_of(aircraft),
        reason=reason,
    ) as w:
        w.change(aircraft, data_to=left_on)
        for row in aircraft.periods.filter(to_on__isnull=True):
            w.change(row, to_on=left_on)
        for span in aircraft.spans.filter(to_on__isnull=True):
            w.change(span, to_on=left_on)


def aircraft_set_state(
    *,
    aircraft: Aircraft,
    state: str,
    from_on: dt.date,
    at: dt.datetime,
    reason: str = "",
    configuration: Configuration | None = None,
    actor: User | None = None,
) -> AircraftSpan:
    """Close the state that holds and open the next, a day later."""
    with Writing(
        actor=actor,
        action="aircraft_set_state",
        at=at,
        operator=aircraft.operator,
        stream=stream_of(aircraft),
        reason=reason,
    ) as w:
        kept = configuration
        for span in aircraft.spans.filter(to_on__isnull=True):
            w.change(span, to_on=from_on - dt.timedelta(days=1))
            kept = kept or span.configuration
        return w.create(
            AircraftSpan(
                aircraft=aircraft, state=state, configuration=kept, from_on=from_on
            )
        )


def panel_on_aircraft_record(
    *,
    aircraft: Aircraft,
    panel: Panel,
    reason: str,
    from_on: dt.date,
    source: str,
    at: dt.datetime,
    at_minutes: int | None = None,
    at_cycles: int | None = None,
    thickness_mm: float | None = None,
    material: Material | None = None,
    document: Document | None = None,
    actor: User | None = None,
) -> PanelOnAircraft:
    """Skin that was replaced, modified or blended on this tail."""
    with Writing(
        actor=actor,
        action="panel_on_aircraft_record",
        at=at,
        operator=aircraft.operator,
        stream=stream_of(aircraft),
    ) as w:
        return w.create(
            PanelOnAircraft(
                aircraft=aircraft,
                panel=panel,
                reason=reason,
                from_on=from_on,
                at_minutes=at_minutes,
                at_cycles=at_cycles,
                thickness_mm=thickness_mm,
                material=material,
                document=document,
                source=source,
            )
        )


def stream_of(aircraft: Aircraft) -> str:
    """The name of the aircraft's own chain of history."""
    return f"aircraft:{aircraft.pk}"
