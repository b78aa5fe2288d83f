"""The pilot's facts with the Sun in the sky: its slews go round the circle that the gate keeps."""

from trunnion.mount.clearance import Circle
from trunnion.pilot.departure import Facts

UP_DEG = -1.0
"""Lower than this the Sun is below the horizon with all of its disc."""

LEEWAY_DEG = 0.1
"""The Sun moves on while the mount is on its way."""


class Sunlit:
    """Remembers the facts for the Sun where it was last seen."""

    def __init__(self, facts: Facts) -> None:
        self._dark = self._facts = facts
        self._sun: tuple[float, float] | None = None

    def facts(self, sun: tuple[float, float] | None) -> Facts:
        """The facts with the circle round the Sun, where one is kept and the Sun is up.

        Where the Sun is not known it is held to be where it was.
        """
        radius_deg = self._dark.sun_keep_out_deg
        if radius_deg is None or sun is None or sun == self._sun:
            return self._facts
        self._sun, self._facts = sun, self._dark
        if sun[1] >= UP_DEG:
            circle = Circle("the Sun", *sun, radius_deg + LEEWAY_DEG)
            clearance = self._dark.clearance.with_circle(circle)
            self._facts = self._dark._replace(clearance=clearance)
        return self._facts
