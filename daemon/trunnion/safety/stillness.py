"""Whether the mount stands still: after a halt nothing moves before it does.

An order begins where the mount is, at rest; begun while the mount still moves it would be overrun.
"""

from trunnion.mount.joints import Reading
from trunnion.safety.limits import SafetyLimits

STILL_S = 0.2
"""It must not have moved for so long, by no more than what the encoder's error explains."""


class Stillness:
    """Remembers the reading from which on the mount has not moved."""

    def __init__(self, limits: SafetyLimits) -> None:
        self._most_deg = 2.0 * limits.encoder_error_deg
        self._since: Reading | None = None

    def forget(self) -> None:
        """Begin anew."""
        self._since = None

    def is_still(self, reading: Reading) -> bool:
        """Whether the mount has stood still up to this reading; asked turn by turn."""
        since = self._since
        if since is None or self._has_moved(since, reading):
            self._since = reading
            return False
        return reading.taken_s - since.taken_s >= STILL_S

    def _has_moved(self, since: Reading, reading: Reading) -> bool:
        return (
            abs(reading.first_deg - since.first_deg) > self._most_deg
            or abs(reading.second_deg - since.second_deg) > self._most_deg
        )
