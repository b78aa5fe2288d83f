"""When to take the power from the motors: the second half of a stop of category 1.

Stop category 1 in the sense of IEC 60204-1, 9.2.2: a controlled stop with the power left on until
the machine is at rest, and taken away then. A mount that does not come to rest in time loses it at
once, as in category 0.
"""

from trunnion.mount.joints import Reading
from trunnion.mount.mount import JointLimits
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.rest import BRAKING_MARGIN, REACTION_S
from trunnion.safety.stillness import Stillness


class PowerJudge:
    """Watches a mount from the stop on, until it is reset."""

    def __init__(self, limits: SafetyLimits) -> None:
        slowest_s = max(_braking_s(limits.mount.first), _braking_s(limits.mount.second))
        self._longest_s = REACTION_S + BRAKING_MARGIN * slowest_s
        self._stillness = Stillness(limits)
        self._stopped_s: float | None = None

    def must_cut(self, mono_s: float, reading: Reading | None, *, is_stopped: bool) -> bool:
        """Whether the motors must be without power now; asked once a turn.

        A mount of which nothing is heard counts as one that does not come to rest.
        """
        if not is_stopped:
            self._stopped_s = None
            self._stillness.forget()
            return False
        if self._stopped_s is None:
            self._stopped_s = mono_s
        is_at_rest = reading is not None and self._stillness.is_still(reading)
        return is_at_rest or mono_s - self._stopped_s > self._longest_s


def _braking_s(joint: JointLimits) -> float:
    return joint.rate_deg_s / joint.acceleration_deg_s2
