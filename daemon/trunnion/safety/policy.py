"""What each hazard leads to: the table, and nothing else. The gate is the mechanism.

Of several hazards the worst action wins; an action that cannot be carried out falls through to the
next worse one, and at last to a halt. The operator's page is printed from this table.
"""

from enum import Enum
from typing import NamedTuple

from trunnion.safety.verdict import Action, Rule


class Clears(Enum):
    """Who ends what a hazard has led to."""

    BY_ITSELF = "by itself"
    BY_ORDER = "with the next order that is allowed"
    BY_OPERATOR = "by an operator"


class Policy(NamedTuple):
    """What a rule does and what ends it.

    The hazard must have lasted `after_s` seconds before the rule acts, and must have been gone for
    `calm_s` before it lets go. `until` ends the sentence of an intervention; `meaning` and `remedy`
    are for the operator's page.
    """

    action: Action
    after_s: float
    calm_s: float
    clears: Clears
    until: str
    meaning: str
    remedy: str


def _slow(until: str, meaning: str, remedy: str) -> Policy:
    return Policy(Action.SLOW, 0.0, 0.0, Clears.BY_ORDER, until, meaning, remedy)


def _refuse(meaning: str, remedy: str) -> Policy:
    until = "until something allowed is asked for"
    return Policy(Action.HALT, 0.0, 0.0, Clears.BY_ORDER, until, meaning, remedy)


def _halt(
    until: str, meaning: str, remedy: str, *, after_s: float = 0.0, calm_s: float = 0.0
) -> Policy:
    return Policy(Action.HALT, after_s, calm_s, Clears.BY_ITSELF, until, meaning, remedy)


def _stow(until: str, meaning: str, remedy: str, *, calm_s: float = 0.0) -> Policy:
    return Policy(Action.STOW, 0.0, calm_s, Clears.BY_ITSELF, until, meaning, remedy)


def _latch(after_s: float, meaning: str, remedy: str) -> Policy:
    until = "until somebody has looked and resets the stop"
    return Policy(Action.LATCH, after_s, 0.0, Clears.BY_OPERATOR, until, meaning, remedy)


_CHECK_PLAN = "Nothing to do at the mount. Look for the contact or the request that asked for it."

