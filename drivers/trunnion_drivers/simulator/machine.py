"""The whole simulated machine, steel with encoders, as the station file describes it.

It models rate and acceleration limits, backlash, static friction, run-on, limit switches, hard
stops, wind that bends the antenna, encoders, latency, a watchdog, a brake that holds at once and
against any motor, and the faults of `faults.py`. It does not model vibration, temperature,
nor a motor whose torque runs out.
"""

from typing import NamedTuple

from trunnion_drivers.control.command import Command
from trunnion_drivers.interface.errors import BadSettings, SettingProblem
from trunnion_drivers.interface.values import DriverMotion, JointFacts, MountFacts
from trunnion_drivers.simulator.course import Bounds
from trunnion_drivers.simulator.encoder import Encoder
from trunnion_drivers.simulator.faults import HEALTHY, Faults, JointFault
from trunnion_drivers.simulator.joint import JointBuild, JointState
from trunnion_drivers.simulator.mount import SimulatedMount
from trunnion_drivers.simulator.sensor import Sensor, both_deg
from trunnion_drivers.simulator.settings import MachineSettings


class Look(NamedTuple):
    """What the machine says of itself: both angles (deg), and its inputs."""

    first_deg: float
    second_deg: float
    stop_pressed: bool
    at_limit: bool
    words: str | None


class SimulatedMachine:
    """Steel that exists as long as this object does. Seconds given to it never go back."""

    def __init__(
        self,
        settings: MachineSettings,
        facts: MountFacts,
        mono_s: float,
        angles_deg: tuple[float, float] | None = None,
    ) -> None:
        self._settings = settings
        start = settings.start_deg or (facts.stow_first_deg, facts.stow_second_deg)
        builds = _build(settings, facts.first), _build(settings, facts.second)
        self._mount = SimulatedMount(
            mono_s, angles_deg or start, builds, settings.latency_s, settings.watchdog_s
        )
        self._sensors = _sensor(settings, 1), _sensor(settings, 2)
        self._faults = HEALTHY
        self._is_cut = False
        self.is_braked = False
        self.was_forced = False

    def suffer(self, mono_s: float, faults: Faults) -> None:
        """Let this be wrong from now on."""
        if faults is not self._faults:
            self._faults = faults
            self._mount.suffer(mono_s, self._joint_faults)
            self._set_power(mono_s)
            if faults.stop_pressed:
                self._mount.halt(mono_s)

    def command(self, mono_s: float, command: Command) -> None:
        """Tell the controller, which does not listen while its stop is pressed."""
        if not self._faults.stop_pressed:
            self.was_forced |= self.is_braked
            self._mount.command(mono_s, command)

    def halt(self, mono_s: float) -> None:
        """Bring both joints to rest."""
        self._mount.halt(mono_s)

    def cut_power(self, mono_s: float, *, is_cut: bool) -> None:
        """Take the power from the motors, or give it back."""
        self._is_cut = is_cut
        self._set_power(mono_s)

    def brake(self, mono_s: float, *, is_engaged: bool) -> None:
        """Engage or release the brake; powered motors that move are forced by it."""
        is_moving = self.true_motion(mono_s)[2:] != (0.0, 0.0)
        self.was_forced |= is_engaged and is_moving and self.is_powered
        self.is_braked = is_engaged
        self._mount.suffer(mono_s, self._joint_faults)

    @property
    def _joint_faults(self) -> tuple[JointFault, JointFault]:
        return (JointFault.JAMMED, JointFault.JAMMED) if self.is_braked else self._faults.joints

    @property
    def is_powered(self) -> bool:
        """Whether the motors have power."""
        return not (self._is_cut or self._faults.has_no_power)

    def look(self, mono_s: float) -> Look:
        """What the machine says of itself at this second."""
        joints = self._joints(mono_s)
        first_deg, second_deg = both_deg(self._sensors, joints, self._faults)
        return Look(
            first_deg,
            second_deg,
            self._faults.stop_pressed,
            self._mount.is_at_switch(joints),
            self._faults.words,
        )

    def true_motion(self, mono_s: float) -> DriverMotion:
        """Where the antenna truly is (deg) and how fast it moves (deg/s)."""
        first, second = self._joints(mono_s)
        return DriverMotion(
            first.antenna_deg,
            second.antenna_deg,
            first.antenna_rate_deg_s,
            second.antenna_rate_deg_s,
        )

    def _joints(self, mono_s: float) -> tuple[JointState, JointState]:
        first, second = self._mount.joints(mono_s)
        bend_deg = self._settings.bend_deg_s2_m2 * self._faults.wind_m_s**2
        if bend_deg == 0.0:
            return first, second
        return (
            first._replace(antenna_deg=first.antenna_deg + bend_deg),
            second._replace(antenna_deg=second.antenna_deg + bend_deg),
        )

    def _set_power(self, mono_s: float) -> None:
        self._mount.power(mono_s, is_on=self.is_powered)


def start_problems(settings: MachineSettings, facts: MountFacts) -> None:
    """Raise BadSettings for a start beyond the hard stops, and for stops before the switches."""
    beyond = settings.overtravel_deg
    found = [
        SettingProblem("start_deg", f"expected joint {n} between its hard stops, got {angle:g}")
        for n, (angle, joint) in enumerate(
            zip(settings.start_deg or (), (facts.first, facts.second), strict=False), 1
        )
        if not joint.lower_deg - beyond <= angle <= joint.upper_deg + beyond
    ]
    if settings.switches_deg > beyond:
        reason = f"expected the switches before the hard stops at {beyond:g}, got "
        found.append(SettingProblem("switches_deg", f"{reason}{settings.switches_deg:g}"))
    if found:
        raise BadSettings(tuple(found))


def _build(settings: MachineSettings, joint: JointFacts) -> JointBuild:
    switches, stops = settings.switches_deg, settings.overtravel_deg
    return JointBuild(
        Bounds(joint.rate_deg_s, joint.acceleration_deg_s2),
        (joint.lower_deg - switches, joint.upper_deg + switches),
        (joint.lower_deg - stops, joint.upper_deg + stops),
        settings.backlash_deg,
        settings.breakaway_deg,
        settings.breakaway_rate_deg_s,
        settings.run_on_deg,
        follows_rate=settings.follows_rate,
    )


def _sensor(settings: MachineSettings, number: int) -> Sensor:
    seed = f"{settings.seed}, joint {number}"
    encoder = Encoder(settings.encoder_resolution_deg, settings.encoder_noise_deg, seed)
    return Sensor(encoder, settings.encoder_scale, is_on_motor=settings.encoder_on_motor)
