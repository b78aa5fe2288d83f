"""Angle tables: what is read, and what is refused in which words."""

from contextlib import suppress
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion.files.angle_table import load_angle_table, read_angle_table
from trunnion.files.problems import FileProblems
from trunnion.files.target_file import load_target_file
from trunnion.sky.angle_table import AngleTable

TABLE = """time,azimuth_deg,elevation_deg,range_km
2026-12-01T10:15:00Z,359.1,10.3,1800.5
2026-12-01T10:15:10Z,0.2,10.9,1760.2

2026-12-01T11:15:20+01:00,1.3,11.4,1720.0
"""


def problems(text: str) -> list[tuple[int | None, str]]:
    with pytest.raises(FileProblems) as caught:
        read_angle_table(Path("table.csv"), text)
    return [(each.line, each.message) for each in caught.value.problems]


def test_a_table_is_read_and_named_by_its_file(tmp_path: Path) -> None:
    path = tmp_path / "moonbounce.csv"
    path.write_text(TABLE)
    for table in (load_angle_table(path), load_target_file(path)):
        assert isinstance(table, AngleTable)
        assert table.name == "moonbounce"
        assert [row.azimuth_deg for row in table.rows] == [359.1, 0.2, 1.3]
        assert table.rows[2].utc_s - table.rows[0].utc_s == 20.0
        assert table.rows[1].range_km == 1760.2


def test_columns_may_stand_in_any_order_and_the_range_may_be_missing() -> None:
    text = "elevation_deg, time, azimuth_deg\n5,2026-12-01T10:15:00Z,7\n6,2026-12-01T10:16:00Z,8\n"
    table = read_angle_table(Path("t.csv"), text)
    assert table.rows[1][1:] == (8.0, 6.0, None)


def test_everything_wrong_is_told_with_its_line() -> None:
    text = TABLE.replace("10:15:10Z", "10:15:10").replace("11.4", "high")
    naive, number = problems(text)
    assert (naive[0], number) == (3, (5, "expected a number, got 'high'"))
    assert "with Z or an offset" in naive[1]


@pytest.mark.parametrize(
    ("before", "after", "line", "answer"),
    [
        ("range_km", "distance", 1, "expected the columns time, azimuth_deg"),
        ("azimuth_deg", "azimut_deg", 1, "expected a column 'azimuth_deg'"),
        ("10:15:10Z", "10:14:10Z", 3, "expected a time after that of the row before it"),
        ("10.9", "90.9", 3, "expected an azimuth of -360 to 360"),
        ("0.2,10.9,1760.2", "0.2,10.9", 3, "expected 4 values, got 3"),
        ("1760.2", "", 3, "expected a range in every row or in none"),
        ("1760.2", "inf", 3, "expected finite numbers"),
    ],
)
def test_a_mistake_is_told_with_its_line(before: str, after: str, line: int, answer: str) -> None:
    found = problems(TABLE.replace(before, after))
    assert (line, answer) in [(number, sentence[: len(answer)]) for number, sentence in found]


@pytest.mark.parametrize("text", ["", "\n\n", "time,azimuth_deg,elevation_deg\n"])
def test_a_table_without_rows_is_refused(text: str) -> None:
    assert problems(text)


@given(st.text(alphabet="time,azimuth_deg\n\r\"'0123456789.:-TZ\x00é", max_size=300))
def test_any_text_is_a_table_or_has_problems(text: str) -> None:
    for whole in (text, TABLE + text, TABLE[:40] + "\n" + text):
        with suppress(FileProblems):
            read_angle_table(Path("t.csv"), whole)
