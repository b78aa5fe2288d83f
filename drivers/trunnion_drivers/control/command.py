"""What a mount can be told: to go somewhere, to move at a rate, or to switch its motors."""

from enum import Enum
from typing import NamedTuple, TypeAlias

from trunnion_drivers.interface.values import DriverMotion


class Rates(NamedTuple):
    """The rates of both joints in degrees per second."""

    first_deg_s: float
    second_deg_s: float


class Turn(Enum):
    """What the contacts of one motor do."""

    DOWN = -1
    OFF = 0
    UP = 1


class Switches(NamedTuple):
    """The contacts of both motors."""

    first: Turn
    second: Turn


Command: TypeAlias = DriverMotion | Rates | Switches


class CommandMode(Enum):
    """Which of these commands a mount understands."""

    POSITION = "position"
    RATE = "rate"
    ON_OFF = "on-off"
