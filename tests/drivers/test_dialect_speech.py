"""Answers cut, joined, doubled, drowned in noise: an angle that was sent, or nothing."""

from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.drivers.benches import DIALECTS
from trunnion_drivers.control.command import Rates
from trunnion_drivers.dialect.__main__ import main
from trunnion_drivers.dialect.dialect import Dialect, Verb
from trunnion_drivers.dialect.load import load_dialect
from trunnion_drivers.dialect.speech import reading_of, spoken, understood, utterances
from trunnion_drivers.interface.errors import Garbled, Refused
from trunnion_drivers.interface.values import DriverMotion

NAMES = ["reedmace", "plover"]
LOADED = {name: load_dialect(DIALECTS / f"{name}.yaml") for name in NAMES}
angles = st.tuples(st.floats(-263, 271), st.floats(1.7, 91.9))
dialects = st.sampled_from(NAMES).map(LOADED.__getitem__)


def answer(dialect: Dialect, first_deg: float, second_deg: float, flags: int = 0x80) -> bytes:
    reply = utterances(dialect, Verb.READ)[0].reply
    assert reply is not None
    written = dialect.scales.written({"first": first_deg, "second": second_deg})
    return reply.encode({**written, "flags": flags})


def heard(dialect: Dialect, come: bytes) -> tuple[float, float] | None:
    try:
        values = understood(dialect, utterances(dialect, Verb.READ)[0], come)
    except (Refused, Garbled):
        return None
    if values is None:
        return None
    return values["first"], values["second"]


@given(dialects, angles)
def test_what_is_answered_is_understood(dialect: Dialect, sent: tuple[float, float]) -> None:
    assert heard(dialect, answer(dialect, *sent)) == pytest.approx(sent, abs=6e-4)


@given(dialects, angles, st.data())
def test_a_cut_answer_is_none(
    dialect: Dialect, sent: tuple[float, float], data: st.DataObject
) -> None:
    whole = answer(dialect, *sent)
    begin = data.draw(st.integers(0, len(whole) - 1))
    end = data.draw(st.integers(begin, len(whole)))
    if (begin, end) != (0, len(whole)):
        assert heard(dialect, whole[begin:end]) is None


@given(dialects, angles, angles)
def test_of_two_answers_the_first_is_taken(
    dialect: Dialect, one: tuple[float, float], other: tuple[float, float]
) -> None:
    come = answer(dialect, *one) + answer(dialect, *other)
    assert heard(dialect, come) == pytest.approx(one, abs=6e-4)
    come = answer(dialect, *one)[:-3] + answer(dialect, *other)
    assert heard(dialect, come) in (None, pytest.approx(other, abs=6e-4))


@given(dialects, angles, st.integers(0, 400), st.integers(1, 255))
def test_a_changed_byte_is_never_another_angle(
    dialect: Dialect, sent: tuple[float, float], at: int, change: int
) -> None:
    """One byte changed is within the power of both checksums."""
    whole = bytearray(answer(dialect, *sent))
    whole[at % len(whole)] ^= change
    assert heard(dialect, bytes(whole)) in (None, pytest.approx(sent, abs=6e-4))


@given(dialects, st.binary(max_size=200))
def test_noise_is_no_answer(dialect: Dialect, noise: bytes) -> None:
    assert heard(dialect, noise) is None


@given(angles, st.binary(max_size=40))
def test_an_answer_is_found_behind_noise(sent: tuple[float, float], noise: bytes) -> None:
    come = noise + b"\r\n" + answer(LOADED["reedmace"], *sent)
    assert heard(LOADED["reedmace"], come) in (None, pytest.approx(sent, abs=6e-4))


def test_a_refusal_is_told() -> None:
    dialect = LOADED["reedmace"]
    refusal = dialect.refusals[0].encode({"code": 7})
    with pytest.raises(Refused, match=r"\?07"):
        heard_or_raise(dialect, refusal)


def test_an_echo_that_was_not_expected_is_told() -> None:
    dialect = LOADED["plover"]
    with pytest.raises(Garbled, match="echo"):
        heard_or_raise(dialect, utterances(dialect, Verb.READ)[0].sent)


def heard_or_raise(dialect: Dialect, come: bytes) -> None:
    understood(dialect, utterances(dialect, Verb.READ)[0], come)


def test_flags_are_told() -> None:
    dialect = LOADED["plover"]
    values = {"first": 1.0, "second": 2.0}
    assert not reading_of(dialect, 5.0, {**values, "flags": 0x80}).stop_pressed
    told = reading_of(dialect, 5.0, {**values, "flags": 0x0C})
    assert told.stop_pressed
    assert told.at_limit
    assert told.fault == "motor too hot"


def test_what_is_sent_says_what_was_ordered() -> None:
    reedmace, plover = LOADED["reedmace"], LOADED["plover"]
    (order,) = spoken(reedmace, DriverMotion(-12.5, 33.25, 0.5, -0.25))
    assert order.sent.startswith(b"G-0012.500+0033.250+00.5000-00.2500*")
    first, second = spoken(plover, Rates(1.5, -0.5))
    assert first.sent[3:6] == b"\x00" + (1500).to_bytes(2, "big", signed=True)
    assert second.sent[3:6] == b"\x01" + (500).to_bytes(2, "big", signed=True)


def test_the_command_shows_what_is_sent_and_what_is_read(
    capsys: pytest.CaptureFixture[str],
) -> None:
    path = str(DIALECTS / "reedmace.yaml")
    assert main([path, "--first", "17.5"]) == 0
    assert "G+0017.500" in capsys.readouterr().out
    captured = answer(LOADED["reedmace"], 12.5, 33.25, 0x10).decode()
    assert main([path, "--captured", captured]) == 0
    assert "first 12.5, second 33.25, flags 16, drive overload" in capsys.readouterr().out
    assert main([path, "--captured", "garbage"]) == 1
    assert main([str(Path(path).with_name("none.yaml"))]) == 1
    assert "No such file" in capsys.readouterr().err
