"""Permission to transmit: what it takes to have it, and for how long it is good."""

from typing import NamedTuple

from trunnion.mount.joints import Reading
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.verdict import Action, Verdict

SETTLED_S = 1.0
"""The beam must have been on target for so long without a break, by default."""

VALIDITY_S = 1.0
"""A permission is good for so long, and has to be given anew before that."""


class TransmitPermit(NamedTuple):
    """Until which monotonic second one may transmit, if at all; and why not, where not."""

    until_s: float | None
    reason: str | None

    def is_good_at(self, mono_s: float) -> bool:
        """Whether transmitting is permitted at this second."""
        return self.until_s is not None and mono_s < self.until_s


class TransmitJudge:
    """Gives the permission turn by turn; whatever is not known forbids."""

    def __init__(
        self, limits: SafetyLimits, tolerance_deg: float, settled_s: float = SETTLED_S
    ) -> None:
        self._limits = limits
        self._tolerance_deg = tolerance_deg
        self._settled_s = settled_s
        self._since_s: float | None = None

    def judge(
        self, mono_s: float, error_deg: float | None, reading: Reading | None, verdict: Verdict
    ) -> TransmitPermit:
        """Permit, or say why not.

        `error_deg` is the angle on the sky between beam and target, None outside a contact; the
        reading and the verdict are those of this turn.
        """
        reason = self._why_not(mono_s, error_deg, reading, verdict)
        if reason is not None:
            self._since_s = None
            return TransmitPermit(None, reason)
        if self._since_s is None:
            self._since_s = mono_s
        if mono_s - self._since_s < self._settled_s:
            return TransmitPermit(None, "the beam has been on target for too short a time")
        return TransmitPermit(mono_s + VALIDITY_S, None)

    def _why_not(
        self, mono_s: float, error_deg: float | None, reading: Reading | None, verdict: Verdict
    ) -> str | None:
        worse = [each for each in verdict.interventions if each.action > Action.SLOW]
        if worse or verdict.latch is not None:
            return worse[0].sentence if worse else verdict.latch
        if error_deg is None:
            return "no contact is on"
        if not error_deg <= self._tolerance_deg:
            return f"the beam is {error_deg:.2f}° off, {self._tolerance_deg:g}° are allowed"
        if reading is None or not mono_s - reading.taken_s <= self._limits.reading_max_age_s:
            return "nobody knows where the mount is"
        _, elevation_deg = self._limits.mount.hinges.boresight(reading.joints)
        lowest_deg = self._limits.transmit_floor_deg
        if not elevation_deg >= lowest_deg:
            return f"elevation {elevation_deg:.2f}°, the transmit floor is {lowest_deg:g}°"
        return None
