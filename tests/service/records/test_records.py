"""Records, written and read back through the file itself."""

import sqlite3
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

from tests.service.records.story import UTC_S, sample, start
from trunnion.service.clock import VirtualClock
from trunnion.service.records.export import csv_lines
from trunnion.service.records.queries import EventRecord, NoRecords, Records
from trunnion.service.records.values import EventKind, Outcome
from trunnion.service.records.writer import RecordWriter


@pytest.fixture
def path(tmp_path: Path) -> Path:
    return tmp_path / "state" / "records.sqlite3"


@pytest.fixture
def writer(path: Path) -> Iterator[RecordWriter]:
    opened = RecordWriter(path, VirtualClock(UTC_S))
    yield opened
    opened.close()


def put_one_contact(writer: RecordWriter, turns: int = 3) -> None:
    writer.begin_contact(start())
    for turn in range(turns):
        writer.sample(sample(turn))
    writer.event(UTC_S + 0.2, EventKind.INTERVENTION, "slowed to 6°/s")
    writer.end_contact(UTC_S + 611.5, Outcome.DONE, {"worst_error_deg": 0.31})


def test_a_contact_comes_back_as_it_went_in(writer: RecordWriter, path: Path) -> None:
    put_one_contact(writer)
    assert writer.flush()
    with Records(path) as records:
        (contact,) = records.contacts()
        assert contact == records.contact(contact.contact_id)
        assert (contact.contact, contact.target) == ("A-17", "LANTERN-G")
        assert (contact.begin_utc_s, contact.end_utc_s) == (UTC_S, UTC_S + 611.5)
        assert (contact.planned_begin_s, contact.planned_end_s) == (UTC_S + 2.5, UTC_S + 611.25)
        assert contact.outcome is Outcome.DONE
        assert contact.summary == {"worst_error_deg": 0.31}
        assert contact.samples == 3
        first, second, _ = records.samples(contact.contact_id)
        assert second.utc_s == UTC_S + 0.125
        assert first[1:] == (
            *("tracking", 211.7, 33.1, 1234.5, 0.021),
            *(-148.3, 33.2, 0.32, 0.18),
            *(-148.4, 33.15, 0.3, 0.16),
            *(-148.5, 33.05, 0.0625, "rate"),
        )
        assert records.events() == records.events(contact_id=contact.contact_id)
        assert records.events() == (
            EventRecord(UTC_S + 0.2, EventKind.INTERVENTION, "slowed to 6°/s", contact.contact_id),
        )
        assert records.contact(contact.contact_id + 1) is None


def test_a_halt_without_anything_known_is_a_sample_too(writer: RecordWriter, path: Path) -> None:
    writer.begin_contact(start())
    writer.sample(
        sample()._replace(look=None, error_deg=None, demand=None, order=None, reading=None)
    )
    writer.flush()
    with Records(path) as records:
        (kept,) = records.samples(records.contacts()[0].contact_id)
        assert kept == (UTC_S, "tracking", *(None,) * 15, "rate")


def test_a_contact_is_under_way_while_its_writer_lives(writer: RecordWriter, path: Path) -> None:
    writer.begin_contact(start())
    writer.sample(sample(4))
    writer.flush()
    with Records(path) as records:
        assert records.contacts()[0].outcome is Outcome.UNDER_WAY


def test_newest_first_and_no_more_than_asked_for(writer: RecordWriter, path: Path) -> None:
    for number in range(5):
        writer.begin_contact(start(f"A-{number}"))
        writer.event(UTC_S + number, EventKind.STATE, f"contact {number}")
        writer.end_contact(UTC_S + 9.0, Outcome.CUT_SHORT, {})
    writer.flush()
    with Records(path) as records:
        assert [each.contact for each in records.contacts(limit=2)] == ["A-4", "A-3"]
        assert [each.sentence for each in records.events(limit=2)] == ["contact 4", "contact 3"]


