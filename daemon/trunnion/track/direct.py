"""A path that evaluates its target at every instant, on one turn of the first joint."""

from bisect import bisect_right
from dataclasses import dataclass

from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Motion
from trunnion.sky.look import Look, Target


@dataclass(frozen=True, slots=True, eq=False)
class DirectPath:
    """The joints that point at the target, exactly, whether the mount can follow or not.

    `node_s` and `node_deg` tell roughly where the first joint is at some instants, in the mount's
    own travel; the turn at any other instant is the one nearest to the line between its nodes.
    """

    target: Target
    hinges: Hinges
    is_tipped: bool
    node_s: tuple[float, ...]
    node_deg: tuple[float, ...]

    def at(self, utc_s: float) -> Motion:
        """Joint angles and rates at this instant; raises NoPosition."""
        look = self.target.look(utc_s)
        first_deg, *others = self.hinges.motion(
            look.azimuth_deg,
            look.elevation_deg,
            look.azimuth_rate_deg_s,
            look.elevation_rate_deg_s,
            is_tipped=self.is_tipped,
        )
        turns = round((self._roughly_deg(utc_s) - first_deg) / 360.0)
        return Motion(first_deg + 360.0 * turns, *others)

    def look(self, utc_s: float) -> Look:
        """Where the target stands at this instant; raises NoPosition."""
        return self.target.look(utc_s)

    def _roughly_deg(self, utc_s: float) -> float:
        after = bisect_right(self.node_s, utc_s)
        if after in (0, len(self.node_s)):
            return self.node_deg[min(after, len(self.node_s) - 1)]
        begin_s, end_s = self.node_s[after - 1], self.node_s[after]
        share = (utc_s - begin_s) / (end_s - begin_s)
        return self.node_deg[after - 1] * (1.0 - share) + self.node_deg[after] * share
