"""The simulated mount as a driver like any other. What it does not model: see `machine.py`.

While no daemon runs its time stands still.
"""

from collections import deque
from collections.abc import Mapping
from contextlib import ExitStack, closing
from typing import Self

from trunnion_drivers.control.command import Command, CommandMode
from trunnion_drivers.control.steered import SteeredDriver
from trunnion_drivers.interface.values import (
    Capabilities,
    Clock,
    DriverMotion,
    DriverReading,
    MountFacts,
)
from trunnion_drivers.settings import checked
from trunnion_drivers.simulator.faults import Faults, FaultSchedule, healthy, timetable
from trunnion_drivers.simulator.line import SimulatedLine
from trunnion_drivers.simulator.machine import SimulatedMachine, start_problems
from trunnion_drivers.simulator.memory import Memory
from trunnion_drivers.simulator.settings import SimulatorSettings


class SimulatorDriver(SteeredDriver):
    """Steel that exists as long as this object does, whether the link to it is open or not."""

    def __init__(self, settings: SimulatorSettings, facts: MountFacts, clock: Clock) -> None:
        follows_rate = settings.follows_rate and settings.command is CommandMode.POSITION
        steering = settings.control.steering(settings.command, facts, follows_rate=follows_rate)
        super().__init__(steering, facts, clock)
        self.capabilities = Capabilities(
            follows_rate=follows_rate or settings.command is CommandMode.RATE,
            cuts_power=True,
            reports_stop_input=True,
            reports_limits=True,
            has_brake=settings.brake is not None,
        )
        if settings.brake is not None:
            self.brake_timing = settings.brake.timing()
        now_s = clock.monotonic_s()
        self._settings = settings
        self._machine = SimulatedMachine(settings, facts, now_s)
        self._line = SimulatedLine(clock, settings.order_loss, settings.reply_loss, settings.seed)
        self._past: deque[DriverReading] = deque(maxlen=600)
        self._memory: Memory | None = None
        self._has_recalled = False
        episodes = [episode.episode(now_s) for episode in settings.faults]
        self._schedule: FaultSchedule = timetable(episodes) if episodes else healthy

    @classmethod
    def from_settings(cls, settings: Mapping[str, object], facts: MountFacts, clock: Clock) -> Self:
        """Build a simulated mount; see SimulatorSettings for the keys. Raises BadSettings."""
        read = checked(SimulatorSettings, settings)
        start_problems(read, facts)
        return cls(read, facts, clock)

    def inject(self, schedule: FaultSchedule) -> None:
        """Let this go wrong from now on, instead of what the settings say."""
        self._schedule = schedule

    def true_motion(self) -> DriverMotion:
        """Where the antenna truly is now (deg) and how fast it moves (deg/s), open or not."""
        now_s, _ = self._now()
        return self._machine.true_motion(now_s)

    @property
    def is_powered(self) -> bool:
        """Whether the motors have power."""
        self._now()
        return self._machine.is_powered

    @property
    def is_braked(self) -> bool:
        """Whether the brake is engaged."""
        return self._machine.is_braked

    @property
    def was_forced(self) -> bool:
        """Whether a motor has ever worked against the brake."""
        return self._machine.was_forced

    def _open(self) -> None:
        now_s, faults = self._now()
        self._line.connect(faults)
        if self._settings.memory is not None:
            self._memory = self._remembered(self._settings.memory)
        self._machine.cut_power(now_s, is_cut=False)
        self._start_anew()

    def _close(self) -> None:
        if self._memory is not None:
            self._keep()
            self._memory.close()
            self._memory = None

    def _look(self) -> DriverReading:
        now_s, faults = self._now()
        self._line.carry_reply(faults)
        if faults.call_lasts_s > 0.0:
            now_s, faults = self._now()
        self._keep()
        reading = DriverReading(now_s, *self._machine.look(now_s))
        self._past.append(reading)
        return self._aged(reading, faults.reading_age_s) if faults.reading_age_s else reading

    def _tell(self, command: Command) -> None:
        if self._reaches_the_mount(is_motion=True):
            self._machine.command(self._clock.monotonic_s(), command)

    def _rest(self) -> None:
        if self._reaches_the_mount(is_motion=False):
            self._machine.halt(self._clock.monotonic_s())

    def _cut_power(self) -> None:
        if self._reaches_the_mount(is_motion=False):
            self._machine.cut_power(self._clock.monotonic_s(), is_cut=True)

    def _engage_brake(self) -> None:
        if self._reaches_the_mount(is_motion=False):
            self._machine.brake(self._clock.monotonic_s(), is_engaged=True)

    def _release_brake(self) -> None:
        if self._reaches_the_mount(is_motion=True):
            self._machine.brake(self._clock.monotonic_s(), is_engaged=False)

    def _reaches_the_mount(self, *, is_motion: bool) -> bool:
        _, faults = self._now()
        return self._line.carries_order(faults, is_motion=is_motion)

    def _now(self) -> tuple[float, Faults]:
        """What time it is, and what is wrong now; the machine knows of it from here on."""
        now_s = self._clock.monotonic_s()
        faults = self._schedule(now_s)
        self._machine.suffer(now_s, faults)
        return now_s, faults

    def _aged(self, newest: DriverReading, age_s: float) -> DriverReading:
        until_s = newest.taken_s - age_s
        return next((old for old in reversed(self._past) if old.taken_s <= until_s), self._past[0])

    def _keep(self) -> None:
        if self._memory is not None:
            motion = self._machine.true_motion(self._clock.monotonic_s())
            self._memory.keep(motion.first_deg, motion.second_deg)

    def _remembered(self, path: str) -> Memory:
        with ExitStack() as undo:
            memory = undo.enter_context(closing(Memory(self._facts.folder / path)))
            if not self._has_recalled:
                self._recall(memory)
                self._has_recalled = True
            undo.pop_all()
        return memory

    def _recall(self, memory: Memory) -> None:
        angles_deg = memory.recall()
        if angles_deg is not None:
            now_s = self._clock.monotonic_s()
            self._machine = SimulatedMachine(self._settings, self._facts, now_s, angles_deg)
