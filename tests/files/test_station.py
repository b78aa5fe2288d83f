from pathlib import Path

import pytest

from tests.files.station_text import RIGHT, changed, written
from trunnion.files.problems import FileProblems
from trunnion.files.station import driver_problems, effective_settings, load_station
from trunnion.files.station_machine import Geometry
from trunnion.files.station_sky import EarthData, RefractionModel


def problems_of(folder: Path, text: str) -> list[str]:
    with pytest.raises(FileProblems) as caught:
        load_station(written(folder, text))
    return [str(problem).removeprefix(f"{folder}/") for problem in caught.value.problems]


def test_what_is_left_out_takes_the_safe_default(tmp_path: Path) -> None:
    station = load_station(written(tmp_path))
    assert station.mount.geometry is Geometry.AZIMUTH_ELEVATION
    assert station.antenna.pointing_tolerance_deg == pytest.approx(0.32)
    assert station.sky.earth_orientation is EarthData.PACKAGED
    assert station.sky.refraction is RefractionModel.RADIO
    assert station.safety.transmit_floor_deg == 5
    assert station.safety.horizon_mask is None
    assert station.safety.stow_on_exit is False
    assert station.cadence.tick_hz == 10
    assert station.files.elements == ()
    assert station.path == tmp_path / "station.yaml"


def test_transmitting_is_never_permitted_below_the_legal_floor_by_default(tmp_path: Path) -> None:
    text = changed(elevation_floor_deg="elevation_floor_deg: 1.5")
    assert load_station(written(tmp_path, text)).safety.transmit_floor_deg == 3


def test_relative_paths_begin_at_the_station_files_folder(tmp_path: Path) -> None:
    text = RIGHT + (
        "sky:\n  earth_orientation: earth/finals2000A\n"
        "files:\n  elements: [day.tle, /srv/elements]\n  control_socket: run/control.sock\n"
    )
    station = load_station(written(tmp_path, text))
    assert station.files.plan == tmp_path / "plan.yaml"
    assert station.files.elements == (tmp_path / "day.tle", Path("/srv/elements"))
    assert station.files.control_socket == tmp_path / "run/control.sock"
    assert station.sky.earth_orientation == tmp_path / "earth/finals2000A"


def test_one_elements_path_needs_no_list(tmp_path: Path) -> None:
    station = load_station(written(tmp_path, RIGHT + "files: {elements: day.tle}\n"))
    assert station.files.elements == (tmp_path / "day.tle",)


