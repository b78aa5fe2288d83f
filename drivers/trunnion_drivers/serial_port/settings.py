"""How a serial port is to be opened: part of the settings of every driver that uses one."""

from enum import Enum
from typing import Annotated, Self
from urllib.parse import urlsplit

from pydantic import Field, field_validator, model_validator

from trunnion_drivers.settings import Settings


class Parity(Enum):
    """The parity bit."""

    NONE = "none"
    EVEN = "even"
    ODD = "odd"


class StopLine(Enum):
    """The modem-control input that a normally closed stop switch holds up."""

    NONE = "none"
    CTS = "cts"
    DSR = "dsr"
    DCD = "dcd"
    RI = "ri"


class PowerLine(Enum):
    """The modem-control output that holds the power contactor."""

    NONE = "none"
    RTS = "rts"
    DTR = "dtr"


class LineSettings(Settings):
    """Speed and shape of the characters on the wire."""

    baud_rate: Annotated[int, Field(ge=50, le=4_000_000)] = 9600
    data_bits: Annotated[int, Field(ge=7, le=8)] = 8
    parity: Annotated[Parity, Field(strict=False)] = Parity.NONE
    stop_bits: Annotated[int, Field(ge=1, le=2)] = 1


class PortSettings(LineSettings):
    """A port by its URL: a device, `socket://host:port`, or `rfc2217://host:port`.

    `rs485` lets the kernel's driver switch the direction with RTS: up while it sends, down
    `rs485_after_s` after the last bit, `rs485_before_s` before the first one. `stop_input`
    and `power_output` name modem-control lines; a stop that is not held up counts as pressed.
    """

    url: Annotated[str, Field(min_length=1)]
    rs485: bool = False
    rs485_before_s: Annotated[float, Field(ge=0.0, le=0.1)] = 0.0
    rs485_after_s: Annotated[float, Field(ge=0.0, le=0.1)] = 0.0
    stop_input: Annotated[StopLine, Field(strict=False)] = StopLine.NONE
    power_output: Annotated[PowerLine, Field(strict=False)] = PowerLine.NONE

    @field_validator("url")
    @classmethod
    def _must_be_known(cls, url: str) -> str:
        scheme, _, rest = url.rpartition("://")
        if scheme not in ("", "socket", "rfc2217"):
            raise ValueError(f"expected a device, socket:// or rfc2217://, got {url!r}")
        if scheme and not (rest and urlsplit(url).hostname and urlsplit(url).port):
            raise ValueError(f"expected {scheme}://host:port, got {url!r}")
        return url

    @model_validator(mode="after")
    def _must_have_its_lines(self) -> Self:
        wants_lines = (
            self.stop_input is not StopLine.NONE or self.power_output is not PowerLine.NONE
        )
        if self.url.startswith("socket://") and wants_lines:
            raise ValueError(
                "a socket:// has no modem-control lines for stop_input or power_output"
            )
        return self

    @model_validator(mode="after")
    def _must_switch_here(self) -> Self:
        if self.rs485 and "://" in self.url:
            raise ValueError("rs485 needs a port of this computer; a port server has its own")
        return self

    @model_validator(mode="after")
    def _must_not_use_rts_twice(self) -> Self:
        if self.rs485 and self.power_output is PowerLine.RTS:
            raise ValueError("rs485 needs rts for its direction, so rts cannot hold the power")
        return self
