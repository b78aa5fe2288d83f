"""For all tests of the command line: whatever terminal they are started from, none is there."""

import pytest


@pytest.fixture(autouse=True)
def no_terminal(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.delenv("COLUMNS", raising=False)
