"""What is said on one connection: requests in, replies out. No I/O."""

import logging
from collections.abc import Callable, Iterator, Mapping
from typing import Protocol

from trunnion.service.control.lines import LineBuffer, LineTooLong
from trunnion.service.control.peer import Peer
from trunnion.service.control.protocol import (
    LONGEST_REQUEST_BYTES,
    BadArguments,
    ErrorKind,
    ProtocolError,
    Request,
    encode_error,
    encode_result,
    parse_request,
)
from trunnion.service.errors import ServiceError

_log = logging.getLogger(__name__)

Handler = Callable[[Mapping[str, object]], Mapping[str, object]]
"""Fulfils one command with its arguments; quick, since others wait.

Raises BadArguments or another ServiceError.
"""

LOOKING_ON = frozenset({"status"})
"""Commands that change nothing, and are not worth a line in the log."""


class Conversation(Protocol):
    """One connection's side of the talk."""

    @property
    def is_over(self) -> bool:
        """Whether to hang up once everything said has been sent."""
        ...

    def hear(self, data: bytes) -> bytes:
        """Take in what came; return what to send."""
        ...


class RequestConversation:
    """Answers each line by the handler of its command; hangs up on what is no request."""

    def __init__(self, handlers: Mapping[str, Handler], peer: Peer) -> None:
        self._handlers = handlers
        self._peer = peer
        self._lines = LineBuffer(LONGEST_REQUEST_BYTES)
        self._is_over = False

    @property
    def is_over(self) -> bool:
        """Whether to hang up once everything said has been sent."""
        return self._is_over

    def hear(self, data: bytes) -> bytes:
        """Take in what came; return the replies to the lines that are whole now."""
        self._lines.add(data)
        return b"".join(reply + b"\n" for reply in self._replies())

    def _replies(self) -> Iterator[bytes]:
        try:
            while not self._is_over and (line := self._lines.next_line()) is not None:
                yield self._reply(line)
        except LineTooLong:
            self._is_over = True
            message = f"expected a line of at most {LONGEST_REQUEST_BYTES} bytes, got more"
            yield encode_error(None, ErrorKind.TOO_LONG, message)

    def _reply(self, line: bytes) -> bytes:
        try:
            request = parse_request(line)
        except ProtocolError as error:
            self._is_over = error.kind is ErrorKind.MALFORMED
            _log.warning("no request: %s (%s)", error, self._peer)
            return encode_error(error.request_id, error.kind, str(error))
        return self._fulfil(request)

    def _fulfil(self, request: Request) -> bytes:
        handler = self._handlers.get(request.command)
        if handler is None:
            known = ", ".join(sorted(self._handlers))
            message = f"expected one of the commands {known}, got {request.command!r}"
            return encode_error(request.request_id, ErrorKind.UNKNOWN_COMMAND, message)
        if request.command not in LOOKING_ON:
            _log.info("%s, asked for by %s", request.command, self._peer)
        try:
            return encode_result(request.request_id, handler(request.arguments))
        except BadArguments as error:
            return encode_error(request.request_id, ErrorKind.BAD_ARGUMENTS, str(error))
        except ServiceError as error:
            return encode_error(request.request_id, ErrorKind.REFUSED, str(error))
        except Exception:  # noqa: BLE001 - one command's mistake must not cost the others their daemon
            _log.exception("the command %s failed by a mistake of ours", request.command)
            message = "the daemon made a mistake of its own; its log says more"
            return encode_error(request.request_id, ErrorKind.INTERNAL, message)
