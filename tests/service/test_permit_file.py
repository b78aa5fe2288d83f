"""The permission to transmit as a file."""

from pathlib import Path

import pytest

from trunnion.service.permit_file import PermitFile


@pytest.fixture
def path(tmp_path: Path) -> Path:
    return tmp_path / "transmit"


def test_it_is_forbidden_until_permitted_and_expires_by_itself(path: Path) -> None:
    permit = PermitFile(path, validity_s=2.0)
    assert path.read_text() == "forbidden\n"
    permit.tell(71.25, is_permitted=True)
    assert path.read_text() == "permitted until_mono_s=73.250\n"


def test_it_is_renewed_in_time_and_not_every_turn(path: Path) -> None:
    permit = PermitFile(path, validity_s=2.0)
    lines = []
    for turn in range(12):
        permit.tell(71.25 + 0.125 * turn, is_permitted=True)
        lines.append(path.read_text())
    assert [float(line.partition("=")[2]) for line in dict.fromkeys(lines)] == [73.25, 73.75, 74.25]


def test_its_end_is_written_at_once(path: Path) -> None:
    permit = PermitFile(path, validity_s=2.0)
    permit.tell(71.25, is_permitted=True)
    permit.tell(71.26, is_permitted=False)
    assert path.read_text() == "forbidden\n"
    permit.tell(71.27, is_permitted=True)
    assert path.read_text() == "permitted until_mono_s=73.270\n"
    permit.forbid()
    assert path.read_text() == "forbidden\n"


def test_a_file_that_cannot_be_written_forbids_by_its_absence(path: Path) -> None:
    permit = PermitFile(path, validity_s=2.0)
    permit.tell(71.25, is_permitted=True)
    draft = path.with_name(path.name + ".new")
    draft.mkdir()
    permit.tell(72.9, is_permitted=True)
    assert not path.exists()
    assert str(permit.trouble).startswith("cannot write")
    draft.rmdir()
    permit.tell(73.0, is_permitted=False)
    assert path.read_text() == "forbidden\n"
    assert permit.trouble is None
