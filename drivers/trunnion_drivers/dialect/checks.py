"""What a dialect may not be, although each of its messages is well written."""

from collections.abc import Iterable, Iterator

from trunnion_drivers.control.command import CommandMode
from trunnion_drivers.dialect.dialect import SWITCHING, Dialect, Verb
from trunnion_drivers.dialect.message import Message
from trunnion_drivers.dialect.numbers import DoesNotFit
from trunnion_drivers.interface.values import JointFacts, MountFacts
from trunnion_drivers.scale import ANGLES, RATES

Finding = tuple[tuple[str, ...], str]

_SENT = {*ANGLES, *RATES}
_NEEDED = {CommandMode.POSITION: ANGLES, CommandMode.RATE: RATES, CommandMode.ON_OFF: ()}
_SAMPLE = 1.0


def contradictions(dialect: Dialect) -> Iterator[Finding]:
    """All that does not go together, with the key that is to blame."""
    yield from _what_is_read(dialect)
    yield from _what_moves(dialect)
    yield from _half_a_brake(dialect)
    yield from _unknown_fields(dialect)
    yield from _ambiguous_replies(dialect)


def too_narrow(dialect: Dialect, facts: MountFacts) -> Iterator[Finding]:
    """Fields that cannot hold the whole travel or rate of this mount."""
    for verb, send in _all_sent(dialect):
        for values in _corners(facts):
            try:
                send.encode({**dict.fromkeys(send.fields, 0.0), **dialect.scales.written(values)})
            except DoesNotFit as error:
                yield ("commands", verb.value), f"{send.written!r} is too narrow: {error}"
                break


def _what_is_read(dialect: Dialect) -> Iterator[Finding]:
    replies = [step.reply for step in dialect.steps(Verb.READ) if step.reply]
    read = _fields(replies) if dialect.steps(Verb.READ) else _fields(dialect.reports)
    missing = [name for name in ANGLES if name not in read]
    if missing:
        yield ("commands", "read"), f"expected replies with {_braced(missing)} in them"


def _what_moves(dialect: Dialect) -> Iterator[Finding]:
    if dialect.command is CommandMode.ON_OFF:
        for verb in SWITCHING:
            if not dialect.steps(verb):
                yield ("commands",), f"expected a command `{verb.value}` for switched motors"
        return
    sent = _fields(step.send for step in dialect.steps(Verb.MOVE))
    missing = [name for name in _NEEDED[dialect.command] if name not in sent]
    if missing:
        yield ("commands", "move"), f"expected messages with {_braced(missing)} in them"


def _half_a_brake(dialect: Dialect) -> Iterator[Finding]:
    brake = (Verb.ENGAGE_BRAKE, Verb.RELEASE_BRAKE)
    for verb, other in (brake, brake[::-1]):
        if dialect.steps(verb) and not dialect.steps(other):
            yield ("commands", verb.value), f"expected a command `{other.value}` beside it"


def _unknown_fields(dialect: Dialect) -> Iterator[Finding]:
    for verb, send in _all_sent(dialect):
        allowed = _SENT if verb is Verb.MOVE else set()
        unknown = sorted(send.fields - allowed)
        if unknown:
            known = f"known here: {', '.join(sorted(allowed))}" if allowed else "none belongs here"
            yield ("commands", verb.value), f"unknown field {_braced(unknown)}; {known}"


def _ambiguous_replies(dialect: Dialect) -> Iterator[Finding]:
    for verb in Verb:
        for step in dialect.steps(verb):
            sample = step.reply and step.reply.encode(dict.fromkeys(step.reply.fields, _SAMPLE))
            if sample and any(refusal.find(sample) for refusal in dialect.refusals):
                yield ("commands", verb.value), "ambiguous: this reply could be one of the refusals"


def _all_sent(dialect: Dialect) -> Iterator[tuple[Verb, Message]]:
    for verb in Verb:
        for step in dialect.steps(verb):
            yield verb, step.send


def _fields(messages: Iterable[Message]) -> set[str]:
    return {name for message in messages for name in message.fields}


def _braced(names: list[str]) -> str:
    return ", ".join(f"{{{name}}}" for name in names)


def _corners(facts: MountFacts) -> Iterator[dict[str, float]]:
    for first_deg, first_sense in _ends(facts.first):
        for second_deg, second_sense in _ends(facts.second):
            yield {
                "first": first_deg,
                "second": second_deg,
                "first_rate": first_sense * facts.first.rate_deg_s,
                "second_rate": second_sense * facts.second.rate_deg_s,
            }


def _ends(joint: JointFacts) -> tuple[tuple[float, float], tuple[float, float]]:
    return (joint.lower_deg, -1.0), (joint.upper_deg, 1.0)
