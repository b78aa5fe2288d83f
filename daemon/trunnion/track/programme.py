"""What planning says: who has the mount when, and what each contact will be like."""

from dataclasses import dataclass
from enum import Enum

from trunnion.track.path import Assignment


class FindingKind(Enum):
    """What can be said about a contact before it happens."""

    EMPTY = "empty"
    PAST = "past"
    NO_POSITION = "no position"
    NEVER_VISIBLE = "never visible"
    GIVES_WAY = "gives way"
    OFF_TRAVEL = "off travel"
    UNWINDS = "unwinds"
    OBSTRUCTED = "obstructed"
    TOO_FAST = "too fast"
    TOO_SUDDEN = "too sudden"
    OUT_OF_REACH = "out of reach"
    NO_WAY = "no way"
    LATE = "late"
    LEFT_OUT = "left out"


@dataclass(frozen=True, slots=True)
class Finding:
    """One thing that will not be as wished, from when until when (UTC), in one sentence.

    `is_failure` tells whether the contact will miss something that it asked for.
    """

    kind: FindingKind
    begin_s: float
    end_s: float
    sentence: str
    is_failure: bool


@dataclass(frozen=True, slots=True)
class Forecast:
    """What one wanted contact will be like; times are UTC, None where there is nothing to point at.

    `worst_error_deg` is the largest angle between boresight and target once the mount has had time
    to get there, `outside_beam_s` the time in which it is above half the beamwidth, `worst_loss_db`
    what the largest error costs in power.
    """

    contact: str
    begin_s: float | None
    culmination_s: float | None
    end_s: float | None
    highest_elevation_deg: float | None
    first_joint_begin_deg: float | None
    first_joint_end_deg: float | None
    worst_error_deg: float
    outside_beam_s: float
    findings: tuple[Finding, ...]
    worst_loss_db: float = 0.0

    @property
    def is_served(self) -> bool:
        """Whether nothing that was asked for will be missed."""
        return not any(finding.is_failure for finding in self.findings)


@dataclass(frozen=True, slots=True)
class Programme:
    """Assignments in order of time without overlap; one forecast a wanted contact, as given."""

    assignments: tuple[Assignment, ...]
    forecasts: tuple[Forecast, ...]
