"""What passes between the daemon and a driver: plain values. Standard library only."""

from dataclasses import dataclass
from pathlib import Path
from typing import NamedTuple, Protocol


class Clock(Protocol):
    """Time, handed in, so that a driver runs under a virtual clock as under the real one."""

    def monotonic_s(self) -> float:
        """Seconds since an arbitrary start, never stepped."""
        ...

    def sleep(self, seconds: float) -> None:
        """Let this much time pass."""
        ...


@dataclass(frozen=True, slots=True)
class JointFacts:
    """What the station file says of one joint: travel (deg), rate (deg/s), its change (deg/s²)."""

    lower_deg: float
    upper_deg: float
    rate_deg_s: float
    acceleration_deg_s2: float


@dataclass(frozen=True, slots=True)
class MountFacts:
    """What the station file says of the mount, for a driver to scale and bound its commands.

    `folder` is where relative paths among the driver's settings begin.
    """

    first: JointFacts
    second: JointFacts
    stow_first_deg: float
    stow_second_deg: float
    folder: Path = Path()


class DriverMotion(NamedTuple):
    """Where both joints shall be at the moment of the call (deg) and how fast they move (deg/s)."""

    first_deg: float
    second_deg: float
    first_rate_deg_s: float
    second_rate_deg_s: float


class DriverReading(NamedTuple):
    """Both joint angles as measured (deg), the monotonic second they were true at, and flags.

    `stop_pressed` is the hardware stop input (True means stop, also when the signal is lost);
    `at_limit` a limit switch; `fault` the mount's own words for a fault it reports, else None.
    """

    taken_s: float
    first_deg: float
    second_deg: float
    stop_pressed: bool = False
    at_limit: bool = False
    fault: str | None = None


@dataclass(frozen=True, slots=True)
class Capabilities:
    """What this hardware can do beyond moving to a position and halting."""

    follows_rate: bool = False
    cuts_power: bool = False
    has_brake: bool = False
    reports_stop_input: bool = False
    reports_limits: bool = False
