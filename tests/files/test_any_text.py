"""Whatever stands in a file, reading it gives a value or problems, never anything else."""

from contextlib import suppress
from pathlib import Path

from hypothesis import given
from hypothesis import strategies as st

from tests.files.station_text import RIGHT
from trunnion.files.plan import PlanFile, read_plan
from trunnion.files.problems import FileProblems
from trunnion.files.station import StationFile
from trunnion.files.station_checks import STATION_CHECKS
from trunnion.files.validation import validated
from trunnion.files.yaml_text import parse_yaml

EXAMPLE = Path(__file__).parents[2] / "config"
PLAN = (EXAMPLE / "plan.yaml").read_text(encoding="utf-8")
STATION = (EXAMPLE / "station.yaml").read_text(encoding="utf-8")

ODD = (
    *("", "~", "true", "[]", "{}", "[1]", "[1, 2]", "[a, {b: c}]", "{a: [b]}", "-", "&a b", "*a"),
    *("sun", "fixed:1,2", "fixed:1e400,2", "2026-12-01T01:00:00Z", "0001-01-01T00:00:00+23:59"),
    *("9999-12-31T23:59:59-23:59", "1e999", "0x10", "!!float 3", "'\\0'", '"\\0"', "/" * 300),
)
VALUES = st.one_of(
    st.integers().map(str),
    st.floats().map(repr),
    st.text(max_size=12),
    st.datetimes().map(str),
    st.sampled_from(ODD),
)


def with_values(text: str, changes: dict[int, str]) -> str:
    lines = text.splitlines()
    for number, value in changes.items():
        place = number % len(lines)
        key, colon, _ = lines[place].partition(":")
        lines[place] = f"{key}{colon} {value}"
    return "\n".join(lines)


CHANGES = st.dictionaries(st.integers(0, 200), VALUES, min_size=1, max_size=4)


@given(st.sampled_from([RIGHT, STATION]), CHANGES)
def test_a_station_file_is_right_or_its_problems_are_told(
    text: str, changes: dict[int, str]
) -> None:
    with suppress(FileProblems):
        parsed = parse_yaml(with_values(text, changes), "station.yaml")
        station = validated(StationFile, parsed, Path("/nowhere"), STATION_CHECKS)
        assert station.mount.first.rate_deg_s > 0
        assert station.safety.transmit_floor_deg >= station.safety.elevation_floor_deg


@given(CHANGES)
def test_a_plan_is_right_or_its_problems_are_told(changes: dict[int, str]) -> None:
    with suppress(FileProblems):
        plan: PlanFile = read_plan(parse_yaml(with_values(PLAN, changes), "plan.yaml"), Path())
        assert all(contact.from_s < contact.until_s for contact in plan.contacts)
