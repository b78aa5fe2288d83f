"""The control laws' figures: the true antenna's error behind a simulated mount, in virtual time."""

from math import sqrt
from time import perf_counter
from typing import Any, NamedTuple

from tests.bench.row import Row
from tests.drivers.mounts import FACTS, HOME, HandClock
from trunnion_drivers.interface.values import DriverMotion, JointFacts, MountFacts
from trunnion_drivers.simulator.driver import SimulatorDriver

TICK_S = 0.1
LOOKS = 5
SETTLING_S, LASTS_S = 40.0, 160.0
SWITCHED = MountFacts(
    JointFacts(-263.7, 271.3, 2.5, 8.0), JointFacts(1.7, 91.9, 2.3, 8.0), 17.3, 61.9
)
COARSE: dict[str, Any] = {
    "command": "on-off",
    "run_on_deg": 0.4,
    "encoder_resolution_deg": 1.0,
    "control": {"threshold_deg": 0.3, "resolution_deg": 1.0},
}
LONGEST_LOOK_S = 30e-6
CALLS = 20000


class Followed(NamedTuple):
    """How well a goal was followed, and how often motors were started for it in a minute."""

    rms_deg: float
    worst_deg: float
    starts_a_minute: float


def rows() -> list[Row]:
    """Measure all laws, and the simulated mount itself."""
    return [latency(), coarse(), rates(), look()]


def latency() -> Row:
    """What 100 ms of latency add to the error of a mount without, at 1°/s."""
    late = {"latency_s": 0.1, "control": {"latency_s": 0.1}}
    added_deg = followed(late, 1.0).worst_deg - followed({}, 1.0).worst_deg
    return at_most("pointing error added by 100 ms of latency, 1°/s", added_deg, 0.01, 1.0)


def coarse() -> Row:
    """The worst rms error of a switched mount at rates from a slow pass to a fast one."""
    results = [followed(COARSE, rate, SWITCHED) for rate in (0.05, 0.3, 1.0, -0.7)]
    worst = max(results)
    starts = max(result.starts_a_minute for result in results)
    figure = f"switched mount, 1° encoder: rms error, worst of four rates ({starts:.0f} starts/min)"
    return at_most(figure, worst.rms_deg, 1.0, 0.6)


def rates() -> Row:
    """The worst rms error of a mount steered by rates."""
    worst_deg = max(followed({"command": "rate"}, rate).rms_deg for rate in (0.05, 0.7, -1.7))
    return at_most("mount steered by rates: rms error against encoder", worst_deg, 0.001, 2.0)


def look() -> Row:
    """The simulated mount's own cost: an order and a reading."""
    clock = HandClock()
    driver = SimulatorDriver.from_settings({}, FACTS, clock)
    driver.open()
    begin_s = perf_counter()
    for number in range(CALLS):
        clock.sleep(TICK_S)
        driver.move(HOME._replace(first_deg=17.3 + number % 7, first_rate_deg_s=1.0))
        driver.read()
    each_s = (perf_counter() - begin_s) / CALLS
    return Row(
        "simulated mount: an order and a reading",
        f"{each_s * 1e6:.1f} µs",
        f"{LONGEST_LOOK_S * 1e6:g} µs",
        each_s / LONGEST_LOOK_S,
        1.0,
        is_at_least=False,
    )


def at_most(figure: str, error_deg: float, baseline_deg: float, limit: float) -> Row:
    """A row about an error."""
    ratio = error_deg / baseline_deg
    shown = f"{error_deg:.5f}°"
    return Row(figure, shown, f"{baseline_deg:g}°", ratio, limit, is_at_least=False)


def followed(settings: dict[str, Any], rate_deg_s: float, facts: MountFacts = FACTS) -> Followed:
    """Follow a goal that moves evenly and begins some degrees off; the settling does not count."""
    clock = HandClock()
    driver = SimulatorDriver.from_settings(settings, facts, clock)
    driver.open()
    begin_s, errors = clock.monotonic_s(), []
    while (since_s := clock.monotonic_s() - begin_s) < LASTS_S:
        goal_deg = 12.1 + rate_deg_s * since_s
        driver.move(DriverMotion(goal_deg, 61.9, rate_deg_s, 0.0))
        driver.read()
        for part in range(LOOKS):
            true_deg = driver.true_motion().first_deg
            if since_s > SETTLING_S:
                errors.append(true_deg - goal_deg - rate_deg_s * part * TICK_S / LOOKS)
            clock.sleep(TICK_S / LOOKS)
    rms_deg = sqrt(sum(error * error for error in errors) / len(errors))
    starts = getattr(driver._steering, "starts", 0)
    return Followed(rms_deg, max(map(abs, errors)), starts / LASTS_S * 60.0)
