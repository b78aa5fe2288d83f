"""What a picture shows of one assignment: samples of the target, the boresight and the joints."""

from collections.abc import Iterator
from typing import NamedTuple

from trunnion.mount.joints import Motion
from trunnion.mount.mount import Mount
from trunnion.mount.sphere import separation_deg
from trunnion.track.path import Assignment

SAMPLES = 240


class Sample(NamedTuple):
    """One instant (UTC): where the target is seen, where the beam points, the joints, the error."""

    utc_s: float
    seen: tuple[float, float]
    flown: tuple[float, float]
    motion: Motion
    error_deg: float


class Flight(NamedTuple):
    """A contact's assignment as it will be flown, evenly sampled."""

    contact: str
    samples: tuple[Sample, ...]


def flight_of(assignment: Assignment, mount: Mount) -> Flight:
    """Sample an assignment; raises NoPosition where its target has none."""
    return Flight(assignment.contact, tuple(_samples(assignment, mount)))


def _samples(assignment: Assignment, mount: Mount) -> Iterator[Sample]:
    length_s = assignment.end_s - assignment.begin_s
    for index in range(SAMPLES + 1):
        utc_s = assignment.begin_s + length_s * index / SAMPLES
        motion, look = assignment.path.at(utc_s), assignment.path.look(utc_s)
        seen = look.azimuth_deg, look.elevation_deg
        flown = mount.hinges.boresight(motion.joints)
        yield Sample(utc_s, seen, flown, motion, separation_deg(*seen, *flown))
