"""The inputs that somebody works by hand: the hardware stop and the limit switches."""

from collections.abc import Callable, Iterator

from trunnion_drivers.commission.bay import Bay
from trunnion_drivers.commission.finding import Finding, bad, good, judged


def stop_input(bay: Bay) -> Iterator[Finding]:
    """Whether the hardware stop is seen, both when pressed and when let go."""
    if not bay.driver.capabilities.reports_stop_input:
        yield good("the driver reports no stop input; the hard-wired stop works without it")
        return
    words = "Press and hold the hardware stop.", "Let the hardware stop go."
    yield from _by_hand(bay, words, lambda: bay.driver.read().stop_pressed)


def limit_switches(bay: Bay) -> Iterator[Finding]:
    """Whether a limit switch worked by hand is seen."""
    if not bay.driver.capabilities.reports_limits:
        yield good("the driver reports no limit switches")
        return
    words = "Hold a limit switch open by hand.", "Let the limit switch close."
    yield from _by_hand(bay, words, lambda: bay.driver.read().at_limit)


def _by_hand(bay: Bay, words: tuple[str, str], is_seen: Callable[[], bool]) -> Iterator[Finding]:
    for ask, state in zip(words, (True, False), strict=True):
        if not bay.operator.agrees(ask):
            yield bad(f"passed over: {ask}")
            return
        is_right = is_seen() is state
        yield judged(f"{ask} {'Seen' if is_right else 'NOT seen'}.", is_good=is_right)
