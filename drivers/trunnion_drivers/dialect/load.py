"""A dialect file on disk becomes a Dialect, or all that is wrong with it, by file, line and key."""

from collections.abc import Callable, Iterator
from functools import partial
from pathlib import Path
from typing import TypeVar

from pydantic import ValidationError

from trunnion_drivers.dialect.checks import contradictions
from trunnion_drivers.dialect.dialect import Dialect, Flags, Step, Verb
from trunnion_drivers.dialect.message import Frame, Message
from trunnion_drivers.dialect.notation import Coding, literal
from trunnion_drivers.dialect.sections import DialectSection, FlagsSection
from trunnion_drivers.dialect.yaml_lines import LinedYaml, read_lined_yaml
from trunnion_drivers.interface.errors import BadSettings, SettingProblem
from trunnion_drivers.scale import Scales
from trunnion_drivers.settings import problems

Key = tuple[str, ...]
Made = TypeVar("Made")


def load_dialect(path: Path, key: str = "dialect") -> Dialect:
    """Read a dialect file that the settings name under `key`. Raises BadSettings with all of it."""
    text = read_lined_yaml(path, key)
    try:
        section = DialectSection.model_validate(text.value)
    except ValidationError as error:
        found = [(tuple(p.key.split(".")), p.reason) for p in problems(error, DialectSection)]
        raise _bad(text, key, found) from None
    compiler = _Compiler(section)
    dialect = compiler.dialect()
    found = compiler.problems or list(contradictions(dialect))
    if found:
        raise _bad(text, key, found)
    return dialect


def _bad(text: LinedYaml, key: str, found: list[tuple[Key, str]]) -> BadSettings:
    return BadSettings(
        tuple(
            SettingProblem(key, ": ".join(filter(None, (text.place(at), ".".join(at), reason))))
            for at, reason in found
        )
    )


class _Compiler:
    """Turns texts into messages, and notes what cannot be turned."""

    def __init__(self, section: DialectSection) -> None:
        self.problems: list[tuple[Key, str]] = []
        self._section = section
        self._frame = self._build_frame()

    def dialect(self) -> Dialect:
        section = self._section
        return Dialect(
            name=section.name,
            verbs={verb: tuple(self._steps(verb)) for verb in Verb},
            refusals=tuple(self._messages("refusals")),
            reports=tuple(self._messages("reports")),
            scales=Scales(section.first.scale(), section.second.scale()),
            flags=_flags(section.flags),
            line=section.line,
            reply_within_s=section.reply_within_s,
            pause_s=section.pause_s,
            has_echo=section.echo,
            command=section.command,
            follows_rate=section.follows_rate,
            is_text=section.coding is Coding.TEXT,
            end=self._frame.end,
        )

    def _build_frame(self) -> Frame:
        section = self._section
        checksum = section.checksum
        return Frame(
            coding=section.coding,
            begin=self._literal("begin", section.begin),
            end=self._literal("end", section.end),
            checksum=checksum.kind if checksum else None,
            checksum_from=checksum.first_byte if checksum else 0,
            checksum_as=checksum.written if checksum else "",
        )

    def _literal(self, key: str, written: str) -> bytes:
        return self._attempt((key,), partial(literal, written, self._section.coding)) or b""

    def _steps(self, verb: Verb) -> Iterator[Step]:
        for number, step in enumerate(getattr(self._section.commands, verb.value)):
            at = ("commands", verb.value, str(number))
            send = self._message((*at, "send"), step.send)
            reply = self._message((*at, "reply"), step.reply) if step.reply is not None else None
            if send is not None:
                yield Step(send, reply)

    def _messages(self, key: str) -> Iterator[Message]:
        for number, written in enumerate(getattr(self._section, key)):
            message = self._message((key, str(number)), written)
            if message is not None:
                yield message

    def _message(self, at: Key, written: str) -> Message | None:
        return self._attempt(at, partial(Message, written, self._frame))

    def _attempt(self, at: Key, make: Callable[[], Made]) -> Made | None:
        try:
            return make()
        except ValueError as error:
            self.problems.append((at, str(error)))
            return None


def _flags(section: FlagsSection) -> Flags:
    return Flags(
        section.at_limit or 0,
        section.stop_pressed or 0,
        section.stop_released or 0,
        tuple(section.faults.items()),
    )
