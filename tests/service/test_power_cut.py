"""The power of the motors from the stop to the reset, on a simulated mount."""

from dataclasses import dataclass, field
from pathlib import Path
from typing import cast

from tests.service.stations import station_with
from trunnion.mount.joints import Reading
from trunnion.pilot.decision import Decision
from trunnion.pilot.phase import Phase
from trunnion.safety.power import PowerJudge
from trunnion.safety.verdict import Halt, Verdict
from trunnion.safety.world import World
from trunnion.service.antenna import mount_of
from trunnion.service.clearance import clearance_of
from trunnion.service.clock import VirtualClock
from trunnion.service.drivers import build_simulator
from trunnion.service.limits import safety_limits_of
from trunnion.service.link.direct import DirectLink
from trunnion.service.power_cut import PowerCut
from trunnion.service.turn import Turn
from trunnion_drivers.simulator.driver import SimulatorDriver

STOPPED = Verdict(Halt())
SLIPPING = STOPPED._replace(latch="the mount moves", must_cut_power=True)


@dataclass
class Rig:
    """The example station's simulator, and what sees to its power."""

    folder: Path
    said: list[str] = field(default_factory=list)
    clock: VirtualClock = field(default_factory=lambda: VirtualClock(1_893_456_123.75, 41.5))

    def __post_init__(self) -> None:
        station = station_with(self.folder)
        limits = safety_limits_of(station, mount_of(station), clearance_of(station))
        self.steel = cast("SimulatorDriver", build_simulator(station, self.clock))
        self.link = DirectLink(self.steel, self.clock)
        self.power = PowerCut(PowerJudge(limits), self.link, self.said.append)

    def turns(self, count: int, verdict: Verdict = STOPPED, *, is_stopped: bool) -> None:
        """So many control turns in which nothing is to move."""
        for _ in range(count):
            self.clock.sleep(0.1)
            reading = self.link.newest()
            self.link.submit(Halt())
            self.power.see_to_it(self._turn(reading, verdict), is_stopped=is_stopped)

    def _turn(self, reading: Reading | None, verdict: Verdict) -> Turn:
        world = World(None, is_link_up=True, lateness_s=0.0)
        decision = Decision(Phase.HALTED, None)
        return Turn(self.clock.utc_s(), self.clock.monotonic_s(), reading, world, decision, verdict)


def test_a_mount_at_rest_loses_it_a_moment_after_the_stop_and_has_it_again_after_the_reset(
    tmp_path: Path,
) -> None:
    rig = Rig(tmp_path)
    rig.turns(5, is_stopped=False)
    assert rig.steel.is_powered
    rig.link.emergency_halt()
    rig.turns(5, is_stopped=True)
    assert not rig.steel.is_powered
    rig.turns(5, is_stopped=True)
    assert len(rig.said) == 1
    rig.link.release()
    rig.turns(2, is_stopped=False)
    assert rig.steel.is_powered


def test_a_mount_that_does_not_stay_at_rest_loses_it_at_once(tmp_path: Path) -> None:
    rig = Rig(tmp_path)
    rig.turns(5, is_stopped=False)
    rig.link.emergency_halt()
    rig.turns(1, SLIPPING, is_stopped=True)
    assert not rig.steel.is_powered
