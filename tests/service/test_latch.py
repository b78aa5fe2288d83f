"""The emergency stop on disk."""

from pathlib import Path

import pytest

from trunnion.safety.emergency import EmergencyStop
from trunnion.service.latch import EmergencyLatch

STOP = EmergencyStop("smoke from the drive", 1_893_456_123.75)
LATER = EmergencyStop("the button", 1_893_456_200.5)


@pytest.fixture
def path(tmp_path: Path) -> Path:
    return tmp_path / "emergency-stop.latch"


def test_a_stop_survives_and_a_clear_lifts_it(path: Path) -> None:
    latch = EmergencyLatch(path)
    assert latch.read() is None
    assert latch.write(STOP) is None
    assert EmergencyLatch(path).read() == STOP
    assert latch.write(LATER) is None
    assert EmergencyLatch(path).read() == LATER
    assert latch.clear() is None
    assert EmergencyLatch(path).read() is None
    assert list(path.parent.iterdir()) == []
    assert latch.clear() is None


def test_a_cause_that_no_file_can_hold_is_kept_as_well_as_can_be(path: Path) -> None:
    latch = EmergencyLatch(path)
    assert latch.write(STOP._replace(cause="smoke \udcff\nfrom the drive")) is None
    assert latch.read() == STOP._replace(cause="smoke ? from the drive")


@pytest.mark.parametrize("content", [b"", b"\x00" * 4096, b"\xff\xfe", b"no", b"x" * 1_000_000])
def test_a_damaged_file_is_a_stop(path: Path, content: bytes) -> None:
    path.write_bytes(content)
    assert EmergencyLatch(path).read() is not None


def test_a_torn_file_is_a_stop_wherever_it_was_torn(path: Path) -> None:
    latch = EmergencyLatch(path)
    latch.write(STOP)
    whole = path.read_bytes()
    for length in range(len(whole)):
        path.write_bytes(whole[:length])
        assert latch.read() is not None


def test_a_file_that_cannot_be_read_is_a_stop(path: Path) -> None:
    path.mkdir()
    assert EmergencyLatch(path).read() is not None


@pytest.mark.parametrize("length", [0, 17])
def test_a_draft_left_behind_is_a_stop_until_cleared(path: Path, length: int) -> None:
    latch = EmergencyLatch(path)
    latch.write(STOP)
    draft = path.with_name(path.name + ".new")
    draft.write_bytes(path.read_bytes()[:length])
    path.unlink()
    assert EmergencyLatch(path).read() is not None
    assert latch.clear() is None
    assert EmergencyLatch(path).read() is None


def test_a_folder_that_cannot_be_written_to_is_said(tmp_path: Path) -> None:
    missing = tmp_path / "no" / "such" / "folder" / "latch"
    trouble = EmergencyLatch(missing).write(STOP)
    assert trouble == f"cannot write {missing}: No such file or directory"


def test_a_clear_that_fails_is_said_and_the_stop_stays(path: Path) -> None:
    path.mkdir()
    (path / "something").touch()
    latch = EmergencyLatch(path)
    assert str(latch.clear()).startswith(f"cannot remove {path}")
    assert latch.read() is not None
