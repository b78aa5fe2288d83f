"""Planned paths made from arrays, and evaluated at many instants."""

from array import array

import numpy as np

from trunnion.mount.arrays import FloatArray, Motions
from trunnion.sky.look import Target
from trunnion.track.cubic import cubic
from trunnion.track.planned import PlannedPath


def planned_path(target: Target, begin_s: float, step_s: float, motions: Motions) -> PlannedPath:
    """The path through these states, which are `step_s` apart."""
    nodes = np.column_stack(motions).ravel()
    return PlannedPath(target, begin_s, step_s, array("d", nodes.tobytes()))


def motions_along(path: PlannedPath, utc_s: FloatArray) -> Motions:
    """The path at instants between its first and last node, shape (n,)."""
    nodes = np.frombuffer(path.nodes).reshape(-1, 4)
    steps = (utc_s - path.begin_s) / path.step_s
    at = np.clip(steps.astype(int), 0, len(nodes) - 2)
    share = np.clip(steps - at, 0.0, 1.0)
    before, after = nodes[at], nodes[at + 1]
    (first_deg, first_rate), (second_deg, second_rate) = (
        cubic(
            before[:, joint],
            before[:, 2 + joint],
            after[:, joint],
            after[:, 2 + joint],
            path.step_s,
            share,
        )
        for joint in (0, 1)
    )
    return Motions(first_deg, second_deg, first_rate, second_rate)
