"""The settings of a driver whose controller a dialect file describes."""

from typing import Annotated

from pydantic import Field

from trunnion_drivers.brake import BrakeSettings
from trunnion_drivers.control.settings import ControlSettings
from trunnion_drivers.serial_port.settings import LineSettings, PortSettings

_LINE = ("baud_rate", "data_bits", "parity", "stop_bits")


class DialectSettings(PortSettings):
    """A port, and the file that says what is spoken over it; `control` tunes the laws.

    `brake` has the times of the brake, where the dialect has its commands.
    Speed and shape of the characters are the dialect's unless they are given here.
    """

    dialect: Annotated[str, Field(min_length=1)]
    control: ControlSettings = ControlSettings()
    brake: BrakeSettings = BrakeSettings()

    def port(self, line: LineSettings) -> PortSettings:
        """The port to open."""
        own = {name: getattr(self, name) for name in PortSettings.model_fields}
        given = {name: own[name] for name in _LINE if name in self.model_fields_set}
        return PortSettings.model_construct(**{**own, **line.model_dump(), **given})
