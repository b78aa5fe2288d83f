"""What harmless faults cost in mid-contact: no contact is lost, and the seconds lost are counted.

A smooth pass with up to 1°/s in azimuth, flown by the same pilot, gate, turn and link as the
daemon's, in virtual time; judged by the simulated steel, not by what the daemon believes.
"""

from collections.abc import Callable, Iterator
from dataclasses import dataclass

import pytest

from tests.pilot.flight import CLEARANCE, FACTS, MOUNT, START_UTC_S
from trunnion.mount.joints import Joints
from trunnion.mount.sphere import separation_deg
from trunnion.pilot.phase import Wish
from trunnion.pilot.pilot import Pilot
from trunnion.safety.gate import Gate
from trunnion.safety.limits import SafetyLimits
from trunnion.service.cadence import Cadence
from trunnion.service.clock import VirtualClock
from trunnion.service.link.direct import DirectLink
from trunnion.service.surroundings import world_of
from trunnion.service.torture.contact import Arc
from trunnion.service.turn import ControlTurn, Orders
from trunnion_drivers.interface.errors import Garbled, NoReply
from trunnion_drivers.interface.values import DriverReading, JointFacts, MountFacts
from trunnion_drivers.simulator.driver import SimulatorDriver
from trunnion_drivers.simulator.settings import SimulatorSettings

HALF_BEAM_DEG, TOLERANCE_DEG = 1.6, 0.32
TICK_S = 0.1
BEGIN_S, LENGTH_S = START_UTC_S + 40.0, 180.0
FAULT_S = BEGIN_S + 83.0
"""Close to the middle, where the mount is fastest."""
PASS = Arc(
    "pass", MOUNT.hinges, Joints(-71.3, 21.9), Joints(43.1, 47.7), BEGIN_S, BEGIN_S + LENGTH_S
)
LIMITS = SafetyLimits(MOUNT, CLEARANCE, transmit_floor_deg=10.0)

AWAY_S = 2.5
"""A second until the service manager restarts it, the start, and the plan made anew."""

Spoil = Callable[[DriverReading], DriverReading]


class SpoiltOnce(SimulatorDriver):
    """One of its readings, the first after `spoilt_from_s`, is not what it should be."""

    spoil: Spoil | None = None
    spoilt_from_s = 0.0

    def _look(self) -> DriverReading:
        reading = super()._look()
        spoil = self.spoil
        if spoil is None or reading.taken_s < self.spoilt_from_s:
            return reading
        self.spoil = None
        return spoil(reading)


@dataclass
class Lost:
    """Seconds of the contact in which the beam, or its tolerance, was off the target."""

    beam_s: float = 0.0
    tolerance_s: float = 0.0


class Flight:
    """A daemon in virtual time; it may die, and another one take its place."""

    def __init__(self, *, follows_rate: bool = True) -> None:
        self.clock = VirtualClock(START_UTC_S, 812.6)
        first, second = (
            JointFacts(
                joint.lower_deg, joint.upper_deg, joint.rate_deg_s, joint.acceleration_deg_s2
            )
            for joint in (MOUNT.first, MOUNT.second)
        )
        facts = MountFacts(first, second, PASS.start.first_deg, PASS.start.second_deg)
        self.driver = SpoiltOnce(SimulatorSettings(follows_rate=follows_rate), facts, self.clock)
        self.lost = Lost()
        self.is_latched = False
        self.start()

    def start(self) -> None:
        """A new process."""
        mount = MOUNT.with_reserve(0.97, 0.7)
        self.link = DirectLink(self.driver, self.clock)
        pilot = Pilot(FACTS._replace(mount=mount, tolerance_deg=TOLERANCE_DEG))
        self.control = ControlTurn(self.clock, self.link, pilot, Gate(LIMITS), ())
        self.cadence = Cadence(self.clock, TICK_S)

    def die(self, away_s: float) -> None:
        """Be killed, and be there again after so long."""
        self.driver.close()
        self.wait(away_s)
        self.start()

    def wait(self, seconds: float) -> None:
        """Let time pass without a turn, while the target goes on."""
        for _ in range(round(seconds / TICK_S)):
            self.clock.sleep(TICK_S)
            self.count()

    def turns(self, until_s: float) -> Iterator[None]:
        """Turn by turn until that second."""
        while self.clock.utc_s() < until_s:
            lateness_s = self.cadence.wait().lateness_s
            turn = self.control.run(
                Orders((PASS.assignment(),), Wish.FOLLOW_PLAN),
                lambda: world_of(None, self.link.status, lateness_s),  # noqa: B023 - called at once
            )
            self.is_latched = self.is_latched or turn.verdict.latch is not None
            self.count()
            yield

    def count(self) -> None:
        """One tick of the contact, by where the steel is."""
        utc_s = self.clock.utc_s()
        if not BEGIN_S <= utc_s < BEGIN_S + LENGTH_S:
            return
        true, look = self.driver.true_motion(), PASS.look(utc_s)
        azimuth_deg, elevation_deg = MOUNT.hinges.boresight(Joints(true.first_deg, true.second_deg))
        off_deg = separation_deg(azimuth_deg, elevation_deg, look.azimuth_deg, look.elevation_deg)
        self.lost.beam_s += TICK_S if off_deg > HALF_BEAM_DEG else 0.0
        self.lost.tolerance_s += TICK_S if off_deg > TOLERANCE_DEG else 0.0

    def fly(self, happens: Callable[["Flight"], None]) -> Lost:
        """The whole contact, with this in the middle of it."""
        for _ in self.turns(FAULT_S):
            pass
        happens(self)
        for _ in self.turns(BEGIN_S + LENGTH_S):
            pass
        assert not self.is_latched
        return self.lost


def garbled(_: DriverReading) -> DriverReading:
    raise Garbled("expected two angles, got a hiccup")


def silent(_: DriverReading) -> DriverReading:
    raise NoReply("expected an answer within 0.3 s, got none")


def reading_that(spoil: Spoil) -> Callable[[Flight], None]:
    def happens(flight: Flight) -> None:
        flight.driver.spoil, flight.driver.spoilt_from_s = spoil, flight.clock.monotonic_s()

    return happens


@pytest.mark.parametrize(
    "happens",
    [
        lambda _: None,
        reading_that(lambda reading: reading._replace(first_deg=reading.first_deg + 37.0)),
        reading_that(lambda reading: reading._replace(second_deg=float("nan"))),
        reading_that(garbled),
        reading_that(silent),
        lambda flight: flight.wait(0.4),
        lambda flight: flight.wait(0.9),
    ],
    ids=["nothing", "jump", "no number", "garbled", "silent", "0.4 s late", "0.9 s late"],
)
def test_one_bad_reading_or_late_turn_costs_nothing(happens: Callable[[Flight], None]) -> None:
    assert Flight().fly(happens) == Lost(0.0, 0.0)


@pytest.mark.parametrize(
    ("follows_rate", "beam_s", "tolerance_s"),
    [(True, 0.0, 1.2), (False, 2.2, 4.5)],
    ids=["a mount that goes on", "a mount that stands"],
)
def test_a_restart_costs_the_time_away_and_a_moment_to_catch_up(
    beam_s: float, tolerance_s: float, *, follows_rate: bool
) -> None:
    lost = Flight(follows_rate=follows_rate).fly(lambda flight: flight.die(AWAY_S))
    assert lost.beam_s <= beam_s
    assert 0.0 < lost.tolerance_s <= tolerance_s, lost


def test_a_fault_that_is_not_harmless_is_seen_here() -> None:
    assert Flight().fly(lambda flight: flight.wait(30.0)).beam_s > 10.0
