"""Invented contacts: smooth ways of the joints, which the mount can follow on any geometry."""

from math import cos, pi, sin
from typing import NamedTuple

import numpy as np

from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Joints, Motion
from trunnion.sky.look import FloatArray, Look, Looks
from trunnion.track.path import Assignment


class Arc(NamedTuple):
    """From rest to rest along half a wave of the cosine; the target is where the beam should be.

    An arc is its own target: nothing but the mount's geometry stands between the two.
    """

    name: str
    hinges: Hinges
    start: Joints
    goal: Joints
    begin_s: float
    end_s: float

    def at(self, utc_s: float) -> Motion:
        """Joint angles and rates at this instant; at rest outside the contact."""
        length_s = self.end_s - self.begin_s
        phase = pi * min(max((utc_s - self.begin_s) / length_s, 0.0), 1.0)
        share, share_per_s = 0.5 * (1.0 - cos(phase)), 0.5 * pi * sin(phase) / length_s
        first_deg = self.goal.first_deg - self.start.first_deg
        second_deg = self.goal.second_deg - self.start.second_deg
        return Motion(
            self.start.first_deg + share * first_deg,
            self.start.second_deg + share * second_deg,
            share_per_s * first_deg,
            share_per_s * second_deg,
        )

    def is_on(self, utc_s: float) -> bool:
        """Whether the contact is on at this instant."""
        return self.begin_s <= utc_s < self.end_s

    def look(self, utc_s: float) -> Look:
        """Where the target stands; its rates are those of the joints and serve nobody here."""
        motion = self.at(utc_s)
        azimuth_deg, elevation_deg = self.hinges.boresight(motion.joints)
        rates = motion.first_rate_deg_s, motion.second_rate_deg_s
        return Look(azimuth_deg, elevation_deg, None, *rates, None)

    def looks(self, utc_s: FloatArray) -> Looks:
        """The same for many instants."""
        looks = [self.look(float(each)) for each in utc_s]
        azimuths, elevations, _, first, second, _ = zip(*looks, strict=True)
        columns = (azimuths, elevations, first, second)
        azimuth, elevation, azimuth_rate, elevation_rate = map(np.array, columns)
        return Looks(azimuth, elevation, None, azimuth_rate, elevation_rate, None)

    def assignment(self) -> Assignment:
        """The contact as the pilot knows it."""
        return Assignment(self.name, self, self.begin_s, self.end_s, self, 0)