@pytest.mark.parametrize(
    ("changes", "expected"),
    [
        (
            {"latitude_deg": "latitude_deg: 95.5"},
            "station.yaml:3: site.latitude_deg: expected 90 or less, got 95.5",
        ),
        (
            {"height_m": "height_m: '812'"},
            "station.yaml:5: site.height_m: expected a number, got '812'",
        ),
        (
            {"name": "name:"},
            "station.yaml:2: site.name: expected a text, got nothing",
        ),
        (
            {"rate_deg_s": "rate_deg_s: 0"},
            "station.yaml:9: mount.first.rate_deg_s: expected a number above 0, got 0",
        ),
        (
            {"rate_deg_s": "rate_deg_s: .inf"},
            "station.yaml:9: mount.first.rate_deg_s: expected a finite number, got .inf",
        ),
        (
            {"acceleration_deg_s2": "acceleration_deg_s2: true"},
            "station.yaml:10: mount.first.acceleration_deg_s2: expected a number, got true",
        ),
        (
            {"travel_deg": "travel_deg: [270, -270]"},
            (
                "station.yaml:8: mount.first.travel_deg: expected the lower end first and above it "
                "the upper, got [270, -270]"
            ),
        ),
        (
            {"travel_deg": "travel_deg: [0, 90, 180]"},
            "station.yaml:8: mount.first.travel_deg: expected a list of two numbers, got one of 3",
        ),
        (
            {"travel_deg": "travel_deg: [-2000, 90]"},
            (
                "station.yaml:8: mount.first.travel_deg: expected a travel within -1080 to 1080, "
                "got [-2000, 90]"
            ),
        ),
        (
            {"stow_deg": "stow_deg: [300, 88]"},
            (
                "station.yaml:15: mount.stow_deg: expected the first joint to park within its "
                "travel [-270, 270], got 300"
            ),
        ),
        (
            {"stow_deg": "stow_deg: [0, 3]"},
            (
                "station.yaml:15: mount.stow_deg: expected an elevation of at least the floor, 5, "
                "got 3"
            ),
        ),
        (
            {"stow_deg": "stow_deg: [0, 88]\n  geometry: azimuth-elevaton"},
            (
                "station.yaml:16: mount.geometry: expected one of 'azimuth-elevation', "
                "'x-y-north-south', 'x-y-east-west', 'hour-angle-declination', "
                "'other-axis', "
                "got 'azimuth-elevaton'"
            ),
        ),
        (
            {
                "half_power_beamwidth_deg": "half_power_beamwidth_deg: 3\n"
                "  pointing_tolerance_deg: 2"
            },
            (
                "station.yaml:18: antenna.pointing_tolerance_deg: expected at most half the "
                "beamwidth, 1.5, got 2"
            ),
        ),
        (
            {"elevation_floor_deg": "elevation_floor_deg: 90"},
            (
                "station.yaml:19: safety.elevation_floor_deg: expected less than the highest "
                "elevation that the mount reaches, 90, got 90"
            ),
        ),
        (
            {"elevation_floor_deg": "elevation_floor_deg: 5\n  transmit_floor_deg: 4"},
            (
                "station.yaml:20: safety.transmit_floor_deg: expected the elevation floor, 5, or "
                "more, got 4"
            ),
        ),
        (
            {"elevation_floor_deg": "elevation_floor_deg: 5\n  reading_max_age_s: 0.1"},
            (
                "station.yaml:20: safety.reading_max_age_s: expected more than the 0.1 s of one "
                "control turn at 10 Hz, got 0.1"
            ),
        ),
        (
            {
                "elevation_floor_deg": "elevation_floor_deg: 5\n  encoder_error_deg: 1.5\n"
                "  slip_deg: 1.25"
            },
            (
                "station.yaml:21: safety.slip_deg: expected more than encoder_error_deg, 1.5, "
                "got 1.25"
            ),
        ),
        (
            {"elevation_floor_deg": "elevation_floor_deg: 5\n  stow_on_exit: yes"},
            "station.yaml:20: safety.stow_on_exit: expected true or false, got 'yes'",
        ),
        (
            {"elevation_floor_deg": "elevation_flor_deg: 5"},
            (
                "station.yaml:19: safety.elevation_flor_deg: unknown key; "
                "did you mean 'elevation_floor_deg'?"
            ),
        ),
        (
            {"elevation_floor_deg": ""},
            "station.yaml:18: safety: expected a mapping of keys, got nothing",
        ),
        (
            {"latitude_deg": ""},
            "station.yaml:1: site.latitude_deg: this key is required, and missing",
        ),
    ],
)
def test_each_mistake_is_named_with_its_line_and_key(
    tmp_path: Path, changes: dict[str, str], expected: str
) -> None:
    assert expected in problems_of(tmp_path, changed(**changes))


def test_a_stow_over_the_top_counts_by_its_true_elevation(tmp_path: Path) -> None:
    over_the_top = RIGHT.replace("[0, 90]", "[0, 180]")
    load_station(written(tmp_path, over_the_top.replace("[0, 88]", "[0, 170]")))
    found = problems_of(tmp_path, over_the_top.replace("[0, 88]", "[0, 177]"))
    assert found == [
        "station.yaml:15: mount.stow_deg: expected an elevation of at least the floor, 5, got 3"
    ]


