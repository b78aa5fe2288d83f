"""As much of a station file as the bench needs: its mount, and its driver's settings."""

from collections.abc import Mapping
from pathlib import Path
from typing import NamedTuple

from pydantic import BaseModel, ConfigDict, Field, ValidationError

from trunnion_drivers.dialect.yaml_lines import read_lined_yaml
from trunnion_drivers.interface.errors import BadSettings, SettingProblem
from trunnion_drivers.interface.values import JointFacts, MountFacts
from trunnion_drivers.settings import problems


class _Part(BaseModel):
    model_config = ConfigDict(extra="ignore", frozen=True, allow_inf_nan=False)


class _Joint(_Part):
    travel_deg: tuple[float, float]
    rate_deg_s: float = Field(gt=0)
    acceleration_deg_s2: float = Field(gt=0)

    def facts(self) -> JointFacts:
        return JointFacts(*self.travel_deg, self.rate_deg_s, self.acceleration_deg_s2)


class _Mount(_Part):
    first: _Joint
    second: _Joint
    stow_deg: tuple[float, float]


class _Driver(BaseModel):
    model_config = ConfigDict(extra="allow")

    kind: str


class _Safety(_Part):
    elevation_floor_deg: float


class _Station(_Part):
    mount: _Mount
    safety: _Safety | None = None
    driver: _Driver


class BenchStation(NamedTuple):
    """The mount, the driver's kind and settings, and the floor below which nothing may go (deg).

    Without a floor in the file it is the lower end of the second joint's travel.
    """

    facts: MountFacts
    kind: str
    settings: Mapping[str, object]
    floor_deg: float


def read_station(path: Path) -> BenchStation:
    """Read what the bench needs; `trunnion check` reads the whole file. Raises BadSettings."""
    text = read_lined_yaml(path, "station")
    try:
        station = _Station.model_validate(text.value)
    except ValidationError as error:
        raise BadSettings(
            tuple(
                SettingProblem(p.key, f"{text.place(tuple(p.key.split('.')))}: {p.reason}")
                for p in problems(error, _Station)
            )
        ) from None
    mount = station.mount
    folder = path.absolute().parent
    facts = MountFacts(mount.first.facts(), mount.second.facts(), *mount.stow_deg, folder)
    safety = station.safety
    floor_deg = safety.elevation_floor_deg if safety else facts.second.lower_deg
    settings = station.driver.model_extra or {}
    return BenchStation(facts, station.driver.kind, settings, floor_deg)
