"""Replaced files are noticed by their names, times and sizes."""

import os
from pathlib import Path

from trunnion.service.file_watch import signature_of


def test_a_new_size_a_new_time_and_a_new_file_are_noticed(tmp_path: Path) -> None:
    plan, folder = tmp_path / "plan.yaml", tmp_path / "elements"
    folder.mkdir()
    plan.write_text("one")
    (folder / "a.tle").write_text("x")
    paths = (plan, folder, tmp_path / "missing")
    seen = [signature_of(paths)]
    assert signature_of(paths) == seen[-1]
    for change in (
        lambda: plan.write_text("three"),
        lambda: os.utime(plan, (17.3, 17.3)),
        lambda: (folder / "b.tle").write_text("y"),
        (folder / "a.tle").unlink,
        plan.unlink,
        lambda: (tmp_path / "missing").write_text("here now"),
    ):
        change()
        assert signature_of(paths) not in seen
        seen.append(signature_of(paths))


def test_a_folder_that_vanishes_in_between_is_nothing_to_stumble_over(tmp_path: Path) -> None:
    assert signature_of((tmp_path / "gone",))[0][1:] == (0, 0)


def test_a_folder_that_cannot_be_read_does_not_end_the_watch(tmp_path: Path) -> None:
    class Unreadable(type(tmp_path)):  # type: ignore[misc]
        def iterdir(self) -> None:
            raise PermissionError

    assert len(signature_of((Unreadable(tmp_path),))) == 1
