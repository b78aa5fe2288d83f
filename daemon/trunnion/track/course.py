"""Where a target takes the joints, sampled evenly over a stretch of time."""

from math import ceil
from typing import NamedTuple

import numpy as np

from trunnion.mount.arrays import FloatArray, Motions, plain_motions
from trunnion.mount.hinges import Hinges
from trunnion.sky.look import Looks, Target
from trunnion.track.looking import finite_looks

STEP_S = 0.25
"""Spacing of the samples; a low pass needs no finer one, see the tests of planned paths."""

MOST_STEPS = 4800
"""Longer contacts are of slower targets: they are sampled more widely."""


class Course(NamedTuple):
    """Samples at `begin_s + i * step_s`: the target's directions, and the plain solution's joints.

    The first joint runs on without jumps, by whole turns if need be.
    """

    begin_s: float
    step_s: float
    looks: Looks
    motions: Motions

    @property
    def size(self) -> int:
        """How many samples."""
        return len(self.motions.first_deg)

    @property
    def utc_s(self) -> FloatArray:
        """The instants of the samples, shape (size,)."""
        return np.asarray(self.begin_s + self.step_s * np.arange(self.size))

    def span(self, begin: int, last: int) -> tuple[float, float]:
        """The instants (UTC) of two samples."""
        return self.begin_s + self.step_s * begin, self.begin_s + self.step_s * last

    def part(self, begin: int, end: int) -> "Course":
        """The samples from `begin` to before `end`."""
        return Course(
            self.begin_s + self.step_s * begin,
            self.step_s,
            self.looks,
            Motions(*(field[begin:end] for field in self.motions)),
        )


def sample_course(target: Target, begin_s: float, end_s: float, hinges: Hinges) -> Course:
    """Sample a target; raises NoPosition where it has none, or none that is finite."""
    steps = min(max(2, ceil((end_s - begin_s) / STEP_S)), MOST_STEPS)
    looks = finite_looks(target, np.linspace(begin_s, end_s, steps + 1))
    motions = plain_motions(
        hinges,
        looks.azimuth_deg,
        looks.elevation_deg,
        looks.azimuth_rate_deg_s,
        looks.elevation_rate_deg_s,
    )
    return Course(begin_s, (end_s - begin_s) / steps, looks, motions)
