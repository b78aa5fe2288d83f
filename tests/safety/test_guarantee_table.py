"""The developers' table of guarantees names tests that exist, for all eight of them."""

import re
from pathlib import Path

from tests.safety import test_guarantees

NOTES = Path(__file__).parents[2] / "DEVELOPERS.md"
ROW = re.compile(r"^\| (\d) \| [^|]+ \| ([^|]+) \|$", re.MULTILINE)


def test_every_guarantee_names_tests_that_exist() -> None:
    rows = ROW.findall(NOTES.read_text())
    named = {number: re.findall(r"`(test_\w+)`", tests) for number, tests in rows}
    assert list(named) == list("12345678")
    for number, tests in named.items():
        assert tests
        assert all(name.startswith(f"test_{number}_") for name in tests)
        assert all(callable(getattr(test_guarantees, name, None)) for name in tests)
