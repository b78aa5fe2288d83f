"""When to leave for the next contact, and whether there is time to stow before it."""

from enum import Enum
from typing import NamedTuple

from trunnion.mount.clearance import Clearance
from trunnion.mount.joints import Joints
from trunnion.mount.mount import Mount
from trunnion.track.transit import transit, transit_time_s


class Pause(Enum):
    """What to do with the time until the next contact."""

    STOW = "stow"
    GO = "go"


class Timing(NamedTuple):
    """How early to be at the rise point, and what pause is worth a trip to stow (seconds)."""

    lead_s: float = 30.0
    dwell_s: float = 60.0


class Departure(NamedTuple):
    """What to do now, and the UTC second at which the mount has to leave where it stands."""

    pause: Pause
    leave_s: float


def plan_departure(
    place: Joints, start: Joints, begin_s: float, utc_s: float, facts: "Facts"
) -> Departure:
    """Choose between stow and the start of the next contact, from where the mount stands.

    The mount goes to stow when it can still be back `lead_s` before the contact begins after
    having rested there for `dwell_s`. Raises NoWay where no clear way leads to the start.
    """
    direct_s = _way_s(place, start, facts)
    leave_s = begin_s - direct_s - facts.timing.lead_s
    if utc_s >= leave_s:
        return Departure(Pause.GO, leave_s)
    if place == facts.mount.stow:
        return Departure(Pause.STOW, leave_s)
    back_s = _way_s(facts.mount.stow, start, facts)
    round_trip_s = _way_s(place, facts.mount.stow, facts) + facts.timing.dwell_s + back_s
    if utc_s + round_trip_s + facts.timing.lead_s > begin_s:
        return Departure(Pause.GO, leave_s)
    return Departure(Pause.STOW, begin_s - back_s - facts.timing.lead_s)


class Facts(NamedTuple):
    """What the pilot knows of its antenna."""

    mount: Mount
    clearance: Clearance
    tolerance_deg: float
    timing: Timing = Timing()
    sun_keep_out_deg: float | None = None


def _way_s(start: Joints, goal: Joints, facts: Facts) -> float:
    return transit_time_s(start, transit(start, goal, facts.mount, facts.clearance), facts.mount)
