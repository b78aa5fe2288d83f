"""What is said on one connection, without a socket."""

import json
from collections.abc import Mapping
from typing import Any

import pytest

from trunnion.service.control.conversation import RequestConversation
from trunnion.service.control.peer import Peer
from trunnion.service.control.protocol import BadArguments
from trunnion.service.control.stop_conversation import StopConversation
from trunnion.service.errors import ServiceError

PEER = Peer(pid=4711, uid=1003, gid=1007)


def echo(arguments: Mapping[str, object]) -> Mapping[str, object]:
    return {"heard": dict(arguments)}


def refuse(arguments: Mapping[str, object]) -> Mapping[str, object]:
    raise ServiceError("expected the button released, got it pressed")


def dislike(arguments: Mapping[str, object]) -> Mapping[str, object]:
    raise BadArguments("expected no arguments")


def fail(arguments: Mapping[str, object]) -> Mapping[str, object]:
    raise ZeroDivisionError


def talk() -> RequestConversation:
    handlers = {"echo": echo, "refuse": refuse, "dislike": dislike, "fail": fail}
    return RequestConversation(handlers, PEER)


def replies(said: bytes) -> list[dict[str, Any]]:
    return [json.loads(line) for line in said.splitlines()]


def test_each_line_has_its_reply_in_order() -> None:
    conversation = talk()
    first = b'{"v":1,"id":1,"command":"echo","arguments":{"a":2.5}}\n{"v":1,"id":"b","comm'
    assert replies(conversation.hear(first)) == [{"v": 1, "id": 1, "result": {"heard": {"a": 2.5}}}]
    assert replies(conversation.hear(b'and":"echo"}\n')) == [
        {"v": 1, "id": "b", "result": {"heard": {}}}
    ]
    assert not conversation.is_over


@pytest.mark.parametrize(
    ("command", "kind"),
    [
        ("refuse", "refused"),
        ("dislike", "bad-arguments"),
        ("fail", "internal"),
        ("ecko", "unknown-command"),
    ],
)
def test_a_request_without_result_has_a_typed_error_and_the_talk_goes_on(
    command: str, kind: str
) -> None:
    conversation = talk()
    line = json.dumps({"v": 1, "id": 9, "command": command}).encode() + b"\n"
    (reply,) = replies(conversation.hear(line))
    assert (reply["id"], reply["error"]["kind"]) == (9, kind)
    assert reply["error"]["message"]
    assert not conversation.is_over


@pytest.mark.parametrize(
    ("garbage", "kind"),
    [(b"\x00\xff\x13 GET / HTTP\n", "malformed"), (b"x" * 5000, "too-long")],
)
def test_garbage_is_answered_and_ends_the_talk(garbage: bytes, kind: str) -> None:
    conversation = talk()
    (reply,) = replies(conversation.hear(garbage + b'{"v":1,"command":"echo"}\n'))
    assert reply["error"]["kind"] == kind
    assert conversation.is_over


class Stops:
    """A place to stop, which may fail."""

    def __init__(self, *, is_broken: bool = False) -> None:
        self.causes: list[str] = []
        self._is_broken = is_broken

    def __call__(self, cause: str) -> None:
        self.causes.append(cause)
        if self._is_broken:
            raise OSError("no space")


@pytest.mark.parametrize("line", [b"stop", b"stop\n", b"stop\r\n", b"stop   \n"])
def test_the_word_stops_without_an_end_of_line(line: bytes) -> None:
    stops = Stops()
    conversation = StopConversation(stops, PEER)
    assert conversation.hear(line) == b"stopped\n"
    assert stops.causes == ["asked for by user 1003, process 4711"]
    assert conversation.is_over


def test_the_word_may_come_in_pieces_and_stops_once() -> None:
    stops = Stops()
    conversation = StopConversation(stops, PEER)
    assert [conversation.hear(piece) for piece in (b"s", b"to", b"p", b"stop")] == [
        b"",
        b"",
        b"stopped\n",
        b"",
    ]
    assert len(stops.causes) == 1


def test_the_cause_is_kept_printable_and_short() -> None:
    stops = Stops()
    StopConversation(stops, PEER).hear(b"stop smoke\x1b[2J\xff " + b"y" * 900 + b"\nmore")
    (cause,) = stops.causes
    assert cause.startswith("asked for by user 1003, process 4711: smoke[2J\ufffd yyy")
    assert len(cause) < 260


@pytest.mark.parametrize("line", [b"status\n", b"\n", b"STOP\n", b"sto\n"])
def test_anything_else_stops_nothing(line: bytes) -> None:
    stops = Stops()
    conversation = StopConversation(stops, PEER)
    assert conversation.hear(line) == b"expected stop\n"
    assert stops.causes == []
    assert conversation.is_over


def test_a_stop_that_fails_is_answered_all_the_same() -> None:
    conversation = StopConversation(Stops(is_broken=True), PEER)
    assert b"not whole" in conversation.hear(b"stop")


@pytest.mark.parametrize(("command", "is_noted"), [("echo", True), ("status", False)])
def test_who_asked_for_a_change_is_noted(
    command: str, is_noted: bool, caplog: pytest.LogCaptureFixture
) -> None:
    caplog.set_level("INFO")
    conversation = RequestConversation({"echo": echo, "status": echo}, PEER)
    conversation.hear(json.dumps({"v": 1, "command": command}).encode() + b"\n")
    assert ("echo, asked for by user 1003, process 4711" in caplog.text) is is_noted
