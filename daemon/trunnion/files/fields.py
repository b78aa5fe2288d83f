"""Bounded types that the sections of the station file and the plan file share."""

from pathlib import Path
from typing import Annotated

from pydantic import (
    AfterValidator,
    BeforeValidator,
    Field,
    StringConstraints,
    ValidationInfo,
    WithJsonSchema,
)


def listed(values: tuple[float, ...]) -> str:
    """Return numbers as they would stand in the file: `[-270, 270]`."""
    return f"[{', '.join(f'{value:g}' for value in values)}]"


def _lower_end_first(ends: tuple[float, float]) -> tuple[float, float]:
    lower, upper = ends
    if lower >= upper:
        raise ValueError(f"expected the lower end first and above it the upper, got {listed(ends)}")
    return ends


def _two(value: object) -> object:
    if isinstance(value, tuple) and len(value) != 2:
        raise ValueError(f"expected a list of two numbers, got one of {len(value)}")
    return value


def _number_as_text(value: object) -> object:
    is_whole_number = isinstance(value, int) and not isinstance(value, bool)
    return str(value) if is_whole_number else value


def _resolved(value: object, info: ValidationInfo) -> object:
    return resolved_path(str(value), info) if isinstance(value, str | Path) else value


def resolved_path(text: str, info: ValidationInfo) -> Path:
    """Return a path of the file as an absolute one; a relative one begins at the file's folder."""
    if not text or not text.isprintable():
        raise ValueError(f"expected a path, got {text[:40]!r}")
    folder: Path = (info.context or {}).get("folder", Path.cwd())
    return folder / text


AzimuthDeg = Annotated[float, Field(ge=-360, le=360)]
"""True azimuth, from north through east; a turn more or less is the same direction."""

ElevationDeg = Annotated[float, Field(ge=-90, le=90)]
"""Elevation above the horizontal plane."""

PositiveFloat = Annotated[float, Field(gt=0)]

Pair = Annotated[tuple[float, float], BeforeValidator(_two)]
"""Two numbers in a list."""

Interval = Annotated[Pair, AfterValidator(_lower_end_first)]
"""Two numbers in a list, the lower end first."""

FilePath = Annotated[Path, BeforeValidator(_resolved), WithJsonSchema({"type": "string"})]
"""A path; a relative one begins at the folder of the file it stands in."""

Name = Annotated[
    str,
    BeforeValidator(_number_as_text),
    StringConstraints(min_length=1, max_length=80, pattern=r"^[^\x00-\x1f\x7f]+$"),
    WithJsonSchema({"type": ["string", "integer"], "minLength": 1, "maxLength": 80}),
]
"""A name on one line; a number is taken as the text of its digits."""
