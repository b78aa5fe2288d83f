from datetime import UTC, datetime

import pytest

from trunnion.files.instant_text import parse_instant


def test_an_instant_is_posix_seconds() -> None:
    noon_s = datetime(2026, 12, 1, 3, 17, 5, 250_000, tzinfo=UTC).timestamp()
    assert parse_instant("2026-12-01T12:47:05.25+09:30") == noon_s


@pytest.mark.parametrize("text", ["1957-10-04T00:00:00Z", "2100-01-01T00:00:00Z"])
def test_the_time_of_spacecraft_is_taken(text: str) -> None:
    assert datetime.fromtimestamp(parse_instant(text), UTC) == datetime.fromisoformat(text)


@pytest.mark.parametrize(
    "text",
    [
        "1957-10-03T23:59:59Z",
        "2100-01-01T00:00:01Z",
        "0001-01-01T00:00:00+23:59",
        "9999-12-31T23:59:59-23:59",
    ],
)
def test_another_century_is_refused(text: str) -> None:
    with pytest.raises(ValueError, match="expected a time from 1957-10-04 to 2100-01-01, got"):
        parse_instant(text)


@pytest.mark.parametrize("text", ["2026-12-01T01:00:00", "2026-12-01", "noon", "", "1796086932"])
def test_a_time_without_an_offset_is_refused(text: str) -> None:
    with pytest.raises(ValueError, match="expected a time like"):
        parse_instant(text)
