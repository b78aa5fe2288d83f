"""The circle round the Sun: part of the clearance, and drawn anew whenever the Sun has moved."""

from collections.abc import Iterator
from dataclasses import replace
from math import isfinite

from trunnion.mount.clearance import Circle
from trunnion.mount.joints import Joints
from trunnion.safety.hazard import Hazard
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.verdict import Rule
from trunnion.safety.way_in import find_way_in
from trunnion.safety.world import World

UP_DEG = -1.0
"""Lower than this even the upper edge of the Sun, lifted by refraction, is below the horizon."""

LEEWAY_DEG = 0.2
"""A mount that leaves the circle goes on until it is so far outside."""


class Sunshine:
    """Remembers the limits as they are with the Sun where it was last said to be."""

    def __init__(self, limits: SafetyLimits) -> None:
        self._dark = self._limits = self._wide = limits
        self._sun: tuple[float, float] | None = None

    def find(self, world: World) -> Iterator[Hazard]:
        """Whether the Sun's direction is wanted and not known."""
        if self._dark.sun_keep_out_deg is not None and not _is_known(world.sun):
            yield Hazard(Rule.SUN_UNKNOWN, "nobody knows where the Sun stands")

    def limits_in(self, world: World) -> SafetyLimits:
        """The limits with the circle round the Sun, where there is one and the Sun is up.

        Where the Sun is not known it is held to be where it was.
        """
        if self._dark.sun_keep_out_deg is None or world.sun is None or world.sun == self._sun:
            return self._limits
        if _is_known(world.sun):
            self._sun = world.sun
            self._limits = lit(self._dark, *world.sun)
            self._wide = lit(self._dark, *world.sun, leeway_deg=LEEWAY_DEG)
        return self._limits

    def way_out(self, place: Joints) -> Joints | None:
        """Where a mount may leave the circle to, by the shortest straight way; None outside."""
        return find_way_in(place, self._wide)


def lit(
    limits: SafetyLimits, azimuth_deg: float, elevation_deg: float, leeway_deg: float = 0.0
) -> SafetyLimits:
    """The limits with the Sun in this direction, and that much more round it."""
    radius_deg = limits.sun_keep_out_deg
    if radius_deg is None or elevation_deg < UP_DEG:
        return limits
    circle = Circle("the Sun", azimuth_deg, elevation_deg, radius_deg + leeway_deg)
    return replace(limits, clearance=limits.clearance.with_circle(circle))


def _is_known(sun: tuple[float, float] | None) -> bool:
    return sun is not None and isfinite(sun[0]) and isfinite(sun[1])
