"""Stations with other mounts than azimuth–elevation, from their files to a flown pass."""

import shutil
from pathlib import Path

import pytest

from tests.service.stations import write_plan, write_station
from trunnion.cli.init import example_folder
from trunnion.files.problems import FileProblems
from trunnion.files.station import load_station
from trunnion.mount.hinges import Hinges
from trunnion.safety.verdict import Move
from trunnion.service.antenna import mount_of
from trunnion.service.clearance import clearance_of
from trunnion.service.rehearsal import rehearsal_of

OVERHEAD = (
    "{id: overhead, target: QUILLON-1, from: 2026-12-01T01:02:12Z, until: 2026-12-01T01:11:43Z}"
)
ALTITUDE = "geometry: azimuth-elevation"


@pytest.mark.parametrize(
    ("geometry", "hinges"),
    [
        ("azimuth-elevation", Hinges.azimuth_elevation()),
        ("x-y-north-south", Hinges.x_y_north_south()),
        ("x-y-east-west", Hinges.x_y_east_west()),
        ("hour-angle-declination", Hinges.hour_angle_declination(-42.137)),
    ],
)
def test_every_geometry_has_its_hinges(tmp_path: Path, geometry: str, hinges: Hinges) -> None:
    station = load_station(write_station(tmp_path, {ALTITUDE: f"geometry: {geometry}"}))
    assert mount_of(station).hinges == hinges


def test_an_unknown_geometry_is_told_with_what_there_is(tmp_path: Path) -> None:
    path = write_station(tmp_path, {ALTITUDE: "geometry: x-y-north"})
    with pytest.raises(FileProblems, match="x-y-north-south"):
        load_station(path)


def test_a_stow_position_below_the_floor_is_found_for_every_geometry(tmp_path: Path) -> None:
    changes = {
        ALTITUDE: "geometry: x-y-east-west",
        "travel_deg: [0, 90]": "travel_deg: [-88, 90]",
        "stow_deg: [0, 88]": "stow_deg: [0, 87]",
    }
    station = load_station(write_station(tmp_path, changes))
    with pytest.raises(FileProblems, match="expected an elevation of at least"):
        clearance_of(station)


def test_an_x_y_mount_follows_the_overhead_pass_that_azimuth_cannot(tmp_path: Path) -> None:
    write_station(tmp_path)
    shutil.copy(example_folder() / "station-x-y.yaml", tmp_path)
    write_plan(tmp_path, OVERHEAD)
    worst_deg = {}
    for name in ("station.yaml", "station-x-y.yaml"):
        briefing, rehearsal = rehearsal_of(tmp_path / name, None)
        for turn in rehearsal.turns():
            if isinstance(turn.verdict.order, Move):
                boresight = rehearsal.mount.hinges.boresight(turn.verdict.order.motion.joints)
                assert rehearsal.clearance.is_clear(boresight[0], boresight[1] + 1e-9)
            assert not turn.verdict.interventions
        (contact,) = briefing.contacts
        assert contact.forecast is not None
        worst_deg[name] = rehearsal.results["overhead"].score.worst_error_deg
        assert worst_deg[name] == pytest.approx(contact.forecast.worst_error_deg, abs=0.02)
    assert worst_deg["station.yaml"] > 0.5
    assert worst_deg["station-x-y.yaml"] < 0.02


WESTERN = "{id: west, target: BRINDLE-4, from: 2026-12-01T00:36:54Z, until: 2026-12-01T00:49:18Z}"


def test_a_pass_that_only_a_mount_that_goes_over_the_top_can_hold(tmp_path: Path) -> None:
    write_station(tmp_path)
    over = (example_folder() / "station-over-the-top.yaml").read_text()
    upright = over.replace(
        "travel_deg: [0, 180]\n    rate_deg_s: 4.0", "travel_deg: [0, 90]\n    rate_deg_s: 4.0"
    )
    assert upright != over
    (tmp_path / "over.yaml").write_text(over)
    (tmp_path / "upright.yaml").write_text(upright)
    write_plan(tmp_path, WESTERN)
    briefing, rehearsal = rehearsal_of(tmp_path / "over.yaml", None)
    assert all(not turn.verdict.interventions for turn in rehearsal.turns())
    assert briefing.contacts[0].is_served
    assert rehearsal.results["west"].score.worst_error_deg < 0.02
    assert all(each.path.at(each.begin_s + 99.3).second_deg > 90.0 for each in briefing.assignments)
    other, _ = rehearsal_of(tmp_path / "upright.yaml", None)
    assert not other.contacts[0].is_served
