"""From a command to the bytes on the wire, and from bytes to what they say. Pure."""

from collections.abc import Mapping
from typing import NamedTuple

from trunnion_drivers.control.command import Command, Rates, Switches
from trunnion_drivers.dialect.dialect import SWITCHING, Dialect, Step, Verb
from trunnion_drivers.dialect.message import Message
from trunnion_drivers.interface.errors import Garbled, Refused
from trunnion_drivers.interface.values import DriverMotion, DriverReading


class Utterance(NamedTuple):
    """Bytes to send, and the answer that must follow, if any."""

    sent: bytes
    reply: Message | None


def utterances(dialect: Dialect, verb: Verb) -> list[Utterance]:
    """What to send for a verb without values."""
    return [Utterance(step.send.encode({}), step.reply) for step in dialect.steps(verb)]


def spoken(dialect: Dialect, command: Command) -> list[Utterance]:
    """What to send for a command. Raises DoesNotFit."""
    if isinstance(command, Switches):
        return [said for verb in _verbs(command) for said in utterances(dialect, verb)]
    values = dialect.scales.written(_values(command))
    return [_with(step, values) for step in dialect.steps(Verb.MOVE)]


def understood(dialect: Dialect, utterance: Utterance, come: bytes) -> Mapping[str, float] | None:
    """What an answer says, in degrees; None where more must come.

    Raises Refused for a refusal, Garbled where one's own message comes back instead of an answer.
    """
    if dialect.has_echo:
        come = come.removeprefix(utterance.sent)
    if utterance.reply is not None:
        found = utterance.reply.find(come)
        if found is not None:
            return dialect.scales.degrees(found.values)
    for refusal in dialect.refusals:
        if refusal.find(come) is not None:
            raise Refused(f"the controller refused {utterance.sent!r}: {come[-80:]!r}")
    if not dialect.has_echo and come == utterance.sent:
        raise Garbled(f"expected an answer, got an echo of {utterance.sent!r}")
    return None


def reported(dialect: Dialect, come: bytes) -> Mapping[str, float] | None:
    """What the newest report in a stream says, in degrees; None where there is none."""
    newest = None
    for report in dialect.reports:
        while (found := report.find(come)) is not None:
            newest = dialect.scales.degrees(found.values)
            come = come[found.end :]
    return newest


def reading_of(dialect: Dialect, taken_s: float, values: Mapping[str, float]) -> DriverReading:
    """The reading that these values make. Raises Garbled where an angle is missing."""
    if "first" not in values or "second" not in values:
        raise Garbled(f"expected both angles, got {sorted(values)}")
    bits, flags = int(values.get("flags", 0)), dialect.flags
    return DriverReading(
        taken_s,
        values["first"],
        values["second"],
        stop_pressed=flags.has_stop and flags.is_stopped(bits),
        at_limit=bool(bits & flags.at_limit),
        fault=flags.words(bits),
    )


def _values(command: DriverMotion | Rates) -> dict[str, float]:
    if isinstance(command, Rates):
        return {"first_rate": command.first_deg_s, "second_rate": command.second_deg_s}
    first_deg, second_deg, first_rate, second_rate = command
    return {
        "first": first_deg,
        "second": second_deg,
        "first_rate": first_rate,
        "second_rate": second_rate,
    }


def _with(step: Step, values: Mapping[str, float]) -> Utterance:
    return Utterance(step.send.encode(values), step.reply)


def _verbs(switches: Switches) -> list[Verb]:
    return [verb for verb, (joint, turn) in SWITCHING.items() if switches[joint] is turn]
