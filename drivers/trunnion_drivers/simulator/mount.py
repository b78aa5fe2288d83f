"""The simulated mount as steel and controller: orders take effect late, and expire.

Pure: the second is an argument, never earlier than that of the call before.
"""

from collections import deque
from math import inf
from typing import NamedTuple

from trunnion_drivers.control.command import Command, Rates, Switches
from trunnion_drivers.interface.values import DriverMotion
from trunnion_drivers.simulator.faults import JointFault
from trunnion_drivers.simulator.joint import JointBuild, JointState, SimulatedJoint

JointFaults = tuple[JointFault, JointFault]

_SOUND: JointFaults = (JointFault.NONE, JointFault.NONE)
_RUNNING = (JointFault.RUNNING_AWAY, JointFault.UNSTOPPABLE)

CREEP = 0.05
"""The part of its highest rate at which a joint creeps whose brake slips."""


class _Due(NamedTuple):
    """A command under way to the controller; None brings both joints to rest."""

    due_s: float
    command: Command | None


class SimulatedMount:
    """Two joints behind one controller that understands all three kinds of command.

    A command takes effect `latency_s` after it was given. A motion not renewed within `watchdog_s`
    ends in rest, as it would with a controller that misses its master.
    """

    def __init__(
        self,
        mono_s: float,
        angles_deg: tuple[float, float],
        builds: tuple[JointBuild, JointBuild],
        latency_s: float,
        watchdog_s: float,
    ) -> None:
        self._builds = builds
        self._joints = tuple(map(SimulatedJoint, (mono_s, mono_s), angles_deg, builds))
        self._latency_s = latency_s
        self._watchdog_s = watchdog_s
        self._under_way: deque[_Due] = deque()
        self._expires_s = inf
        self._faults = _SOUND
        self._has_power = True

    def command(self, mono_s: float, command: Command) -> None:
        """Tell the controller; a goal moves on with its rates from the second it takes effect."""
        self._under_way.append(_Due(mono_s + self._latency_s, command))

    def halt(self, mono_s: float) -> None:
        """Bring both joints to rest."""
        self._under_way.append(_Due(mono_s + self._latency_s, None))

    def joints(self, mono_s: float) -> tuple[JointState, JointState]:
        """Where both joints are at this second."""
        self._advance(mono_s)
        first, second = self._joints
        return first.at(mono_s), second.at(mono_s)

    def is_at_switch(self, states: tuple[JointState, JointState]) -> bool:
        """Whether a joint has run onto one of its limit switches there."""
        first, second = self._joints
        return first.is_at_switch(states[0]) or second.is_at_switch(states[1])

    def suffer(self, mono_s: float, faults: JointFaults) -> None:
        """Let the joints be broken like this from this second on."""
        if faults is self._faults or faults == self._faults:
            return
        self._advance(mono_s)
        held = [fault is JointFault.SLIPPING for fault in self._faults]
        self._faults = faults
        for number, (joint, fault) in enumerate(zip(self._joints, faults, strict=True)):
            if fault is JointFault.JAMMED:
                joint.seize(mono_s)
            elif self._is_at_rest and held[number] != (fault is JointFault.SLIPPING):
                joint.run_at(mono_s, self._creep_deg_s(number))
        self._run_away(mono_s)

    def power(self, mono_s: float, *, is_on: bool) -> None:
        """Give the motors power or take it; without it nothing moves that was at rest."""
        if is_on != self._has_power:
            self._advance(mono_s)
            self._has_power = is_on
            self._under_way.clear()
            self._expires_s = inf
            for number, joint in enumerate(self._joints):
                joint.run_at(mono_s, self._creep_deg_s(number))
            self._run_away(mono_s)

    def _run_away(self, mono_s: float) -> None:
        """Let joints run that run away, as long as their motors have power."""
        for joint, build, fault in zip(self._joints, self._builds, self._faults, strict=True):
            if self._has_power and fault in _RUNNING:
                joint.run_at(mono_s, 0.5 * build.bounds.rate_deg_s)

    def _advance(self, mono_s: float) -> None:
        while self._under_way and self._under_way[0].due_s <= mono_s:
            due_s, command = self._under_way.popleft()
            self._expire(due_s)
            if command is None:
                self._rest(due_s)
            elif self._has_power:
                self._take_up(due_s, command)
        self._expire(mono_s)

    def _take_up(self, due_s: float, command: Command) -> None:
        self._expires_s = due_s + self._watchdog_s
        for number, (joint, fault) in enumerate(zip(self._joints, self._faults, strict=True)):
            if fault not in _DISOBEDIENT:
                self._drive(number, joint, due_s, command)

    def _drive(self, number: int, joint: SimulatedJoint, due_s: float, command: Command) -> None:
        sense = -1.0 if self._faults[number] is JointFault.REVERSED else 1.0
        match command:
            case DriverMotion():
                goal_deg, rate_deg_s = command[number], command[number + 2]
                if sense < 0.0:
                    goal_deg = 2.0 * joint.at(due_s).motor_deg - goal_deg
                joint.go_to(due_s, goal_deg, sense * rate_deg_s)
            case Rates():
                joint.run_at(due_s, sense * command[number])
            case Switches():
                rate_deg_s = command[number].value * self._builds[number].bounds.rate_deg_s
                joint.run_at(due_s, sense * rate_deg_s)

    def _expire(self, mono_s: float) -> None:
        if mono_s > self._expires_s:
            self._rest(self._expires_s)

    def _rest(self, mono_s: float) -> None:
        for number, joint in enumerate(self._joints):
            if self._faults[number] is not JointFault.UNSTOPPABLE:
                joint.run_at(mono_s, self._creep_deg_s(number))
        self._expires_s = inf

    @property
    def _is_at_rest(self) -> bool:
        """Whether no order is being carried out."""
        return self._expires_s == inf

    def _creep_deg_s(self, number: int) -> float:
        """How fast a joint goes that is told to rest."""
        slips = self._faults[number] is JointFault.SLIPPING
        return CREEP * self._builds[number].bounds.rate_deg_s if slips else 0.0


_DISOBEDIENT = (JointFault.JAMMED, *_RUNNING)
