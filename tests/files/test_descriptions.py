"""The docstrings below the keys of a section."""

from typing import Any

from pydantic import Field

from trunnion.files.plan import PlanFile
from trunnion.files.section import Section
from trunnion.files.station import StationFile


class Dish(Section):
    """A section to describe."""

    from_deg: float = Field(alias="from")
    """Where it begins,
    in two lines."""
    plain: int
    size_m: float = 3.7
    """How large it is."""


def test_what_stands_below_a_key_describes_it() -> None:
    properties = Dish.model_json_schema()["properties"]
    assert properties["from"]["description"] == "Where it begins,\nin two lines."
    assert properties["size_m"]["description"] == "How large it is."
    assert "description" not in properties["plain"]


def test_every_key_of_both_files_is_described() -> None:
    for model in (StationFile, PlanFile):
        schema = model.model_json_schema()
        for section in (schema, *schema["$defs"].values()):
            for key, told in keys_of(section).items():
                assert "description" in told or is_a_section(told), key


def keys_of(section: dict[str, Any]) -> dict[str, Any]:
    properties: dict[str, Any] = section.get("properties", {})
    return properties


def is_a_section(told: dict[str, Any]) -> bool:
    """A section is described where it is defined."""
    return "$ref" in told or "$ref" in told.get("items", {})
