"""Errors that are somebody's, told in one message: the user's, a file's, a target's, a mount's."""

from collections.abc import Iterator
from contextlib import contextmanager

import typer

from trunnion.cli.output import say
from trunnion.files.problems import FileProblems
from trunnion.service.errors import ServiceError
from trunnion.sky.errors import SkyError
from trunnion_drivers.interface.errors import DriverError

FAILED = 1
"""The exit code of a command that could not do what was asked."""

MISUSED = 2
"""The exit code of a mistake in the asking; a daemon whose station file cannot be used is one too,
as no restart would mend it."""


@contextmanager
def told_plainly() -> Iterator[None]:
    """Turn an error that was raised on purpose into its message and exit code 1.

    Anything else is a mistake in the program, and keeps its traceback.
    """
    try:
        yield
    except (FileProblems, ServiceError, SkyError, DriverError) as error:
        say(str(error))
        raise typer.Exit(FAILED) from None
    except BrokenPipeError:
        raise  # whoever read our output has gone; the command line's own library knows what to do
    except OSError as error:
        place = f"{error.filename}: " if error.filename else ""
        say(f"{place}{error.strerror or error}")
        raise typer.Exit(FAILED) from None
