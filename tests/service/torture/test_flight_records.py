"""The records of a flight: written while there is room, opened again after every death."""

from pathlib import Path

import pytest

from trunnion.service.clock import VirtualClock
from trunnion.service.records.queries import Records
from trunnion.service.records.values import EventKind
from trunnion.service.torture.records import BATCH, TroubledBook, cannot_open

START_UTC_S = 1_796_083_217.3


def book(folder: Path) -> TroubledBook:
    return TroubledBook(folder / "records", VirtualClock(START_UTC_S, 71.5))


def tell(records: TroubledBook, sentence: str, *, is_full: bool = False) -> None:
    records.event(START_UTC_S, EventKind.STATE, sentence)
    for _ in range(BATCH):
        records.turn_over(is_full=is_full)


def told(folder: Path) -> set[str]:
    with Records(folder / "records") as records:
        return {each.sentence for each in records.events()}


@pytest.mark.parametrize("is_torn", [False, True])
def test_after_a_death_the_records_open_and_go_on(tmp_path: Path, is_torn: bool) -> None:
    first = book(tmp_path)
    for number in range(7):
        tell(first, f"before {number}")
    first.die(is_torn=is_torn)
    assert cannot_open(tmp_path / "records") is None
    second = book(tmp_path)
    tell(second, "after")
    assert second.trouble is None
    second.die(is_torn=False)
    assert "after" in told(tmp_path)
    assert ("before 6" in told(tmp_path)) is not is_torn
    assert "before 0" in told(tmp_path)


def test_what_a_full_disk_cannot_take_waits(tmp_path: Path) -> None:
    records = book(tmp_path)
    tell(records, "before")
    tell(records, "while full", is_full=True)
    assert told(tmp_path) == {"before"}
    tell(records, "after")
    assert told(tmp_path) == {"before", "while full", "after"}
    records.die(is_torn=False)


def test_records_that_cannot_be_opened_are_told(tmp_path: Path) -> None:
    (tmp_path / "records").write_bytes(b"not a database at all, whatever it says" * 40)
    assert "not a database" in str(cannot_open(tmp_path / "records"))
