"""Where the mount may be: travel of both joints, and the sky its beam may look at."""

from collections.abc import Callable
from math import hypot, inf

from trunnion.mount.clearance import Circle, Sector
from trunnion.mount.joints import Joints, Motion
from trunnion.mount.mount import JointBox, JointLimits
from trunnion.safety.hazard import Hazard
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.verdict import Rule

FINEST_DEG = 0.02
"""Where something is near, the way is looked at in steps of this size: less than any mast."""

LEAVING_DEG = 0.25
"""A way that begins where it may not, by the encoder's error or the like, has left after this."""

ROOM_DEG = 1.0
"""A place with this much room round it needs no closer look."""

ROUNDING_DEG = 1e-9


def find_at(
    place: Joints, limits: SafetyLimits, allowance_deg: float = ROUNDING_DEG
) -> Hazard | None:
    """What forbids this place, if anything; `allowance_deg` forgives that much below or outside.

    Below zero it asks for that much more room.

    Inside a circle nothing is forgiven: it moves, and would be forgiven again and again.
    """
    mount = limits.mount
    first_deg, second_deg = place
    first, second = mount.first, mount.second
    if not first.lower_deg - allowance_deg <= first_deg <= first.upper_deg + allowance_deg:
        return _off_travel("first", first_deg, first)
    if not second.lower_deg - allowance_deg <= second_deg <= second.upper_deg + allowance_deg:
        return _off_travel("second", second_deg, second)
    for box in mount.forbidden:
        if box.meets(place, place):
            finding = f"joints at {first_deg:.1f}°/{second_deg:.1f}° are in {box.name}"
            return Hazard(Rule.KEEP_OUT, finding)
    azimuth_deg, elevation_deg = mount.hinges.boresight(place)
    if elevation_deg + min(allowance_deg, 0.0) > limits.clearance.free_above_deg:
        return None
    return _find_in_sky(azimuth_deg, elevation_deg, limits, allowance_deg)


def has_room(place: Joints, limits: SafetyLimits) -> bool:
    """Whether nothing at all is forbidden within `ROOM_DEG` of this place, by either joint."""
    mount = limits.mount
    first_deg, second_deg = place
    first, second = mount.first, mount.second
    return (
        first.lower_deg + ROOM_DEG <= first_deg <= first.upper_deg - ROOM_DEG
        and second.lower_deg + ROOM_DEG <= second_deg <= second.upper_deg - ROOM_DEG
        and _is_free_around(place, ROOM_DEG, limits)
    )


def find_on_the_way(begin: Joints, end: Joints, limits: SafetyLimits) -> Hazard | None:
    """What forbids the straight way between two places, its end included and its begin left out.

    Of a begin that is forbidden itself, its surroundings are left out with it.
    """
    found = find_at(end, limits)
    if found is not None:
        return found
    first_deg, second_deg = end.first_deg - begin.first_deg, end.second_deg - begin.second_deg

    def way(share: float) -> Joints:
        return Joints(begin.first_deg + share * first_deg, begin.second_deg + share * second_deg)

    if find_at(begin, limits) is None:
        return _find_between(way, 0.0, 1.0, limits, ROUNDING_DEG)
    leaving = LEAVING_DEG / max(abs(first_deg), abs(second_deg), LEAVING_DEG)
    return find_at(way(leaving), limits) or _find_between(way, leaving, 1.0, limits, ROUNDING_DEG)


def find_while_stopping(
    motion: Motion, limits: SafetyLimits, allowance_deg: float = ROUNDING_DEG
) -> Hazard | None:
    """What forbids the way on which both joints come to rest if they brake from this motion.

    Each joint brakes by itself, so that the way is bent.
    """
    found = find_at(stopping_place(motion, limits), limits, allowance_deg)
    if found is not None:
        return found
    found = find_at(motion.joints, limits, allowance_deg)
    if found is not None:
        return found
    first, second = limits.braking.first, limits.braking.second
    longest_s = max(
        abs(motion.first_rate_deg_s) / first.acceleration_deg_s2,
        abs(motion.second_rate_deg_s) / second.acceleration_deg_s2,
    )

    def way(share: float) -> Joints:
        return _braked(motion, limits, longest_s * share)

    return _find_between(way, 0.0, 1.0, limits, allowance_deg)


def _find_between(
    way: Callable[[float], Joints],
    begin: float,
    end: float,
    limits: SafetyLimits,
    allowance_deg: float,
) -> Hazard | None:
    """What forbids a stretch of a way whose ends are clear: by halves, until each is free.

    Along the way neither joint turns back, so that all of the stretch is as near to one end as the
    other end is.
    """
    one, other = way(begin), way(end)
    reach_deg = hypot(other.first_deg - one.first_deg, other.second_deg - one.second_deg)
    if reach_deg <= FINEST_DEG or _is_free_around(one, reach_deg, limits):
        return None
    middle = 0.5 * (begin + end)
    return (
        find_at(way(middle), limits, allowance_deg)
        or _find_between(way, begin, middle, limits, allowance_deg)
        or _find_between(way, middle, end, limits, allowance_deg)
    )


