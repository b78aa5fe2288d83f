"""Whether a mount that was halted comes to rest, and stays there."""

from collections.abc import Iterator

from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.safety.hazard import Hazard
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.verdict import Rule

REACTION_S = 1.0
"""A halt may take this long to get through to the mount and to show in the readings."""

BRAKING_MARGIN = 1.5
"""A mount may brake this much more slowly than its acceleration."""


class Rest:
    """Watches from a halt until the next order."""

    def __init__(self, limits: SafetyLimits) -> None:
        self._limits = limits
        self._place: Joints | None = None
        self._settled_s = 0.0

    def forget(self) -> None:
        """The mount was ordered to move, or could not be told to rest."""
        self._place = None

    def find(self, mono_s: float, reading: Reading, measured: Motion) -> Iterator[Hazard]:
        """Motion that nobody ordered; `measured` is how the mount moves by its readings."""
        if self._place is None:
            self._settled_s = mono_s + self._settling_s(measured)
            self._place = reading.joints
        if mono_s <= self._settled_s:
            self._place = reading.joints
            return
        moved_deg = max(
            abs(reading.first_deg - self._place.first_deg),
            abs(reading.second_deg - self._place.second_deg),
        )
        if moved_deg > self._limits.slip_deg:
            yield Hazard(Rule.SLIPPED, f"the mount moved {moved_deg:.1f}° that nobody ordered")

    def _settling_s(self, measured: Motion) -> float:
        mount = self._limits.mount
        braking_s = max(
            abs(measured.first_rate_deg_s) / mount.first.acceleration_deg_s2,
            abs(measured.second_rate_deg_s) / mount.second.acceleration_deg_s2,
        )
        return REACTION_S + BRAKING_MARGIN * braking_s
