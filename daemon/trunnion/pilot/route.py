"""A way through the joints' space, flown point by point."""

from collections.abc import Sequence

from trunnion.mount.joints import Joints, Motion
from trunnion.mount.motion import approach
from trunnion.mount.mount import Mount

ARRIVED_DEG = 1e-6
"""Closer than any encoder resolves: the shaper lands exactly, this allows for rounding."""


class Route:
    """Way-points still ahead; the mount comes to rest at each, so that it cuts no corner."""

    def __init__(self, waypoints: Sequence[Joints]) -> None:
        self._ahead = list(waypoints)

    @property
    def goal(self) -> Joints:
        """Where the route ends."""
        return self._ahead[-1]

    def step(self, now: Motion, mount: Mount, dt_s: float) -> Motion:
        """The next motion along the route, `dt_s` after `now`."""
        while len(self._ahead) > 1 and is_at_rest_at(now, self._ahead[0]):
            del self._ahead[0]
        return approach(now, Motion(*self._ahead[0]), mount, dt_s)

    def is_done(self, now: Motion) -> bool:
        """Whether the goal is reached and the mount is at rest there."""
        return len(self._ahead) == 1 and is_at_rest_at(now, self.goal)


def is_at_rest_at(now: Motion, place: Joints) -> bool:
    """Whether this motion is none, at this place."""
    return (
        abs(now.first_deg - place.first_deg) <= ARRIVED_DEG
        and abs(now.second_deg - place.second_deg) <= ARRIVED_DEG
        and abs(now.first_rate_deg_s) <= ARRIVED_DEG
        and abs(now.second_rate_deg_s) <= ARRIVED_DEG
    )
