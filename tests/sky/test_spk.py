"""Ephemeris files: what is refused, and a copy in another process."""

import pickle
from pathlib import Path

import pytest

from tests.published.reference_sky import EPHEMERIS
from tests.sky.stations import EARTH, EPOCH_S, NORTH
from trunnion.sky.celestial import Celestial
from trunnion.sky.errors import NoPosition, SkyError
from trunnion.sky.instants import parse_utc
from trunnion.sky.naming import Body
from trunnion.sky.refraction import NoRefraction
from trunnion.sky.spk import SpkBody
from trunnion.sky.viewpoint import Viewpoint

VIEW = Viewpoint(NORTH, EARTH, NoRefraction(), is_apparent=True)


def test_a_file_that_is_none_is_refused(tmp_path: Path) -> None:
    path = tmp_path / "noise.bsp"
    path.write_bytes(b"no ephemeris at all" * 100)
    with pytest.raises(SkyError, match=r"noise.bsp: expected a JPL ephemeris \(SPK\)"):
        SpkBody(Body.MARS, str(path))
    with pytest.raises(SkyError, match="no such file"):
        SpkBody(Body.MARS, str(tmp_path / "none.bsp"))


def test_outside_the_span_of_the_file_there_is_no_position() -> None:
    target = Celestial(SpkBody(Body.MARS, str(EPHEMERIS)), VIEW)
    with pytest.raises(NoPosition, match="mars: expected an instant of 18"):
        target.look(parse_utc("2060-01-01T00:00:00Z"))


def test_a_pickled_copy_gives_the_same_numbers() -> None:
    target = Celestial(SpkBody(Body.VENUS, str(EPHEMERIS)), VIEW)
    assert pickle.loads(pickle.dumps(target)).look(EPOCH_S) == target.look(EPOCH_S)
