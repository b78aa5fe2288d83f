"""The common ground of all sections of a file: strict, frozen, no key it does not know."""

from pydantic import BaseModel, ConfigDict


class Section(BaseModel):
    """One mapping of a YAML file as a value.

    Nothing is converted behind the user's back (`"5"` is no number, `yes` is not true), and a
    docstring below a key is its description in the JSON Schema.
    """

    model_config = ConfigDict(
        allow_inf_nan=False,
        extra="forbid",
        frozen=True,
        strict=True,
        use_attribute_docstrings=True,
        validate_default=True,
    )
