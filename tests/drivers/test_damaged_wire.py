"""A whole exchange over a damaged wire: the angles that were sent, or an error of the contract."""

from functools import partial

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.drivers.benches import DIALECTS
from tests.drivers.mounts import HandClock
from tests.drivers.scripted_port import Scripted
from trunnion_drivers.dialect.dialect import Dialect, Verb
from trunnion_drivers.dialect.load import load_dialect
from trunnion_drivers.dialect.speech import understood, utterances
from trunnion_drivers.interface.errors import Garbled, NoReply, Refused
from trunnion_drivers.serial_port.exchange import Exchanges

REPLY_WITHIN_S = 0.3
SPOKEN = [load_dialect(DIALECTS / name) for name in ("reedmace.yaml", "plover.yaml")]

angles = st.tuples(st.floats(-263, 271), st.floats(1.7, 91.9))
places = st.integers(0, 60)


def cut_short(end: int, answer: bytes) -> bytes:
    return answer[: end % len(answer)]


def cut_at_the_front(begin: int, answer: bytes) -> bytes:
    return answer[begin % len(answer) :]


def without_some(at: int, answer: bytes) -> bytes:
    return answer[: at % len(answer)] + answer[at % len(answer) + 2 :]


def with_another_byte(at: int, answer: bytes) -> bytes:
    changed = bytearray(answer)
    changed[at % len(answer)] ^= 0x15
    return bytes(changed)


def doubled(_: int, answer: bytes) -> bytes:
    return answer + answer


def behind_noise(at: int, answer: bytes) -> bytes:
    return bytes(range(at, at + 20)) + answer


def before_noise(at: int, answer: bytes) -> bytes:
    return answer + bytes(range(at + 100, at + 120))


damages = st.sampled_from(
    [cut_short, cut_at_the_front, without_some, with_another_byte, doubled, behind_noise,
     before_noise, lambda _, answer: answer]
)  # fmt: skip


@given(st.sampled_from(SPOKEN), angles, damages, places, places, st.floats(0.0, 0.4))
def test_an_answer_is_right_or_an_error(
    dialect: Dialect,
    sent_deg: tuple[float, float],
    damage: object,
    at: int,
    split: int,
    delay_s: float,
) -> None:
    question = utterances(dialect, Verb.READ)[0]
    assert question.reply is not None
    written = dialect.scales.written({"first": sent_deg[0], "second": sent_deg[1]})
    whole = question.reply.encode({**written, "flags": 0x80})
    come = damage(at, whole) if callable(damage) else whole
    clock = HandClock()
    pieces = [(delay_s, come[:split]), (delay_s + 0.01, come[split:])]
    exchanges = Exchanges(Scripted(clock, pieces), clock, REPLY_WITHIN_S, 0.0)
    try:
        values = exchanges.ask(question.sent, partial(understood, dialect, question))
    except (NoReply, Garbled, Refused):
        assert come != whole or delay_s + 0.01 > REPLY_WITHIN_S
    else:
        assert (values["first"], values["second"]) == pytest.approx(sent_deg, abs=6e-4)
