"""How long hazards last: which of them act now, by the times that the policy gives them.

Pure: the second is an argument, never earlier than that of the call before.
"""

from collections.abc import Iterable, Mapping

from trunnion.safety.hazard import Hazard
from trunnion.safety.policy import Policy
from trunnion.safety.verdict import Rule


class Lasting:
    """Remembers since when each hazard is there, and when one that acts was last seen."""

    def __init__(self, policy: Mapping[Rule, Policy]) -> None:
        self._policy = policy
        self._since_s: dict[Rule, float] = {}
        self._acting: dict[Rule, tuple[Hazard, float]] = {}

    @property
    def acting(self) -> frozenset[Rule]:
        """The rules that acted at the last call."""
        return frozenset(self._acting)

    def acting_at(self, mono_s: float, found: Iterable[Hazard]) -> tuple[Hazard, ...]:
        """The hazards that act now, given those found now."""
        present = {hazard.rule: hazard for hazard in found}
        if not present and not self._acting and not self._since_s:
            return ()
        self._since_s = {rule: self._since_s.get(rule, mono_s) for rule in present}
        for rule, hazard in present.items():
            if mono_s - self._since_s[rule] >= self._policy[rule].after_s:
                self._acting[rule] = (hazard, mono_s)
        self._acting = {
            rule: (hazard, seen_s)
            for rule, (hazard, seen_s) in self._acting.items()
            if rule in present or mono_s - seen_s < self._policy[rule].calm_s
        }
        return tuple(hazard for hazard, _ in self._acting.values())
