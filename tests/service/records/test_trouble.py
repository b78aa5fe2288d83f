"""Records on a disk that fails: the writer says so, drops, and comes back."""

import sqlite3
import subprocess
import sys
import threading
from pathlib import Path

import pytest

from tests.service.records.story import UTC_S, sample, start
from trunnion.service.clock import VirtualClock
from trunnion.service.records.queries import NoRecords, Records
from trunnion.service.records.values import EventKind, Outcome
from trunnion.service.records.writer import RecordWriter


@pytest.fixture
def path(tmp_path: Path) -> Path:
    return tmp_path / "records.sqlite3"


def test_a_locked_file_costs_samples_and_nothing_else(path: Path) -> None:
    writer = RecordWriter(path, VirtualClock(UTC_S))
    writer.flush()
    other = sqlite3.connect(path, isolation_level=None)
    other.execute("BEGIN IMMEDIATE")
    writer.begin_contact(start())
    writer.sample(sample(1))
    writer.event(UTC_S, EventKind.STOP, "stopped: smoke")
    assert writer.flush(timeout_s=30.0)
    assert "locked" in str(writer.trouble)
    assert writer.dropped == 1
    other.execute("ROLLBACK")
    other.close()
    writer.sample(sample(2))
    writer.end_contact(UTC_S + 9.0, Outcome.DONE, {})
    assert writer.flush()
    assert writer.trouble is None
    writer.close()
    with Records(path) as records:
        (contact,) = records.contacts()
        assert (contact.outcome, contact.samples) == (Outcome.DONE, 1)
        assert [each.sentence for each in records.events()] == ["stopped: smoke"]


def test_a_folder_that_is_not_there_yet_comes(tmp_path: Path) -> None:
    obstacle = tmp_path / "disk"
    obstacle.write_text("not a folder")
    writer = RecordWriter(obstacle / "records.sqlite3", VirtualClock(UTC_S))
    writer.begin_contact(start())
    writer.flush()
    assert "cannot be written" in str(writer.trouble)
    obstacle.unlink()
    writer.flush()
    assert writer.trouble is None
    writer.close()
    with Records(obstacle / "records.sqlite3") as records:
        assert records.contacts()[0].contact == "A-17"


@pytest.mark.parametrize("content", [b"garbage " * 900, b"SQLite format 3\0" + b"\x5a" * 9000])
def test_a_damaged_file_is_moved_aside_and_a_new_one_begun(path: Path, content: bytes) -> None:
    path.write_bytes(content)
    writer = RecordWriter(path, VirtualClock(UTC_S))
    writer.flush()
    writer.begin_contact(start())
    writer.flush()
    assert writer.trouble is None
    writer.close()
    assert path.with_name(path.name + ".damaged-1").read_bytes() == content
    with Records(path) as records:
        assert records.contacts()[0].contact == "A-17"


def test_a_second_writer_is_told_off_and_the_first_one_goes_on(path: Path) -> None:
    first = RecordWriter(path, VirtualClock(UTC_S))
    first.flush()
    second = RecordWriter(path, VirtualClock(UTC_S))
    second.flush()
    assert "another daemon writes to this file" in str(second.trouble)
    assert first.trouble is None
    first.close()
    second.flush()
    assert second.trouble is None
    second.close()


def test_putting_never_waits_and_what_is_too_much_is_counted(path: Path) -> None:
    other = sqlite3.connect(path, isolation_level=None)
    other.execute("BEGIN EXCLUSIVE")
    writer = RecordWriter(path, VirtualClock(UTC_S), most_waiting=100)
    for turn in range(1000):
        writer.sample(sample(turn))
    assert writer.dropped >= 800
    other.execute("ROLLBACK")
    other.close()
    writer.close()


