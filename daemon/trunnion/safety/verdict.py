"""What the gate says in one turn: the order that leaves, and every reason why it is another one."""

from enum import Enum, IntEnum
from typing import NamedTuple

from trunnion.mount.joints import Joints, Motion


class Move(NamedTuple):
    """Send the joints there, with these rates, now."""

    motion: Motion


class Halt(NamedTuple):
    """Bring both joints to rest at full deceleration, and leave them there."""


Order = Move | Halt


class Action(IntEnum):
    """What a hazard leads to; the higher number wins."""

    SLOW = 1
    """The order is brought within the limits; the mount goes on."""
    STOW = 2
    """The mount is to go to stow by a clear way, and to stay there."""
    HALT = 3
    """The mount is halted until the cause is gone."""
    LATCH = 4
    """The mount is halted, and an emergency stop is latched: a person has to reset it."""


class Rule(Enum):
    """What was broken, in the words of the records."""

    EMERGENCY_STOP = "emergency stop"
    NO_READING = "no reading"
    READING_OLD = "reading too old"
    READING_IMPOSSIBLE = "reading impossible"
    READING_JUMPED = "reading jumped"
    POSITION_LOST = "position lost"
    FROZEN = "reading frozen"
    STALLED = "stalled"
    SLIPPED = "moved unordered"
    WRONG_WAY = "moved the wrong way"
    UNSETTLED = "not at rest yet"
    OUTSIDE = "outside its limits"
    LINK_DOWN = "link down"
    TURN_LATE = "control turn late"
    MOUNT_FAULT = "fault of the mount"
    CLOCK_UNTRUSTED = "clock untrusted"
    CLOCK_STEPPED = "clock stepped"
    WIND = "wind"
    WIND_UNKNOWN = "wind unknown"
    HEARTBEAT_LOST = "heartbeat lost"
    STOW_OVERDUE = "stow overdue"
    NOT_FINITE = "order not finite"
    TRAVEL = "travel"
    RATE = "rate or acceleration"
    FLOOR = "elevation floor"
    MASK = "horizon mask"
    KEEP_OUT = "keep-out"
    SUN = "circle round the Sun"
    SUN_IN_BEAM = "Sun in the beam"
    SUN_UNKNOWN = "Sun unknown"
    STOPPING = "stopping distance"


class Intervention(NamedTuple):
    """One rule that acted: what was asked, what is done, until when, in one sentence."""

    rule: Rule
    action: Action
    sentence: str


class Verdict(NamedTuple):
    """The order that leaves for the mount, and why, where it is not the one that was asked for.

    `wants_stow` asks the pilot for the way to stow; `latch` is the cause of an emergency stop that
    has to be kept from now on, and is told again until it is; `must_cut_power` asks for the power
    of the motors to be removed, because a mount that was halted does not come to rest;
    `way_out` is where a mount should go first that the Sun has moved over, without anybody's leave.
    """

    order: Order
    interventions: tuple[Intervention, ...] = ()
    wants_stow: bool = False
    latch: str | None = None
    must_cut_power: bool = False
    way_out: Joints | None = None