def test_a_contact_that_begins_over_another_ends_it(writer: RecordWriter, path: Path) -> None:
    writer.begin_contact(start("A-17"))
    writer.begin_contact(start("B-3", UTC_S + 77.5))
    writer.flush()
    with Records(path) as records:
        newer, older = records.contacts()
        assert (older.outcome, older.end_utc_s) == (Outcome.CUT_SHORT, UTC_S + 77.5)
        assert (newer.contact, newer.outcome) == ("B-3", Outcome.UNDER_WAY)


def test_a_summary_that_json_cannot_hold_does_not_cost_the_contact(
    writer: RecordWriter, path: Path
) -> None:
    writer.begin_contact(start())
    writer.end_contact(UTC_S + 9.0, Outcome.DONE, {"rms": float("nan")})
    writer.flush()
    with Records(path) as records:
        assert "nan" in str(records.contacts()[0].summary["unwritable"])


def test_closing_writes_what_waits(path: Path) -> None:
    writer = RecordWriter(path, VirtualClock(UTC_S))
    put_one_contact(writer)
    writer.close()
    writer.close()
    with Records(path) as records:
        assert records.contacts()[0].samples == 3
    assert not path.with_name(path.name + "-wal").exists()


def test_a_killed_daemon_leaves_a_readable_file_and_an_interrupted_contact(path: Path) -> None:
    script = (
        "import os, signal, sys; from pathlib import Path\n"
        "from tests.service.records.story import UTC_S, sample, start\n"
        "from trunnion.service.clock import VirtualClock\n"
        "from trunnion.service.records.writer import RecordWriter\n"
        "writer = RecordWriter(Path(sys.argv[1]), VirtualClock(UTC_S))\n"
        "writer.begin_contact(start())\n"
        "for turn in range(40): writer.sample(sample(turn))\n"
        "writer.flush()\n"
        "os.kill(os.getpid(), signal.SIGKILL)\n"
    )
    root = Path(__file__).parents[3]
    killed = subprocess.run(
        [sys.executable, "-c", script, str(path)], cwd=root, check=False, timeout=60
    )
    assert killed.returncode < 0
    with Records(path) as records:
        assert records.contacts()[0].outcome is Outcome.INTERRUPTED
        assert records.contacts()[0].samples == 40
    restarted = RecordWriter(path, VirtualClock(UTC_S + 30.0))
    restarted.begin_contact(start("B-3"))
    restarted.flush()
    with Records(path) as records:
        newer, older = records.contacts()
        assert newer.outcome is Outcome.UNDER_WAY
        assert older.outcome is Outcome.INTERRUPTED
        assert older.end_utc_s == UTC_S + 0.125 * 39
    restarted.close()


def test_csv_has_a_line_of_names_and_a_line_a_sample(writer: RecordWriter, path: Path) -> None:
    writer.begin_contact(start())
    writer.sample(sample())
    writer.sample(sample(2)._replace(order=None))
    writer.flush()
    with Records(path) as records:
        names, first, halted = csv_lines(records.samples(1))
    assert names.startswith("utc,phase,target_azimuth_deg,target_elevation_deg,target_range_km,")
    assert first == (
        "2030-01-01T00:02:03.750Z,tracking,211.7,33.1,1234.5,0.021,-148.3,33.2,0.32,0.18,"
        "-148.4,33.15,0.3,0.16,-148.5,33.05,0.0625,rate"
    )
    assert ",0.32,0.18,,,,,-148.5," in halted


def test_no_file_is_said_plainly(path: Path) -> None:
    with pytest.raises(NoRecords, match="no records yet"):
        Records(path)


def test_another_program_s_database_is_neither_read_nor_touched(path: Path) -> None:
    path.parent.mkdir()
    with sqlite3.connect(path) as other:
        other.execute("CREATE TABLE precious (x)")
    other.close()
    before = path.read_bytes()
    writer = RecordWriter(path, VirtualClock(UTC_S))
    put_one_contact(writer)
    writer.flush()
    assert "another program's database" in str(writer.trouble)
    writer.close()
    assert path.read_bytes()[100:] == before[100:]
    with pytest.raises(NoRecords, match="another program's database"):
        Records(path)
