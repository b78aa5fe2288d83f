"""One daemon a mount."""

from pathlib import Path

import pytest

from trunnion.service.sole_daemon import MountInUse, sole_daemon


def test_a_second_one_is_refused_until_the_first_is_gone(tmp_path: Path) -> None:
    latch = tmp_path / "stop.latch"
    with sole_daemon(latch), pytest.raises(MountInUse, match="another daemon"), sole_daemon(latch):
        pass
    with sole_daemon(latch):
        assert not latch.exists()


def test_mounts_with_latches_of_their_own_do_not_mind_each_other(tmp_path: Path) -> None:
    with sole_daemon(tmp_path / "north.latch"), sole_daemon(tmp_path / "south.latch"):
        pass


def test_a_folder_that_is_not_there_is_told_before_anything_moves(tmp_path: Path) -> None:
    missing = tmp_path / "nowhere" / "stop.latch"
    with (
        pytest.raises(MountInUse, match=r"cannot keep an emergency stop.*nowhere"),
        sole_daemon(missing),
    ):
        pass
