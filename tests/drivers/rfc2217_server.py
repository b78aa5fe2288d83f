"""pyserial's own RFC 2217 server in front of an adapter that a test holds in its hand."""

import socket
import threading
from typing import Any

from serial.rfc2217 import PortManager

from trunnion_drivers.bench.peer import Peer


class HandHeldAdapter:
    """As much of a serial port as the server asks for; its inputs are set by the test."""

    def __init__(self) -> None:
        self.cts, self.dsr, self.ri, self.cd = True, True, False, True
        self.rts, self.dtr, self.break_condition = False, False, False
        self.baudrate, self.bytesize, self.parity, self.stopbits = 9600, 8, "N", 1
        self.xonxoff = self.rtscts = False
        self.port, self.name = "hand-held", "hand-held"

    def reset_input_buffer(self) -> None: ...

    def reset_output_buffer(self) -> None: ...


class Rfc2217Server:
    """Serves one client after the other on the loopback interface; a context manager."""

    def __init__(self, adapter: HandHeldAdapter, peer: Peer) -> None:
        self._adapter = adapter
        self._peer = peer
        self._server = socket.create_server(("127.0.0.1", 0))
        self._server.settimeout(0.05)
        self.url = f"rfc2217://127.0.0.1:{self._server.getsockname()[1]}"
        self._is_over = threading.Event()
        self._thread = threading.Thread(target=self._run, daemon=True)

    def __enter__(self) -> "Rfc2217Server":
        self._thread.start()
        return self

    def __exit__(self, *_: object) -> None:
        self._is_over.set()
        self._thread.join()
        self._server.close()

    def _run(self) -> None:
        while not self._is_over.is_set():
            try:
                client, _ = self._server.accept()
            except TimeoutError:
                continue
            with client:
                client.settimeout(0.01)
                self._serve(client)

    def _serve(self, client: socket.socket) -> None:
        make: Any = PortManager
        manager = make(self._adapter, _Sender(client))
        while not self._is_over.is_set():
            manager.check_modem_lines()
            try:
                come = client.recv(1024)
            except TimeoutError:
                continue
            except OSError:
                return
            if not come:
                return
            plain = b"".join(manager.filter(come))
            said = self._peer.hear(0.0, plain) if plain else b""
            if said:
                client.sendall(b"".join(manager.escape(said)))


class _Sender:
    def __init__(self, client: socket.socket) -> None:
        self._client = client

    def write(self, data: bytes) -> None:
        self._client.sendall(data)
