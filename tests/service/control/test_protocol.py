"""The control protocol as values."""

import json
from contextlib import suppress

import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion.service.control.lines import LineBuffer, LineTooLong
from trunnion.service.control.protocol import (
    ErrorKind,
    ProtocolError,
    Reply,
    Request,
    encode_error,
    encode_request,
    encode_result,
    parse_reply,
    parse_request,
)

json_values = st.recursive(
    st.none() | st.booleans() | st.integers() | st.floats(allow_nan=False, allow_infinity=False)
    | st.text(max_size=20),
    lambda inner: st.lists(inner, max_size=4) | st.dictionaries(st.text(max_size=8), inner),
    max_leaves=8,
)  # fmt: skip
ids = st.none() | st.integers() | st.text(max_size=64)


@given(ids, st.text(max_size=30), st.dictionaries(st.text(max_size=8), json_values, max_size=4))
def test_a_request_survives_the_wire(
    request_id: int | str | None, command: str, arguments: dict[str, object]
) -> None:
    request = Request(request_id, command, arguments)
    line = encode_request(request)
    assert b"\n" not in line
    assert parse_request(line) == request


@given(ids, st.dictionaries(st.text(max_size=8), json_values, max_size=4))
def test_a_reply_survives_the_wire(request_id: int | str | None, result: dict[str, object]) -> None:
    assert parse_reply(encode_result(request_id, result)) == Reply(request_id, result, None)


@pytest.mark.parametrize("kind", ErrorKind)
def test_an_error_survives_the_wire(kind: ErrorKind) -> None:
    line = encode_error("b-17", kind, "expected rest, got motion")
    assert parse_reply(line) == Reply("b-17", None, (kind, "expected rest, got motion"))


def test_the_shape_on_the_wire_is_the_documented_one() -> None:
    assert json.loads(encode_request(Request(7, "status", {}))) == {
        "v": 1,
        "id": 7,
        "command": "status",
        "arguments": {},
    }
    assert parse_request(b'{"v":1,"command":"status"}') == Request(None, "status", {})


@given(st.binary(max_size=200) | json_values.map(lambda value: json.dumps(value).encode()))
def test_whatever_comes_is_understood_or_refused_by_type(line: bytes) -> None:
    for parse in (parse_request, parse_reply):
        with suppress(ProtocolError):
            parse(line)


@pytest.mark.parametrize(
    ("line", "kind", "request_id"),
    [
        (b"", ErrorKind.MALFORMED, None),
        (b"\xff\xfe", ErrorKind.MALFORMED, None),
        (b"[1,2]", ErrorKind.MALFORMED, None),
        (b"[" * 4000, ErrorKind.MALFORMED, None),
        (b'{"v":NaN}', ErrorKind.MALFORMED, None),
        (b'{"v":1,"id":true,"command":"x"}', ErrorKind.MALFORMED, None),
        (b'{"v":1,"id":{},"command":"x"}', ErrorKind.MALFORMED, None),
        (b'{"v":2,"id":31,"command":"x"}', ErrorKind.VERSION, 31),
        (b'{"id":31,"command":"x"}', ErrorKind.VERSION, 31),
        (b'{"v":1,"id":31}', ErrorKind.MALFORMED, 31),
        (b'{"v":1,"id":31,"command":5}', ErrorKind.MALFORMED, 31),
        (b'{"v":1,"id":31,"command":"x","arguments":[]}', ErrorKind.MALFORMED, 31),
        (b'{"v":1,"id":31,"command":"x","argments":{}}', ErrorKind.MALFORMED, 31),
    ],
)
def test_what_is_refused_says_why_and_to_whom(
    line: bytes, kind: ErrorKind, request_id: int | None
) -> None:
    with pytest.raises(ProtocolError) as refused:
        parse_request(line)
    assert (refused.value.kind, refused.value.request_id) == (kind, request_id)


def test_a_result_that_json_cannot_hold_is_our_mistake() -> None:
    with pytest.raises(ValueError, match="JSON"):
        encode_result(1, {"elevation_deg": float("nan")})


def lines_of(buffer: LineBuffer) -> list[bytes]:
    return list(iter(buffer.next_line, None))


@given(
    st.lists(st.binary(max_size=20).filter(lambda b: b"\n" not in b and not b.endswith(b"\r"))),
    st.lists(st.integers(1, 7), min_size=1),
)
def test_lines_do_not_depend_on_how_they_were_cut(lines: list[bytes], cuts: list[int]) -> None:
    stream = b"".join(line + b"\n" for line in lines)
    buffer, heard, turn = LineBuffer(20), list[bytes](), 0
    while stream:
        size = cuts[turn % len(cuts)]
        buffer.add(stream[:size])
        heard += lines_of(buffer)
        stream, turn = stream[size:], turn + 1
    assert heard == lines


@pytest.mark.parametrize("data", [b"x" * 21, b"x" * 21 + b"\n"])
def test_a_line_beyond_its_bound_is_refused_whole_or_not(data: bytes) -> None:
    buffer = LineBuffer(20)
    buffer.add(b"short\n" + data)
    assert buffer.next_line() == b"short"
    with pytest.raises(LineTooLong):
        buffer.next_line()


def test_a_line_at_its_bound_passes() -> None:
    buffer = LineBuffer(20)
    buffer.add(b"x" * 20 + b"\n")
    assert buffer.next_line() == b"x" * 20
