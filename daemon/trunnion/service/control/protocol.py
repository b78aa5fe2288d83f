"""The control protocol as values: one request a line, one reply a line, JSON, UTF-8. No I/O.

A request is `{"v": 1, "id": 7, "command": "status", "arguments": {}}`, where `id` (a number or a
short text, sent back unchanged) and `arguments` may be left out. A reply carries the same `v` and
`id`, and either `result`, an object, or `error`, an object of `kind` and `message`.
"""

import json
from collections.abc import Mapping
from enum import Enum
from typing import Any, NamedTuple, NoReturn

from trunnion.service.errors import ServiceError

VERSION = 1
LONGEST_REQUEST_BYTES = 4096
LONGEST_REPLY_BYTES = 1024 * 1024
_LONGEST_ID = 64
_KEYS = frozenset({"v", "id", "command", "arguments"})

RequestId = int | str | None


class ErrorKind(Enum):
    """Why a request has no result."""

    MALFORMED = "malformed"
    TOO_LONG = "too-long"
    VERSION = "version"
    UNKNOWN_COMMAND = "unknown-command"
    BAD_ARGUMENTS = "bad-arguments"
    REFUSED = "refused"
    INTERNAL = "internal"


class BadArguments(ServiceError):  # noqa: N818 - named for what happened
    """For handlers: the arguments are not what this command takes."""


class ProtocolError(Exception):
    """A line that is no request, or a reply that is none."""

    def __init__(self, kind: ErrorKind, message: str, request_id: RequestId = None) -> None:
        super().__init__(message)
        self.kind = kind
        self.request_id = request_id


class Request(NamedTuple):
    """One request: what to do, with which arguments, and the number to answer under."""

    request_id: RequestId
    command: str
    arguments: Mapping[str, object]


def encode_request(request: Request) -> bytes:
    """One line for the wire, without its end."""
    return _line(
        {
            "v": VERSION,
            "id": request.request_id,
            "command": request.command,
            "arguments": dict(request.arguments),
        }
    )


def parse_request(line: bytes) -> Request:
    """Understand one line; raises ProtocolError, which carries the id where there was one."""
    fields = _object(line)
    request_id = _request_id(fields.get("id"))
    if fields.get("v") != VERSION:
        message = f"expected version {VERSION} of the protocol, got {fields.get('v')!r}"
        raise ProtocolError(ErrorKind.VERSION, message, request_id)
    if unknown := fields.keys() - _KEYS:
        message = f"expected no other keys than {sorted(_KEYS)}, got {sorted(unknown)}"
        raise ProtocolError(ErrorKind.MALFORMED, message, request_id)
    command, arguments = fields.get("command"), fields.get("arguments", {})
    if not isinstance(command, str) or not isinstance(arguments, dict):
        message = "expected a text as `command` and an object as `arguments`"
        raise ProtocolError(ErrorKind.MALFORMED, message, request_id)
    return Request(request_id, command, arguments)


def encode_result(request_id: RequestId, result: Mapping[str, object]) -> bytes:
    """The reply to a request that was fulfilled; a value JSON cannot hold raises."""
    return _line({"v": VERSION, "id": request_id, "result": dict(result)})


def encode_error(request_id: RequestId, kind: ErrorKind, message: str) -> bytes:
    """The reply to a request that was not."""
    error = {"kind": kind.value, "message": message}
    return _line({"v": VERSION, "id": request_id, "error": error})


class Reply(NamedTuple):
    """One reply: the result, or why there is none."""

    request_id: RequestId
    result: dict[str, Any] | None
    error: tuple[ErrorKind, str] | None


def parse_reply(line: bytes) -> Reply:
    """Understand one reply; raises ProtocolError."""
    match _object(line):
        case {"v": 1, "id": request_id, "result": dict(result)}:
            return Reply(_request_id(request_id), result, None)
        case {"v": 1, "id": request_id, "error": {"kind": str(kind), "message": str(message)}}:
            return Reply(_request_id(request_id), None, (_error_kind(kind), message))
    raise ProtocolError(ErrorKind.MALFORMED, "expected a reply, got something else")


def _error_kind(kind: str) -> ErrorKind:
    try:
        return ErrorKind(kind)
    except ValueError:
        return ErrorKind.INTERNAL


def _line(fields: Mapping[str, object]) -> bytes:
    return json.dumps(fields, ensure_ascii=False, allow_nan=False, separators=(",", ":")).encode()


def _object(line: bytes) -> dict[str, Any]:
    try:
        fields = json.loads(line, parse_constant=_refuse_constant)
    except (ValueError, RecursionError) as error:
        raise ProtocolError(ErrorKind.MALFORMED, f"expected JSON, got {error}") from error
    if not isinstance(fields, dict):
        raise ProtocolError(ErrorKind.MALFORMED, f"expected an object, got {type(fields).__name__}")
    return fields


def _refuse_constant(constant: str) -> NoReturn:
    raise ValueError(f"the number {constant}")


def _request_id(value: object) -> RequestId:
    if value is None or (isinstance(value, int) and not isinstance(value, bool)):
        return value
    if isinstance(value, str) and len(value) <= _LONGEST_ID:
        return value
    message = f"expected a whole number or a text of at most {_LONGEST_ID} letters as `id`"
    raise ProtocolError(ErrorKind.MALFORMED, message)
