"""The near-zenith passes of the benchmark, and what others make of them on the same samples."""

from typing import Any

import numpy as np
from scipy import optimize
from scipy.sparse import diags, hstack, vstack

from tests.track.skies import START_S, Overflight
from trunnion.mount.arrays import FloatArray, joint_errors_deg, plain_motions
from trunnion.mount.clearance import Clearance
from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Joints, Motion
from trunnion.mount.motion import approach
from trunnion.mount.mount import JointLimits, Mount
from trunnion.track.beam import Beam
from trunnion.track.course import Course, sample_course
from trunnion.track.objective import Objective
from trunnion.track.options import options_for
from trunnion.track.outcome import errors_along
from trunnion.track.planned_arrays import planned_path
from trunnion.track.steering import Aim, steer
from trunnion.track.stretches import clear_stretches
from trunnion.track.wanted import Wanted

SOLVE: Any = optimize.linprog
BESIDE: Any = hstack

CLEARANCE = Clearance(5.0, None)


def machine(rate_deg_s: float, acceleration_deg_s2: float, upper_deg: float = 90.0) -> Mount:
    """An azimuth–elevation mount with a travel of ±270°; the elevation joint is 10°/s, 10°/s²."""
    return Mount(
        Hinges.azimuth_elevation(),
        JointLimits(-270.0, 270.0, rate_deg_s, acceleration_deg_s2),
        JointLimits(0.0, upper_deg, 10.0, 10.0),
        Joints(0.0, 45.0),
    )


def course_of(target: Overflight, mount: Mount) -> Course:
    """A pass from 5° to 5° of elevation."""
    (stretch,) = clear_stretches(Wanted("c", target, START_S, START_S + 800.0, 1), CLEARANCE)
    return sample_course(target, *stretch, mount.hinges)


def fine(target: Overflight, mount: Mount) -> Course:
    """The same pass at 10 Hz, within 100 s of its culmination."""
    begin_s = target.culmination_s - 100.0
    looks = target.looks(np.asarray(begin_s + 0.1 * np.arange(2001)))
    fields = looks.azimuth_deg, looks.elevation_deg, looks[3], looks[4]
    return Course(begin_s, 0.1, looks, plain_motions(mount.hinges, *fields))


def planned_errors_deg(
    target: Overflight, mount: Mount, objective: Objective, beam: Beam
) -> FloatArray:
    """Errors of our path, at 10 Hz within 100 s of the culmination."""
    course = course_of(target, mount)
    aim = Aim(mount, CLEARANCE, objective, beam.half_width_deg)
    option = options_for(course, aim, beam)[0]
    path = planned_path(target, course.begin_s, course.step_s, steer(course, option.branch, aim))
    return errors_along(path, fine(target, mount).utc_s, mount)


def linear_programme_deg(target: Overflight, mount: Mount) -> float:
    """Least worst error weighted by cos(elevation) that the azimuth alone can have, at 10 Hz.

    Unknowns: the azimuths and the error. Rates and accelerations are the first and the second
    differences of the azimuths.
    """
    course, limits = fine(target, mount), mount.first
    wanted_deg, weight = course.motions.first_deg, np.cos(np.radians(course.motions.second_deg))
    count = course.size
    first = diags([-1.0, 1.0], [0, 1], shape=(count - 1, count))
    second = diags([1.0, -2.0, 1.0], [0, 1, 2], shape=(count - 2, count))
    rows: list[Any] = [BESIDE([sign * diags(weight), -np.ones((count, 1))]) for sign in (1.0, -1.0)]
    most = [sign * weight * wanted_deg for sign in (1.0, -1.0)]
    for difference, limit in (
        (first, limits.rate_deg_s * course.step_s),
        (second, limits.acceleration_deg_s2 * course.step_s**2),
    ):
        height = difference.shape[0]
        rows += [BESIDE([sign * difference, np.zeros((height, 1))]) for sign in (1.0, -1.0)]
        most += [np.full(height, limit)] * 2
    found = SOLVE(
        np.append(np.zeros(count), 1.0),
        A_ub=vstack(rows).tocsr(),
        b_ub=np.concatenate(most),
        bounds=[(None, None)] * count + [(0.0, None)],
        method="highs",
    )
    return float(found.fun)


def chase_errors_deg(target: Overflight, mount: Mount) -> FloatArray:
    """Errors of a chase at 10 Hz: always as near to the target as the mount can get."""
    motions = fine(target, mount).motions
    goals = [Motion(*each) for each in np.column_stack(motions).tolist()]
    return joint_errors_deg(*flown(goals, mount), motions)


def flown(goals: list[Motion], mount: Mount) -> tuple[FloatArray, FloatArray]:
    """Both joint angles of a mount that is led after goals at 10 Hz, from the first one on."""
    places = [goals[0]]
    for goal in goals[1:]:
        places.append(approach(places[-1], goal, mount, 0.1))
    first_deg, second_deg, *_ = (np.array(field) for field in zip(*places, strict=True))
    return first_deg, second_deg
