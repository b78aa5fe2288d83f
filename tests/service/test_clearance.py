from pathlib import Path

import pytest

from tests.files.station_text import RIGHT, changed, written
from trunnion.files.problems import FileProblems
from trunnion.files.station import load_station
from trunnion.service.clearance import clearance_of

SAFETY = """elevation_floor_deg: 5
  horizon_mask: horizon.txt
  keep_outs:
    - {name: mast, azimuth_deg: [350, 12], elevation_deg: [0, 31]}"""


def test_floor_mask_and_keep_outs_come_together(tmp_path: Path) -> None:
    (tmp_path / "horizon.txt").write_text("17 9\n197 2\n")
    station = load_station(written(tmp_path, changed(elevation_floor_deg=SAFETY)))
    clearance = clearance_of(station)
    assert clearance.lowest_deg(17) == 9
    assert clearance.lowest_deg(197) == 5
    assert not clearance.is_clear(3, 30)
    assert clearance.is_clear(13, 30)


def test_without_a_mask_the_floor_alone_counts(tmp_path: Path) -> None:
    assert clearance_of(load_station(written(tmp_path, RIGHT))).mask is None


@pytest.mark.parametrize(
    ("stow_deg", "reason"),
    [
        ("[-3, 30]", "expected a stow position outside all keep-outs, got one in 'mast'"),
        (
            "[17, 8]",
            "expected an elevation of at least 9, which is the horizon mask at azimuth 17, got 8",
        ),
    ],
)
def test_a_stow_position_that_is_not_clear_is_told_with_its_line(
    tmp_path: Path, stow_deg: str, reason: str
) -> None:
    (tmp_path / "horizon.txt").write_text("17 9\n197 2\n")
    text = changed(elevation_floor_deg=SAFETY, stow_deg=f"stow_deg: {stow_deg}")
    with pytest.raises(FileProblems) as caught:
        clearance_of(load_station(written(tmp_path, text)))
    assert str(caught.value) == f"{tmp_path}/station.yaml:15: mount.stow_deg: {reason}"


def test_a_mask_that_is_not_there_is_told(tmp_path: Path) -> None:
    station = load_station(written(tmp_path, changed(elevation_floor_deg=SAFETY)))
    with pytest.raises(FileProblems, match=r"horizon\.txt: no such file"):
        clearance_of(station)
