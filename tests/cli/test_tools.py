"""The tools that drivers bring along, called as commands of the program."""

from pathlib import Path

from tests.cli.command import EXAMPLE, trunnion

DIALECT = EXAMPLE / "dialects" / "reedmace.yaml"


def test_a_dialect_is_shown() -> None:
    told = trunnion("dialect", DIALECT, "--first", "-12.5")
    assert told.exit_code == 0
    assert "G-0012.500" in told.stdout


def test_a_tool_has_its_own_help() -> None:
    for tool in ("bench", "dialect", "commission"):
        told = trunnion(tool, "--help")
        assert told.exit_code == 0
        assert f"usage: trunnion {tool}" in told.stdout


def test_what_a_tool_cannot_do_is_told(tmp_path: Path) -> None:
    told = trunnion("bench", tmp_path / "gone.yaml")
    assert told.exit_code == 1
    assert "No such file" in told.stderr
