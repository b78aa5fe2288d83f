"""YAML as plain values whose every key still knows its line; what could be a trap is refused.

Refused are anchors and aliases (a few lines of them can unfold to gigabytes), tags, keys given
twice, deep nesting, more than one document, and numbers that are not finite.
"""

from collections.abc import Iterator
from dataclasses import dataclass, field
from pathlib import Path

import yaml

from trunnion.files.problems import FileProblems, Problem
from trunnion.files.reading import read_text
from trunnion.files.scalars import scalar_value

KeyPath = tuple[str | int, ...]

_LIMIT_BYTES = 1_000_000
_DEEPEST = 16
_HINT = "; indent with spaces, not tabs, and quote a value that begins with @ or `"
_LOADER = getattr(yaml, "CBaseLoader", yaml.BaseLoader)


@dataclass(frozen=True, slots=True)
class YamlText:
    """The value of a YAML file and the line each key stands on.

    Mappings come as dict with keys of text, sequences as tuple, scalars as None, bool, int, float
    or str.
    """

    file: str
    value: object
    lines: dict[KeyPath, int]

    def problem(self, path: KeyPath, message: str) -> Problem:
        """Return a problem at this key, or at the nearest one above it that stands in the file."""
        known = next((path[:n] for n in range(len(path), -1, -1) if path[:n] in self.lines), ())
        return Problem(self.file, self.lines.get(known), dotted(path), message)


def read_yaml(path: Path) -> YamlText:
    """Read a YAML file; raises FileProblems with everything that is wrong with it as YAML."""
    return parse_yaml(read_text(path, _LIMIT_BYTES), str(path))


def parse_yaml(text: str, file: str) -> YamlText:
    """Parse YAML text that came from `file`; raises FileProblems as `read_yaml` does."""
    builder = _Builder(file)
    try:
        value = builder.document(iter(yaml.parse(text, Loader=_LOADER)))
    except yaml.YAMLError as error:
        raise FileProblems([*builder.problems, _syntax_problem(file, error)]) from None
    if builder.problems:
        raise FileProblems(builder.problems)
    return YamlText(file, value, builder.lines)


def dotted(path: KeyPath) -> str:
    """Return a key path as users read it, list items counted from one: `contacts[2].target`."""
    words = (f"[{part + 1}]" if isinstance(part, int) else f".{part[:60]}" for part in path)
    return "".join(words).removeprefix(".")


@dataclass(slots=True)
class _Builder:
    """Turns the parser's events into values, noting lines and problems on the way."""

    file: str
    lines: dict[KeyPath, int] = field(default_factory=dict)
    problems: list[Problem] = field(default_factory=list)

    def document(self, events: Iterator[yaml.Event]) -> object:
        value = None
        documents = 0
        for event in events:
            if isinstance(event, yaml.DocumentStartEvent):
                documents += 1
                if documents > 1:
                    self._complain(event, (), "expected one document, got a second one")
                    break
            elif isinstance(event, yaml.NodeEvent):
                value = self._node(event, events, ())
        return value

    def _node(self, event: yaml.Event, events: Iterator[yaml.Event], path: KeyPath) -> object:
        self.lines.setdefault(path, _line(event))
        self._refuse_traps(event, path)
        if isinstance(event, yaml.ScalarEvent):
            return self._scalar(event, path)
        if isinstance(event, yaml.SequenceStartEvent):
            return self._sequence(events, path)
        if isinstance(event, yaml.MappingStartEvent):
            return self._mapping(events, path)
        return None

    def _refuse_traps(self, event: yaml.Event, path: KeyPath) -> None:
        if getattr(event, "anchor", None) is not None:
            self._complain(event, path, "anchors and aliases are not allowed here; write it out")
        if getattr(event, "tag", None) not in (None, "!"):
            self._complain(event, path, "tags are not allowed here; write the plain value")
        if len(path) > _DEEPEST:
            self._complain(event, (), f"expected at most {_DEEPEST} levels of nesting, got more")
            raise FileProblems(self.problems)

    def _scalar(self, event: yaml.ScalarEvent, path: KeyPath) -> object:
        text: str = event.value
        is_plain = event.implicit[0]
        try:
            return scalar_value(text) if is_plain else text
        except ValueError as error:
            self._complain(event, path, str(error))
            return None

    def _sequence(self, events: Iterator[yaml.Event], path: KeyPath) -> tuple[object, ...]:
        items: list[object] = []
        while not isinstance(event := next(events), yaml.SequenceEndEvent):
            items.append(self._node(event, events, (*path, len(items))))
        return tuple(items)

    def _mapping(self, events: Iterator[yaml.Event], path: KeyPath) -> dict[str, object]:
        found: dict[str, object] = {}
        while not isinstance(event := next(events), yaml.MappingEndEvent):
            key = self._key(event, events, path)
            if key in found:
                first = self.lines[(*path, key)]
                self._complain(event, (*path, key), f"this key was already given in line {first}")
            self.lines.setdefault((*path, key), _line(event))
            found[key] = self._node(next(events), events, (*path, key))
        return found

    def _key(self, event: yaml.Event, events: Iterator[yaml.Event], path: KeyPath) -> str:
        if isinstance(event, yaml.ScalarEvent):
            self._refuse_traps(event, (*path, event.value))
            return str(event.value)
        self._complain(event, path, "expected a word as key, got a list or a mapping")
        self._node(event, events, (*path, "?"))
        return "?"

    def _complain(self, event: yaml.Event, path: KeyPath, message: str) -> None:
        self.problems.append(Problem(self.file, _line(event), dotted(path), message))


def _line(event: yaml.Event) -> int:
    return event.start_mark.line + 1 if event.start_mark else 1


def _syntax_problem(file: str, error: yaml.YAMLError) -> Problem:
    mark = getattr(error, "problem_mark", None)
    reason = getattr(error, "problem", None) or getattr(error, "reason", None) or str(error)
    hint = _HINT if "cannot start any token" in reason else ""
    return Problem(file, mark.line + 1 if mark else None, "", f"not valid YAML: {reason}{hint}")
