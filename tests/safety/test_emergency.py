"""The emergency stop as text: what was written is read, and damage is a stop."""

from hashlib import sha256

from hypothesis import given
from hypothesis import strategies as st

from trunnion.safety.emergency import EmergencyStop, decode, encode

STOP = EmergencyStop("button at the south door", 1_796_083_217.25)


def test_what_was_written_is_read() -> None:
    assert decode(encode(STOP)) == STOP


@given(st.text(), st.floats(0.0, 4e9))
def test_any_cause_stays_one_line_and_readable(cause: str, utc_s: float) -> None:
    stop = decode(encode(EmergencyStop(cause, utc_s)))
    assert stop == EmergencyStop(" ".join(cause.split()), utc_s)


@given(st.integers(0, len(encode(STOP)) - 2))
def test_a_text_cut_anywhere_is_a_stop_that_says_so(length: int) -> None:
    stop = decode(encode(STOP)[:length])
    assert "damaged" in stop.cause
    assert stop.utc_s == 0.0


@given(st.integers(0, len(encode(STOP)) - 2), st.characters())
def test_a_text_with_one_wrong_character_is_a_stop(place: int, character: str) -> None:
    text = encode(STOP)
    spoilt = text[:place] + character + text[place + 1 :]
    assert spoilt == text or "damaged" in decode(spoilt).cause


@given(st.text())
def test_any_text_at_all_is_a_stop(text: str) -> None:
    assert isinstance(decode(text), EmergencyStop)


def test_a_later_version_is_a_stop() -> None:
    assert "damaged or of another version" in decode(encode(STOP).replace(" 1\n", " 2\n", 1)).cause


def test_a_text_whose_time_is_none_is_a_stop_that_says_so() -> None:
    body = encode(STOP).rsplit("\n", 2)[0].replace(repr(STOP.utc_s), "yesterday") + "\n"
    forged = f"{body}{sha256(body.encode()).hexdigest()}\n"
    assert "damaged" in decode(forged).cause
    assert decode(forged).utc_s == 0.0


def test_a_text_with_a_line_too_many_is_a_stop_that_says_so() -> None:
    body = encode(STOP).rsplit("\n", 2)[0] + "\nmore\n"
    forged = f"{body}{sha256(body.encode()).hexdigest()}\n"
    assert "damaged" in decode(forged).cause
