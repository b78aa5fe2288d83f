"""The last control turn, and how punctual it was; written by it, read from any thread."""

from dataclasses import dataclass, field

from trunnion.mount.joints import Reading
from trunnion.service.cadence import Beat
from trunnion.service.turn import Turn


@dataclass(slots=True)
class Pulse:
    """Nothing is known before the first turn."""

    beat: Beat = field(default_factory=lambda: Beat(0, 0.0, 0))
    missed: int = 0
    turn: Turn | None = None

    def reading(self) -> Reading | None:
        """What the last turn knew of where the mount is."""
        return self.turn.reading if self.turn is not None else None
