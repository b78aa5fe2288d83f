"""Small files that are replaced whole."""

from pathlib import Path

import pytest

from trunnion.service.durable_file import draft_of, remove_durably, write_durably


def test_content_is_replaced_and_no_draft_stays(tmp_path: Path) -> None:
    path = tmp_path / "wish"
    write_durably(path, "a longer text than the next\n")
    write_durably(path, "überholt\n")
    assert path.read_text(encoding="utf-8") == "überholt\n"
    assert list(tmp_path.iterdir()) == [path]


def test_a_write_that_fails_leaves_the_old_content(tmp_path: Path) -> None:
    path = tmp_path / "wish"
    write_durably(path, "old\n")
    draft_of(path).mkdir()
    with pytest.raises(IsADirectoryError):
        write_durably(path, "new\n")
    assert path.read_text() == "old\n"


def test_removing_takes_the_draft_along_and_may_be_repeated(tmp_path: Path) -> None:
    path = tmp_path / "wish"
    write_durably(path, "old\n")
    draft_of(path).write_text("half")
    remove_durably(path)
    remove_durably(path)
    assert list(tmp_path.iterdir()) == []
