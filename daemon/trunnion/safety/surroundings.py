"""Hazards that come from outside: the link, the clock, the wind, the turn itself."""

from collections.abc import Iterator
from math import isnan

from trunnion.safety.hazard import Hazard
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.verdict import Rule
from trunnion.safety.world import World

CALM_SHARE = 0.8
"""Once the wind was too high, it must fall below this share of the limit to count as lower."""


def find_around(world: World, limits: SafetyLimits, acting: frozenset[Rule]) -> Iterator[Hazard]:
    """Everything wrong with the surroundings in this turn.

    `acting` are the rules that act already. Numbers that are not finite count as not known.
    """
    if world.emergency is not None:
        yield Hazard(Rule.EMERGENCY_STOP, f"emergency stop: {world.emergency.cause}")
    if not world.is_link_up:
        yield Hazard(Rule.LINK_DOWN, "the mount does not answer as it should")
    if world.mount_fault is not None:
        yield Hazard(Rule.MOUNT_FAULT, f"the mount reports: {world.mount_fault}")
    if not world.lateness_s <= limits.turn_max_lateness_s:
        finding = (
            f"the control turn came {world.lateness_s:.2f} s late, "
            f"{limits.turn_max_lateness_s:g} s are allowed"
        )
        yield Hazard(Rule.TURN_LATE, finding)
    yield from _find_in_clock(world, limits)
    yield from _find_in_wind(world, limits, is_windy=Rule.WIND in acting)
    yield from _find_in_heartbeat(world, limits)


def _find_in_clock(world: World, limits: SafetyLimits) -> Iterator[Hazard]:
    most_s, error_s = limits.clock_max_error_s, world.clock_error_s
    if most_s is not None and not _is_at_most(error_s, most_s):
        known = "an unknown time" if error_s is None else f"{error_s:g} s"
        finding = f"the clock may be wrong by {known}, {most_s:g} s are allowed"
        yield Hazard(Rule.CLOCK_UNTRUSTED, finding)


def _find_in_wind(world: World, limits: SafetyLimits, *, is_windy: bool) -> Iterator[Hazard]:
    for name, wind_m_s, most_m_s in (
        ("gusts", world.wind_gust_m_s, limits.wind_stow_gust_m_s),
        ("mean wind", world.wind_mean_m_s, limits.wind_stow_mean_m_s),
    ):
        if most_m_s is None:
            continue
        if wind_m_s is None or isnan(wind_m_s):
            yield Hazard(Rule.WIND_UNKNOWN, f"no reading of {name}")
        elif wind_m_s > (CALM_SHARE * most_m_s if is_windy else most_m_s):
            yield Hazard(Rule.WIND, f"{name} of {wind_m_s:.1f} m/s, {most_m_s:g} m/s are allowed")


def _find_in_heartbeat(world: World, limits: SafetyLimits) -> Iterator[Hazard]:
    most_s, age_s = limits.heartbeat_max_age_s, world.heartbeat_age_s
    if most_s is not None and not _is_at_most(age_s, most_s):
        heard = "never heard" if age_s is None else f"last heard {age_s:.1f} s ago"
        yield Hazard(Rule.HEARTBEAT_LOST, f"the outside heartbeat was {heard}")


def _is_at_most(value: float | None, most: float) -> bool:
    """Whether a value is known and small enough; one that is not a number is not."""
    return value is not None and value <= most
