"""The plan file: which targets the station follows, and when."""

import re
from collections.abc import Iterator
from math import floor
from pathlib import Path
from typing import Annotated

from pydantic import (
    AfterValidator,
    Field,
    ValidationInfo,
    field_validator,
)

from trunnion.files.fields import ElevationDeg, Name
from trunnion.files.instant import Instant
from trunnion.files.section import Section
from trunnion.files.target_text import checked_target
from trunnion.files.validation import Contradiction, validated
from trunnion.files.yaml_text import YamlText, read_yaml
from trunnion.sky.instants import format_utc

_LONGEST_CONTACT_S = 7 * 86400.0
_UNSAFE = re.compile(r"[^\w.+-]+")


def _file_name_safe(contact: str) -> str:
    if not re.fullmatch(r"[\w.+-]{1,80}", contact):
        raise ValueError(
            f"expected at most 80 letters, digits and the marks . _ + -, got {contact!r}"
        )
    return contact


def _generated_id(data: dict[str, object]) -> str:
    target, from_s = data.get("target"), data.get("from_s")
    if not (isinstance(target, str) and isinstance(from_s, float)):
        return "unnamed"
    begin = re.sub(r"[-:]", "", format_utc(floor(from_s), 0))
    return f"{_UNSAFE.sub('-', target)[:60]}-{begin}"


class Wishes(Section):
    """What one contact asks for beyond its time."""

    minimum_elevation_deg: ElevationDeg | None = None
    """Follow the target only while it is at least this high, in degrees."""
    note: Annotated[str, Field(max_length=500)] = ""
    """Anything worth remembering; it goes into the records."""


class Contact(Section):
    """One stretch of time in which the antenna follows one target."""

    target: Annotated[Name, AfterValidator(checked_target)]
    """`sun`, `moon` or a planet, `icrs:RIGHT_ASCENSION,DECLINATION`, `fixed:AZIMUTH,ELEVATION`,
    `file:PATH` from the station file's folder on, a name from the station file's `targets`, or the
    name or the catalogue number of a set of orbit elements."""
    from_s: Instant = Field(alias="from")
    """When it begins, in ISO 8601 with Z or an offset: 2026-12-01T10:15:00Z."""
    until_s: Instant = Field(alias="until")
    """When it ends, written like `from`."""
    id: Annotated[Name, AfterValidator(_file_name_safe)] = Field(default_factory=_generated_id)
    """A name for the contact, different from all others; by default target and begin."""
    priority: Annotated[int, Field(ge=0, le=100)] = 50
    """Which contact gets the antenna where two overlap: the higher number."""
    wishes: Wishes = Wishes()
    """What this contact asks for beyond its time."""

    @field_validator("until_s")
    @classmethod
    def _after_its_begin(cls, until_s: float, info: ValidationInfo) -> float:
        from_s = info.data.get("from_s", until_s - 1)
        if until_s <= from_s:
            raise ValueError(
                f"expected a time after `from`, {format_utc(from_s, 0)}, "
                f"got {format_utc(until_s, 0)}"
            )
        if until_s - from_s > _LONGEST_CONTACT_S:
            raise ValueError("expected a contact of at most 7 days, got a longer one")
        return until_s


class PlanFile(Section):
    """A pass plan."""

    contacts: tuple[Contact, ...]
    """The contacts, in any order."""


def load_plan(path: Path) -> PlanFile:
    """Read a plan file; raises FileProblems with everything that is wrong with it."""
    return read_plan(read_yaml(path), path.absolute().parent)


def read_plan(text: YamlText, folder: Path) -> PlanFile:
    """Return the plan in a YAML text; raises FileProblems."""
    return validated(PlanFile, text, folder, [ids_differ])


def ids_differ(contacts: tuple[Contact, ...]) -> Iterator[Contradiction]:
    """Every contact leaves records under its id, so no two may share one."""
    first: dict[str, int] = {}
    for place, contact in enumerate(contacts):
        earlier = first.setdefault(contact.id, place)
        if earlier != place:
            yield Contradiction(
                ("contacts", place, "id"),
                f"expected an id of its own, got {contact.id!r}, the id of contacts[{earlier + 1}]",
            )
