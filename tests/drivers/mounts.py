"""Mounts and a clock for the tests of drivers, with crooked numbers."""

from trunnion_drivers.interface.values import DriverMotion, JointFacts, MountFacts

FACTS = MountFacts(
    first=JointFacts(-263.7, 271.3, 5.3, 2.9),
    second=JointFacts(1.7, 91.9, 3.1, 1.9),
    stow_first_deg=17.3,
    stow_second_deg=61.9,
)
QUICK = MountFacts(
    first=JointFacts(-263.7, 271.3, 19.3, 47.0),
    second=JointFacts(1.7, 91.9, 17.1, 41.0),
    stow_first_deg=17.3,
    stow_second_deg=61.9,
)
"""So quick that tests in real time need not wait."""
HOME = DriverMotion(17.3, 61.9, 0.0, 0.0)


class HandClock:
    """Time that passes only while somebody sleeps."""

    def __init__(self, monotonic_s: float = 1234.5) -> None:
        self._monotonic_s = monotonic_s

    def monotonic_s(self) -> float:
        return self._monotonic_s

    def sleep(self, seconds: float) -> None:
        self._monotonic_s += seconds
