"""`trunnion init`: the example configuration, as a start for one's own."""

from importlib.resources import files
from pathlib import Path
from typing import Annotated

import typer

from trunnion.cli.errors import FAILED
from trunnion.cli.output import print_text, say

_ABOUT_THE_FOLDER = {"README.md"}


def init(
    folder: Annotated[
        Path, typer.Argument(metavar="FOLDER", help="Where to; made if it is not there.")
    ] = Path(),
) -> None:
    """Write out the example configuration; overwrites nothing."""
    examples = _examples()
    in_the_way = [name for name in examples if (folder / name).exists()]
    if in_the_way:
        say(f"{folder}: already there, nothing written: {', '.join(in_the_way)}")
        raise typer.Exit(FAILED)
    for name, path in examples.items():
        (folder / name).parent.mkdir(parents=True, exist_ok=True)
        with (folder / name).open("xb") as stream:
            stream.write(path.read_bytes())
    station = folder / "station.yaml"
    print_text(
        f"Wrote {', '.join(examples)} to {folder.absolute()}.\n"
        f"To look at the example as on its day: trunnion check {station} --now 2026-12-01T00:00Z\n"
        f"Make the files your station's, then: trunnion check {station}"
    )


def _examples() -> dict[str, Path]:
    """Return the example files by their names below the folder."""
    folder = example_folder()
    found = {str(path.relative_to(folder)): path for path in sorted(folder.rglob("*"))}
    return {
        name: path
        for name, path in found.items()
        if path.is_file() and name not in _ABOUT_THE_FOLDER
    }


def example_folder() -> Path:
    """Return the folder of the example configuration, installed or in a source checkout."""
    package = Path(str(files("trunnion")))
    installed = package / "example"
    return installed if installed.is_dir() else package.parents[1] / "config"