def test_many_threads_may_tell_at_once(path: Path) -> None:
    writer = RecordWriter(path, VirtualClock(UTC_S))
    threads = [threading.Thread(target=tell_often, args=(writer,)) for _ in range(4)]
    for thread in threads:
        thread.start()
    for thread in threads:
        thread.join()
    writer.close()
    with Records(path) as records:
        assert len(records.events(limit=1000)) == 800


def tell_often(writer: RecordWriter) -> None:
    for turn in range(200):
        writer.event(UTC_S + turn, EventKind.STATE, f"turn {turn}")


def test_a_full_disk_costs_samples_is_said_and_is_got_over(path: Path) -> None:
    root = Path(__file__).parents[3]
    child = [sys.executable, "-m", "tests.service.records.full_disk", str(path)]
    told = subprocess.run(child, cwd=root, check=True, timeout=60, capture_output=True, text=True)
    trouble, after, lost = told.stdout.splitlines()
    assert trouble.startswith("records cannot be written: ")
    assert after == "None"
    with Records(path) as records:
        (contact,) = records.contacts()
        assert (contact.outcome, contact.summary) == (Outcome.DONE, {"rms_error_deg": 0.07})
        assert contact.samples + int(lost) == 20_000
        assert 0 < contact.samples < 20_000
        assert [each.sentence for each in records.events()] == ["while the disk was full"]


def test_records_that_are_removed_are_begun_anew_with_the_contact_under_way(path: Path) -> None:
    writer = RecordWriter(path, VirtualClock(UTC_S))
    writer.begin_contact(start())
    writer.sample(sample(1))
    writer.flush()
    for each in path.parent.iterdir():
        each.unlink()
    writer.sample(sample(2))
    writer.end_contact(UTC_S + 9.0, Outcome.DONE, {})
    writer.flush()
    writer.close()
    with Records(path) as records:
        (contact,) = records.contacts()
        assert (contact.contact, contact.outcome, contact.samples) == ("A-17", Outcome.DONE, 1)


def test_records_damaged_in_mid_contact_are_begun_anew_with_it(path: Path) -> None:
    writer = RecordWriter(path, VirtualClock(UTC_S))
    writer.begin_contact(start())
    for turn in range(3000):
        writer.sample(sample(turn))
    writer.flush()
    checkpoint(path)
    with path.open("r+b") as file:
        file.write(b"\x5a" * path.stat().st_size)
    for turn in range(40):
        writer.sample(sample(turn))
        writer.flush()
    writer.end_contact(UTC_S + 9.0, Outcome.DONE, {})
    writer.flush()
    assert writer.trouble is None
    writer.close()
    with Records(path) as records:
        assert records.contacts()[0].outcome is Outcome.DONE
    assert path.with_name(path.name + ".damaged-1").exists()


def checkpoint(path: Path) -> None:
    """Have everything in the database file itself, so that damaging it is damage indeed."""
    connection = sqlite3.connect(path)
    connection.execute("PRAGMA wal_checkpoint(TRUNCATE)")
    connection.close()


def test_a_second_damaged_file_does_not_replace_the_first_one(path: Path) -> None:
    for content in (b"first garbage " * 900, b"second garbage " * 900):
        path.write_bytes(content)
        writer = RecordWriter(path, VirtualClock(UTC_S))
        writer.flush()
        writer.flush()
        writer.close()
    kept = [path.with_name(f"{path.name}.damaged-{number}").read_bytes() for number in (1, 2)]
    assert [content[:5] for content in kept] == [b"first", b"secon"]


def test_the_records_of_a_later_version_are_left_alone(path: Path) -> None:
    writer = RecordWriter(path, VirtualClock(UTC_S))
    writer.begin_contact(start())
    writer.close()
    later = sqlite3.connect(path)
    later.execute("PRAGMA user_version = 99")
    later.close()
    writer = RecordWriter(path, VirtualClock(UTC_S))
    writer.sample(sample())
    writer.flush()
    assert "version 1 or older, got 99" in str(writer.trouble)
    writer.close()
    with pytest.raises(NoRecords, match="got 99"):
        Records(path)
