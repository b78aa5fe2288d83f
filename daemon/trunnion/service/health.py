"""Asks all parts of the daemon how they fare; safe from any thread."""

from collections.abc import Mapping

from trunnion.service.parts import Parts
from trunnion.service.status import Health, describe


def status_of(parts: Parts) -> Mapping[str, object]:
    """What `trunnion status` prints."""
    turning = parts.turning
    return describe(parts.station, turning.pulse.turn, turning.contacts.score, health_of(parts))


def health_of(parts: Parts) -> Health:
    """How everything round the control turn fares at this moment."""
    keeping, planning, turning = parts.keeping, parts.planning, parts.turning
    return Health(
        utc_s=parts.clock.utc_s(),
        wish=keeping.wish.wish,
        stop=keeping.desk.latched,
        link=turning.link.status,
        beat=turning.pulse.beat,
        missed_turns=turning.pulse.missed,
        records_trouble=keeping.records.trouble,
        plan_trouble=planning.plans.trouble,
        is_planning=planning.plans.is_planning,
        transmit=turning.transmission.permit_at(parts.clock.monotonic_s()),
        transmit_trouble=turning.transmission.trouble,
        sensors_trouble=turning.senses.trouble,
        correction=planning.corrections.in_force,
        wish_trouble=keeping.wish.trouble,
        correction_trouble=planning.corrections.trouble,
    )
