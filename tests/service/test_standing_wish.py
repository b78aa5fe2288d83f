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
def test_a_file_that_cannot_be_understood_means_stand_still(tmp_path: Path, content: bytes) -> None:
    (tmp_path / "wish").write_bytes(content)
    assert StandingWish(tmp_path / "wish").wish is Wish.STAND


def test_a_disk_that_fails_is_told_and_the_wish_is_taken_up(tmp_path: Path) -> None:
    standing = StandingWish(tmp_path / "no such folder" / "wish")
    trouble = standing.set(Wish.STOW)
    assert standing.wish is Wish.STOW
    assert trouble == standing.trouble
    assert "a restart would follow plan: cannot write" in str(trouble)
    assert "no such folder" in str(trouble)


def test_a_draft_left_behind_means_stand_still_until_a_wish_is_kept(tmp_path: Path) -> None:
    StandingWish(tmp_path / "wish").set(Wish.FOLLOW_PLAN)
    (tmp_path / "wish.new").touch()
    standing = StandingWish(tmp_path / "wish")
    assert standing.wish is Wish.STAND
    standing.set(Wish.FOLLOW_PLAN)
    assert StandingWish(tmp_path / "wish").wish is Wish.FOLLOW_PLAN


def test_what_a_restart_would_do_anyhow_is_no_trouble(tmp_path: Path) -> None:
    (tmp_path / "wish.new").mkdir()
    standing = StandingWish(tmp_path / "wish")
    assert standing.set(Wish.STAND) is None
    assert "a restart would stand still: cannot write" in str(standing.set(Wish.STOW))
    assert standing.wish is Wish.STOW
