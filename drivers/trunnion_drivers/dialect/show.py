"""What a dialect would send, and how a captured answer is read, without hardware."""

from collections.abc import Iterator

from trunnion_drivers.control.command import Command, CommandMode, Rates, Switches, Turn
from trunnion_drivers.dialect.dialect import Dialect, Verb
from trunnion_drivers.dialect.message import Message
from trunnion_drivers.dialect.speech import Utterance, spoken, utterances
from trunnion_drivers.interface.values import DriverMotion


def sent_lines(dialect: Dialect, motion: DriverMotion) -> Iterator[str]:
    """One line a message: for the verb it belongs to, what is sent and what must come back."""
    for verb in Verb:
        if verb is not Verb.MOVE:
            for said in utterances(dialect, verb):
                yield _line(verb, said)
    if dialect.command is not CommandMode.ON_OFF:
        for said in spoken(dialect, _command(dialect.command, motion)):
            yield _line(Verb.MOVE, said)


def read_lines(dialect: Dialect, captured: bytes) -> Iterator[str]:
    """One line a way in which captured bytes can be understood."""
    for what, message in _what_may_come(dialect):
        found = message.find(captured)
        if found is not None:
            values = dialect.scales.degrees(found.values)
            shown = ", ".join(f"{name} {value:.6g}" for name, value in values.items()) or "yes"
            bits = values.get("flags")
            yield f"{what}: {shown}{'' if bits is None else _told(dialect, int(bits))}"


def _what_may_come(dialect: Dialect) -> Iterator[tuple[str, Message]]:
    for verb in Verb:
        for step in dialect.steps(verb):
            if step.reply is not None:
                yield f"answer to {verb.value}", step.reply
    yield from (("refusal", message) for message in dialect.refusals)
    yield from (("report", message) for message in dialect.reports)


def _told(dialect: Dialect, bits: int) -> str:
    flags = dialect.flags
    told = [
        "at a limit" if bits & flags.at_limit else "",
        "stop pressed" if flags.has_stop and flags.is_stopped(bits) else "",
        flags.words(bits) or "",
    ]
    return "".join(f", {words}" for words in told if words)


def _command(mode: CommandMode, motion: DriverMotion) -> Command:
    if mode is CommandMode.RATE:
        return Rates(motion.first_rate_deg_s, motion.second_rate_deg_s)
    return motion if mode is CommandMode.POSITION else Switches(Turn.OFF, Turn.OFF)


def _line(verb: Verb, said: Utterance) -> str:
    answer = f"  answer {said.reply.written!r}" if said.reply else "  no answer"
    return f"{verb.value:10} {shown(said.sent)}{answer}"


def shown(data: bytes) -> str:
    """Bytes for people: as text where they are text, else in hexadecimal."""
    is_text = all(0x20 <= byte < 0x7F or byte in b"\r\n\t\x02\x03" for byte in data)
    return repr(data)[1:] if is_text else data.hex(" ").upper()
