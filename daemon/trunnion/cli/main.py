"""The command line: one function a command, each in a file of its own group."""

from importlib.metadata import version
from typing import Annotated, Any

import typer
from typer.core import TyperGroup

from trunnion.cli.angles import angles
from trunnion.cli.check import check
from trunnion.cli.control import recover, reset, resume, status, stop, stow
from trunnion.cli.correct import correct
from trunnion.cli.demo import demo
from trunnion.cli.errors import told_plainly
from trunnion.cli.init import init
from trunnion.cli.output import print_text
from trunnion.cli.passes import passes
from trunnion.cli.records import records_app
from trunnion.cli.rehearse import rehearse
from trunnion.cli.run import run
from trunnion.cli.schema import schema
from trunnion.cli.show import show
from trunnion.cli.tools import AS_TYPED, bench, commission, dialect
from trunnion.cli.torture import torture

_COMMANDS = (
    demo,
    init,
    show,
    schema,
    check,
    angles,
    passes,
    rehearse,
    torture,
    run,
    status,
    stop,
    reset,
    stow,
    resume,
    correct,
    recover,
)
_TOOLS = (bench, dialect, commission)


class _Commands(TyperGroup):
    """The commands, each of which tells its errors plainly."""

    def invoke(self, ctx: Any) -> Any:
        with told_plainly():
            return super().invoke(ctx)


def _print_version(wanted: bool) -> None:  # noqa: FBT001 - typer's own signature
    if wanted:
        print_text(f"trunnion {version('trunnion')}")
        raise typer.Exit


def _trunnion(
    *,
    _version: Annotated[
        bool,
        typer.Option(
            "--version", callback=_print_version, is_eager=True, help="Print the version."
        ),
    ] = False,
) -> None:
    """Keep a ground station's antenna on every contact of its pass plan.

    Moving machinery: a software stop never replaces a hardware emergency stop.
    """


def build_app() -> typer.Typer:
    """Return the command line with all its commands."""
    app = typer.Typer(
        cls=_Commands,
        no_args_is_help=True,
        add_completion=False,
        pretty_exceptions_enable=False,
    )
    app.callback()(_trunnion)
    for command in _COMMANDS:
        app.command()(command)
    for tool in _TOOLS:
        app.command(context_settings=AS_TYPED, add_help_option=False)(tool)
    app.add_typer(records_app(), name="records")
    return app


def main() -> None:
    """Run the command line; the exit code is 0 for done, 1 for failed or refused, 2 for misused."""
    build_app()(prog_name="trunnion")
