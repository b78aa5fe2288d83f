"""The real daemon, corrected in mid-contact: flown, shown, kept when killed, taken back."""

from pathlib import Path
from typing import Any

import pytest

from tests.end_to_end.station import Station


def points_at(elevation_deg: float, status: dict[str, Any]) -> bool:
    reading: list[float] | None = status["mount"]["reading_deg"]
    is_tracking = status["phase"] == "tracking"
    return is_tracking and reading is not None and abs(reading[1] - elevation_deg) < 0.05


def test_a_correction_is_flown_shown_and_taken_back(tmp_path: Path) -> None:
    station = Station(tmp_path)
    process = station.run()
    try:
        station.wait_for(lambda status: points_at(83.1, status))
        told = station.command("correct", str(station.file), "--elevation", "-1.4")
        assert told.returncode == 0, told.stderr
        status = station.wait_for(lambda status: points_at(81.7, status))
        assert status["correction"]["elevation_deg"] == pytest.approx(-1.4)
        assert status["correction"]["contact"] == "the-contact"
        process.kill()
        process.wait()
        process = station.run()
        status = station.wait_for(lambda status: points_at(81.7, status))
        assert status["correction"]["contact"] == "the-contact"
        assert station.command("correct", str(station.file), "--clear").returncode == 0
        status = station.wait_for(lambda status: points_at(83.1, status))
        assert status["correction"] is None
    finally:
        process.terminate()
        process.wait(30)
