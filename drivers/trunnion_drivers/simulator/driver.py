"""The simulated mount as a driver like any other.

It models rate and acceleration limits, hard stops, encoders, latency and a watchdog. It does not
model bending, vibration, heat or the grip of brakes; while no daemon runs its time stands still.
"""

from collections.abc import Mapping
from contextlib import ExitStack, closing
from typing import Self

from trunnion_drivers.interface.driver import Driver
from trunnion_drivers.interface.errors import BadSettings, SettingProblem
from trunnion_drivers.interface.values import (
    Capabilities,
    Clock,
    DriverMotion,
    DriverReading,
    JointFacts,
    MountFacts,
)
from trunnion_drivers.settings import checked
from trunnion_drivers.simulator.course import Bounds
from trunnion_drivers.simulator.encoder import Encoder
from trunnion_drivers.simulator.joint import SimulatedJoint
from trunnion_drivers.simulator.memory import Memory
from trunnion_drivers.simulator.mount import SimulatedMount
from trunnion_drivers.simulator.settings import SimulatorSettings


class SimulatorDriver(Driver):
    """Steel that exists as long as this object does, whether the link to it is open or not."""

    capabilities = Capabilities(follows_rate=True, reports_limits=True, has_link=False)

    def __init__(self, settings: SimulatorSettings, facts: MountFacts, clock: Clock) -> None:
        super().__init__(facts, clock)
        self._settings = settings
        self._encoders = tuple(
            Encoder(
                settings.encoder_resolution_deg,
                settings.encoder_noise_deg,
                f"{settings.seed}, joint {joint}",
            )
            for joint in (1, 2)
        )
        start = settings.start_deg or (facts.stow_first_deg, facts.stow_second_deg)
        self._mount = self._mount_at(*start)
        self._memory: Memory | None = None
        self._has_recalled = False

    @classmethod
    def from_settings(cls, settings: Mapping[str, object], facts: MountFacts, clock: Clock) -> Self:
        """Build a simulated mount; see SimulatorSettings for the keys. Raises BadSettings."""
        read = checked(SimulatorSettings, settings)
        _start_must_be_reachable(read, facts)
        return cls(read, facts, clock)

    def true_motion(self) -> DriverMotion:
        """Where both joints truly are now (deg) and how fast they move (deg/s), open or not."""
        return self._mount.motion(self._clock.monotonic_s())

    def _open(self) -> None:
        if self._settings.memory is not None:
            self._memory = self._remembered(self._settings.memory)

    def _close(self) -> None:
        if self._memory is not None:
            self._keep(self.true_motion())
            self._memory.close()
            self._memory = None

    def _read(self) -> DriverReading:
        now_s = self._clock.monotonic_s()
        motion = self._mount.motion(now_s)
        self._keep(motion)
        return DriverReading(
            now_s,
            self._encoders[0].reading_deg(motion.first_deg),
            self._encoders[1].reading_deg(motion.second_deg),
            at_limit=self._mount.is_at_stop(now_s),
        )

    def _move(self, motion: DriverMotion) -> None:
        now_s = self._clock.monotonic_s()
        self._mount.move(now_s, motion)
        self._keep(self._mount.motion(now_s))

    def _halt(self) -> None:
        self._mount.halt(self._clock.monotonic_s())

    def _keep(self, motion: DriverMotion) -> None:
        if self._memory is not None:
            self._memory.keep(motion.first_deg, motion.second_deg)

    def _remembered(self, path: str) -> Memory:
        with ExitStack() as undo:
            memory = undo.enter_context(closing(Memory(self._facts.folder / path)))
            if not self._has_recalled:
                angles = memory.recall()
                self._mount = self._mount_at(*angles) if angles else self._mount
                self._has_recalled = True
            undo.pop_all()
        return memory

    def _mount_at(self, first_deg: float, second_deg: float) -> SimulatedMount:
        now_s = self._clock.monotonic_s()
        first, second = (
            SimulatedJoint(
                now_s,
                angle_deg,
                Bounds(facts.rate_deg_s, facts.acceleration_deg_s2),
                _stops_deg(facts, self._settings.overtravel_deg),
            )
            for angle_deg, facts in (
                (first_deg, self._facts.first),
                (second_deg, self._facts.second),
            )
        )
        return SimulatedMount(first, second, self._settings.latency_s, self._settings.watchdog_s)


def _stops_deg(facts: JointFacts, overtravel_deg: float) -> tuple[float, float]:
    return facts.lower_deg - overtravel_deg, facts.upper_deg + overtravel_deg


def _start_must_be_reachable(settings: SimulatorSettings, facts: MountFacts) -> None:
    if settings.start_deg is None:
        return
    joints = (facts.first, facts.second)
    found = [
        SettingProblem("start_deg", f"expected joint {n} between its hard stops, got {angle:g}")
        for n, (angle, joint) in enumerate(zip(settings.start_deg, joints, strict=True), 1)
        if not joint.lower_deg - settings.overtravel_deg
        <= angle
        <= joint.upper_deg + settings.overtravel_deg
    ]
    if found:
        raise BadSettings(tuple(found))
