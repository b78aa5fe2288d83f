"""A Modbus server as its client sees it, through pymodbus, with the errors of the contract.

pymodbus connects anew by itself when it is asked something; here a lost connection stays lost until
it is opened again, because the daemon must look before anything moves.
"""

from collections.abc import Callable, Sequence
from typing import Any
from urllib.parse import urlsplit

from pymodbus.client import ModbusSerialClient, ModbusTcpClient
from pymodbus.exceptions import ConnectionException, ModbusException
from serial.rs485 import RS485Settings

from trunnion_drivers.interface.errors import Garbled, LinkLost, NoReply, Refused
from trunnion_drivers.modbus.settings import ModbusSettings, Table

_PORT = 502


class ModbusLink:
    """One unit of one server."""

    def __init__(self, settings: ModbusSettings) -> None:
        self._url = settings.url
        self._unit = settings.unit
        self._is_rs485 = settings.rs485
        self._client: Any = _client(settings)

    def open(self) -> None:
        """Connect. Raises LinkLost."""
        if not self._client.connect():
            raise LinkLost(f"{self._url}: expected a Modbus server, and there is no connection")
        if self._is_rs485:
            self._switch_direction()

    def close(self) -> None:
        """Hang up."""
        self._client.close()

    def _switch_direction(self) -> None:
        try:
            self._client.socket.rts = False
            self._client.socket.rs485_mode = RS485Settings(loopback=False)
        except (OSError, ValueError) as error:
            self.close()
            raise LinkLost(f"{self._url}: cannot switch its RS485 direction: {error}") from error

    def registers(self, table: Table, address: int, count: int) -> list[int]:
        """Read registers. Raises LinkLost, NoReply, Garbled."""
        client = self._client
        read = (
            client.read_input_registers if table is Table.INPUT else client.read_holding_registers
        )
        words = self._ask(lambda: read(address, count=count, device_id=self._unit)).registers
        if len(words) != count:
            raise Garbled(f"expected {count} registers, got {len(words)}")
        return list(words)

    def inputs(self, address: int, count: int) -> list[bool]:
        """Read discrete inputs. Raises LinkLost, NoReply, Garbled."""
        client = self._client
        bits = self._ask(
            lambda: client.read_discrete_inputs(address, count=count, device_id=self._unit)
        ).bits
        if len(bits) < count:
            raise Garbled(f"expected {count} inputs, got {len(bits)}")
        return [bool(bit) for bit in bits[:count]]

    def write_registers(self, address: int, words: Sequence[int]) -> None:
        """Write holding registers. Raises LinkLost, NoReply, Garbled, Refused."""
        client = self._client
        self._ask(lambda: client.write_registers(address, list(words), device_id=self._unit))

    def write_coil(self, address: int, *, is_on: bool) -> None:
        """Write one coil. Raises LinkLost, NoReply, Garbled, Refused."""
        client = self._client
        self._ask(lambda: client.write_coil(address, is_on, device_id=self._unit))

    def _ask(self, ask: Callable[[], Any]) -> Any:
        if not self._client.connected:
            raise LinkLost(f"{self._url}: the connection is gone")
        try:
            answer = ask()
        except ConnectionException as error:
            raise LinkLost(f"{self._url}: the connection broke") from error
        except ModbusException as error:
            raise NoReply(f"{self._url}: expected an answer in time: {error}") from error
        except OSError as error:
            raise LinkLost(f"{self._url}: the connection broke: {error}") from error
        if answer.isError():
            raise Refused(f"{self._url}: the server answered with an exception: {answer}")
        return answer


def _client(settings: ModbusSettings) -> ModbusTcpClient | ModbusSerialClient:
    timeout_s = settings.reply_within_s
    if settings.is_tcp:
        parts = urlsplit(settings.url)
        return ModbusTcpClient(
            parts.hostname or "", port=parts.port or _PORT, timeout=timeout_s, retries=0
        )
    return ModbusSerialClient(
        settings.url,
        baudrate=settings.baud_rate,
        bytesize=settings.data_bits,
        parity=settings.parity.value[0].upper(),
        stopbits=settings.stop_bits,
        timeout=timeout_s,
        retries=0,
    )
