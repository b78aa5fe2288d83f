"""An operator's leave to bring a mount back that was found outside its limits.

It is for once: it ends inside, with a stop, with any other request, or after a time. No restart
keeps it.
"""

from collections.abc import Callable
from typing import NamedTuple

from trunnion.mount.joints import Joints, Reading
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.places import find_at
from trunnion.safety.way_in import find_way_in
from trunnion.service.clock import Clock
from trunnion.service.errors import ServiceError

LONGEST_S = 120.0
"""After so long the leave ends, wherever the mount is."""


class NothingToRecover(ServiceError):  # noqa: N818 - named for what it means
    """The mount is inside its limits, no straight way leads back, or nobody knows where it is."""


class _Leave(NamedTuple):
    goal: Joints
    until_s: float


class RecoveryLeave:
    """Granted and withdrawn from any thread; asked by the control turn."""

    def __init__(
        self, limits: SafetyLimits, clock: Clock, newest: Callable[[], Reading | None]
    ) -> None:
        self._limits = limits
        self._clock = clock
        self._newest = newest
        self._leave: _Leave | None = None

    def grant(self) -> Joints:
        """Give leave, and return the place inside to which the mount goes.

        Raises NothingToRecover.
        """
        reading = self._newest()
        if reading is None:
            raise NothingToRecover("nobody knows where the mount is")
        place = f"{reading.first_deg:.2f}°/{reading.second_deg:.2f}°"
        if find_at(reading.joints, self._limits) is None:
            raise NothingToRecover(f"the mount is inside its limits, at {place}")
        goal = find_way_in(reading.joints, self._limits)
        if goal is None:
            raise NothingToRecover(f"no straight way leads inside from {place}: move it by hand")
        self._leave = _Leave(goal, self._clock.monotonic_s() + LONGEST_S)
        return goal

    def withdraw(self) -> None:
        """End it, if it is there."""
        self._leave = None

    def way_back(self, reading: Reading | None) -> Joints | None:
        """Where the mount may go by this leave in this turn; None for nowhere."""
        leave = self._leave
        if leave is None or reading is None:
            return None
        is_inside = find_at(reading.joints, self._limits) is None
        if is_inside or self._clock.monotonic_s() >= leave.until_s:
            self.withdraw()
            return None
        return leave.goal