@pytest.mark.parametrize(
    ("section", "expected"),
    [
        (
            "targets:\n  sun: fixed:10,20\n",
            (
                "station.yaml:23: targets.sun: expected a name of your own, got 'sun', which "
                "already has a meaning"
            ),
        ),
        (
            "targets:\n  mast: fixed:10\n",
            (
                "station.yaml:23: targets.mast: expected fixed:AZIMUTH,ELEVATION in degrees, as in "
                "fixed:143.5,27, with an elevation of -90 to 90, got 'fixed:10'"
            ),
        ),
        (
            "sky:\n  refraction: radar\n",
            (
                "station.yaml:23: sky.refraction: expected one of 'radio', 'optical', 'none', "
                "got 'radar'"
            ),
        ),
        (
            "files:\n  plan: ''\n",
            "station.yaml:23: files.plan: expected a path, got ''",
        ),
        ("cadense: 3\n", "station.yaml:22: cadense: unknown key; did you mean 'cadence'?"),
        (
            "zebra: 3\n",
            (
                "station.yaml:22: zebra: unknown key; known here: site, mount, antenna, planning, "
                "sky, safety, driver, wind, cadence, files, targets"
            ),
        ),
    ],
)
def test_each_mistake_in_what_may_be_left_out_is_named(
    tmp_path: Path, section: str, expected: str
) -> None:
    assert problems_of(tmp_path, RIGHT + section) == [expected]


@pytest.mark.parametrize(
    ("box", "expected"),
    [
        ("azimuth_deg: [3, 400], elevation_deg: [0, 9]", "expected two different azimuths"),
        ("azimuth_deg: [3, 3], elevation_deg: [0, 9]", "expected two different azimuths"),
        ("azimuth_deg: [3, 9], elevation_deg: [9, 0]", "expected the lower end first"),
        ("azimuth_deg: [3, 9], elevation_deg: [0, 99]", "expected elevations of -90 to 90"),
    ],
)
def test_each_mistake_in_a_keep_out_is_named(tmp_path: Path, box: str, expected: str) -> None:
    keep_outs = f"elevation_floor_deg: 5\n  keep_outs:\n    - {{name: mast, {box}}}"
    (found,) = problems_of(tmp_path, changed(elevation_floor_deg=keep_outs))
    assert found.startswith("station.yaml:21: safety.keep_outs[1].")
    assert expected in found


def test_all_mistakes_come_at_once_contradictions_among_them(tmp_path: Path) -> None:
    text = changed(
        latitude_deg="latitude_deg: north",
        stow_deg="stow_deg: [0, 2]",
        half_power_beamwidth_deg="half_power_beamwidth_deg: -1",
    )
    assert problems_of(tmp_path, text) == [
        "station.yaml:3: site.latitude_deg: expected a number, got 'north'",
        "station.yaml:15: mount.stow_deg: expected an elevation of at least the floor, 5, got 2",
        "station.yaml:17: antenna.half_power_beamwidth_deg: expected a number above 0, got -1",
    ]


@pytest.mark.parametrize(("text", "got"), [("", "nothing"), ("- 1\n", "[1]"), ("word\n", "'word'")])
def test_a_file_that_is_no_mapping_is_told(tmp_path: Path, text: str, got: str) -> None:
    (found,) = problems_of(tmp_path, text)
    assert found.endswith(f"expected a mapping of keys, got {got}")


def test_a_socket_path_too_long_for_the_system_is_told(tmp_path: Path) -> None:
    section = f"files:\n  control_socket: /run/{'x' * 120}.sock\n"
    (found,) = problems_of(tmp_path, RIGHT + section)
    assert "expected a path of at most 102 bytes" in found


def test_the_drivers_own_settings_are_kept_and_its_complaints_get_their_lines(
    tmp_path: Path,
) -> None:
    text = changed(kind="kind: simulator\n  noise_deg: 0.01\n  port:\n    speed: fast")
    station = load_station(written(tmp_path, text))
    assert station.driver.kind == "simulator"
    assert station.driver.settings == {"noise_deg": 0.01, "port": {"speed": "fast"}}
    found = driver_problems(station, [("port.speed", "expected a number"), ("", "no port")])
    assert [(p.line, p.key, p.message) for p in found.problems] == [
        (20, "driver", "no port"),
        (24, "driver.port.speed", "expected a number"),
    ]


def test_the_effective_settings_hold_every_key_as_plain_data(tmp_path: Path) -> None:
    settings = effective_settings(load_station(written(tmp_path)))
    assert settings["cadence"] == {"tick_hz": 10.0}
    assert settings["driver"] == {"kind": "simulator"}
