"""First step: whether it answers, how fast, and how quiet its encoders are at rest."""

from collections.abc import Iterator
from statistics import median

from trunnion_drivers.commission.bay import JOINT_NAMES, Bay
from trunnion_drivers.commission.finding import Finding, good, judged
from trunnion_drivers.commission.samples import moved_deg, noise_deg

_READINGS = 20


def link(bay: Bay) -> Iterator[Finding]:
    """Read it again and again, at rest."""
    taken_s = []
    for _ in range(_READINGS):
        before_s = bay.clock.monotonic_s()
        bay.driver.read()
        taken_s.append(bay.clock.monotonic_s() - before_s)
    yield good(f"it answers within {median(taken_s) * 1e3:.1f} ms ({_READINGS} readings)")
    for number, name in enumerate(JOINT_NAMES):
        samples = bay.mover.rest(number, 1.0)
        noise = noise_deg(samples)
        is_still = abs(moved_deg(samples)) < 10.0 * noise + 1e-3
        text = f"{name} joint at rest: {samples[-1].angle_deg:.4f}°, noise {noise:.4f}°"
        yield judged(text, is_good=is_still)
