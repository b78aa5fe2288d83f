"""One serial port by its URL, with pyserial, and errors in words that help.

A reader waits for the descriptor and then takes everything that is there in one call; what has no
descriptor (RFC 2217) is asked in short slices.
"""

import select
import termios
from collections.abc import Callable
from types import MappingProxyType
from typing import Any

import serial
from serial.rs485 import RS485Settings

from trunnion_drivers.interface.errors import LinkLost
from trunnion_drivers.interface.values import Clock
from trunnion_drivers.serial_port.settings import Parity, PortSettings, PowerLine, StopLine
from trunnion_drivers.serial_port.trouble import in_words

_SLICE_S = 0.02
_WRITE_TIMEOUT_S = 1.0
_CHUNK = 4096
_PARITY = MappingProxyType(
    {
        Parity.NONE: serial.PARITY_NONE,
        Parity.EVEN: serial.PARITY_EVEN,
        Parity.ODD: serial.PARITY_ODD,
    }
)


class SerialPort:
    """A port that is opened and closed again and again; every error of it is a LinkLost."""

    def __init__(
        self,
        settings: PortSettings,
        clock: Clock,
        make: Callable[..., Any] = serial.serial_for_url,
    ) -> None:
        self._make = make
        self._settings = settings
        self._clock = clock
        self._port: serial.SerialBase | None = None
        self._poll: select.poll | None = None

    def open(self) -> None:
        """Open it for this process alone, and give the actuators their power."""
        settings = self._settings
        is_here = _has_descriptor(settings.url)
        try:
            port = self._make(
                settings.url,
                do_not_open=True,
                baudrate=settings.baud_rate,
                bytesize=settings.data_bits,
                parity=_PARITY[settings.parity],
                stopbits=settings.stop_bits,
                write_timeout=_WRITE_TIMEOUT_S if is_here else None,
                exclusive=True,
            )
            port.timeout = 0 if is_here else _SLICE_S
            if settings.rs485:
                port.rts = False
                port.rs485_mode = _direction(settings)
            port.open()
        except (OSError, ValueError, termios.error) as error:
            raise LinkLost(in_words(settings.url, error)) from error
        self._port = port
        self._poll = _watch(port) if is_here else None

    def close(self) -> None:
        """Close it; nothing is raised for a port that is gone."""
        port, self._port = self._port, None
        if port is not None:
            try:
                port.close()
            except OSError:
                return

    def send(self, message: bytes) -> None:
        """Write the whole message. Raises LinkLost."""
        try:
            self._opened.write(message)
        except OSError as error:
            raise self._lost(error) from error

    def drop_unsent(self) -> None:
        """Forget what still waits to be sent. Raises LinkLost."""
        port: Any = self._opened
        try:
            port.reset_output_buffer()
        except (OSError, termios.error) as error:
            raise self._lost(error) from error

    def receive(self, until_s: float) -> bytes:
        """Whatever has come, waiting until this second at most; empty when nothing has."""
        try:
            if self._poll is None:
                return self._receive_in_slices(until_s)
            wait_ms = max(0.0, until_s - self._clock.monotonic_s()) * 1e3
            return self._opened.read(_CHUNK) if self._poll.poll(wait_ms) else b""
        except OSError as error:
            raise self._lost(error) from error

    @property
    def stop_pressed(self) -> bool:
        """Whether the stop input says stop: its line is not held up. Raises LinkLost."""
        line = self._settings.stop_input
        if line is StopLine.NONE:
            return False
        try:
            is_held_up = getattr(self._opened, "cd" if line is StopLine.DCD else line.value)
        except OSError as error:
            raise self._lost(error) from error
        return not is_held_up

    def set_power(self, *, is_on: bool) -> None:
        """Hold up the power output, or drop it. Raises LinkLost."""
        line = self._settings.power_output
        if line is not PowerLine.NONE:
            try:
                setattr(self._opened, line.value, is_on)
            except OSError as error:
                raise self._lost(error) from error

    @property
    def _opened(self) -> serial.SerialBase:
        if self._port is None:
            raise LinkLost(f"{self._settings.url}: the port is not open")
        return self._port

    def _receive_in_slices(self, until_s: float) -> bytes:
        port: Any = self._opened
        while True:
            waiting = int(port.in_waiting)
            come = bytes(port.read(waiting or 1))
            if come or self._clock.monotonic_s() >= until_s:
                return come

    def _lost(self, error: Exception) -> LinkLost:
        return LinkLost(in_words(self._settings.url, error))


def _has_descriptor(url: str) -> bool:
    return "://" not in url


def _direction(settings: PortSettings) -> RS485Settings:
    return RS485Settings(
        rts_level_for_tx=True,
        rts_level_for_rx=False,
        loopback=False,
        delay_before_tx=settings.rs485_before_s,
        delay_before_rx=settings.rs485_after_s,
    )


def _watch(port: serial.SerialBase) -> select.poll:
    poll = select.poll()
    poll.register(port.fileno(), select.POLLIN)
    return poll
