"""From a goal to a command: one law a joint, chosen by what the mount understands."""

from typing import Protocol

from trunnion_drivers.control.command import Command, Rates, Switches
from trunnion_drivers.control.on_off import OnOffLaw, OnOffSettings
from trunnion_drivers.control.position import PositionLaw, PositionSettings
from trunnion_drivers.control.rate import RateLaw, RateSettings
from trunnion_drivers.interface.values import DriverMotion, DriverReading, MountFacts

_REPEAT_S = 1.0


class Steering(Protocol):
    """Says what to tell a mount; pure, the second is an argument."""

    def steer(self, mono_s: float, goal: DriverMotion, reading: DriverReading) -> Command | None:
        """The command for a goal of this second; None where the last one still says it all."""
        ...

    def forget(self, mono_s: float) -> None:
        """The mount was halted, or its link opened anew: nothing said before holds."""
        ...


class PositionSteering:
    """For a mount that goes where it is told."""

    def __init__(self, settings: PositionSettings, facts: MountFacts) -> None:
        self._settings = settings
        self._first, self._second = (
            PositionLaw(settings, joint) for joint in (facts.first, facts.second)
        )
        self._told: tuple[float, float] | None = None
        self._told_s = 0.0

    def steer(self, mono_s: float, goal: DriverMotion, _reading: DriverReading) -> Command | None:
        """Say where to go, unless a mount that only knows angles has been told so already."""
        first_deg = self._first.order_deg(mono_s, goal.first_deg, goal.first_rate_deg_s)
        second_deg = self._second.order_deg(mono_s, goal.second_deg, goal.second_rate_deg_s)
        if self._is_known(mono_s, (first_deg, second_deg)):
            return None
        self._told, self._told_s = (first_deg, second_deg), mono_s
        return DriverMotion(first_deg, second_deg, goal.first_rate_deg_s, goal.second_rate_deg_s)

    def _is_known(self, mono_s: float, order: tuple[float, float]) -> bool:
        """Whether a coarse mount has been told so a moment ago; an order can get lost."""
        is_coarse = self._settings.step_deg > 0.0 and not self._settings.follows_rate
        return is_coarse and order == self._told and mono_s - self._told_s < _REPEAT_S

    def forget(self, _mono_s: float) -> None:
        """The mount was halted."""
        self._told = None
        self._first.forget()
        self._second.forget()


class RateSteering:
    """For a mount that moves at the rates it is told."""

    def __init__(self, settings: RateSettings, facts: MountFacts) -> None:
        self._first, self._second = (
            RateLaw(settings, joint.rate_deg_s, joint.acceleration_deg_s2)
            for joint in (facts.first, facts.second)
        )

    def steer(self, mono_s: float, goal: DriverMotion, reading: DriverReading) -> Command | None:
        """Say how fast to move."""
        taken_s = reading.taken_s
        return Rates(
            self._first.order_deg_s(
                mono_s, goal.first_deg, goal.first_rate_deg_s, reading.first_deg, taken_s
            ),
            self._second.order_deg_s(
                mono_s, goal.second_deg, goal.second_rate_deg_s, reading.second_deg, taken_s
            ),
        )

    def forget(self, _mono_s: float) -> None:
        """The mount was halted."""
        self._first.forget()
        self._second.forget()


class OnOffSteering:
    """For a mount whose motors are switched."""

    def __init__(self, settings: OnOffSettings, facts: MountFacts) -> None:
        self._first, self._second = (
            OnOffLaw(settings, joint.rate_deg_s, joint.acceleration_deg_s2)
            for joint in (facts.first, facts.second)
        )

    def steer(self, mono_s: float, goal: DriverMotion, reading: DriverReading) -> Command | None:
        """Say what to switch."""
        taken_s = reading.taken_s
        return Switches(
            self._first.order(
                mono_s, goal.first_deg, goal.first_rate_deg_s, reading.first_deg, taken_s
            ),
            self._second.order(
                mono_s, goal.second_deg, goal.second_rate_deg_s, reading.second_deg, taken_s
            ),
        )

    def forget(self, mono_s: float) -> None:
        """The mount was halted."""
        self._first.forget(mono_s)
        self._second.forget(mono_s)

    @property
    def starts(self) -> int:
        """How often a motor was started."""
        return self._first.starts + self._second.starts
