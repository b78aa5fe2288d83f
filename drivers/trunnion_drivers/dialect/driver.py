"""A mount behind a controller that a dialect file describes, over any serial port."""

from collections.abc import Iterable, Mapping
from functools import partial
from typing import Self

from trunnion_drivers.control.command import Command, CommandMode
from trunnion_drivers.control.steered import SteeredDriver
from trunnion_drivers.dialect.checks import too_narrow
from trunnion_drivers.dialect.dialect import Dialect, Verb
from trunnion_drivers.dialect.load import load_dialect
from trunnion_drivers.dialect.settings import DialectSettings
from trunnion_drivers.dialect.speech import (
    Utterance,
    reading_of,
    reported,
    spoken,
    understood,
    utterances,
)
from trunnion_drivers.interface.errors import BadSettings, SettingProblem
from trunnion_drivers.interface.values import Capabilities, Clock, DriverReading, MountFacts
from trunnion_drivers.serial_port.any_port import port_for
from trunnion_drivers.serial_port.exchange import Exchanges
from trunnion_drivers.serial_port.settings import PowerLine, StopLine
from trunnion_drivers.settings import checked


class DialectDriver(SteeredDriver):
    """Speaks a dialect; what the controller cannot do itself the control laws do."""

    def __init__(
        self, settings: DialectSettings, dialect: Dialect, facts: MountFacts, clock: Clock
    ) -> None:
        steering = settings.control.steering(
            dialect.command, facts, follows_rate=dialect.follows_rate
        )
        super().__init__(steering, facts, clock)
        self._dialect = dialect
        self._port = port_for(settings.port(dialect.line), clock)
        self._exchanges = Exchanges(self._port, clock, dialect.reply_within_s, dialect.pause_s)
        self._has_power_line = settings.power_output is not PowerLine.NONE
        self.capabilities = Capabilities(
            follows_rate=dialect.follows_rate or dialect.command is CommandMode.RATE,
            cuts_power=self._has_power_line or bool(dialect.steps(Verb.CUT_POWER)),
            reports_stop_input=dialect.flags.has_stop or settings.stop_input is not StopLine.NONE,
            reports_limits=bool(dialect.flags.at_limit),
            has_brake=bool(dialect.steps(Verb.ENGAGE_BRAKE)),
        )
        self.brake_timing = settings.brake.timing()

    @classmethod
    def from_settings(cls, settings: Mapping[str, object], facts: MountFacts, clock: Clock) -> Self:
        """Build the driver and read its dialect file; opens no port. Raises BadSettings."""
        read = checked(DialectSettings, settings)
        dialect = load_dialect(facts.folder / read.dialect)
        found = [
            SettingProblem("dialect", f"{read.dialect}: {'.'.join(at)}: {reason}")
            for at, reason in too_narrow(dialect, facts)
        ]
        if found:
            raise BadSettings(tuple(found))
        return cls(read, dialect, facts, clock)

    def _open(self) -> None:
        self._port.open()
        try:
            self._port.set_power(is_on=True)
            self._say(utterances(self._dialect, Verb.START))
        except Exception:
            self._port.close()
            raise
        self._start_anew()

    def _close(self) -> None:
        self._port.close()

    def _look(self) -> DriverReading:
        asked_s = self._clock.monotonic_s()
        questions = utterances(self._dialect, Verb.READ)
        values = self._say(questions) if questions else self._await_report()
        answered_s = self._clock.monotonic_s()
        taken_s = 0.5 * (asked_s + answered_s) if questions else answered_s
        reading = reading_of(self._dialect, taken_s, values)
        return reading._replace(stop_pressed=reading.stop_pressed or self._port.stop_pressed)

    def _tell(self, command: Command) -> None:
        self._say(spoken(self._dialect, command))

    def _rest(self) -> None:
        self._say(utterances(self._dialect, Verb.HALT))

    def _halt_at_once(self) -> bool:
        """Overtake what waits to be sent: of a line, an end makes nonsense; a frame must go out."""
        stop = b"".join(said.sent for said in utterances(self._dialect, Verb.HALT))
        if self._dialect.is_text and self._dialect.end:
            self._port.drop_unsent()
            stop = self._dialect.end + stop
        self._port.send(stop)
        return True

    def _cut_power(self) -> None:
        if self._has_power_line:
            self._port.set_power(is_on=False)
        self._say(utterances(self._dialect, Verb.CUT_POWER))

    def _engage_brake(self) -> None:
        self._say(utterances(self._dialect, Verb.ENGAGE_BRAKE))

    def _release_brake(self) -> None:
        self._say(utterances(self._dialect, Verb.RELEASE_BRAKE))

    def _say(self, said: Iterable[Utterance]) -> dict[str, float]:
        """Say one thing after the other; the values of all answers together."""
        values: dict[str, float] = {}
        for utterance in said:
            if utterance.reply is None:
                self._exchanges.tell(utterance.sent)
            else:
                understand = partial(understood, self._dialect, utterance)
                values |= self._exchanges.ask(utterance.sent, understand)
        return values

    def _await_report(self) -> Mapping[str, float]:
        return self._exchanges.listen(partial(reported, self._dialect))
