"""The common ground of all sections of a file: strict, frozen, no key it does not know."""

from pydantic import BaseModel, ConfigDict

from trunnion.files.descriptions import describe


class Section(BaseModel):
    """One mapping of a YAML file as a value.

    Nothing is converted behind the user's back (`"5"` is no number, `yes` is not true), and a
    docstring below a key is its description in the JSON Schema.
    """

    model_config = ConfigDict(
        allow_inf_nan=False,
        defer_build=True,
        extra="forbid",
        frozen=True,
        json_schema_extra=describe,
        strict=True,
        validate_default=True,
    )
