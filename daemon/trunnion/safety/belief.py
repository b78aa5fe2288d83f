"""Which reading to believe: where the mount says it is, against where it can be."""

from collections.abc import Iterator
from math import isfinite

from trunnion.mount.joints import Motion, Reading
from trunnion.mount.motion import stopping_distance_deg
from trunnion.mount.mount import JointLimits
from trunnion.safety.hazard import Hazard
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.verdict import Rule

FAR_OUTSIDE_DEG = 10.0
"""Further outside its travel than this no joint can be: the reading is wrong."""

JUMP_MARGIN = 1.5
"""A reading may change this much faster than the joint's rate before it counts as a jump."""

JUMP_ENCODER_ERRORS = 4.0
"""Two readings, each wrong by the encoder's error to one side, and as much again to spare."""


class Belief:
    """The last reading that could be true, and the motion that it and the one before it show.

    The first reading of all is believed on its word, and shows no motion yet; one that contradicts
    it takes its place.
    """

    def __init__(self, limits: SafetyLimits) -> None:
        self._limits = limits
        self.reading: Reading | None = None
        self.measured: Motion | None = None
        self._jumped_s: float | None = None

    def forget(self) -> None:
        """Begin anew: somebody may have moved or calibrated the mount."""
        self.reading = self.measured = self._jumped_s = None

    def find(self, mono_s: float, reading: Reading | None) -> Iterator[Hazard]:
        """What keeps this reading from being believed, if anything."""
        if reading is None:
            yield Hazard(Rule.NO_READING, "the mount has not said where it is")
            return
        most_s = self._limits.reading_max_age_s
        age_s = mono_s - reading.taken_s
        if age_s > most_s:
            finding = f"the last reading is {age_s:.1f} s old, {most_s:g} s are allowed"
            yield Hazard(Rule.READING_OLD, finding)
        elif not age_s >= -most_s or not self._is_possible(reading):
            finding = f"the mount says it is at {reading.first_deg:.1f}°/{reading.second_deg:.1f}°"
            yield Hazard(Rule.READING_IMPOSSIBLE, finding)
        else:
            yield from self._hold_against_the_last(reading)

    def _is_possible(self, reading: Reading) -> bool:
        mount = self._limits.mount
        return _is_near(reading.first_deg, mount.first) and _is_near(
            reading.second_deg, mount.second
        )

    def _hold_against_the_last(self, reading: Reading) -> Iterator[Hazard]:
        last = self.reading
        if last is None or not self._is_jump(last, reading):
            self._jumped_s = None
            self._believe(reading)
            return
        finding = (
            f"the reading jumped from {last.first_deg:.1f}°/{last.second_deg:.1f}° "
            f"to {reading.first_deg:.1f}°/{reading.second_deg:.1f}°"
        )
        yield Hazard(Rule.READING_JUMPED, finding)
        if self.measured is None:
            self._begin_with(reading)
            return
        yield Hazard(Rule.POSITION_LOST, f"{finding} and stays there")
        if self._jumped_s is None:
            self._jumped_s = reading.taken_s

    def _begin_with(self, reading: Reading) -> None:
        self.reading, self.measured = reading, None

    def _believe(self, reading: Reading) -> None:
        last = self.reading
        if last is None:
            self._begin_with(reading)
        elif reading.taken_s > last.taken_s:
            self.reading, self.measured = reading, _motion_between(last, reading)

    def _is_jump(self, last: Reading, reading: Reading) -> bool:
        mount, rates = self._limits.mount, self.measured or Motion(*last.joints)
        until_s = reading.taken_s if self._jumped_s is None else self._jumped_s
        since_s = abs(until_s - last.taken_s)
        first_deg = self._reach_deg(mount.first, since_s, rates.first_rate_deg_s)
        second_deg = self._reach_deg(mount.second, since_s, rates.second_rate_deg_s)
        return (
            abs(reading.first_deg - last.first_deg) > first_deg
            or abs(reading.second_deg - last.second_deg) > second_deg
        )

    def _reach_deg(self, joint: JointLimits, since_s: float, rate_deg_s: float) -> float:
        """How far a joint may have got; after a jump it is halted, and gets no further."""
        reach_deg = joint.rate_deg_s * since_s
        if self._jumped_s is not None:
            reach_deg += stopping_distance_deg(rate_deg_s, joint)
        return JUMP_MARGIN * reach_deg + JUMP_ENCODER_ERRORS * self._limits.encoder_error_deg


def _motion_between(before: Reading, now: Reading) -> Motion:
    since_s = now.taken_s - before.taken_s
    return Motion(
        now.first_deg,
        now.second_deg,
        (now.first_deg - before.first_deg) / since_s,
        (now.second_deg - before.second_deg) / since_s,
    )


def _is_near(angle_deg: float, joint: JointLimits) -> bool:
    lowest, highest = joint.lower_deg - FAR_OUTSIDE_DEG, joint.upper_deg + FAR_OUTSIDE_DEG
    return isfinite(angle_deg) and lowest <= angle_deg <= highest
