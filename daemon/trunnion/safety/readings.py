"""Hazards that the readings tell of: where the mount says it is, against where it can be.

The watch keeps the last reading that it believed, and for how long something has been odd. A single
bad reading halts the mount for a turn; only what lasts is held against it.
"""

from collections.abc import Iterator
from math import isfinite

from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.safety.hazard import Hazard
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.policy import POLICY
from trunnion.safety.verdict import Rule

FAR_OUTSIDE_DEG = 10.0
"""Further outside its travel than this no joint can be: the reading is wrong."""

JUMP_MARGIN = 1.5
"""A reading may change this much faster than the joint's rate before it counts as a jump."""

WRONG_WAY_DEG = 1.0
"""Moved so far against the order, the mount is wired or geared the wrong way."""


class ReadingWatch:
    """Looks at reading after reading; its memory is small and holds no clock."""

    def __init__(self, limits: SafetyLimits) -> None:
        self._limits = limits
        self._believed: Reading | None = None
        self._before: Reading | None = None
        self._since_s: dict[Rule, float] = {}
        self._rest: Joints | None = None
        self._move_begin: tuple[Joints, Joints] | None = None

    def find(
        self, mono_s: float, reading: Reading | None, ordered: Motion | None
    ) -> Iterator[Hazard]:
        """Everything wrong with this reading, given what was ordered in the turn before."""
        if reading is None:
            yield Hazard(Rule.NO_READING, "the mount has not said where it is")
            return
        age_s = mono_s - reading.taken_s
        if age_s > self._limits.reading_max_age_s:
            finding = (
                f"the last reading is {age_s:.1f} s old, "
                f"{self._limits.reading_max_age_s:g} s are allowed"
            )
            yield Hazard(Rule.READING_OLD, finding)
            return
        impossible = self._find_impossible(reading)
        if impossible is not None:
            yield impossible
            return
        if self._believed is None or reading.taken_s > self._believed.taken_s:
            self._before = self._believed
        self._believed = reading
        yield from self._find_disobedience(mono_s, reading, ordered)

    def measured(self) -> Motion | None:
        """The newest believed reading, with the rates between it and the one before."""
        now, before = self._believed, self._before
        if now is None:
            return None
        if before is None:
            return Motion(*now.joints)
        since_s = now.taken_s - before.taken_s
        return Motion(
            now.first_deg,
            now.second_deg,
            (now.first_deg - before.first_deg) / since_s,
            (now.second_deg - before.second_deg) / since_s,
        )

    def _find_impossible(self, reading: Reading) -> Hazard | None:
        mount = self._limits.mount
        for angle_deg, joint in (
            (reading.first_deg, mount.first),
            (reading.second_deg, mount.second),
        ):
            lowest, highest = joint.lower_deg - FAR_OUTSIDE_DEG, joint.upper_deg + FAR_OUTSIDE_DEG
            if not (isfinite(angle_deg) and lowest <= angle_deg <= highest):
                return Hazard(Rule.READING_IMPOSSIBLE, f"the mount says it is at {angle_deg:.1f}°")
        return self._find_jump(reading)

    def _find_jump(self, reading: Reading) -> Hazard | None:
        before = self._believed
        if before is None:
            return None
        since_s = max(0.0, reading.taken_s - before.taken_s)
        for old_deg, new_deg, joint in (
            (before.first_deg, reading.first_deg, self._limits.mount.first),
            (before.second_deg, reading.second_deg, self._limits.mount.second),
        ):
            most_deg = JUMP_MARGIN * joint.rate_deg_s * since_s + 4 * self._limits.encoder_error_deg
            if abs(new_deg - old_deg) > most_deg:
                finding = f"the reading jumped from {old_deg:.1f}° to {new_deg:.1f}°"
                return Hazard(Rule.READING_JUMPED, finding)
        return None

    def _find_disobedience(
        self, mono_s: float, reading: Reading, ordered: Motion | None
    ) -> Iterator[Hazard]:
        if ordered is None:
            self._move_begin = None
            self._since_s.pop(Rule.STALLED, None)
            yield from self._find_slip(mono_s, reading)
            return
        self._rest = None
        self._since_s.pop(Rule.SLIPPED, None)
        yield from self._find_wrong_way(reading, ordered)
        yield from self._find_stall(mono_s, reading, ordered)

    def _find_stall(self, mono_s: float, reading: Reading, ordered: Motion) -> Iterator[Hazard]:
        behind_deg = _furthest_deg(ordered.joints, reading.joints)
        is_behind = behind_deg > self._limits.stall_error_deg
        if self._has_lasted(Rule.STALLED, mono_s, is_odd=is_behind):
            finding = f"the mount is {behind_deg:.1f}° from where it was ordered to be"
            yield Hazard(Rule.STALLED, finding)

    def _find_slip(self, mono_s: float, reading: Reading) -> Iterator[Hazard]:
        """Once the mount has come to rest after a halt, it stays where it is."""
        if self._rest is None:
            self._rest = reading.joints
            self._since_s[Rule.SLIPPED] = mono_s
        is_settling = mono_s - self._since_s[Rule.SLIPPED] < self._settling_s()
        moved_deg = _furthest_deg(self._rest, reading.joints)
        if is_settling:
            self._rest = reading.joints
        elif moved_deg > self._limits.slip_deg:
            yield Hazard(Rule.SLIPPED, f"the mount moved {moved_deg:.1f}° that nobody ordered")

    def _settling_s(self) -> float:
        """Time to come to rest from full rate, and as much again for the reading to show it."""
        joints = (self._limits.mount.first, self._limits.mount.second)
        return 2.0 * max(each.rate_deg_s / each.acceleration_deg_s2 for each in joints) + 0.5

    def _find_wrong_way(self, reading: Reading, ordered: Motion) -> Iterator[Hazard]:
        if self._move_begin is None:
            self._move_begin = (ordered.joints, reading.joints)
        order_begin, reading_begin = self._move_begin
        for joint in (0, 1):
            wanted_deg = ordered[joint] - order_begin[joint]
            done_deg = reading.joints[joint] - reading_begin[joint]
            if min(abs(wanted_deg), abs(done_deg)) > WRONG_WAY_DEG and wanted_deg * done_deg < 0.0:
                which = "second" if joint else "first"
                yield Hazard(Rule.WRONG_WAY, f"the {which} joint moves against its orders")
            if abs(done_deg) > WRONG_WAY_DEG:
                self._move_begin = (ordered.joints, reading.joints)

    def _has_lasted(self, rule: Rule, mono_s: float, *, is_odd: bool) -> bool:
        if not is_odd:
            self._since_s.pop(rule, None)
            return False
        return mono_s - self._since_s.setdefault(rule, mono_s) >= POLICY[rule].after_s


def _furthest_deg(one: Joints, other: Joints) -> float:
    return max(abs(one.first_deg - other.first_deg), abs(one.second_deg - other.second_deg))