POLICY: dict[Rule, Policy] = {
    Rule.EMERGENCY_STOP: Policy(
        Action.HALT,
        0.0,
        0.0,
        Clears.BY_OPERATOR,
        "until it is reset",
        "Somebody or something asked for an emergency stop, or the file that keeps one is damaged. "
        "Where the mount has a power output, its motors lose their power as soon as it rests.",
        "Go and look. When the cause is gone and nobody is near the mount, reset the stop; then "
        "tell the mount to go on. As long as a stop input is pressed, or the file that asks for a "
        "stop is there, no reset is taken.",
    ),
    Rule.NO_READING: _halt(
        "until the mount says where it is",
        "The mount has not said where it is since the start.",
        "Check power and cable of the mount's controller.",
    ),
    Rule.READING_OLD: _halt(
        "until a fresh reading comes",
        "The last word of where the mount is has become too old to move by.",
        "Check the cable; a controller that answers slowly may need a longer reading_max_age_s.",
    ),
    Rule.READING_IMPOSSIBLE: _halt(
        "until a possible reading comes",
        "The mount says it is where it cannot be, or gives no number.",
        "If it stays, check the encoders and the travel in the station file.",
        after_s=0.25,
    ),
    Rule.READING_JUMPED: _halt(
        "until the readings follow each other again",
        "Two readings are further apart than the mount could have moved.",
        "If it comes again, check encoder, coupling and cable.",
        after_s=0.25,
    ),
    Rule.POSITION_LOST: _latch(
        1.0,
        "The readings jumped and stayed there: an encoder has lost its zero, or slipped.",
        "Compare the mount's true direction with the reading; calibrate before you reset.",
    ),
    Rule.FROZEN: _latch(
        1.0,
        "The mount was sent on and its reading does not change at all.",
        "Look whether it moved. If it did, the encoder is dead; if not, the drive or the joint.",
    ),
    Rule.STALLED: _latch(
        3.0,
        "The mount stays far behind its orders.",
        "Look for an obstacle, ice, a jammed joint, a drive without power; then reset.",
    ),
    Rule.SLIPPED: _latch(
        0.3,
        "The mount was told to rest, and moves.",
        "Somebody turns it by hand, the wind pushes it, a brake slips or the drive has run away. "
        "Be ready to cut the power.",
    ),
    Rule.WRONG_WAY: _latch(
        0.0,
        "The mount moves away from where it was told to go.",
        "Reversed wiring or a reversed encoder after work on the mount; else a drive run away.",
    ),
    Rule.UNSETTLED: _halt(
        "until it has stood still for a moment",
        "After a start or a halt the mount has to stand still before it moves again.",
        "Nothing; it takes a moment. If it stays, look who or what moves the mount.",
        after_s=1.0,
    ),
    Rule.OUTSIDE: _halt(
        "until it was brought back by hand or by leave",
        "The mount stands outside its travel, below its floor or horizon, or in a keep-out.",
        "Look whether the way back is free, and let `trunnion recover` bring it back slowly.",
    ),
    Rule.LINK_DOWN: _halt(
        "until the link is up",
        "The mount does not answer, or answers in a way that cannot be trusted.",
        "Check power and cable of the mount's controller.",
    ),
    Rule.TURN_LATE: _halt(
        "until the turns come in time",
        "The computer was too busy to steer in time.",
        "If it comes again, look for another program that takes the processor.",
    ),
    Rule.MOUNT_FAULT: _halt(
        "until the mount reports none",
        "The mount's own controller reports a fault.",
        "Look the fault up in the papers of the controller.",
    ),
    Rule.CLOCK_UNTRUSTED: _halt(
        "until the clock can be trusted",
        "The computer's clock is not synchronised, or not well enough.",
        "Check the time service and the network.",
    ),
    Rule.CLOCK_STEPPED: _halt(
        "until the clock has run evenly for a while",
        "The computer's clock was set while the mount was being steered by it.",
        "Nothing, if it happens once. Otherwise find what sets the clock.",
        calm_s=2.0,
    ),
    Rule.WIND: _stow(
        "until the wind has been lower for a while",
        "The wind is above the limit of the station file.",
        "Wait.",
        calm_s=300.0,
    ),
    Rule.WIND_UNKNOWN: _stow(
        "until the wind is known",
        "This station needs a wind sensor, and it does not answer.",
        "Check the sensor and its cable.",
    ),
    Rule.HEARTBEAT_LOST: _stow(
        "until it is heard again",
        "The outside heartbeat that this station depends on has stopped.",
        "Look for whoever sends it.",
    ),
    Rule.STOW_OVERDUE: Policy(
        Action.HALT,
        300.0,
        0.0,
        Clears.BY_ITSELF,
        "until the reason to stow is over",
        "The mount should have reached stow long ago and has not.",
        "Look why; stow it by hand if the reason is the wind and the mount can be reached safely.",
    ),
    Rule.NOT_FINITE: _refuse("Something other than a number was asked for.", _CHECK_PLAN),
    Rule.TRAVEL: _refuse("A joint was asked to leave its travel.", _CHECK_PLAN),
    Rule.RATE: _slow(
        "until the mount has caught up",
        "More was asked of a joint than it can do.",
        "Nothing; the mount follows as fast as it can.",
    ),
    Rule.FLOOR: _refuse("The beam was asked to go below the elevation floor.", _CHECK_PLAN),
    Rule.MASK: _refuse("The beam was asked to go below the horizon mask.", _CHECK_PLAN),
    Rule.KEEP_OUT: _refuse("The mount was asked to enter a keep-out.", _CHECK_PLAN),
    Rule.SUN: _refuse(
        "The beam was asked to go too near the Sun.",
        "Nothing to do at the mount. A contact goes on by itself once its target has left the "
        "circle that sun_keep_out_deg draws round the Sun.",
    ),
    Rule.SUN_IN_BEAM: _stow(
        "until the Sun has been out of the beam for a while",
        "The Sun has moved so near to the beam that it may heat feed and structure. The contact is "
        "broken off; the mount leaves the circle round the Sun slowly and goes to stow.",
        "Nothing, if the mount moves away. If it does not, the Sun stands over the way to stow, or "
        "over stow itself: send the mount elsewhere by hand, or shade the feed.",
        calm_s=60.0,
    ),
    Rule.SUN_UNKNOWN: _halt(
        "until it is known where the Sun stands",
        "This station stays clear of the Sun, and nobody can tell where the Sun stands, because "
        "the computer's clock cannot be trusted.",
        "Check the time service and the network. The Sun moves a degree in four minutes: do not "
        "leave the antenna pointing near it.",
    ),
    Rule.STOPPING: _slow(
        "until there is room to stop",
        "The mount moves too fast to stop before a limit that lies ahead.",
        "Nothing; the mount brakes.",
    ),
}
