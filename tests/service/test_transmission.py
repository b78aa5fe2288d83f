"""The permission to transmit as the daemon keeps it."""

from pathlib import Path

import pytest

from tests.service.stations import station_with
from trunnion.mount.joints import Reading
from trunnion.pilot.decision import Decision
from trunnion.pilot.phase import Phase
from trunnion.safety.verdict import Halt, Verdict
from trunnion.safety.world import World
from trunnion.service.antenna import mount_of
from trunnion.service.clearance import clearance_of
from trunnion.service.limits import safety_limits_of
from trunnion.service.transmission import Transmission, transmission_of
from trunnion.service.turn import Turn

BEGIN_S = 812.6
NAMED = {
    "transmit_permit: null": "transmit_permit: permit",
    "transmit_settle_s: 1 ": "transmit_settle_s: 2.5 ",
}


@pytest.fixture
def transmission(tmp_path: Path) -> Transmission:
    station = station_with(tmp_path, NAMED)
    limits = safety_limits_of(station, mount_of(station), clearance_of(station))
    return transmission_of(station, limits, tolerance_deg=0.37)


def tell(transmission: Transmission, mono_s: float, error_deg: float = 0.21) -> None:
    """One turn, so far off a target high up."""
    decision = Decision(Phase.TRACKING, None, error_deg=error_deg)
    reading = Reading(mono_s - 0.07, 41.9, 57.3)
    world = World(None, is_link_up=True, lateness_s=0.0)
    transmission.note(Turn(1e9, mono_s, reading, world, decision, Verdict(Halt())))


def test_it_takes_the_time_of_the_station_file(transmission: Transmission, tmp_path: Path) -> None:
    assert (tmp_path / "permit").read_text() == "forbidden\n"
    assert transmission.permit_at(BEGIN_S).until_s is None
    tell(transmission, BEGIN_S)
    tell(transmission, BEGIN_S + 2.4)
    assert transmission.permit_at(BEGIN_S + 2.4).until_s is None
    assert (tmp_path / "permit").read_text() == "forbidden\n"
    tell(transmission, BEGIN_S + 2.6)
    assert transmission.permit_at(BEGIN_S + 2.6).is_good_at(BEGIN_S + 2.6)
    assert (tmp_path / "permit").read_text().startswith("permitted")


def test_it_expires_without_turns_and_goes_at_once_off_target(
    transmission: Transmission, tmp_path: Path
) -> None:
    tell(transmission, BEGIN_S)
    tell(transmission, BEGIN_S + 2.6)
    expired = transmission.permit_at(BEGIN_S + 4.0)
    assert (expired.until_s, expired.reason) == (None, "the permission was not renewed in time")
    tell(transmission, BEGIN_S + 2.7, error_deg=0.4)
    assert "0.40° off" in str(transmission.permit_at(BEGIN_S + 2.7).reason)
    assert (tmp_path / "permit").read_text() == "forbidden\n"


def test_that_it_comes_and_goes_is_told_once_each(tmp_path: Path) -> None:
    station = station_with(tmp_path, NAMED)
    limits = safety_limits_of(station, mount_of(station), clearance_of(station))
    told: list[str] = []
    transmission = transmission_of(station, limits, 0.37, told.append)
    for mono_s in (0.0, 2.6, 2.7):
        tell(transmission, BEGIN_S + mono_s)
    assert told == ["transmitting is permitted"]
    tell(transmission, BEGIN_S + 2.8, error_deg=0.4)
    tell(transmission, BEGIN_S + 2.9, error_deg=0.5)
    off = "transmitting is forbidden: the beam is 0.40° off, 0.37° are allowed"
    assert told == ["transmitting is permitted", off]
    for mono_s in (3.0, 5.6):
        tell(transmission, BEGIN_S + mono_s)
    transmission.end()
    transmission.end()
    assert told[2:] == ["transmitting is permitted", "transmitting is forbidden: the program ends"]


def test_the_end_takes_it_back(transmission: Transmission, tmp_path: Path) -> None:
    tell(transmission, BEGIN_S)
    tell(transmission, BEGIN_S + 2.6)
    transmission.end()
    assert transmission.permit_at(BEGIN_S + 2.6).until_s is None
    assert (tmp_path / "permit").read_text() == "forbidden\n"


def test_trouble_with_the_file_is_told(transmission: Transmission, tmp_path: Path) -> None:
    assert transmission.trouble is None
    (tmp_path / "permit.new").mkdir()
    transmission.end()
    assert "cannot write" in str(transmission.trouble)


def test_without_a_file_nothing_is_written(tmp_path: Path) -> None:
    station = station_with(tmp_path)
    limits = safety_limits_of(station, mount_of(station), clearance_of(station))
    transmission = transmission_of(station, limits, tolerance_deg=0.37)
    before = set(tmp_path.iterdir())
    tell(transmission, BEGIN_S)
    transmission.end()
    assert (set(tmp_path.iterdir()), transmission.trouble) == (before, None)
