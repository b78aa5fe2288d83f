"""Invented targets for planning: passes over a still round Earth, and things that misbehave."""

from dataclasses import dataclass
from math import cos, radians, sin, sqrt

import numpy as np

from trunnion.sky.errors import NoPosition
from trunnion.sky.look import FloatArray, Look, Looks

START_S = 1_796_083_217.3
"""An instant like any other, so that no zero hides a mistake."""

EARTH_KM = 6371.0
MU_KM3_S2 = 398600.4418


@dataclass(frozen=True)
class Overflight:
    """A circular orbit over a still round Earth, highest at `culmination_s`.

    It flies towards `heading_deg` and passes on the right of the zenith, as the station sees it, at
    `highest_deg` of elevation.
    """

    highest_deg: float
    heading_deg: float = 17.3
    height_km: float = 500.0
    culmination_s: float = START_S + 400.0
    name: str = "overflight"

    @property
    def half_length_s(self) -> float:
        """From rise over a level horizon to culmination, roughly."""
        radius = EARTH_KM + self.height_km
        return float(np.arccos(EARTH_KM / radius) / sqrt(MU_KM3_S2 / radius**3))

    def look(self, utc_s: float) -> Look:
        looks = self.looks(np.array([utc_s]))
        return Look(*(float(field[0]) for field in looks if field is not None))

    def looks(self, utc_s: FloatArray) -> Looks:
        position, velocity = self._state(utc_s)
        east, north, up = position
        level = np.maximum(np.hypot(east, north), 1e-9)
        distance = np.sqrt(level**2 + up**2)
        level_rate = (east * velocity[0] + north * velocity[1]) / level
        return Looks(
            np.degrees(np.arctan2(east, north)) % 360.0,
            np.degrees(np.arctan2(up, level)),
            distance,
            np.degrees((north * velocity[0] - east * velocity[1]) / level**2),
            np.degrees((level * velocity[2] - up * level_rate) / distance**2),
            (level * level_rate + up * velocity[2]) / distance,
        )

    def _state(self, utc_s: FloatArray) -> tuple[FloatArray, FloatArray]:
        """East, north, up in km and km/s: along the heading, to its right, and up, turned."""
        radius = EARTH_KM + self.height_km
        mean_motion = sqrt(MU_KM3_S2 / radius**3)
        angle = mean_motion * (utc_s - self.culmination_s)
        aside = radians(90.0 - self.highest_deg)
        aside -= np.arcsin(EARTH_KM / radius * sin(aside))  # angle at the Earth's centre
        ahead, ahead_rate = radius * np.sin(angle), radius * mean_motion * np.cos(angle)
        out, out_rate = radius * np.cos(angle), -radius * mean_motion * np.sin(angle)
        heading = radians(self.heading_deg)
        along = np.array([sin(heading), cos(heading), 0.0])[:, None]
        right = np.array([cos(heading), -sin(heading), 0.0])[:, None]
        up = np.array([0.0, 0.0, 1.0])[:, None]
        side = right * sin(aside) + up * cos(aside)
        return along * ahead + side * out - up * EARTH_KM, along * ahead_rate + side * out_rate


@dataclass(frozen=True)
class Lost:
    """A target that has no position from an instant on."""

    target: Overflight
    lost_s: float
    name: str = "lost"

    def look(self, utc_s: float) -> Look:
        self._check(utc_s)
        return self.target.look(utc_s)

    def looks(self, utc_s: FloatArray) -> Looks:
        self._check(float(utc_s.max()))
        return self.target.looks(utc_s)

    def _check(self, utc_s: float) -> None:
        if utc_s >= self.lost_s:
            raise NoPosition("expected an orbit, got a decayed one")
