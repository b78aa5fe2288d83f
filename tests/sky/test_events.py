"""Sky events against brute force, and the Earth's shadow against skyfield."""

import warnings

import numpy as np
import pytest
from skyfield.api import EarthSatellite

from tests.published.reference_sky import de421, skyfield_time
from tests.sky.stations import DAY_S, EARTH, EPOCH_S, NORTH, satellite
from trunnion.sky.errors import SkyError
from trunnion.sky.events import Span, in_shadow, spans, sun_near, sun_separation_deg
from trunnion.sky.fixed import FixedDirection
from trunnion.sky.look import FloatArray
from trunnion.sky.refraction import NoRefraction
from trunnion.sky.sun import Sun
from trunnion.sky.viewpoint import Viewpoint

VIEW = Viewpoint(NORTH, EARTH, NoRefraction(), is_apparent=True)
UNTIL_S = EPOCH_S + 1.5 * DAY_S


def covered(found: tuple[Span, ...], utc_s: FloatArray) -> FloatArray:
    inside: FloatArray = np.any(
        [(span.begin_s <= utc_s) & (utc_s <= span.end_s) for span in found], axis=0
    )
    return inside


@pytest.mark.parametrize("within_deg", [21.7, 37.3])
def test_the_sun_is_near_when_second_by_second_it_is(within_deg: float) -> None:
    target = satellite("QUILLON-1", is_apparent=True)
    utc_s = np.arange(EPOCH_S + 0.25, UNTIL_S, 1.0)
    separation_deg = sun_separation_deg(target, VIEW, utc_s)
    is_day = Sun(VIEW).looks(utc_s).elevation_deg > -1.0
    found = sun_near(target, VIEW, EPOCH_S, UNTIL_S, within_deg)
    assert found
    assert (covered(found, utc_s) == (separation_deg < within_deg) & is_day).all()


def test_a_beacon_before_the_setting_sun() -> None:
    sun = Sun(VIEW).look(EPOCH_S + 0.85 * DAY_S)
    beacon = FixedDirection(sun.azimuth_deg, sun.elevation_deg)
    (span,) = sun_near(beacon, VIEW, EPOCH_S + 0.5 * DAY_S, EPOCH_S + DAY_S, 2.0)
    assert (span.begin_s + span.end_s) / 2.0 == pytest.approx(EPOCH_S + 0.85 * DAY_S, abs=20.0)


@pytest.mark.parametrize("name", ["QUILLON-1", "QUILLON-2"])
def test_skyfield_finds_the_same_shadow(name: str) -> None:
    """skyfield 1.55, `is_sunlit` with DE421: the same half of the Sun, the same sphere."""
    target = satellite(name)
    utc_s = np.arange(EPOCH_S, EPOCH_S + 0.5 * DAY_S, 10.0)
    found = in_shadow(target, VIEW, utc_s[0], utc_s[-1])
    time = skyfield_time(utc_s)
    elements = target.element_set
    craft = EarthSatellite(elements.line_1, elements.line_2, ts=time.ts)
    with de421() as ephemeris, warnings.catch_warnings():
        warnings.simplefilter("ignore", RuntimeWarning)
        is_sunlit = craft.at(time).is_sunlit(ephemeris)
    differ = covered(found, utc_s) == is_sunlit
    assert found
    assert differ.sum() <= 2 * len(found)  # a step of ten seconds at each end at most


def test_a_target_nowhere_in_particular_has_no_shadow() -> None:
    with pytest.raises(SkyError, match="known distance"):
        in_shadow(FixedDirection(12.0, 34.0), VIEW, EPOCH_S, UNTIL_S)


def test_an_empty_window_is_refused() -> None:
    with pytest.raises(SkyError, match="ends after it begins"):
        sun_near(Sun(VIEW), VIEW, EPOCH_S, EPOCH_S, 1.0)


def test_spans_are_cut_at_the_window() -> None:
    nodes_s = np.linspace(0.0, 10.0, 11)
    found = spans(lambda t: (t < 2.25) | (t > 7.75), nodes_s)
    assert [(span.begin_s, span.end_s) for span in found] == [
        (0.0, pytest.approx(2.25, abs=1e-6)),
        (pytest.approx(7.75, abs=1e-6), 10.0),
    ]
