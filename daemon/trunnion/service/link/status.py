"""How the link fares, split by blame."""

from enum import Enum
from typing import NamedTuple

from trunnion_drivers.interface.errors import (
    DriverError,
    Garbled,
    LinkLost,
    NoReply,
    Refused,
    WrongState,
)


class LinkState(Enum):
    """What the newest exchange with the driver came to."""

    CLOSED = "not opened, or closed by us"
    UP = "the mount answers"
    SILENT = "the mount does not answer"
    GARBLED = "the mount's answer cannot be trusted"
    REFUSING = "the mount understood the order and would not"
    DOWN = "the way to the mount is gone"
    BROKEN = "the driver failed by a mistake of its own, or of ours"


class LinkStatus(NamedTuple):
    """One look at the link, and what the mount said beside its angles in the newest reading.

    `failures_in_row` counts failed calls of the driver since the last faultless exchange,
    `failures` all of them, `connections` how often the link was opened; `last_error` is kept until
    the next one, so that a cured fault can still be read about. `is_power_cut` tells that we have
    taken the power from the motors.
    """

    state: LinkState = LinkState.CLOSED
    failures_in_row: int = 0
    failures: int = 0
    connections: int = 0
    last_error: str | None = None
    stop_pressed: bool = False
    at_limit: bool = False
    fault: str | None = None
    is_power_cut: bool = False

    @property
    def is_up(self) -> bool:
        """Whether the mount can be talked to; one bad exchange between good ones changes nothing.

        How old the newest reading is tells for itself whether it may be trusted.
        """
        is_passing = self.state in _PASSING and self.failures_in_row <= _OVERLOOKED_IN_ROW
        return self.state is LinkState.UP or is_passing


_PASSING = frozenset({LinkState.SILENT, LinkState.GARBLED})
_OVERLOOKED_IN_ROW = 2

_STATE_OF_ERROR = (
    (LinkLost, LinkState.DOWN),
    (NoReply, LinkState.SILENT),
    (Garbled, LinkState.GARBLED),
    (Refused, LinkState.REFUSING),
    (WrongState, LinkState.BROKEN),
)


def state_after(error: Exception) -> LinkState:
    """The state that an error of the driver leads to; what no driver may raise counts as broken."""
    for kind, state in _STATE_OF_ERROR:
        if isinstance(error, kind):
            return state
    return LinkState.DOWN if isinstance(error, OSError) else LinkState.BROKEN


def sentence(error: Exception) -> str:
    """What to say of an error; one that no driver may raise is named by its class too."""
    return str(error) if isinstance(error, DriverError) else f"{type(error).__name__}: {error}"
