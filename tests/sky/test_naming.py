from contextlib import suppress

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.sky.stations import EARTH, NORTH
from trunnion.sky.builtin import builtin_target
from trunnion.sky.celestial import Celestial
from trunnion.sky.direction import IcrsDirection
from trunnion.sky.errors import SkyError
from trunnion.sky.fixed import FixedDirection
from trunnion.sky.instants import parse_utc
from trunnion.sky.naming import Body, FixedName, IcrsName, has_meaning, meaning
from trunnion.sky.refraction import NoRefraction
from trunnion.sky.sun import Sun
from trunnion.sky.viewpoint import Viewpoint

VIEW = Viewpoint(NORTH, EARTH, NoRefraction(), is_apparent=True)


@pytest.mark.parametrize(
    ("text", "meant"),
    [
        ("sun", Body.SUN),
        (" Moon ", Body.MOON),
        ("NEPTUNE", Body.NEPTUNE),
        ("fixed:251.3,-0.5", FixedName(251.3, -0.5)),
        ("icrs:83.633,22.014", IcrsName(83.633, 22.014)),
        ("ICRS: 217.4, -62.7, -3781.7, 769.5", IcrsName(217.4, -62.7, -3781.7, 769.5)),
        ("icrs:1,2,3,4,5", IcrsName(1.0, 2.0, 3.0, 4.0, 5.0)),
        ("QUILLON-1", None),
        ("sunny", None),
    ],
)
def test_a_text_means_what_it_says(text: str, meant: object) -> None:
    assert meaning(text) == meant


@pytest.mark.parametrize(
    "text",
    [
        *("fixed:", "fixed:12", "fixed:1,91", "fixed:nan,3", "fixed:1,2,3", "icrs:1", "icrs:1,2,3"),
        *("icrs:x,2", "icrs:361,0", "icrs:5,-90.1", "icrs:1e400,2", "icrs:1,2,3,4,5,6"),
    ],
)
def test_a_direction_that_is_none_is_refused(text: str) -> None:
    with pytest.raises(ValueError, match=r"expected (fixed|icrs):"):
        meaning(text)


@given(st.text() | st.text().map("icrs:{}".format) | st.text().map("fixed:{}".format))
def test_any_text_has_a_meaning_or_none_or_is_refused(text: str) -> None:
    with suppress(ValueError):
        assert meaning(text) is None or has_meaning(text.strip())


@pytest.mark.parametrize(
    ("text", "kind"),
    [
        ("sun", Sun),
        ("venus", Celestial),
        ("icrs:83.6,22.0", Celestial),
        ("fixed:1,2", FixedDirection),
    ],
)
def test_every_meaning_becomes_a_target_that_can_be_looked_at(text: str, kind: type) -> None:
    meant = meaning(text)
    assert meant is not None
    target = builtin_target(meant, VIEW)
    assert isinstance(target, kind)
    assert -90.0 <= target.look(parse_utc("2026-12-01T03:17:41Z")).elevation_deg <= 90.0


def test_an_ephemeris_file_that_is_none_is_refused(tmp_path: object) -> None:
    with pytest.raises(SkyError, match="no such file"):
        builtin_target(Body.MARS, VIEW, f"{tmp_path}/none.bsp")


@pytest.mark.parametrize(
    "values",
    [(1.0, 91.0), (float("nan"), 0.0), (1.0, 2.0, 3e4), (1.0, 2.0, 0.0, 0.0, -1.0)],
)
def test_a_direction_out_of_bounds_is_refused(values: tuple[float, ...]) -> None:
    with pytest.raises(SkyError, match="expected"):
        IcrsDirection(*values)
