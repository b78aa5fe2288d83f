"""A target with an operator's correction: a target like any other."""

from dataclasses import dataclass

import numpy as np

from trunnion.mount.arrays import FloatArray
from trunnion.sky.look import Look, Looks, Target
from trunnion.track.correction import Correction

HALF_STEP_S = 0.05
"""Rates come from directions this much before and after."""


@dataclass(frozen=True, slots=True, eq=False)
class Corrected:
    """Where a target is looked for, if an operator's correction holds; raises NoPosition."""

    target: Target
    correction: Correction

    @property
    def name(self) -> str:
        """The name of the target itself."""
        return self.target.name

    def look(self, utc_s: float) -> Look:
        """At one instant."""
        looks = self.looks(np.array([utc_s]))
        azimuth_deg, elevation_deg, range_km, azimuth_rate, elevation_rate, range_rate = (
            None if field is None else float(field[0]) for field in looks
        )
        assert azimuth_deg is not None  # noqa: S101 - a target always has angles and their rates
        assert elevation_deg is not None  # noqa: S101
        assert azimuth_rate is not None  # noqa: S101
        assert elevation_rate is not None  # noqa: S101
        return Look(azimuth_deg, elevation_deg, range_km, azimuth_rate, elevation_rate, range_rate)

    def looks(self, utc_s: FloatArray) -> Looks:
        """At many instants."""
        azimuth_deg, elevation_deg, looks = self._directions(utc_s)
        before, after = (self._directions(utc_s + by_s) for by_s in (-HALF_STEP_S, HALF_STEP_S))
        turned_deg = (after[0] - before[0] + 180.0) % 360.0 - 180.0
        return Looks(
            azimuth_deg,
            elevation_deg,
            looks.range_km,
            turned_deg / (2.0 * HALF_STEP_S),
            (after[1] - before[1]) / (2.0 * HALF_STEP_S),
            looks.range_rate_km_s,
        )

    def _directions(self, utc_s: FloatArray) -> tuple[FloatArray, FloatArray, Looks]:
        correction = self.correction
        looks = self.target.looks(utc_s + correction.time_bias_s)
        azimuth_deg, elevation_deg = _shifted(looks, correction.along_deg, correction.across_deg)
        azimuth_deg = azimuth_deg + correction.azimuth_deg
        elevation_deg = elevation_deg + correction.elevation_deg
        over = elevation_deg > 90.0
        azimuth_deg = np.where(over, azimuth_deg + 180.0, azimuth_deg) % 360.0
        return azimuth_deg, np.where(over, 180.0 - elevation_deg, elevation_deg), looks


def _shifted(looks: Looks, along_deg: float, across_deg: float) -> tuple[FloatArray, FloatArray]:
    """Directions moved on great circles, along the target's motion and at a right angle to it."""
    if along_deg == across_deg == 0.0:
        return looks.azimuth_deg, looks.elevation_deg
    azimuth, elevation = np.radians(looks.azimuth_deg), np.radians(looks.elevation_deg)
    sideways = np.cos(elevation) * looks.azimuth_rate_deg_s
    upwards = looks.elevation_rate_deg_s
    speed = np.maximum(np.hypot(sideways, upwards), 1e-12)
    right = (along_deg * sideways + across_deg * upwards) / speed
    up = (along_deg * upwards - across_deg * sideways) / speed
    angle_deg = np.hypot(right, up)
    angle = np.radians(angle_deg)
    share_right, share_up = np.sin(angle) * right / angle_deg, np.sin(angle) * up / angle_deg
    level = np.cos(angle) * np.cos(elevation) - share_up * np.sin(elevation)
    high = np.cos(angle) * np.sin(elevation) + share_up * np.cos(elevation)
    turned = azimuth + np.arctan2(share_right, level)
    return np.degrees(turned) % 360.0, np.degrees(np.arctan2(high, np.hypot(level, share_right)))
