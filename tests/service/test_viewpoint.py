from pathlib import Path

import pytest
from astropy_iers_data import IERS_A_FILE

from tests.files.station_text import RIGHT, written
from trunnion.files.station import load_station
from trunnion.service.viewpoint import viewpoint_of
from trunnion.sky.errors import SkyError
from trunnion.sky.viewpoint import Viewpoint

AUTUMN_S = 1_790_000_000.0  # in September 2026


def seen_from(folder: Path, sky: str = "") -> Viewpoint:
    section = f"sky:\n  {sky}\n" if sky else ""
    return viewpoint_of(load_station(written(folder, RIGHT + section)))


def test_the_site_is_the_stations(tmp_path: Path) -> None:
    site = seen_from(tmp_path).site
    assert (site.latitude_deg, site.longitude_deg, site.height_m) == (-42.137, 146.52, 812)


def test_light_time_and_aberration_are_on_unless_asked_for_the_straight_line(
    tmp_path: Path,
) -> None:
    viewpoint = seen_from(tmp_path)
    assert viewpoint.is_apparent
    assert viewpoint.refraction.model == "radio"
    assert viewpoint.geometric().refraction.seen(4.25)[0] == 4.25


def test_the_earths_table_is_the_packaged_one_a_file_or_none(tmp_path: Path) -> None:
    packaged = seen_from(tmp_path).earth.at(AUTUMN_S)
    assert packaged[0] != 0
    assert seen_from(tmp_path, f"earth_orientation: {IERS_A_FILE}").earth.at(AUTUMN_S) == packaged
    assert seen_from(tmp_path, "earth_orientation: none").earth.at(AUTUMN_S)[0] == 0


def test_a_table_that_is_not_there_is_told(tmp_path: Path) -> None:
    with pytest.raises(SkyError, match="finals2000A: No such file"):
        seen_from(tmp_path, "earth_orientation: finals2000A")


@pytest.mark.parametrize("model", ["radio", "optical", "none"])
def test_the_air_refracts_as_chosen(tmp_path: Path, model: str) -> None:
    refraction = seen_from(tmp_path, f"refraction: {model}").refraction
    assert refraction.model == model
    assert (refraction.seen(3.5)[0] > 3.5) == (model != "none")


def test_the_stations_own_air_counts_and_the_standards_for_the_rest(tmp_path: Path) -> None:
    def lift_deg(sky: str) -> float:
        return seen_from(tmp_path, sky).refraction.seen(3.5)[0] - 3.5

    dry = lift_deg("relative_humidity_percent: 0")
    humid = lift_deg("relative_humidity_percent: 100")
    thin = lift_deg("relative_humidity_percent: 0\n  pressure_hpa: 600")
    assert dry < lift_deg("") < humid
    assert thin < dry
