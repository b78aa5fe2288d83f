"""The picture of a programme: well-formed, complete, and without colours that matter."""

import re
from xml.etree import ElementTree as ET

import pytest

from tests.track.skies import START_S, Overflight
from tests.track.stations import BEAM, STOW, mount
from trunnion.cli.pictures.page import picture
from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.horizon import HorizonMask
from trunnion.track.day import plan_day
from trunnion.track.programme import Programme
from trunnion.track.wanted import Wanted

CLEARANCE = Clearance(
    5.3,
    HorizonMask(((10.0, 12.0), (100.0, 23.0), (200.0, 4.0))),
    (Sector("mast", 335.0, 345.0, 0.0, 30.0),),
)
SVG = "{http://www.w3.org/2000/svg}"


def programme(*names: str) -> Programme:
    wanted = [
        Wanted(
            name,
            Overflight(88.8, 31.0 + 50.0 * index, culmination_s=START_S + 400.0 + 2000.0 * index),
            START_S + 2000.0 * index,
            START_S + 800.0 + 2000.0 * index,
            1,
        )
        for index, name in enumerate(names)
    ]
    return plan_day(wanted, mount(), CLEARANCE, BEAM, STOW, START_S - 300.0)


def test_every_contact_is_drawn_as_seen_and_as_flown() -> None:
    svg = picture(programme("A & B", "<second>"), mount(), CLEARANCE, BEAM)
    tree = ET.fromstring(svg)
    lines = tree.findall(f"{SVG}polyline")
    assert sum(len(each.attrib["points"].split()) > 200 for each in lines) == 2 * 2 + 5 * 2
    words = [each.text or "" for each in tree.findall(f"{SVG}text")]
    assert any(word.startswith("1  A & B: error up to ") for word in words)
    assert any("<second>" in word for word in words)
    assert "tolerance" in words
    assert len(tree.findall(f"{SVG}polygon")) == 2


@pytest.mark.parametrize("count", [1, 25])
def test_what_is_drawn_lies_on_the_page(count: int) -> None:
    svg = picture(programme(*map(str, range(count))), mount(), CLEARANCE, BEAM)
    size = re.search(r'viewBox="0 0 (\d+) (\d+)"', svg)
    assert size is not None
    width, height = float(size[1]), float(size[2])
    for points in re.findall(r'points="([^"]*)"', svg):
        for point in points.split():
            x, y = map(float, point.split(","))
            assert 0.0 <= x <= width
            assert 0.0 <= y <= height


def test_it_needs_no_colour() -> None:
    svg = picture(programme("one"), mount(), CLEARANCE, BEAM)
    shades = set(re.findall(r"#([0-9a-f]{3,6})\b", svg))
    assert all(len(set(shade)) == 1 for shade in shades)


def test_a_programme_of_nothing_is_an_empty_sky() -> None:
    ET.fromstring(picture(Programme((), ()), mount(), CLEARANCE, BEAM))


def test_the_worst_error_is_that_of_the_forecast() -> None:
    one = programme("one")
    svg = picture(one, mount(), CLEARANCE, BEAM)
    told = re.search(r"error up to ([\d.]+)°", svg)
    assert told is not None
    assert float(told[1]) == pytest.approx(one.forecasts[0].worst_error_deg, abs=0.5)
