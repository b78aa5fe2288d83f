"""Whether everything between two places of the joints is clear of floor, mask and keep-outs.

The joints do not arrive together, and how they are late depends on the mount; so a move of both is
clear only where every pair of angles between the two places is.
"""

from math import asin, atan2, cos, degrees, radians, sin
from typing import NamedTuple

from trunnion.mount.clearance import Circle, Clearance, Sector
from trunnion.mount.joints import Joints
from trunnion.mount.mount import Mount

SMALLEST_DEG = 0.25
"""A box of a mount that does not stand upright is halved down to this size."""


def is_box_clear(one: Joints, other: Joints, mount: Mount, clearance: Clearance) -> bool:
    """Whether mount and boresight are clear at every pair of joint angles between these two."""
    if any(box.meets(one, other) for box in mount.forbidden):
        return False
    if mount.hinges.is_upright:
        return all(_is_patch_clear(patch, clearance) for patch in _patches(one, other))
    return _is_turned_box_clear(one, other, mount, clearance)


class _Patch(NamedTuple):
    """A patch of sky: azimuths clockwise from begin to end (deg), elevations (deg)."""

    begin_deg: float
    end_deg: float
    lower_deg: float
    upper_deg: float


def _patches(one: Joints, other: Joints) -> list[_Patch]:
    """The sky between two places: once upright, and once tipped over where the box goes there."""
    begin_deg, end_deg = sorted((one.first_deg, other.first_deg))
    low_deg, high_deg = sorted((one.second_deg, other.second_deg))
    patches = []
    if low_deg <= 90.0:
        patches.append(_Patch(begin_deg, end_deg, low_deg, min(high_deg, 90.0)))
    if high_deg > 90.0:
        over = _Patch(
            begin_deg + 180.0, end_deg + 180.0, 180.0 - high_deg, 180.0 - max(low_deg, 90.0)
        )
        patches.append(over)
    return patches


def _is_patch_clear(patch: _Patch, clearance: Clearance) -> bool:
    if patch.lower_deg < clearance.floor_deg:
        return False
    mask = clearance.mask
    if mask is not None and patch.lower_deg < mask.highest_deg(patch.begin_deg, patch.end_deg):
        return False
    return not any(_touches(patch, sector) for sector in clearance.keep_outs) and not any(
        _reaches(circle, patch) for circle in clearance.circles
    )


def _touches(patch: _Patch, sector: Sector) -> bool:
    if patch.upper_deg < sector.lower_elevation_deg or patch.lower_deg > sector.upper_elevation_deg:
        return False
    width_deg = (sector.to_azimuth_deg - sector.from_azimuth_deg) % 360.0 or 360.0
    is_begin_within = (patch.begin_deg - sector.from_azimuth_deg) % 360.0 <= width_deg
    span_deg = patch.end_deg - patch.begin_deg
    return is_begin_within or (sector.from_azimuth_deg - patch.begin_deg) % 360.0 <= span_deg


def _reaches(circle: Circle, patch: _Patch) -> bool:
    """Whether a circle reaches into a patch: from its middle to the patch's nearest place.

    That is on the middle's own meridian, or on one of the two that end the patch.
    """
    span_deg = patch.end_deg - patch.begin_deg
    if (circle.azimuth_deg - patch.begin_deg) % 360.0 <= span_deg:
        nearest_deg = min(max(circle.elevation_deg, patch.lower_deg), patch.upper_deg)
        return abs(circle.elevation_deg - nearest_deg) <= circle.radius_deg
    return any(
        circle.depth_deg(azimuth_deg, _nearest_deg(circle, azimuth_deg, patch)) >= 0.0
        for azimuth_deg in (patch.begin_deg, patch.end_deg)
    )


def _nearest_deg(circle: Circle, azimuth_deg: float, patch: _Patch) -> float:
    """The elevation on a meridian, within the patch, that is nearest to the circle's middle."""
    elevation = radians(circle.elevation_deg)
    ahead = cos(elevation) * cos(radians(azimuth_deg - circle.azimuth_deg))
    foot_deg = degrees(atan2(sin(elevation), ahead))
    return min(max(foot_deg, patch.lower_deg), patch.upper_deg)


def _is_turned_box_clear(one: Joints, other: Joints, mount: Mount, clearance: Clearance) -> bool:
    """The same where the sky of a box is no box: by halves, until each lies in a clear patch.

    Turning a joint by an angle moves the boresight by no more than that angle.
    """
    middle = Joints(
        0.5 * (one.first_deg + other.first_deg), 0.5 * (one.second_deg + other.second_deg)
    )
    azimuth_deg, elevation_deg = mount.hinges.boresight(middle)
    if not clearance.is_clear(azimuth_deg, elevation_deg):
        return False
    wide_deg = abs(one.first_deg - other.first_deg)
    high_deg = abs(one.second_deg - other.second_deg)
    radius_deg = 0.5 * (wide_deg + high_deg)
    if radius_deg <= SMALLEST_DEG or _is_cap_clear(
        azimuth_deg, elevation_deg, radius_deg, clearance
    ):
        return True
    if wide_deg >= high_deg:
        halves = (
            Joints(middle.first_deg, one.second_deg),
            Joints(middle.first_deg, other.second_deg),
        )
    else:
        halves = (
            Joints(one.first_deg, middle.second_deg),
            Joints(other.first_deg, middle.second_deg),
        )
    return _is_turned_box_clear(one, halves[1], mount, clearance) and _is_turned_box_clear(
        halves[0], other, mount, clearance
    )


def _is_cap_clear(
    azimuth_deg: float, elevation_deg: float, radius_deg: float, clearance: Clearance
) -> bool:
    """Whether all directions this near to one are clear."""
    if abs(elevation_deg) + radius_deg >= 90.0:
        aside_deg = 180.0
    else:
        aside_deg = degrees(asin(sin(radians(radius_deg)) / cos(radians(elevation_deg))))
    patch = _Patch(
        azimuth_deg - aside_deg,
        azimuth_deg + aside_deg,
        elevation_deg - radius_deg,
        elevation_deg + radius_deg,
    )
    return _is_patch_clear(patch, clearance)
