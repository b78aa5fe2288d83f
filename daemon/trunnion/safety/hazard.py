"""One thing found to be wrong in a turn, before anybody has decided what follows from it."""

from typing import NamedTuple

from trunnion.safety.verdict import Rule


class Hazard(NamedTuple):
    """Which rule it touches, and what was found, as the first half of a sentence."""

    rule: Rule
    finding: str
