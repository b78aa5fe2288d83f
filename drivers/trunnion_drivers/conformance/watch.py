"""What the kit does with a mount again and again: send it somewhere, and see whether it rests."""

from collections.abc import Callable
from math import sqrt

from trunnion_drivers.conformance.rig import Rig
from trunnion_drivers.interface.values import DriverMotion, DriverReading, JointFacts

_RENEWAL_S = 0.1
_ARRIVALS = 3


def come_home(rig: Rig) -> None:
    """Open the driver and bring the mount to rest at home."""
    rig.driver.open()
    settle(rig, rig.home)
    assert error_deg(rig.driver.read(), rig.home) <= rig.accuracy_deg  # noqa: S101 - a test's


def settle(rig: Rig, goal: DriverMotion) -> None:
    """Order this goal again and again, as a daemon would, until the mount rests there.

    It is given twice the time that its rates and accelerations ask for, after its brake let go.
    """
    begin_s = rig.clock.monotonic_s() + _letting_go_s(rig)
    reading = rig.driver.read()
    until_s = begin_s + 2.0 * _longest_slew_s(rig, reading, goal) + 5 * rig.lag_s
    arrivals = 0
    while arrivals < _ARRIVALS and rig.clock.monotonic_s() < until_s + 1.0:
        rig.driver.move(goal)
        rig.clock.sleep(_RENEWAL_S)
        is_there = error_deg(rig.driver.read(), goal) <= rig.accuracy_deg
        is_there &= rig.clock.monotonic_s() > begin_s
        arrivals = arrivals + 1 if is_there else 0


def move_and_read(rig: Rig, goal: DriverMotion) -> None:
    """Order this goal, then read: one of both meets a fault of the link."""
    rig.driver.move(goal)
    rig.driver.read()


def moved(home: DriverMotion, joint: int, by_deg: float) -> DriverMotion:
    """A goal at rest, this far from home in one joint."""
    return replaced(home, joint, home[joint] + by_deg)


def replaced(motion: DriverMotion, place: int, value: float) -> DriverMotion:
    """The same motion with another value in one place."""
    values = list(motion)
    values[place] = value
    return DriverMotion(*values)


def error_deg(reading: DriverReading, goal: DriverMotion) -> float:
    """How far the worse joint is from its goal."""
    return max(abs(reading.first_deg - goal.first_deg), abs(reading.second_deg - goal.second_deg))


def is_still(rig: Rig) -> bool:
    """Whether the mount stays where it is for a while."""
    before = rig.driver.read()
    rig.clock.sleep(still_s(rig))
    after = rig.driver.read()
    return error_deg(after, DriverMotion(before.first_deg, before.second_deg, 0.0, 0.0)) <= (
        2 * rig.accuracy_deg
    )


def rest_until_braked(rig: Rig) -> None:
    """Halt and read as a daemon does, until the brake holds or has had all the time it needs."""
    timing = rig.driver.brake_timing
    stopping_s = max(
        j.rate_deg_s / j.acceleration_deg_s2 for j in (rig.facts.first, rig.facts.second)
    )
    until_s = rig.clock.monotonic_s() + 2.0 * (rig.lag_s + stopping_s + timing.still_s) + 1.0
    while rig.is_braked and not rig.is_braked() and rig.clock.monotonic_s() < until_s:
        rig.driver.halt()
        rig.clock.sleep(_RENEWAL_S)
        rig.driver.read()


def is_still_at_first(rig: Rig) -> bool:
    """Whether the mount stays where it is until its brake has had the time to let go."""
    before = rig.driver.read()
    rig.clock.sleep(0.5 * rig.driver.brake_timing.settle_s)
    after = rig.driver.read()
    return error_deg(after, DriverMotion(before.first_deg, before.second_deg, 0.0, 0.0)) <= (
        2 * rig.accuracy_deg
    )


def has_come_to_rest(rig: Rig) -> bool:
    """Whether the mount is still once it had the time to stop from its highest rate."""
    joints = (rig.facts.first, rig.facts.second)
    rig.clock.sleep(rig.lag_s + max(j.rate_deg_s / j.acceleration_deg_s2 for j in joints))
    return is_still(rig)


def still_s(rig: Rig) -> float:
    """How long to watch for motion."""
    return rig.lag_s + 0.2


def lasted_s(rig: Rig, call: Callable[[], object]) -> float:
    """How long this call took by the rig's clock."""
    before_s = rig.clock.monotonic_s()
    call()
    return rig.clock.monotonic_s() - before_s


def part_way_s(rig: Rig, by_deg: float) -> float:
    """A time in which the first joint gets some of this way, and not all of it."""
    joint = rig.facts.first
    quickest_s = max(by_deg / joint.rate_deg_s, 2.0 * sqrt(by_deg / joint.acceleration_deg_s2))
    return 0.4 * quickest_s


def _letting_go_s(rig: Rig) -> float:
    return rig.driver.brake_timing.settle_s if rig.driver.capabilities.has_brake else 0.0


def _longest_slew_s(rig: Rig, reading: DriverReading, goal: DriverMotion) -> float:
    first_s = _slew_s(rig.facts.first, goal.first_deg - reading.first_deg)
    second_s = _slew_s(rig.facts.second, goal.second_deg - reading.second_deg)
    return max(first_s, second_s)


def _slew_s(joint: JointFacts, distance_deg: float) -> float:
    """Upper bound of the time from rest to rest: all the way at full rate, and one ramp."""
    return abs(distance_deg) / joint.rate_deg_s + 2 * joint.rate_deg_s / joint.acceleration_deg_s2
