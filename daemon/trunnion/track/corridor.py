"""A joint that must stay between two walls that move, within its rate and acceleration.

The states (angle, rate) from which the rest of the corridor can be passed form a convex polygon at
each instant: those of the next instant, stepped back by every allowed acceleration, cut by the
walls and by the rate. They are computed from the last instant to the first. Acceleration is even
within a step.
"""

from collections.abc import Sequence

import numpy as np

from trunnion.mount.arrays import FloatArray
from trunnion.mount.mount import JointLimits
from trunnion.track.polygon import Polygon, clipped, rectangle, sheared, swept

State = tuple[float, float]

RESERVE = 2e-4
"""Share of the acceleration that is kept to correct for rounding along the edge of the polygons."""


def passable_states(
    lower_deg: Sequence[float], upper_deg: Sequence[float], limits: JointLimits, step_s: float
) -> list[Polygon] | None:
    """For each instant the states from which all later ones can be passed; None if there is none.

    The walls are angles at instants `step_s` apart.
    """
    rate, acceleration = limits.rate_deg_s, limits.acceleration_deg_s2 * (1.0 - RESERVE)
    polygon = rectangle(lower_deg[-1], upper_deg[-1], -rate, rate)
    backwards = [polygon]
    for index in range(len(lower_deg) - 2, -1, -1):
        back = sheared(polygon, -step_s)
        wide = swept(back, 0.5 * acceleration * step_s * step_s, -acceleration * step_s)
        slow = clipped(wide, 1, -rate, rate)
        polygon = clipped(slow, 0, lower_deg[index], upper_deg[index])
        if not polygon:
            return None
        backwards.append(polygon)
    return backwards[::-1]


def walls(
    goal_deg: FloatArray, half_deg: FloatArray | float, limits: JointLimits
) -> tuple[FloatArray, FloatArray]:
    """Lower and upper wall: no further than this from a goal, and within the travel."""
    return (
        np.maximum(goal_deg - half_deg, limits.soft_lower_deg),
        np.minimum(goal_deg + half_deg, limits.soft_upper_deg),
    )
