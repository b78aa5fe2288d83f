"""What each hazard leads to: the table, and nothing else. The gate is the mechanism.

Of several hazards the worst action wins. Every row says what clears it in its sentence.
"""

from typing import NamedTuple

from trunnion.safety.verdict import Action, Rule


class Policy(NamedTuple):
    """What a rule does, how long (s) its cause must have lasted, and what ends it, in words."""

    action: Action
    after_s: float
    until: str


_GONE = "until it is over"
_RESET = "until somebody has looked and resets the stop"

POLICY: dict[Rule, Policy] = {
    Rule.EMERGENCY_STOP: Policy(Action.HALT, 0.0, "until it is reset"),
    Rule.NO_READING: Policy(Action.HALT, 0.0, "until the mount says where it is"),
    Rule.READING_OLD: Policy(Action.HALT, 0.0, "until a fresh reading comes"),
    Rule.READING_IMPOSSIBLE: Policy(Action.HALT, 0.0, "until a possible reading comes"),
    Rule.READING_JUMPED: Policy(Action.HALT, 0.0, "until the readings follow each other again"),
    Rule.STALLED: Policy(Action.LATCH, 3.0, _RESET),
    Rule.SLIPPED: Policy(Action.LATCH, 0.5, _RESET),
    Rule.WRONG_WAY: Policy(Action.LATCH, 0.0, _RESET),
    Rule.OUTSIDE: Policy(Action.HALT, 0.0, "until it was brought back by hand or by leave"),
    Rule.LINK_DOWN: Policy(Action.HALT, 0.0, "until the link is up"),
    Rule.TURN_LATE: Policy(Action.HALT, 0.0, "until the turns come in time"),
    Rule.MOUNT_FAULT: Policy(Action.HALT, 0.0, "until the mount reports none"),
    Rule.CLOCK_UNTRUSTED: Policy(Action.HALT, 0.0, "until the clock can be trusted"),
    Rule.WIND: Policy(Action.STOW, 0.0, "until the wind has been lower for a while"),
    Rule.WIND_UNKNOWN: Policy(Action.STOW, 0.0, "until the wind is known"),
    Rule.HEARTBEAT_LOST: Policy(Action.STOW, 0.0, "until it is heard again"),
    Rule.NOT_FINITE: Policy(Action.HALT, 0.0, _GONE),
    Rule.TRAVEL: Policy(Action.HALT, 0.0, _GONE),
    Rule.RATE: Policy(Action.SLOW, 0.0, _GONE),
    Rule.FLOOR: Policy(Action.HALT, 0.0, _GONE),
    Rule.MASK: Policy(Action.HALT, 0.0, _GONE),
    Rule.KEEP_OUT: Policy(Action.HALT, 0.0, _GONE),
    Rule.STOPPING: Policy(Action.SLOW, 0.0, _GONE),
}
