"""The docstrings below the keys of a section, found in its source when a schema asks for them.

Every start of the daemon reads station files; only the schema needs to read the source.
"""

import ast
import inspect
from collections.abc import Iterator
from itertools import pairwise
from textwrap import dedent
from typing import Any

from pydantic import BaseModel


def describe(schema: dict[str, Any], section: type[BaseModel]) -> None:
    """Give each property of a section's JSON Schema the docstring below its key."""
    for name, text in _docstrings(section):
        schema["properties"][section.model_fields[name].alias or name]["description"] = text


def _docstrings(section: type[BaseModel]) -> Iterator[tuple[str, str]]:
    source = ast.parse(dedent(inspect.getsource(section)))
    lines = [line for node in source.body if isinstance(node, ast.ClassDef) for line in node.body]
    for key, below in pairwise(lines):
        match key, below:
            case (
                ast.AnnAssign(target=ast.Name(id=name)),
                ast.Expr(value=ast.Constant(value=str(text))),
            ):
                yield name, inspect.cleandoc(text)
