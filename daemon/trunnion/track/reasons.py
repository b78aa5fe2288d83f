"""Why a mount cannot follow: its travel, its rate or its acceleration."""

from typing import NamedTuple

import numpy as np

from trunnion.mount.arrays import FloatArray
from trunnion.mount.mount import JointLimits, Mount
from trunnion.track.branches import IntArray, motions_on
from trunnion.track.course import Course
from trunnion.track.programme import FindingKind

ROUNDING_DEG = 1e-6


class Reason(NamedTuple):
    """The kind of the finding, and the first half of its sentence."""

    kind: FindingKind
    words: str


def reason_for(course: Course, branch: IntArray, span: tuple[float, float], mount: Mount) -> Reason:
    """What the course asks of the mount in this time (UTC) that it cannot give."""
    within = (course.utc_s >= span[0] - course.step_s) & (course.utc_s <= span[1] + course.step_s)
    wanted = motions_on(course.motions, branch, mount.second)
    first = wanted.first_deg[within], wanted.first_rate_deg_s[within]
    second = wanted.second_deg[within], wanted.second_rate_deg_s[within]
    return (
        _beyond_travel("first", first[0], mount.first)
        or _beyond_travel("second", second[0], mount.second)
        or _too_fast("first", first[1], mount.first)
        or _too_fast("second", second[1], mount.second)
        or Reason(FindingKind.TOO_SUDDEN, "it takes more acceleration than the mount has")
    )


def _beyond_travel(name: str, angle_deg: FloatArray, limits: JointLimits) -> Reason | None:
    beyond_deg = np.maximum(limits.soft_lower_deg - angle_deg, angle_deg - limits.soft_upper_deg)
    if beyond_deg.max(initial=0.0) < ROUNDING_DEG:
        return None
    words = f"it is up to {beyond_deg.max():.1f}° beyond the travel of the {name} joint"
    return Reason(FindingKind.OUT_OF_REACH, words)


def _too_fast(name: str, rate_deg_s: FloatArray, limits: JointLimits) -> Reason | None:
    fastest = float(np.abs(rate_deg_s).max(initial=0.0))
    if fastest <= limits.rate_deg_s:
        return None
    words = f"it takes {fastest:.1f}°/s of the {name} joint, which has {limits.rate_deg_s:g}°/s"
    return Reason(FindingKind.TOO_FAST, words)
