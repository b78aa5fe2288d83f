"""The operator's standing wish over a restart."""

from pathlib import Path

import pytest

from trunnion.pilot.phase import Wish
from trunnion.service.standing_wish import StandingWish


@pytest.mark.parametrize("wish", list(Wish))
def test_a_wish_outlives_the_daemon(tmp_path: Path, wish: Wish) -> None:
    assert StandingWish(tmp_path / "wish").set(wish) is None
    assert StandingWish(tmp_path / "wish").wish is wish


def test_without_a_file_the_plan_is_followed(tmp_path: Path) -> None:
    assert StandingWish(tmp_path / "wish").wish is Wish.FOLLOW_PLAN


@pytest.mark.parametrize("content", [b"", b"stwo\n", b"\xff\xfe", b"follow plan\nstow\n"])
def test_a_file_that_cannot_be_understood_means_hold(tmp_path: Path, content: bytes) -> None:
    (tmp_path / "wish").write_bytes(content)
    assert StandingWish(tmp_path / "wish").wish is Wish.HOLD


def test_a_disk_that_fails_is_told_and_the_wish_is_taken_up(tmp_path: Path) -> None:
    standing = StandingWish(tmp_path / "no such folder" / "wish")
    trouble = standing.set(Wish.STOW)
    assert standing.wish is Wish.STOW
    assert trouble is not None
    assert "no such folder" in trouble
