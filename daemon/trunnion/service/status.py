"""What the daemon says of itself when asked: plain data, for people and for programs."""

from math import isfinite
from typing import NamedTuple

from trunnion.files.station import StationFile
from trunnion.mount.joints import Motion
from trunnion.pilot.phase import Wish
from trunnion.safety.emergency import EmergencyStop
from trunnion.safety.transmit import TransmitPermit
from trunnion.safety.verdict import Move
from trunnion.safety.world import World
from trunnion.service.cadence import Beat
from trunnion.service.correction_request import plain_correction
from trunnion.service.explanation import explanations
from trunnion.service.link.status import LinkStatus
from trunnion.service.recorder import summary_of
from trunnion.service.score import Score
from trunnion.service.standing_correction import CorrectionInForce
from trunnion.service.turn import Turn
from trunnion.sky.instants import format_utc


class Health(NamedTuple):
    """How everything round the control turn fares at this moment."""

    utc_s: float
    wish: Wish
    stop: EmergencyStop | None
    link: LinkStatus
    beat: Beat
    missed_turns: int
    records_trouble: str | None
    plan_trouble: str | None
    is_planning: bool
    transmit: TransmitPermit
    transmit_trouble: str | None
    sensors_trouble: str | None
    correction: CorrectionInForce | None = None
    wish_trouble: str | None = None
    correction_trouble: str | None = None


def describe(
    station: StationFile, turn: Turn | None, score: Score | None, health: Health
) -> dict[str, object]:
    """The daemon's state as JSON holds it; times in ISO 8601, angles in degrees."""
    return {
        "station": station.site.name,
        "time": format_utc(health.utc_s),
        "phase": turn.decision.phase.value if turn else "starting",
        "wish": health.wish.value,
        "emergency_stop": _stop(health.stop),
        "contact": _contact(turn, score) if turn else None,
        "correction": plain_correction(health.correction),
        "mount": _mount(turn) if turn else None,
        "interventions": explanations(turn) if turn else [],
        "surroundings": _surroundings(turn.world) if turn else None,
        "transmit": _transmit(health.transmit),
        "link": _link(health.link),
        "turns": {"lateness_s": health.beat.lateness_s, "missed": health.missed_turns},
        "trouble": _troubles(turn, health),
        "is_planning": health.is_planning,
    }


def _stop(stop: EmergencyStop | None) -> dict[str, object] | None:
    return (
        None
        if stop is None
        else {
            "cause": stop.cause,
            "since": format_utc(stop.utc_s)
            if stop.utc_s > 0.0
            else None,  # a damaged latch knows none
        }
    )


def _contact(turn: Turn, score: Score | None) -> dict[str, object] | None:
    decision = turn.decision
    if decision.assignment is None:
        return None
    look = decision.look
    return {
        "id": decision.assignment.contact,
        "target": decision.assignment.target.name,
        "begin": format_utc(decision.assignment.begin_s),
        "end": format_utc(decision.assignment.end_s),
        "azimuth_deg": look.azimuth_deg if look else None,
        "elevation_deg": look.elevation_deg if look else None,
        "range_km": look.range_km if look else None,
        "error_deg": decision.error_deg,
        "so_far": summary_of(score) if score else None,
    }


def _mount(turn: Turn) -> dict[str, object]:
    reading, order = turn.reading, turn.verdict.order
    return {
        "reading_deg": list(reading.joints) if reading else None,
        "reading_age_s": turn.mono_s - reading.taken_s if reading else None,
        "demand_deg": _joints(turn.decision.demand),
        "order_deg": _joints(order.motion if isinstance(order, Move) else None),
        "leaves_at": format_utc(turn.decision.departure_s) if turn.decision.departure_s else None,
    }


def _joints(motion: Motion | None) -> list[float] | None:
    return None if motion is None else list(motion.joints)


def _surroundings(world: World) -> dict[str, object]:
    return {
        "clock_error_s": _finite(world.clock_error_s),
        "wind_gust_m_s": world.wind_gust_m_s,
        "wind_mean_m_s": world.wind_mean_m_s,
        "heartbeat_age_s": world.heartbeat_age_s,
    }


def _finite(value: float | None) -> float | None:
    """JSON has no word for a clock that nobody ever set."""
    return value if value is not None and isfinite(value) else None


def _transmit(permit: TransmitPermit) -> dict[str, object]:
    return {"is_permitted": permit.until_s is not None, "reason": permit.reason}


def _link(link: LinkStatus) -> dict[str, object]:
    return {
        "state": link.state.value,
        "failures": link.failures,
        "connections": link.connections,
        "last_error": link.last_error,
        "stop_pressed": link.stop_pressed,
        "at_limit": link.at_limit,
        "fault": link.fault,
        "is_power_cut": link.is_power_cut,
    }


def _troubles(turn: Turn | None, health: Health) -> list[str]:
    possible = (
        turn.decision.trouble if turn else None,
        health.plan_trouble,
        health.records_trouble,
        health.transmit_trouble,
        health.sensors_trouble,
        health.wish_trouble,
        health.correction_trouble,
    )
    return [each for each in possible if each]
