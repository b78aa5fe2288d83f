"""How well a planned path will point: flown in thought until it is caught, then read off."""

from collections.abc import Iterator
from typing import NamedTuple

import numpy as np

from trunnion.mount.arrays import FloatArray, joint_errors_deg, plain_motions
from trunnion.mount.joints import Motion
from trunnion.mount.motion import approach
from trunnion.mount.mount import Mount
from trunnion.mount.sphere import separation_deg
from trunnion.track.beam import Beam
from trunnion.track.planned import PlannedPath
from trunnion.track.planned_arrays import motions_along

CATCH_STEP_S = 0.1
FINE_S = 0.1
"""Steps in which a path is caught, and in which its errors are read off."""

MOST_INSTANTS = 20_000
"""Longer contacts are of slower targets: their errors are read off at wider steps."""

MOMENT_S = 10.0
"""A target met for less than this, between two losses, is not found again."""


class Lost(NamedTuple):
    """From when until when (UTC) the target is lost, by how much, how long outside the beam."""

    begin_s: float
    end_s: float
    worst_error_deg: float
    outside_beam_s: float


class Outcome(NamedTuple):
    """Errors (deg) at instants `step_s` apart from `caught_s` (UTC) on, shape (n,).

    `waiting_s` is the time outside the beam before that, `last_error_deg` the error just before.
    """

    caught_s: float
    waiting_s: float
    last_error_deg: float
    step_s: float
    utc_s: FloatArray
    error_deg: FloatArray

    @property
    def worst_error_deg(self) -> float:
        """The largest error once the path is caught, or the last one if it never is."""
        return (
            float(self.error_deg.max(initial=0.0)) if self.error_deg.size else self.last_error_deg
        )

    def outside_s(self, beam: Beam) -> float:
        """Seconds outside the beam."""
        return self.waiting_s + float((self.error_deg > beam.half_width_deg).sum()) * self.step_s

    def lost(self, beam: Beam) -> Iterator[Lost]:
        """The stretches in which the error is above the tolerance, short moments apart joined."""
        is_lost = self.error_deg > beam.tolerance_deg
        edges = np.flatnonzero(np.diff(is_lost, prepend=False, append=False))
        is_apart = np.diff(edges[1:-1])[::2] > MOMENT_S / self.step_s
        edges = edges[np.concatenate(([True], np.repeat(is_apart, 2), [True]))[: edges.size]]
        for begin, end in edges.reshape(-1, 2).tolist():
            error_deg = self.error_deg[begin:end]
            outside_s = float((error_deg > beam.half_width_deg).sum()) * self.step_s
            yield Lost(
                float(self.utc_s[begin]),
                float(self.utc_s[end - 1]),
                float(error_deg.max()),
                outside_s,
            )


def outcome(
    path: PlannedPath, span: tuple[float, float], arrival: Motion, mount: Mount, beam: Beam
) -> Outcome:
    """What comes of flying a path from begin to end (UTC), from where the mount then stands."""
    begin_s, end_s = span
    caught_s, waiting_s, error_deg = begin_s, 0.0, 0.0
    now = arrival
    while now != path.at(caught_s) and caught_s < end_s:
        caught_s = min(caught_s + CATCH_STEP_S, end_s)
        now = approach(now, path.at(caught_s), mount, CATCH_STEP_S)
        error_deg = _error_deg(path, caught_s, now, mount)
        if error_deg > beam.half_width_deg:
            waiting_s += CATCH_STEP_S
    step_s = max(FINE_S, (end_s - caught_s) / MOST_INSTANTS)
    utc_s = np.arange(caught_s, end_s, step_s)
    return Outcome(caught_s, waiting_s, error_deg, step_s, utc_s, errors_along(path, utc_s, mount))


def errors_along(path: PlannedPath, utc_s: FloatArray, mount: Mount) -> FloatArray:
    """Angle (deg) between target and boresight on the path, shape (n,)."""
    if utc_s.size == 0:
        return np.zeros(0)
    looks = path.target.looks(utc_s)
    truth = plain_motions(
        mount.hinges,
        looks.azimuth_deg,
        looks.elevation_deg,
        looks.azimuth_rate_deg_s,
        looks.elevation_rate_deg_s,
    )
    flown = motions_along(path, utc_s)
    return joint_errors_deg(flown.first_deg, flown.second_deg, truth)


def _error_deg(path: PlannedPath, utc_s: float, now: Motion, mount: Mount) -> float:
    look = path.look(utc_s)
    boresight = mount.hinges.boresight(now.joints)
    return separation_deg(look.azimuth_deg, look.elevation_deg, *boresight)
