"""Instants: what is read, what is refused, and that nothing is lost on the way."""

from contextlib import suppress
from datetime import UTC, datetime
from math import isfinite

import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion.sky.instants import format_utc, julian_date, parse_utc

SPAN_S = st.floats(-2_208_988_800.0, 4_102_444_800.0)
"""1900 to 2100."""


@pytest.mark.parametrize(
    ("text", "utc_s"),
    [
        ("1970-01-01T00:00:00Z", 0.0),
        ("2026-12-01T10:15:30.25Z", 1796120130.25),
        ("2026-12-01T12:45:30+02:30", 1796120130.0),
        (" 2026-12-01T05:15:30-05:00 ", 1796120130.0),
        ("2026-12-01 10:15Z", 1796120100.0),
    ],
)
def test_times_with_z_or_an_offset_are_read(text: str, utc_s: float) -> None:
    assert parse_utc(text) == utc_s


@pytest.mark.parametrize(
    "text",
    ["", "now", "2026-12-01T10:15:30", "2026-13-01T10:15:30Z", "10:15Z", "2026-02-29T00:00Z"],
)
def test_naive_and_unreadable_times_are_refused(text: str) -> None:
    with pytest.raises(ValueError, match="expected a time like"):
        parse_utc(text)


def test_a_leap_second_is_refused_by_name() -> None:
    with pytest.raises(ValueError, match="no leap second"):
        parse_utc("2016-12-31T23:59:60Z")


@given(st.text(max_size=40))
def test_any_text_is_read_or_refused_as_a_value_error(text: str) -> None:
    with suppress(ValueError):
        assert isfinite(parse_utc(text))


@given(SPAN_S)
def test_written_and_read_again_it_is_the_same_to_the_digits_written(utc_s: float) -> None:
    assert parse_utc(format_utc(utc_s, 6)) == pytest.approx(utc_s, abs=1e-6)
    assert parse_utc(format_utc(utc_s, 0)) == pytest.approx(utc_s, abs=0.501)


def test_writing_rounds_and_carries_over() -> None:
    utc_s = parse_utc("2026-12-31T23:59:59.9996Z")
    assert format_utc(utc_s) == "2027-01-01T00:00:00.000Z"
    assert format_utc(utc_s, 0) == "2027-01-01T00:00:00Z"
    assert format_utc(-0.25, 2) == "1969-12-31T23:59:59.75Z"


@given(SPAN_S)
def test_a_julian_date_is_a_midnight_and_the_share_of_a_day(utc_s: float) -> None:
    midnight, fraction = julian_date(utc_s)
    assert midnight % 1.0 == 0.5
    assert 0.0 <= fraction <= 1.0
    assert (midnight - 2440587.5) * 86400.0 + fraction * 86400.0 == pytest.approx(utc_s, abs=1e-6)


def test_the_julian_date_of_a_known_instant() -> None:
    """J2000 began at Julian date 2451545.0, by its definition (IAU 1994, resolution C7)."""
    noon = datetime(2000, 1, 1, 12, tzinfo=UTC).timestamp()
    assert julian_date(noon) == (2451544.5, 0.5)
