"""The simulated mount of a flight: found like any driver, with the truth on top of it."""

from collections.abc import Callable, Mapping
from importlib.metadata import entry_points
from math import sqrt
from typing import Protocol, cast

from trunnion.mount.joints import Motion
from trunnion.service.torture.mishap import Mishap, MishapKind
from trunnion.service.torture.scenario import Scenario
from trunnion_drivers.interface.driver import Driver
from trunnion_drivers.interface.values import Clock, DriverMotion, JointFacts, MountFacts

BEND_DEG_S2_M2 = 0.001


class _Truthful(Protocol):
    """What the simulator knows beyond what a driver tells."""

    def true_motion(self) -> DriverMotion:
        """Where the antenna truly is, and how fast it moves."""
        ...


class Steel:
    """A mount that outlives the processes that steer it."""

    def __init__(self, scenario: Scenario, clock: Clock) -> None:
        driver_class = next(iter(entry_points(group="trunnion.drivers", name="simulator"))).load()
        settings: dict[str, object] = {
            **scenario.machine,
            "start_deg": tuple(scenario.start),
            "bend_deg_s2_m2": BEND_DEG_S2_M2,
            "switches_deg": 3.0,
            "overtravel_deg": 5.0,
            "faults": tuple(_episode(each) for each in scenario.mishaps if each.kind in _FAULTS),
        }
        self.driver: Driver = driver_class.from_settings(settings, _facts(scenario), clock)

    def true_motion(self) -> Motion:
        """Where the antenna truly is, and how fast it moves."""
        return Motion(*cast("_Truthful", self.driver).true_motion())


def _facts(scenario: Scenario) -> MountFacts:
    first, second = (
        JointFacts(joint.lower_deg, joint.upper_deg, joint.rate_deg_s, joint.acceleration_deg_s2)
        for joint in (scenario.mount.first, scenario.mount.second)
    )
    return MountFacts(first, second, *scenario.mount.stow)


def _episode(mishap: Mishap) -> dict[str, object]:
    return {"after_s": mishap.at_s, "for_s": mishap.lasts_s, **_FAULTS[mishap.kind](mishap)}


def bent_by_m_s(bend_deg: float) -> float:
    """The wind that bends the antenna so far."""
    return sqrt(bend_deg / BEND_DEG_S2_M2)


def _of_joint(mishap: Mishap, key: str, fault: str) -> dict[str, object]:
    pair = ["none", "none"]
    pair[mishap.joint] = fault
    return {key: tuple(pair)}


_FAULTS: Mapping[MishapKind, Callable[[Mishap], dict[str, object]]] = {
    MishapKind.CABLE_PULLED: lambda _: {"link": "lost"},
    MishapKind.SILENT: lambda _: {"link": "silent"},
    MishapKind.DEAF: lambda _: {"link": "deaf"},
    MishapKind.GARBLED: lambda _: {"link": "garbled"},
    MishapKind.REFUSING: lambda _: {"link": "refusing"},
    MishapKind.JAMMED: lambda each: _of_joint(each, "joints", "jammed"),
    MishapKind.REVERSED: lambda each: _of_joint(each, "joints", "reversed"),
    MishapKind.RUNNING_AWAY: lambda each: _of_joint(each, "joints", "running away"),
    MishapKind.UNSTOPPABLE: lambda each: _of_joint(each, "joints", "unstoppable"),
    MishapKind.SLIPPING: lambda each: _of_joint(each, "joints", "slipping"),
    MishapKind.WIND_PUSH: lambda each: {"wind_m_s": bent_by_m_s(abs(each.amount))},
    MishapKind.FROZEN: lambda each: _of_joint(each, "encoders", "frozen"),
    MishapKind.DEAD: lambda each: _of_joint(each, "encoders", "dead"),
    MishapKind.OFFSET: lambda each: {
        "offsets_deg": (each.amount, 0.0) if each.joint == 0 else (0.0, each.amount)
    },
    MishapKind.OLD_READINGS: lambda each: {"reading_age_s": abs(each.amount)},
    MishapKind.SLOW_CALLS: lambda each: {"call_lasts_s": abs(each.amount)},
    MishapKind.STOP_INPUT: lambda _: {"stop_pressed": True},
    MishapKind.POWER_LOST: lambda _: {"has_no_power": True},
    MishapKind.FAULT_REPORTED: lambda _: {"words": "drive too hot"},
}
