"""From one contact to the next without a pause between: who pays for the slew.

The more wanted contact begins in time, and the one before it ends early; otherwise the one that
comes after begins when the mount has got there.
"""

from dataclasses import replace

from trunnion.mount.clearance import Clearance
from trunnion.mount.joints import Joints
from trunnion.mount.mount import Mount
from trunnion.track.path import Assignment, Path
from trunnion.track.sharing import SHORTEST_S
from trunnion.track.transit import transit, transit_time_s

SETTLED_S = 0.01
"""Where ending earlier (or beginning later) by less changes nothing any more."""

ROUNDS = 12
"""The slew changes with the place it begins or ends at; this often it is counted anew."""


def end_early(
    before: Assignment, begins: Joints, begin_s: float, mount: Mount, clearance: Clearance
) -> Assignment:
    """The assignment, ended so that the mount can be at `begins` at `begin_s`.

    It keeps at least a little of its time, so that this may not be enough. Raises NoWay.
    """
    end_s = before.end_s
    for _ in range(ROUNDS):
        place = before.path.at(end_s).joints
        latest_s = begin_s - _slew_s(place, begins, mount, clearance)
        wanted_s = max(min(before.end_s, latest_s), min(before.begin_s + SHORTEST_S, before.end_s))
        if abs(wanted_s - end_s) < SETTLED_S:
            break
        end_s = wanted_s
    return replace(before, end_s=min(end_s, wanted_s))


def begin_late(
    path: Path,
    span: tuple[float, float],
    place: Joints,
    free_s: float,
    mount: Mount,
    clearance: Clearance,
) -> float:
    """When the mount, free at `place` from `free_s` on, can first be on the path; raises NoWay.

    Not before the path's own beginning, and not after its end.
    """
    begin_s, end_s = span
    there_s = begin_s
    for _ in range(ROUNDS):
        arrives_s = free_s + _slew_s(place, path.at(there_s).joints, mount, clearance)
        wanted_s = min(max(begin_s, arrives_s), end_s)
        if abs(wanted_s - there_s) < SETTLED_S:
            break
        there_s = wanted_s
    return max(there_s, wanted_s)


def _slew_s(place: Joints, goal: Joints, mount: Mount, clearance: Clearance) -> float:
    return transit_time_s(place, transit(place, goal, mount, clearance), mount)
