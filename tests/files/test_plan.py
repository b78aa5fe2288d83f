from pathlib import Path

import pytest

from trunnion.files.plan import PlanFile, load_plan
from trunnion.files.problems import FileProblems
from trunnion.sky.instants import parse_utc

RIGHT = """\
contacts:
  - target: QUILLON-1
    from: 2026-12-01T01:02:11.5Z
    until: 2026-12-01T12:11:43+09:30
  - id: noon
    target: sun
    from: 2026-12-01T01:55:00Z
    until: 2026-12-01T02:11:00Z
    priority: 20
    wishes:
      minimum_elevation_deg: 12.5
      note: clouds do not matter
"""


def loaded(folder: Path, text: str) -> PlanFile:
    file = folder / "plan.yaml"
    file.write_text(text, encoding="utf-8")
    return load_plan(file)


def problems_of(folder: Path, text: str) -> list[str]:
    with pytest.raises(FileProblems) as caught:
        loaded(folder, text)
    return [str(problem).removeprefix(f"{folder}/") for problem in caught.value.problems]


def test_contacts_are_read_with_their_defaults(tmp_path: Path) -> None:
    quillon, sun = loaded(tmp_path, RIGHT).contacts
    assert quillon.target == "QUILLON-1"
    assert quillon.from_s == parse_utc("2026-12-01T01:02:11.5Z")
    assert quillon.until_s == parse_utc("2026-12-01T02:41:43Z")
    assert quillon.id == "QUILLON-1-20261201T010211Z"
    assert quillon.priority == 50
    assert quillon.wishes.minimum_elevation_deg is None
    assert (sun.id, sun.priority, sun.wishes.minimum_elevation_deg) == ("noon", 20, 12.5)


def test_a_catalogue_number_is_a_target(tmp_path: Path) -> None:
    quillon, _ = loaded(tmp_path, RIGHT.replace("QUILLON-1", "90117")).contacts
    assert (quillon.target, quillon.id) == ("90117", "90117-20261201T010211Z")


def test_a_generated_id_serves_as_a_file_name(tmp_path: Path) -> None:
    direction, _ = loaded(tmp_path, RIGHT.replace("QUILLON-1", "fixed:251.3,18.5")).contacts
    assert direction.id == "fixed-251.3-18.5-20261201T010211Z"


def test_a_plan_may_be_empty_but_must_say_so(tmp_path: Path) -> None:
    assert loaded(tmp_path, "contacts: []\n").contacts == ()
    assert problems_of(tmp_path, "contacts:\n") == [
        "plan.yaml:1: contacts: expected a list, got nothing"
    ]
    assert problems_of(tmp_path, "{}\n") == [
        "plan.yaml:1: contacts: this key is required, and missing"
    ]


@pytest.mark.parametrize(
    ("old", "new", "line", "message"),
    [
        ("until: 2026-12-01T02:11:00Z", "until: 2026-12-01T01:55:00Z", 8, "a time after `from`"),
        ("until: 2026-12-01T02:11:00Z", "until: 2026-12-09T02:11:00Z", 8, "at most 7 days"),
        ("until: 2026-12-01T02:11:00Z", "until: 2026-12-01T02:11:00", 8, "expected"),
        ("until: 2026-12-01T02:11:00Z", "until: tomorrow", 8, "expected"),
        ("until: 2026-12-01T02:11:00Z", "until: 20261201", 8, "expected a time like"),
        ("target: sun", "target: fixed:12", 6, "expected fixed:AZIMUTH,ELEVATION"),
        ("target: sun", "target:", 6, "expected a text, got nothing"),
        ("id: noon", "id: high noon", 5, "expected at most 80 letters"),
        ("id: noon", "id: QUILLON-1-20261201T010211Z", 5, "expected an id of its own"),
        ("priority: 20", "priority: 101", 9, "expected 100 or less, got 101"),
        ("priority: 20", "priority: 2.5", 9, "expected a whole number, got 2.5"),
        ("priority: 20", "prioriti: 20", 9, "unknown key; did you mean 'priority'?"),
        ("minimum_elevation_deg", "minimum_elevation", 11, "mean 'minimum_elevation_deg'?"),
        ("from: 2026-12-01T01:55:00Z", "form: 2026-12-01T01:55:00Z", 7, "did you mean 'from'?"),
    ],
)
def test_each_mistake_is_named_with_its_line(
    tmp_path: Path, old: str, new: str, line: int, message: str
) -> None:
    found = problems_of(tmp_path, RIGHT.replace(old, new))
    assert any(p.startswith(f"plan.yaml:{line}: contacts[2]") and message in p for p in found)


def test_all_mistakes_of_all_contacts_come_at_once(tmp_path: Path) -> None:
    text = RIGHT.replace("+09:30", "").replace("T02:11:00Z", "T01:11:00Z").replace("y: 20", "y: -1")
    lines = [problem.split(":")[1] for problem in problems_of(tmp_path, text)]
    assert lines == ["4", "8", "9"]
