"""What the conformance kit needs to know of a driver under test."""

from collections.abc import Callable
from dataclasses import dataclass

from trunnion_drivers.interface.driver import Driver
from trunnion_drivers.interface.values import Clock, DriverMotion, MountFacts


@dataclass(frozen=True, slots=True, kw_only=True)
class Rig:
    """A driver, not open yet, with its mount and its clock; and what the kit may expect of both.

    `clock.sleep` lets the mount's time pass. `accuracy_deg` is how near to its goal the mount comes
    to rest and is read, `lag_s` how much later than ordered it may move. `longest_call_s` bounds
    every call, in the clock's seconds. `home` is an angle pair well inside the travel, where a
    motion of 5° in either joint and either sense is harmless.

    `pull` takes the link away and `plug` brings it back. `stop_input` presses (True) and releases
    the hardware stop, `is_powered` tells whether the actuators have power, `is_braked` whether the
    brake holds: None where there is no such thing, which the driver's capabilities must agree with.
    """

    driver: Driver
    facts: MountFacts
    clock: Clock
    home: DriverMotion
    accuracy_deg: float = 0.01
    lag_s: float = 0.0
    longest_call_s: float = 1.0
    pull: Callable[[], None]
    plug: Callable[[], None]
    stop_input: Callable[[bool], None] | None = None
    is_powered: Callable[[], bool] | None = None
    is_braked: Callable[[], bool] | None = None
