"""Changes to the gate that no test can notice, each with its reason."""

_NEVER_READ = "it is overwritten before it is read for the first time"
_STEP = "gate: return 0.0 if last_s is None else min(max(mono_s - last_s, 0.0), LONGEST_STEP_S): "
_NO_STEP = (
    "in its first turn the gate does not know yet that the mount rests, and moves nothing; "
    "and the monotonic clock never goes back"
)
_CLOSER = "nothing is missed by a closer look than was needed, it only takes longer"
_ORDER = "of these numbers only the order counts, and that stays"
_ROUNDING = "it only forgives rounding, and rounding is a thousand times smaller"
_GUARD = "it only keeps a division from being one by zero; anything tiny serves"

EQUIVALENT: dict[str, str] = {
    "verdict: SLOW = 1: less": _ORDER,
    "verdict: LATCH = 4: greater": _ORDER,
    "rest: self._settled_s = 0.0: greater": _NEVER_READ,
    "rest: self._settled_s = 0.0: less": _NEVER_READ,
    "gate: self._ordered_s = 0.0: greater": _NEVER_READ,
    "gate: self._ordered_s = 0.0: less": _NEVER_READ,
    "places: FINEST_DEG = 0.02: less": _CLOSER,
    "places: if reach_deg <= FINEST_DEG or _is_free_around(one, reach_deg, limits):: 0 LtE Lt": (
        _CLOSER
    ),
    "places: ROUNDING_DEG = 1e-9: greater": _ROUNDING,
    "places: ROUNDING_DEG = 1e-9: less": _ROUNDING,
    "places: return _find_between(way, 0.0, 1.0, limits, allowance_deg): greater": (
        "both joints are at rest by then, and stay there"
    ),
    (
        "places: slowing = joint.acceleration_deg_s2 if rate_deg_s > 0.0 "
        "else -joint.acceleration_deg_s2: 0 Gt GtE"
    ): "a joint at rest brakes for no time",
    (
        "places: 0.0 if sector is None else "
        "_depth_in_sector_deg(azimuth_deg, elevation_deg, sector),: less"
    ): "the worst counts, and one of the others is 0",
    "places: 0.0,: less": "a place in no sector has the depth 0 in it, and the worst counts",
    "obedience: self._readings = 0: greater": _NEVER_READ,
    "obedience: self._readings = 0: less": _NEVER_READ,
    (
        "obedience: if done_deg * gap_deg < 0.0 and abs(gap_deg) > abs(was_deg) + self._most_deg:"
        ": 0 Lt LtE"
    ): "a joint that has moved, and has no gap to its order, is not away from it either",
    "obedience: if run_deg < 0.0:: 0 Lt LtE": "a run of no length has both ends at one place",
    "orders: return first_deg + second_deg < ROOM_DEG: 0 Lt LtE": (
        "at the very edge of the room that was looked at nothing is forbidden either"
    ),
    "orders: limits.turn_s + rate_deg_s / (2.0 * braking.acceleration_deg_s2): less": _CLOSER,
    "orders: TINY_S = 1e-6: greater": _GUARD,
    "orders: TINY_S = 1e-6: less": _GUARD,
    f"{_STEP}greater": _NO_STEP,
    f"{_STEP}less": _NO_STEP,
}

IDLE_CHECKS: dict[str, str] = {
    "orders: if has_room and motion == demand and _stays_near(motion, now, limits):": (
        "what it lets through at once is let through by the closer look as well, only later"
    ),
}
"""Checks that can be taken out without changing what leaves the gate."""
