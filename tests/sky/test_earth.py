"""Earth orientation: the table read as it is, no leap second smeared, and zero beyond its end."""

import pickle
from math import degrees
from pathlib import Path

import numpy as np
import pytest
from astropy_iers_data import IERS_A_FILE

from tests.sky.stations import EARTH
from trunnion.sky.earth import EarthOrientation
from trunnion.sky.errors import SkyError
from trunnion.sky.instants import parse_utc
from trunnion.sky.leap_seconds import LeapSeconds, mjd_to_utc_s

ROWS = Path(IERS_A_FILE).read_text(encoding="ascii").splitlines()
BOUND_S = 0.9
"""UT1 is kept within this of UTC (ITU-R TF.460)."""


def row(mjd: int) -> str:
    return next(line for line in ROWS if line[7:15].strip() == f"{mjd}.00")


@pytest.mark.parametrize(
    ("mjd", "ut1_s"),
    [(53101, -0.4399498), (57753, -0.4077601), (57754, 0.5912821)],
)
def test_a_days_begin_is_the_row_of_the_table(mjd: int, ut1_s: float) -> None:
    """Values read in finals2000A of the IERS (rows of 2004-04-06, 2016-12-31, 2017-01-01)."""
    ut1_minus_utc_s, _, _ = EARTH.at(mjd_to_utc_s(mjd))
    assert ut1_minus_utc_s == pytest.approx(ut1_s, abs=1e-9)


def test_the_pole_is_read_from_its_columns() -> None:
    """MJD 53101 in finals2000A: x −0.140722″, y 0.333536″."""
    _, x, y = EARTH.at(mjd_to_utc_s(53101))
    assert degrees(x) * 3600.0 == pytest.approx(-0.140722, abs=1e-9)
    assert degrees(y) * 3600.0 == pytest.approx(0.333536, abs=1e-9)


def test_a_leap_second_is_not_smeared_over_the_day_before() -> None:
    """−0.40823 s at noon of 2016-12-31, as astropy has it; a plain mean would give +0.09.

    astropy takes Bulletin B, the final values, and those differ by a hundredth of a millisecond.
    """
    ut1_minus_utc_s, _, _ = EARTH.at(parse_utc("2016-12-31T12:00:00Z"))
    assert ut1_minus_utc_s == pytest.approx(-0.4082312, abs=2e-5)
    before, _, _ = EARTH.at(parse_utc("2016-12-31T23:59:59.999Z"))
    after, _, _ = EARTH.at(parse_utc("2017-01-01T00:00:00Z"))
    assert after - before == pytest.approx(1.0, abs=1e-6)


def test_one_instant_and_many_agree_inside_and_outside_the_table() -> None:
    instants_s = np.array(
        [0.0, 1e8, 1.2e9 + 0.7, 1_483_228_799.9, 1_483_228_800.0, 1.7e9, EARTH.end_s, 5e9]
    )
    many = np.array(EARTH.at_many(instants_s)).T
    single = np.array([EARTH.at(float(each)) for each in instants_s])
    np.testing.assert_allclose(single, many, rtol=0.0, atol=1e-12)


def test_the_order_of_asking_does_not_matter() -> None:
    instants_s = [1.7e9, 1.2e9, 0.0, 5e9, 1.7e9 + 86_400.0, 1.7e9, 1e6]
    assert [EARTH.at(each) for each in instants_s] == [
        EarthOrientation.packaged().at(each) for each in instants_s
    ]


def test_beyond_the_table_everything_is_zero_and_it_says_so() -> None:
    assert EARTH.covers(EARTH.end_s - 1.0)
    assert EARTH.at(EARTH.end_s - 1.0)[0] != 0.0
    for outside_s in (EARTH.begin_s - 1.0, EARTH.end_s, EARTH.end_s + 1e7):
        assert not EARTH.covers(outside_s)
        assert EARTH.at(outside_s) == (0.0, 0.0, 0.0)


def test_without_a_table_everything_is_zero() -> None:
    none = EarthOrientation.none()
    assert not none.covers(1.7e9)
    assert none.at(1.7e9) == none.at(-1e6) == (0.0, 0.0, 0.0)
    assert not np.any(none.at_many(np.array([1.7e9, 1.8e9])))


def test_no_day_of_the_table_is_out_of_bounds() -> None:
    days_s = np.arange(EARTH.begin_s, EARTH.end_s, 43_200.0)
    ut1_minus_utc_s, x, y = EARTH.at_many(days_s)
    assert np.abs(ut1_minus_utc_s).max() < BOUND_S
    assert np.degrees(np.abs((x, y)).max()) * 3600.0 < 1.0


def test_it_travels_to_another_process() -> None:
    assert pickle.loads(pickle.dumps(EARTH)).at(1.7e9) == EARTH.at(1.7e9)


def written(folder: Path, *lines: str) -> Path:
    path = folder / "finals2000A"
    path.write_text("\n".join(lines) + "\n", encoding="ascii")
    return path


def test_rows_with_a_date_alone_end_the_table(tmp_path: Path) -> None:
    blank = row(61335)[:16]
    table = EarthOrientation.from_finals(written(tmp_path, row(53101), row(53102), blank))
    assert table.covers(mjd_to_utc_s(53101) + 1.0)
    assert not table.covers(mjd_to_utc_s(53102) + 1.0)


@pytest.mark.parametrize(
    ("lines", "message"),
    [
        ([], "expected an Earth orientation table"),
        ([row(53101)], "expected an Earth orientation table"),
        ([row(53101), row(53103)], "one row a day, got a gap"),
        ([row(53101), row(53101)], "one row a day, got a gap"),
        ([row(53101), row(53102).replace("0.3", "o.3")], "finals2000A:2: expected a row"),
        (["<html>" + "x" * 100], "finals2000A:1: expected a row"),
    ],
)
def test_what_is_no_table_is_refused(tmp_path: Path, lines: list[str], message: str) -> None:
    with pytest.raises(SkyError, match=message):
        EarthOrientation.from_finals(written(tmp_path, *lines))


def test_a_missing_table_is_told(tmp_path: Path) -> None:
    with pytest.raises(SkyError, match="missing: No such file"):
        EarthOrientation.from_finals(tmp_path / "missing")


@pytest.mark.parametrize(
    ("instant", "seconds"),
    [
        ("1960-01-01T00:00:00Z", 10.0),
        ("2003-06-01T00:00:00Z", 32.0),
        ("2008-01-17T00:00:00Z", 33.0),
        ("2016-12-31T23:59:59.9Z", 36.0),
        ("2017-01-01T00:00:00Z", 37.0),
        ("2017-09-01T00:00:00Z", 37.0),
    ],
)
def test_leap_seconds_as_in_erfas_own_test(instant: str, seconds: float) -> None:
    """Source: ERFA, `t_erfa_c.c`, `t_dat`; and the last leap second of Leap_Second.dat."""
    table = LeapSeconds.packaged()
    assert table.at(parse_utc(instant)) == seconds
    assert table.at_many(np.array([parse_utc(instant)]))[0] == seconds


def test_the_table_of_leap_seconds_says_when_it_ends() -> None:
    assert LeapSeconds.packaged().expires_s > parse_utc("2024-01-01T00:00:00Z")


def test_what_is_no_table_of_leap_seconds_is_refused(tmp_path: Path) -> None:
    path = tmp_path / "leap"
    path.write_text("# nothing\n")
    with pytest.raises(SkyError, match="expected a table of leap seconds"):
        LeapSeconds.from_file(path)