def _is_free_around(place: Joints, reach_deg: float, limits: SafetyLimits) -> bool:
    """Whether sky and joint angles are free as far round; the travel is not looked at.

    Turning the joints by a and b moves the boresight by no more than the root of a² + b².
    """
    first_deg, second_deg = place
    if limits.mount.forbidden:
        one = Joints(first_deg - reach_deg, second_deg - reach_deg)
        other = Joints(first_deg + reach_deg, second_deg + reach_deg)
        if any(box.meets(one, other) for box in limits.mount.forbidden):
            return False
    return limits.clearance.is_free_around(*limits.mount.hinges.boresight(place), reach_deg)


def stopping_place(motion: Motion, limits: SafetyLimits) -> Joints:
    """Where both joints come to rest if they brake from this motion, with something in reserve."""
    return _braked(motion, limits, inf)


def _braked(motion: Motion, limits: SafetyLimits, after_s: float) -> Joints:
    """Where both joints are that have braked for so long."""
    first, second = limits.braking.first, limits.braking.second
    return Joints(
        _braking_deg(motion.first_deg, motion.first_rate_deg_s, first, after_s),
        _braking_deg(motion.second_deg, motion.second_rate_deg_s, second, after_s),
    )


def _braking_deg(angle_deg: float, rate_deg_s: float, joint: JointLimits, after_s: float) -> float:
    """Where a joint is that has braked for so long, or is at rest since."""
    braking_s = min(after_s, abs(rate_deg_s) / joint.acceleration_deg_s2)
    slowing = joint.acceleration_deg_s2 if rate_deg_s > 0.0 else -joint.acceleration_deg_s2
    return angle_deg + (rate_deg_s - 0.5 * slowing * braking_s) * braking_s


def depth_deg(place: Joints, limits: SafetyLimits) -> float:
    """How far (deg) a place is outside its limits, by the worst of them; 0 inside."""
    mount, clearance = limits.mount, limits.clearance
    azimuth_deg, elevation_deg = mount.hinges.boresight(place)
    sector = clearance.keep_out(azimuth_deg, elevation_deg)
    return max(
        0.0,
        mount.first.lower_deg - place.first_deg,
        place.first_deg - mount.first.upper_deg,
        mount.second.lower_deg - place.second_deg,
        place.second_deg - mount.second.upper_deg,
        clearance.lowest_deg(azimuth_deg) - elevation_deg,
        0.0 if sector is None else _depth_in_sector_deg(azimuth_deg, elevation_deg, sector),
        *(circle.depth_deg(azimuth_deg, elevation_deg) for circle in clearance.circles),
        *(_depth_in_box_deg(place, box) for box in mount.forbidden),
    )


def _depth_in_sector_deg(azimuth_deg: float, elevation_deg: float, sector: Sector) -> float:
    return min(
        (azimuth_deg - sector.from_azimuth_deg) % 360.0,
        (sector.to_azimuth_deg - azimuth_deg) % 360.0,
        elevation_deg - sector.lower_elevation_deg,
        sector.upper_elevation_deg - elevation_deg,
    )


def _depth_in_box_deg(place: Joints, box: JointBox) -> float:
    return min(
        place.first_deg - box.first_lower_deg,
        box.first_upper_deg - place.first_deg,
        place.second_deg - box.second_lower_deg,
        box.second_upper_deg - place.second_deg,
    )


def _off_travel(name: str, angle_deg: float, joint: JointLimits) -> Hazard:
    travel = f"{joint.lower_deg:g}…{joint.upper_deg:g}°"
    return Hazard(Rule.TRAVEL, f"{name} joint at {angle_deg:.2f}°, its travel is {travel}")


def _find_in_sky(
    azimuth_deg: float, elevation_deg: float, limits: SafetyLimits, allowance_deg: float
) -> Hazard | None:
    clearance = limits.clearance
    if elevation_deg < clearance.floor_deg - allowance_deg:
        finding = f"elevation {elevation_deg:.2f}°, the floor is {clearance.floor_deg:g}°"
        return Hazard(Rule.FLOOR, finding)
    lowest_deg = clearance.lowest_deg(azimuth_deg)
    if elevation_deg < lowest_deg - allowance_deg:
        finding = (
            f"elevation {elevation_deg:.2f}° at azimuth {azimuth_deg:.1f}°, "
            f"the horizon mask stands at {lowest_deg:.2f}°"
        )
        return Hazard(Rule.MASK, finding)
    sector = clearance.keep_out(azimuth_deg, elevation_deg)
    if sector is not None:
        finding = f"azimuth {azimuth_deg:.1f}°, elevation {elevation_deg:.1f}° is in {sector.name}"
        return Hazard(Rule.KEEP_OUT, finding)
    for circle in clearance.circles:
        inside_deg = circle.depth_deg(azimuth_deg, elevation_deg)
        if inside_deg > min(allowance_deg, ROUNDING_DEG):
            return _in_circle(circle, inside_deg)
    return None


def _in_circle(circle: Circle, inside_deg: float) -> Hazard:
    away_deg = circle.radius_deg - inside_deg
    finding = f"{away_deg:.2f}° from {circle.name}, {circle.radius_deg:g}° have to be kept"
    return Hazard(Rule.SUN, finding)
