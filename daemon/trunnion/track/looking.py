"""Asking a target where it stands, and not believing what is no number."""

import numpy as np

from trunnion.mount.arrays import FloatArray
from trunnion.sky.errors import NoPosition
from trunnion.sky.look import Looks, Target


def finite_looks(target: Target, utc_s: FloatArray) -> Looks:
    """Where it stands at many instants; raises NoPosition for none, or one that is not finite."""
    looks = target.looks(utc_s)
    fields = (
        looks.azimuth_deg,
        looks.elevation_deg,
        looks.azimuth_rate_deg_s,
        looks.elevation_rate_deg_s,
    )
    if not all(np.isfinite(field).all() for field in fields):
        raise NoPosition(f"expected finite directions of {target.name}, got one that is not")
    return looks
