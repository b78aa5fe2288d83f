"""What can go wrong around a station, as plain values that can be drawn, printed and left out."""

from enum import Enum
from typing import NamedTuple


class MishapKind(Enum):
    """What goes wrong. Those of steel and line are carried out by the simulated mount."""

    CABLE_PULLED = "cable pulled"
    SILENT = "mount silent"
    DEAF = "mount deaf"
    GARBLED = "answers garbled"
    REFUSING = "orders refused"
    JAMMED = "joint jammed"
    REVERSED = "joint reversed"
    RUNNING_AWAY = "joint running away"
    UNSTOPPABLE = "joint unstoppable"
    SLIPPING = "brake slipping"
    WIND_PUSH = "wind bends the antenna"
    FROZEN = "encoder frozen"
    DEAD = "encoder dead"
    OFFSET = "encoder offset"
    OLD_READINGS = "readings old"
    SLOW_CALLS = "calls slow"
    STOP_INPUT = "stop input pressed"
    POWER_LOST = "power lost"
    FAULT_REPORTED = "fault reported"
    CLOCK_STEP = "clock stepped"
    CLOCK_UNTRUSTED = "clock not synchronised"
    STALL = "turns stalled"
    DEATH = "process killed"
    TORN_LATCH = "process killed, files torn"
    DISK_FULL = "disk full"
    STOP = "operator stops"
    RESET = "operator resets"
    RESUME = "operator resumes"
    STOW = "operator stows"
    HOLD = "operator holds"
    NEW_PLAN = "plan replaced"
    BAD_PLAN = "plan leads astray"
    NO_PLAN = "plan taken away"
    WIND = "wind too high"
    WIND_UNKNOWN = "wind sensor lost"
    HEARTBEAT_LOST = "heartbeat lost"
    SUN_UNKNOWN = "Sun unknown"
    RECOVER = "operator recovers"


class Mishap(NamedTuple):
    """One thing going wrong: when (seconds after the start), for how long, how much, where.

    `amount` is degrees or seconds, as the kind has it; `joint` 0 or 1.
    """

    kind: MishapKind
    at_s: float
    lasts_s: float
    amount: float
    joint: int

    @property
    def end_s(self) -> float:
        """When it is over."""
        return self.at_s + self.lasts_s

    def is_on(self, since_s: float, grace_s: float = 0.0) -> bool:
        """Whether it is going on, or has been within the last `grace_s` seconds."""
        return self.at_s <= since_s < self.end_s + grace_s

    def __str__(self) -> str:
        """The mishap in words."""
        return (
            f"{self.kind.value} at {self.at_s:.1f} s for {self.lasts_s:.1f} s "
            f"(amount {self.amount:.2f}, joint {self.joint + 1})"
        )
