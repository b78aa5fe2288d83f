"""Permission to transmit: what it takes to have it, and for how long it is good."""

from math import inf
from typing import NamedTuple

from trunnion.mount.joints import Joints, Reading
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.verdict import Action, Halt, Order, Verdict

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
        elevation_deg = self._elevation_deg(reading.joints)
        lowest_deg = self._limits.transmit_floor_deg
        if not elevation_deg >= lowest_deg:
            return f"elevation {elevation_deg:.2f}°, the transmit floor is {lowest_deg:g}°"
        if not self._led_to_deg(verdict.order) >= lowest_deg:
            return f"on the way below the transmit floor of {lowest_deg:g}°"
        return None

    def _elevation_deg(self, place: Joints) -> float:
        return self._limits.mount.hinges.boresight(place)[1]

    def _led_to_deg(self, order: Order) -> float:
        """Where an order has led the beam by the next turn: nobody looks before."""
        if isinstance(order, Halt):
            return inf
        now, turn_s = order.motion, self._limits.turn_s
        first_deg = now.first_deg + now.first_rate_deg_s * turn_s
        second_deg = now.second_deg + now.second_rate_deg_s * turn_s
        return min(
            self._elevation_deg(now.joints), self._elevation_deg(Joints(first_deg, second_deg))
        )
