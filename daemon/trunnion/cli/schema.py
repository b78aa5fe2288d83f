"""`trunnion schema`: the JSON Schema of a file, for editors."""

from typing import Annotated

import typer

from trunnion.cli.output import print_json


def schema(
    kind: Annotated[str, typer.Argument(metavar="station|plan", help="Which file.")],
) -> None:
    """Print the JSON Schema of the station file or the plan file, for editors."""
    from trunnion.files.schema import FileKind, json_schema

    try:
        print_json(json_schema(FileKind(kind)))
    except ValueError:
        raise typer.BadParameter(f"expected station or plan, got {kind!r}") from None
