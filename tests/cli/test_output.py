"""What a nested result looks like to people."""

from pathlib import Path

import pytest
from typer.testing import CliRunner

from tests.service.stations import write_station
from trunnion.cli.main import build_app
from trunnion.cli.output import flattened


def test_units_stand_in_brackets_and_numbers_have_three_places() -> None:
    told = {
        "mount": {"reading_deg": [12.34567, -1.0], "reading_age_s": 0.0493044},
        "wind_gust_m_s": 7.25,
        "range_km": None,
        "is_planning": False,
        "phase": "tracking",
    }
    assert list(flattened(told)) == [
        ("mount: reading [°]", "12.346; -1.000"),
        ("mount: reading age [s]", "0.049"),
        ("wind gust [m/s]", "7.250"),
        ("range [km]", "none"),
        ("is planning", "no"),
        ("phase", "tracking"),
    ]


@pytest.mark.parametrize(("columns", "least", "most"), [("72", 50, 72), (None, 73, 160)])
def test_a_table_that_is_piped_is_as_wide_as_columns_says(
    tmp_path: Path, columns: str | None, least: int, most: int
) -> None:
    command = ["check", str(write_station(tmp_path)), "--now", "2026-12-01T00:00Z"]
    printed = CliRunner().invoke(build_app(), command, env={"COLUMNS": columns}).stdout
    rule = next(line for line in printed.splitlines() if line.startswith("─"))
    assert least <= len(rule) <= most
