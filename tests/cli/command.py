"""Run the command line in this process, as a user would type it."""

from pathlib import Path

from typer.testing import CliRunner, Result

from trunnion.cli.main import build_app

EXAMPLE = Path(__file__).parents[2] / "config"


def trunnion(*arguments: str | Path) -> Result:
    return CliRunner().invoke(build_app(), [str(argument) for argument in arguments])
