"""A path planned beforehand: states of both joints at even instants, cubics between them."""

from array import array
from dataclasses import dataclass

from trunnion.mount.joints import Motion
from trunnion.sky.look import Look, Target


@dataclass(frozen=True, slots=True, eq=False)
class PlannedPath:
    """Joint angles (deg) and rates (deg/s) at `begin_s + i * step_s`, four numbers a node.

    `nodes` holds first angle, second angle, first rate, second rate of each node in turn. Before
    the first node and after the last the joints rest there.
    """

    target: Target
    begin_s: float
    step_s: float
    nodes: "array[float]"

    def at(self, utc_s: float) -> Motion:
        """Joint angles and rates at this instant."""
        steps = (utc_s - self.begin_s) / self.step_s
        at = int(steps)
        nodes = self.nodes
        if steps < 0.0 or 4 * at + 8 > len(nodes):
            first_deg, second_deg = nodes[:2] if steps < 0.0 else nodes[-4:-2]
            return Motion(first_deg, second_deg)
        share, step_s = steps - at, self.step_s
        f0, s0, fr0, sr0, f1, s1, fr1, sr1 = nodes[4 * at : 4 * at + 8]
        f2, s2 = (
            3.0 * (f1 - f0) - step_s * (2.0 * fr0 + fr1),
            3.0 * (s1 - s0) - step_s * (2.0 * sr0 + sr1),
        )
        f3, s3 = step_s * (fr0 + fr1) - 2.0 * (f1 - f0), step_s * (sr0 + sr1) - 2.0 * (s1 - s0)
        return Motion(
            f0 + share * (step_s * fr0 + share * (f2 + share * f3)),
            s0 + share * (step_s * sr0 + share * (s2 + share * s3)),
            fr0 + share * (2.0 * f2 + 3.0 * share * f3) / step_s,
            sr0 + share * (2.0 * s2 + 3.0 * share * s3) / step_s,
        )

    def look(self, utc_s: float) -> Look:
        """Where the target stands at this instant; raises NoPosition."""
        return self.target.look(utc_s)
