"""JSON Schema of the station file and the plan file, for editors that complete and check them."""

from enum import Enum
from typing import Any

from pydantic import BaseModel

from trunnion.files.plan import PlanFile
from trunnion.files.station import StationFile

_DIALECT = "https://json-schema.org/draft/2020-12/schema"


class FileKind(Enum):
    """The files that have a schema."""

    STATION = "station"
    PLAN = "plan"


_MODELS: dict[FileKind, type[BaseModel]] = {
    FileKind.STATION: StationFile,
    FileKind.PLAN: PlanFile,
}


def json_schema(kind: FileKind) -> dict[str, Any]:
    """Return the JSON Schema (draft 2020-12) of one kind of file, made from its model.

    The schema cannot tell all that reading the file can: contradictions between keys are found by
    reading alone.
    """
    schema = _MODELS[kind].model_json_schema(by_alias=True)
    return {"$schema": _DIALECT, **_on_one_line(schema)}


def _on_one_line(schema: dict[str, Any]) -> dict[str, Any]:
    """Return the schema with every description on one line, however the source broke it."""
    return {key: _unbroken(key, value) for key, value in schema.items()}


def _unbroken(key: str, value: object) -> object:
    if isinstance(value, dict):
        return _on_one_line(value)
    return " ".join(value.split()) if key == "description" and isinstance(value, str) else value
