"""What the pilot is doing, and what it was told to do."""

from enum import Enum


class Phase(Enum):
    """What the mount is being used for in this turn."""

    STARTING = "starting"
    """No reading yet: nothing is ordered."""
    STOWED = "stowed"
    """At rest in the stow position."""
    STOWING = "stowing"
    """On the way to the stow position."""
    HOLDING = "holding"
    """At rest where it stands: it is told to, or there is no clear way to where it should go."""
    SLEWING = "slewing"
    """On the way to the point where the next target rises."""
    WAITING = "waiting"
    """At rest at the point where the next target rises."""
    ACQUIRING = "acquiring"
    """The contact has begun and the boresight is still on its way to the target."""
    TRACKING = "tracking"
    """The contact has begun and the joints follow its path."""
    RECOVERING = "recovering"
    """Found outside its limits, and on the way back inside, by an operator's leave."""
    HALTED = "halted"
    """An emergency stop is latched: nothing is ordered."""


class Wish(Enum):
    """The operator's standing wish."""

    FOLLOW_PLAN = "follow plan"
    STOW = "stow"
    """Go to stow and stay there until told to follow the plan again."""
    HOLD = "hold"
    """Come to rest and stay there until told to follow the plan again; wind still leads to stow."""
    STAND = "stand still"
    """Stay there, whatever happens, until told otherwise: after a reset somebody may stand at the
    mount, and no hazard may start it (ISO 13850: a reset starts nothing)."""
