"""The controller of a described dialect: the same file, read from the other side.

It waits for whole messages; what it does not know it refuses in the dialect's own words, or leaves
unanswered where there are none.
"""

from collections.abc import Iterator, Mapping
from typing import NamedTuple

from trunnion_drivers.control.command import Rates, Switches, Turn
from trunnion_drivers.dialect.dialect import SWITCHING, Dialect, Flags, Step, Verb
from trunnion_drivers.dialect.message import Found
from trunnion_drivers.interface.values import DriverMotion
from trunnion_drivers.scale import ANGLES, FIRST_RATE, RATES, SECOND_RATE
from trunnion_drivers.simulator.machine import Look, SimulatedMachine

_LONGEST_BUFFER = 4096
_REPORT_EVERY_S = 0.1
_REFUSAL_CODE = 1.0
_STOP_FIRST = (Verb.HALT, *(verb for verb in Verb if verb is not Verb.HALT))


class _Heard(NamedTuple):
    verb: Verb
    step: Step
    found: Found


class DialectPeer:
    """A simulated machine that speaks a dialect."""

    def __init__(self, dialect: Dialect, machine: SimulatedMachine) -> None:
        self._dialect = dialect
        self._machine = machine
        self._buffer = b""
        self._goal: dict[str, float] = {}
        self._switches = Switches(Turn.OFF, Turn.OFF)
        self._reported_s = float("-inf")

    def hear(self, mono_s: float, come: bytes) -> bytes:
        """Do what whole messages say, in their order, and answer each."""
        self._buffer = (self._buffer + come)[-_LONGEST_BUFFER:]
        said = come if self._dialect.has_echo else b""
        while (heard := self._first_heard()) is not None:
            said += self._refuse_what_lies_before(heard.found.begin)
            self._buffer = self._buffer[heard.found.end :]
            said += self._obey(mono_s, heard)
        return said + self._refuse_whole_lines()

    def says_unasked(self, mono_s: float) -> bytes:
        """Reports, ten a second, where the dialect has any."""
        if not self._dialect.reports or mono_s - self._reported_s < _REPORT_EVERY_S:
            return b""
        self._reported_s = mono_s
        values = self._values(mono_s)
        return b"".join(report.encode(values) for report in self._dialect.reports)

    def _first_heard(self) -> _Heard | None:
        return min(self._all_heard(), key=lambda heard: heard.found.begin, default=None)

    def _all_heard(self) -> Iterator[_Heard]:
        for verb in _STOP_FIRST:
            for step in self._dialect.steps(verb):
                found = step.send.find(self._buffer)
                if found is not None:
                    yield _Heard(verb, step, found)

    def _obey(self, mono_s: float, heard: _Heard) -> bytes:
        self._act(mono_s, heard)
        reply = heard.step.reply
        return b"" if reply is None else reply.encode(self._values(mono_s))

    def _act(self, mono_s: float, heard: _Heard) -> None:
        verb = heard.verb
        if verb is Verb.HALT:
            self._goal, self._switches = {}, Switches(Turn.OFF, Turn.OFF)
            self._machine.halt(mono_s)
        elif verb is Verb.CUT_POWER:
            self._machine.cut_power(mono_s, is_cut=True)
        elif verb in (Verb.ENGAGE_BRAKE, Verb.RELEASE_BRAKE):
            self._machine.brake(mono_s, is_engaged=verb is Verb.ENGAGE_BRAKE)
        elif verb is Verb.START:
            self._machine.cut_power(mono_s, is_cut=False)
        elif verb is Verb.MOVE:
            self._move(mono_s, self._dialect.scales.degrees(heard.found.values))
        elif verb in SWITCHING:
            joint, turn = SWITCHING[verb]
            first, second = (turn, self._switches[1]) if joint == 0 else (self._switches[0], turn)
            self._switches = Switches(first, second)
            self._machine.command(mono_s, self._switches)

    def _move(self, mono_s: float, values: Mapping[str, float]) -> None:
        """A goal may come in several messages; a joint not told yet stays where it is."""
        self._goal |= values
        now = self._machine.true_motion(mono_s)
        goal = {**dict(zip((*ANGLES, *RATES), (*now[:2], 0.0, 0.0), strict=True)), **self._goal}
        if any(name in self._goal for name in ANGLES):
            order = DriverMotion(*(goal[name] for name in (*ANGLES, *RATES)))
            self._machine.command(mono_s, order)
        else:
            self._machine.command(mono_s, Rates(goal[FIRST_RATE], goal[SECOND_RATE]))

    def _values(self, mono_s: float) -> dict[str, float]:
        """Everything that an answer may ask for, as it is written; codes and the like are 0."""
        look, motion = self._machine.look(mono_s), self._machine.true_motion(mono_s)
        degrees = {
            "first": look.first_deg,
            "second": look.second_deg,
            FIRST_RATE: motion.first_rate_deg_s,
            SECOND_RATE: motion.second_rate_deg_s,
        }
        written = self._dialect.scales.written(degrees)
        return _Lenient({**written, "flags": float(_bits(self._dialect.flags, look))})

    def _refuse_what_lies_before(self, begin: int) -> bytes:
        return self._refusal() if self._buffer[:begin].strip() else b""

    def _refuse_whole_lines(self) -> bytes:
        """A line that has ended and is no message is not understood."""
        end = self._dialect.end
        if not end or end not in self._buffer:
            return b""
        *lines, self._buffer = self._buffer.split(end)
        return self._refusal() if any(line.strip() for line in lines) else b""

    def _refusal(self) -> bytes:
        refusals = self._dialect.refusals
        if not refusals:
            return b""
        return refusals[0].encode(dict.fromkeys(refusals[0].fields, _REFUSAL_CODE))


class _Lenient(dict[str, float]):
    def __missing__(self, _name: str) -> float:
        return 0.0


def _bits(flags: Flags, look: Look) -> int:
    bits = flags.stop_pressed if look.stop_pressed else flags.stop_released
    if look.at_limit:
        bits |= flags.at_limit
    if look.words is not None and flags.faults:
        bits |= next((mask for words, mask in flags.faults if words == look.words), 0)
    return bits
