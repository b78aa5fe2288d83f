"""Notes of the sky on a plan: an operator's warnings, each provoked by a station or a plan."""

import re
import shutil
from math import cos, radians
from pathlib import Path

import pytest

from trunnion.files.draft import draft_plan
from trunnion.files.station import load_station
from trunnion.service.briefing import brief
from trunnion.service.briefing_order import BriefingOrder
from trunnion.service.sky_notes import sky_notes, sun_over_stow
from trunnion.service.targets import TargetBook
from trunnion.service.viewpoint import viewpoint_of
from trunnion.sky.events import in_shadow
from trunnion.sky.instants import parse_utc
from trunnion.sky.passes import find_passes
from trunnion.sky.sun import Sun

EXAMPLE = Path(__file__).parents[2] / "config"
NOW_S = parse_utc("2026-12-01T00:00:00Z")


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    for name in ("station.yaml", "horizon.txt", "elements.tle", "plan.yaml"):
        shutil.copy(EXAMPLE / name, tmp_path)
    return tmp_path


def notes(folder: Path) -> list[str]:
    briefing = brief(BriefingOrder(folder / "station.yaml", None, NOW_S))
    return [sentence for each in sky_notes(briefing).values() for sentence in each]


def changed(file: Path, before: str, after: str) -> None:
    text = file.read_text()
    assert before in text
    file.write_text(text.replace(before, after))


def test_the_example_has_nothing_to_fear_from_the_sun(folder: Path) -> None:
    assert not any("the Sun" in each for each in notes(folder))


def test_a_beacon_in_front_of_the_sun_is_told(folder: Path) -> None:
    briefing = brief(BriefingOrder(folder / "station.yaml", None, NOW_S))
    (by_day,) = (each for each in briefing.contacts if each.contact.target == "sun")
    sun = Sun(viewpoint_of(briefing.station)).look(by_day.contact.from_s + 300.0)
    plan = f"fixed:{sun.azimuth_deg:.3f},{sun.elevation_deg:.3f}"
    spans = [(by_day.contact.from_s, by_day.contact.until_s)]
    (folder / "plan.yaml").write_text(draft_plan(plan, spans))
    told = [each for each in notes(folder) if each.startswith("the Sun is within ")]
    assert len(told) == 1


def test_old_elements_are_in_doubt_when_the_beam_is_narrow(folder: Path) -> None:
    text = (folder / "station.yaml").read_text()
    line = next(each for each in text.splitlines() if "half_power_beamwidth_deg:" in each)
    key = line.partition(":")[0]
    tolerance = next(each for each in text.splitlines() if "pointing_tolerance_deg:" in each)
    changed(folder / "station.yaml", line, f"{key}: 0.02")
    changed(folder / "station.yaml", tolerance, f"{tolerance.partition(':')[0]}: 0.002")
    assert any("age of the orbit elements (common practice, no source)" in n for n in notes(folder))


def test_who_looks_is_told_of_the_shadow(folder: Path) -> None:
    changed(folder / "station.yaml", "refraction: radio", "refraction: optical")
    briefing = brief(BriefingOrder(folder / "station.yaml", None, NOW_S))
    view = viewpoint_of(briefing.station)
    target = TargetBook(briefing.station, view.geometric()).resolve("QUILLON-1")
    dark = [
        (each.rise_s, each.set_s)
        for each in find_passes(target, NOW_S, NOW_S + 2.0 * 86400.0, 12.0)
        if each.rise_s and each.set_s and in_shadow(target, view, each.rise_s, each.set_s)
    ]
    (folder / "plan.yaml").write_text(draft_plan("QUILLON-1", dark[:1]))
    assert any(each.startswith("in the Earth's shadow from ") for each in notes(folder))


def test_time_lost_to_the_circle_round_the_sun_is_told(folder: Path) -> None:
    briefing = brief(BriefingOrder(folder / "station.yaml", None, NOW_S))
    (by_day,) = (each for each in briefing.contacts if each.contact.target == "sun")
    sun = Sun(viewpoint_of(briefing.station))
    middle_s = 0.5 * (by_day.contact.from_s + by_day.contact.until_s)
    there = sun.look(middle_s)
    plan = f"fixed:{there.azimuth_deg:.3f},{there.elevation_deg:.3f}"
    (folder / "plan.yaml").write_text(draft_plan(plan, [(middle_s - 3000.0, middle_s + 3000.0)]))
    assert not any("circle" in each for each in notes(folder))
    changed(folder / "station.yaml", "sun_keep_out_deg: null", "sun_keep_out_deg: 5")
    (told,) = (each for each in notes(folder) if "circle" in each)
    match = re.fullmatch(r"about (\d+) s are lost to the circle of 5° round the Sun, from .*", told)
    assert match is not None
    # ten degrees at 15.04 deg/h (the Sun's diurnal motion) times the cosine of its declination
    assert int(match[1]) == pytest.approx(10.0 / (15.04 * cos(radians(21.8))) * 3600.0, rel=0.01)


@pytest.mark.parametrize(
    ("stow", "is_told"),
    [
        ("[0, 72]", True),  # due north at -42.137: declination 90 - 72 - 42.137 = -24.1
        ("[0, 88]", False),  # -40.1
        ("[0, 77]", False),  # -29.1, beyond 23.44 + 5
        ("[0, 75.8]", True),  # -27.9
        ("[180, 30]", False),  # near the pole
    ],
)
def test_a_stow_that_the_sun_comes_near_is_told(folder: Path, stow: str, *, is_told: bool) -> None:
    file = folder / "station.yaml"
    changed(file, "stow_deg: [0, 88]", f"stow_deg: {stow}")
    assert not list(sun_over_stow(load_station(file)))
    changed(file, "sun_keep_out_deg: null", "sun_keep_out_deg: 5")
    assert bool(list(sun_over_stow(load_station(file)))) == is_told
