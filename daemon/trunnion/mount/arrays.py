"""The geometry of the hinges for many instants at once. Arrays of shape (n,), numpy."""

from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from trunnion.mount.hinges import Hinges

FloatArray = NDArray[np.float64]


class Motions(NamedTuple):
    """Joint angles (deg) and rates (deg/s) of the plain solution, the first joint without jumps.

    The tipped-over solution has its first joint half a turn on, its second joint at 180° less this
    one, and the second rate with the other sign.
    """

    first_deg: FloatArray
    second_deg: FloatArray
    first_rate_deg_s: FloatArray
    second_rate_deg_s: FloatArray


def plain_motions(
    hinges: Hinges,
    azimuth_deg: FloatArray,
    elevation_deg: FloatArray,
    azimuth_rate_deg_s: FloatArray,
    elevation_rate_deg_s: FloatArray,
) -> Motions:
    """Joint angles and rates that follow a direction which moves at these rates.

    The formulas are those of `Hinges.motion`; consecutive directions are taken to be less than half
    a turn of the first joint apart.
    """
    if hinges.is_upright:
        first_deg = np.unwrap(azimuth_deg, period=360.0)
        return Motions(first_deg, elevation_deg, azimuth_rate_deg_s, elevation_rate_deg_s)
    azimuth, elevation = np.radians(azimuth_deg), np.radians(elevation_deg)
    level = np.cos(elevation)
    along = _components(hinges, level * np.sin(azimuth), level * np.cos(azimuth), np.sin(elevation))
    sideways, upwards = level * azimuth_rate_deg_s, np.sin(elevation) * elevation_rate_deg_s
    change = _components(
        hinges,
        np.cos(azimuth) * sideways - np.sin(azimuth) * upwards,
        -np.sin(azimuth) * sideways - np.cos(azimuth) * upwards,
        level * elevation_rate_deg_s,
    )
    across = np.maximum(np.hypot(along[0], along[1]), 1e-12)
    inwards = along[0] * change[0] + along[1] * change[1]
    return Motions(
        np.unwrap(np.degrees(np.arctan2(along[1], along[0])), period=360.0),
        np.degrees(np.arctan2(along[2], across)),
        (along[0] * change[1] - along[1] * change[0]) / across**2,
        across * change[2] - along[2] * inwards / across,
    )


def joint_errors_deg(first_deg: FloatArray, second_deg: FloatArray, motions: Motions) -> FloatArray:
    """Angle (deg) between the boresight at these joints and the plain solution's direction.

    Vincenty's formula for a sphere, in the frame of the first axis.
    """
    turn = np.radians(motions.first_deg - first_deg)
    one, other = np.radians(second_deg), np.radians(motions.second_deg)
    across = np.cos(other) * np.sin(turn)
    along = np.cos(one) * np.sin(other) - np.sin(one) * np.cos(other) * np.cos(turn)
    ahead = np.sin(one) * np.sin(other) + np.cos(one) * np.cos(other) * np.cos(turn)
    return np.asarray(np.degrees(np.arctan2(np.hypot(across, along), ahead)))


def _components(
    hinges: Hinges, east: FloatArray, north: FloatArray, up: FloatArray
) -> tuple[FloatArray, FloatArray, FloatArray]:
    r, s, a = hinges.frame
    return (
        east * r[0] + north * r[1] + up * r[2],
        east * s[0] + north * s[1] + up * s[2],
        east * a[0] + north * a[1] + up * a[2],
    )
