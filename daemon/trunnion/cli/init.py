"""`trunnion init`: the example configuration, as a start for one's own."""

from importlib.resources import files
from pathlib import Path
from typing import Annotated

import typer

from trunnion.cli.errors import FAILED
from trunnion.cli.output import print_text, say

_ABOUT_THE_FOLDER = {"README.md", "__init__.py"}


def init(
    folder: Annotated[
        Path, typer.Argument(metavar="[FOLDER]", help="Where to; made if it is not there.")
    ] = Path(),
) -> None:
    """Write out the example configuration; overwrites nothing."""
    examples = {
        path.name: path
        for path in sorted(example_folder().iterdir())
        if path.is_file() and path.name not in _ABOUT_THE_FOLDER
    }
    in_the_way = [name for name in examples if (folder / name).exists()]
    if in_the_way:
        say(f"{folder}: already there, nothing written: {', '.join(in_the_way)}")
        raise typer.Exit(FAILED)
    folder.mkdir(parents=True, exist_ok=True)
    for name, path in examples.items():
        with (folder / name).open("xb") as stream:
            stream.write(path.read_bytes())
    station = folder / "station.yaml"
    print_text(
        f"Wrote {', '.join(examples)} to {folder.absolute()}.\n"
        f"Make them your station's, then: trunnion check {station}"
    )


def example_folder() -> Path:
    """Return the folder of the example configuration, installed or in a source checkout."""
    package = Path(str(files("trunnion")))
    installed = package / "example"
    return installed if installed.is_dir() else package.parents[1] / "config"
