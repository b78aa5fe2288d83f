"""How long records are kept."""

from pathlib import Path

import pytest

from tests.service.records.story import UTC_S, sample, start
from tests.service.stations import station_with
from trunnion.service.records.queries import Records
from trunnion.service.records.retention import Retention, retention_of
from trunnion.service.records.store import RecordStore
from trunnion.service.records.values import Event, EventKind


@pytest.fixture
def path(tmp_path: Path) -> Path:
    return tmp_path / "records.sqlite3"


def test_the_station_file_says_how_much_is_kept(tmp_path: Path) -> None:
    keys = {"records_keep_days: null": "records_keep_days: 37.5", "most_mib: 512": "most_mib: 17"}
    assert retention_of(station_with(tmp_path, keys)) == Retention(37.5, 17 * 2**20)


def test_what_is_older_than_it_may_be_goes_a_little_at_a_time(path: Path) -> None:
    store = RecordStore(path)
    for day in range(5):
        utc_s = UTC_S + 86_400.0 * day
        store.write([start(f"A-{day}", utc_s), sample(0, utc_s)])
    retention = Retention(longest_days=2.5)
    for _ in range(5):
        store.forget(retention, UTC_S + 4 * 86_400.0)
    store.close()
    with Records(path) as records:
        assert [each.contact for each in records.contacts()] == ["A-4", "A-3", "A-2"]
        assert [each.samples for each in records.contacts()] == [1, 1, 1]


def test_the_file_does_not_outgrow_its_size_and_summaries_stay(path: Path) -> None:
    store = RecordStore(path)
    largest_bytes = 3_000_000
    retention = Retention(largest_bytes=largest_bytes)
    sizes = []
    for contact in range(12):
        store.write([start(f"A-{contact}", UTC_S + 700.0 * contact)])
        for _ in range(4):
            store.write([sample(turn) for turn in range(1000)])
            store.forget(retention, UTC_S)
        sizes.append(path.stat().st_size)
    store.close()
    assert max(sizes) < 2 * largest_bytes
    with Records(path) as records:
        contacts = records.contacts()
        assert len(contacts) == 12
        assert contacts[0].samples == 4000
        assert contacts[-1].samples == 0


def test_a_clock_set_far_ahead_does_not_cost_the_records(path: Path) -> None:
    store = RecordStore(path)
    store.write([start("A-1", UTC_S), sample(0), start("A-2", UTC_S + 700.0)])
    for _ in range(5):
        store.forget(Retention(longest_days=30.0), UTC_S + 9e8)
    store.close()
    with Records(path) as records:
        assert len(records.contacts()) == 2


def test_a_flood_of_events_is_bounded_too(path: Path) -> None:
    store = RecordStore(path)
    for batch in range(30):
        store.write([Event(UTC_S, EventKind.TROUBLE, f"{batch} " + 200 * "x") for _ in range(300)])
        store.forget(Retention(largest_bytes=400_000), UTC_S)
    store.close()
    assert path.stat().st_size < 1_000_000
    with Records(path) as records:
        assert records.events(limit=1)[0].sentence.startswith("29 ")
