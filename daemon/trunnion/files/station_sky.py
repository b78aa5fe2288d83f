"""Station file: where the station stands and what it sees through."""

from enum import Enum
from pathlib import Path
from typing import Annotated

from pydantic import BeforeValidator, Field, ValidationInfo, WithJsonSchema

from trunnion.files.fields import ElevationDeg, Name, resolved_path
from trunnion.files.section import Section


class EarthData(Enum):
    """Where the Earth's rotation and polar motion come from, when it is not a file of one's own."""

    PACKAGED = "packaged"
    NONE = "none"


class RefractionModel(Enum):
    """Which bending of the ray by the air is added to the elevation."""

    RADIO = "radio"
    OPTICAL = "optical"
    NONE = "none"


def _earth_data(value: object, info: ValidationInfo) -> object:
    if not isinstance(value, str):
        return value
    if value in {member.value for member in EarthData}:
        return EarthData(value)
    return resolved_path(value, info)


class SiteSection(Section):
    """Where the station stands (WGS 84)."""

    name: Name
    """What the station is called; any name on one line."""
    latitude_deg: ElevationDeg
    """Geodetic latitude in degrees, north positive."""
    longitude_deg: Annotated[float, Field(ge=-180, le=180)]
    """Longitude in degrees, east positive, west negative."""
    height_m: Annotated[float, Field(ge=-500, le=9000)]
    """Height in metres above the ellipsoid (not above the sea)."""


class SkySection(Section):
    """What lies between the antenna and its target: the Earth's rotation and the air."""

    earth_orientation: Annotated[
        EarthData | Path, BeforeValidator(_earth_data), WithJsonSchema({"type": "string"})
    ] = EarthData.PACKAGED
    """`packaged` (the IERS table that is installed with the program), `none` (UT1 taken as UTC, the
    pole at rest: up to 0.05 degrees wrong), or the path of a finals2000A file of the IERS."""
    refraction: Annotated[RefractionModel, Field(strict=False)] = RefractionModel.RADIO
    """`radio`, `optical` or `none`."""
    pressure_hpa: Annotated[float, Field(ge=300, le=1100)] | None = None
    """Air pressure at the station in hectopascal; without it, the standard atmosphere's."""
    temperature_c: Annotated[float, Field(ge=-90, le=60)] | None = None
    """Air temperature at the station in degrees Celsius; without it, the standard atmosphere's."""
    relative_humidity_percent: Annotated[float, Field(ge=0, le=100)] | None = None
    """Relative humidity at the station in percent; without it, the standard atmosphere's."""
