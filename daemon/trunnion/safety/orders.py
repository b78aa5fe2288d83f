"""What of a demand may leave: the motion nearest to it that is within every limit."""

from math import isfinite
from typing import NamedTuple

from trunnion.mount.joints import Motion, Reading
from trunnion.mount.motion import approach
from trunnion.mount.mount import JointLimits
from trunnion.safety.hazard import Hazard
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.places import (
    ROOM_DEG,
    find_at,
    find_on_the_way,
    find_while_stopping,
    stopping_place,
)
from trunnion.safety.verdict import Rule

NOTICEABLE_DEG_S = 0.1
"""Less than this a measured rate may differ from the ordered one by the encoder's noise alone."""

BRAKES_SHARE = 0.6
"""A joint that slows down with this share of its acceleration counts as braking already."""

TINY_S = 1e-6


class Examined(NamedTuple):
    """The motion that may leave, if any, and what kept it from being the one asked for."""

    motion: Motion | None
    hazards: tuple[Hazard, ...] = ()


class Mounted(NamedTuple):
    """How the mount is held to move: by its last order, or at rest, and by its readings."""

    base: Motion
    reading: Reading
    measured: Motion


def examine(
    demand: Motion, now: Mounted, dt_s: float, limits: SafetyLimits, *, has_room: bool = False
) -> Examined:
    """Bring a demand within rates and accelerations, and refuse or brake what leads outside.

    `has_room` says that all is clear within `ROOM_DEG` of the reading.
    """
    if not isfinite(sum(demand)):
        return Examined(None, (Hazard(Rule.NOT_FINITE, f"asked for {tuple(demand)}"),))
    motion = approach(now.base, demand, limits.mount, dt_s)
    if has_room and motion == demand and _stays_near(motion, now, limits):
        return Examined(motion)
    if motion == demand:
        forbidden = find_on_the_way(now.reading.joints, motion.joints, limits)
        found: tuple[Hazard, ...] = ()
    else:
        forbidden = find_on_the_way(now.reading.joints, motion.joints, limits) or find_at(
            demand.joints, limits
        )
        found = (Hazard(Rule.RATE, f"{_asked(demand)}, more than a joint can do at once"),)
    if forbidden is not None:
        return Examined(None, (*found, _in_words(forbidden, demand)))
    beyond = _find_beyond(_until_next_turn(motion, now.base, dt_s, limits), now.measured, limits)
    if beyond is None:
        return Examined(motion, found)
    return _brake(now, dt_s, (*found, _too_fast(beyond, demand)), limits)


def _stays_near(motion: Motion, now: Mounted, limits: SafetyLimits) -> bool:
    """Whether the order and all of its stopping distance is well within the reading's room."""
    first_deg = _need_deg(
        motion.first_deg - now.reading.first_deg,
        max(abs(motion.first_rate_deg_s), abs(now.measured.first_rate_deg_s)),
        limits.braking.first,
        limits,
    )
    second_deg = _need_deg(
        motion.second_deg - now.reading.second_deg,
        max(abs(motion.second_rate_deg_s), abs(now.measured.second_rate_deg_s)),
        limits.braking.second,
        limits,
    )
    return first_deg + second_deg < ROOM_DEG


def _need_deg(
    away_deg: float, rate_deg_s: float, braking: JointLimits, limits: SafetyLimits
) -> float:
    """No joint gets further from where it was read: the order, a turn at its rate, braking."""
    return abs(away_deg) + rate_deg_s * (
        limits.turn_s + rate_deg_s / (2.0 * braking.acceleration_deg_s2)
    )


def _find_beyond(motion: Motion, measured: Motion, limits: SafetyLimits) -> Hazard | None:
    """What forbids the place where the joints would rest if they braked now, or the way there.

    From the order's own rate, and from the rate that the readings show: a mount that runs ahead of
    its orders, or after them, needs its own room.
    """
    beyond = find_while_stopping(motion, limits)
    if beyond is not None or not _is_faster(measured, motion):
        return beyond
    return find_while_stopping(measured, limits, limits.encoder_error_deg)


def _until_next_turn(motion: Motion, base: Motion, dt_s: float, limits: SafetyLimits) -> Motion:
    """Where the order takes the mount before it can be thought better of."""
    first, second = limits.mount.first, limits.mount.second
    first_s = _coasting_s(motion.first_rate_deg_s, base.first_rate_deg_s, dt_s, first, limits)
    second_s = _coasting_s(motion.second_rate_deg_s, base.second_rate_deg_s, dt_s, second, limits)
    return motion._replace(
        first_deg=motion.first_deg + motion.first_rate_deg_s * first_s,
        second_deg=motion.second_deg + motion.second_rate_deg_s * second_s,
    )


def _coasting_s(
    rate_deg_s: float, was_deg_s: float, dt_s: float, joint: JointLimits, limits: SafetyLimits
) -> float:
    """How long a joint goes on as it is: a turn, but for one that brakes already."""
    braking_deg_s = abs(was_deg_s) - abs(rate_deg_s)
    share = braking_deg_s / (BRAKES_SHARE * joint.acceleration_deg_s2 * max(dt_s, TINY_S))
    return limits.turn_s * (1.0 - min(max(share, 0.0), 1.0))


def _brake(now: Mounted, dt_s: float, found: tuple[Hazard, ...], limits: SafetyLimits) -> Examined:
    """Brake along the way that the mount is on; where even that is not clear, nothing leaves."""
    rest = Motion(*stopping_place(now.base, limits))
    braking = approach(now.base, rest, limits.braking, dt_s)
    if find_on_the_way(now.reading.joints, braking.joints, limits) is not None:
        return Examined(None, found)
    return Examined(braking, found)


def _is_faster(measured: Motion, ordered: Motion) -> bool:
    """Whether a joint moves noticeably faster than it was told to, and so needs more room."""
    return (
        abs(measured.first_rate_deg_s) > abs(ordered.first_rate_deg_s) + NOTICEABLE_DEG_S
        or abs(measured.second_rate_deg_s) > abs(ordered.second_rate_deg_s) + NOTICEABLE_DEG_S
    )


def _asked(demand: Motion) -> str:
    return f"asked for {demand.first_deg:.1f}°/{demand.second_deg:.1f}°"


def _in_words(hazard: Hazard, demand: Motion) -> Hazard:
    return Hazard(hazard.rule, f"{_asked(demand)}: {hazard.finding}")


def _too_fast(hazard: Hazard, demand: Motion) -> Hazard:
    return Hazard(Rule.STOPPING, f"{_asked(demand)}, could not stop in time: {hazard.finding}")
