"""`trunnion status`, `stop`, `reset`, `stow`, `resume`, `recover`: talk to the running daemon."""

from collections.abc import Mapping
from pathlib import Path
from types import MappingProxyType
from typing import TYPE_CHECKING, Annotated

import typer

from trunnion.cli.arguments import AsJson
from trunnion.cli.errors import FAILED
from trunnion.cli.output import flattened, print_json, print_table, print_text, say
from trunnion.files.problems import FileProblems
from trunnion.service.errors import ServiceError

if TYPE_CHECKING:
    from trunnion.service.control.client import ControlClient

_CAUTION = "If the antenna moves and must not, use the hardware emergency stop."

Daemon = Annotated[
    Path,
    typer.Argument(
        metavar="STATION", help="The station file of the daemon, or its control socket."
    ),
]


def status(daemon: Daemon = Path("station.yaml"), *, as_json: AsJson = False) -> None:
    """Print what the daemon is doing, and what keeps it from doing more."""
    with _client(daemon) as client:
        result = client.request("status")
    if as_json:
        print_json(result)
    else:
        print_table(f"Daemon of {daemon}", ("what", "how"), flattened(result))


def stop(
    daemon: Daemon = Path("station.yaml"),
    *,
    cause: Annotated[str, typer.Option(help="Why, for the records.")] = "",
) -> None:
    """Stop the antenna now, and keep it stopped until a reset: the emergency stop by software.

    It is no substitute for the hardware emergency stop: whoever is in danger presses that one.
    """
    try:
        with _client(daemon) as client:
            print_text(client.emergency_stop(cause))
    except (FileProblems, ServiceError) as error:
        say(f"NOT stopped: {error}\n{_CAUTION}")
        raise typer.Exit(FAILED) from None


def reset(daemon: Daemon = Path("station.yaml")) -> None:
    """Lift an emergency stop whose cause is gone; starts no motion, `resume` does."""
    _ask(daemon, "reset", "The emergency stop is lifted. Nothing moves until told to.")


def stow(daemon: Daemon = Path("station.yaml")) -> None:
    """Send the antenna to its stow position, and keep it there until `resume`."""
    _ask(daemon, "stow", "The antenna goes to its stow position and stays there.")


def resume(daemon: Daemon = Path("station.yaml")) -> None:
    """Follow the pass plan again. The antenna may move at once: see that nobody is near it."""
    _ask(daemon, "resume", "The antenna follows the pass plan again.")


def recover(daemon: Daemon = Path("station.yaml")) -> None:
    """Bring an antenna back inside its limits that stands outside them, slowly; then it holds.

    See first that the way is free and nobody is near it.
    """
    done = "The antenna comes back slowly and holds still inside. Watch it; `stop` stops it."
    _ask(daemon, "recover", done)


def ask(
    daemon: Path, command: str, arguments: Mapping[str, object] = MappingProxyType({})
) -> Mapping[str, object]:
    """Have the daemon do something, and return its answer."""
    with _client(daemon) as client:
        answer = client.request(command, **arguments)
    if trouble := answer.get("trouble"):
        say(f"Done, but: {trouble}")
    return answer


def _ask(daemon: Path, command: str, done: str) -> None:
    ask(daemon, command)
    print_text(done)


def _client(daemon: Path) -> "ControlClient":
    from trunnion.files.control_path import control_socket_of
    from trunnion.service.control.client import ControlClient

    return ControlClient(control_socket_of(daemon))
