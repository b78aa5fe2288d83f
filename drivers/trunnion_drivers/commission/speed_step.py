"""Latency, rate and acceleration of each joint, and how far it goes after a halt."""

from collections.abc import Iterator, Sequence

from trunnion_drivers.commission.bay import JOINT_NAMES, Bay
from trunnion_drivers.commission.finding import Finding, bad, good, judged
from trunnion_drivers.commission.mover import Place
from trunnion_drivers.commission.samples import (
    Sample,
    acceleration_deg_s2,
    highest_rate_deg_s,
    latency_s,
    noise_deg,
    stopping_deg,
)

_WAY_DEG = 20.0
_LONGEST_STOP_S = 10.0


def speed_and_stopping(bay: Bay) -> Iterator[Finding]:
    """Go at full speed with each joint, halt on the way, and creep back."""
    for number, name in enumerate(JOINT_NAMES):
        here = bay.mover.place()
        by_deg = bay.room_deg(number, here[number], _WAY_DEG)
        question = f"The {name} joint shall go by {by_deg:+g}° AT FULL SPEED and be halted."
        if not bay.operator.agrees(question):
            yield bad(f"{name} joint: speed and stopping were passed over")
            continue
        yield from _dash_and_halt(bay, number, here.by(number, by_deg))
        bay.mover.creep(here, number)


def _dash_and_halt(bay: Bay, number: int, goal: Place) -> Iterator[Finding]:
    name, joint = JOINT_NAMES[number], bay.joint(number)
    way_deg = abs(goal[number] - bay.mover.place()[number])
    ramp_s = joint.rate_deg_s / joint.acceleration_deg_s2
    lasts_s = min(0.6 * way_deg / joint.rate_deg_s + ramp_s, 2.0 * ramp_s + 2.0)
    ordered_s, samples = bay.mover.dash(goal, number, lasts_s)
    stopping = bay.mover.rest(number, min(_LONGEST_STOP_S, 2.0 * ramp_s + 1.0))
    yield _latency(name, ordered_s, samples)
    rate = highest_rate_deg_s([*samples, *stopping])
    yield _compared(name, "rate_deg_s", rate, joint.rate_deg_s)
    acceleration = acceleration_deg_s2(samples)
    if acceleration is not None:
        yield _compared(name, "acceleration_deg_s2", acceleration, joint.acceleration_deg_s2)
    distance = stopping_deg(stopping)
    expected = rate * rate / (2.0 * joint.acceleration_deg_s2)
    text = f"{name} joint: a halt at {rate:.2f}°/s takes {distance:.2f}°, expected {expected:.2f}°"
    yield judged(text, is_good=distance <= 1.5 * expected + 0.2 * rate)


def _latency(name: str, ordered_s: float, samples: Sequence[Sample]) -> Finding:
    latency = latency_s(ordered_s, samples, max(0.02, 5.0 * noise_deg(samples[:2])))
    if latency is None:
        return bad(f"{name} joint: it was ordered to move, and did not")
    text = f"{name} joint: motion is read {latency:.2f} s after an order"
    return good(text, "driver.control.latency_s", round(latency, 2))


def _compared(name: str, key: str, measured: float, stated: float) -> Finding:
    text = f"{name} joint: {key} measured {measured:.3g}, the station file says {stated:g}"
    make = good if 0.8 <= measured / stated <= 1.25 else bad
    return make(text, f"mount.{name}.{key}", measured)
