"""YAML as plain values, with the line of each key beside them; no aliases, no tags of its own."""

from pathlib import Path
from typing import Any, NamedTuple

import yaml

from trunnion_drivers.interface.errors import BadSettings, SettingProblem

_LONGEST_BYTES = 200_000


class LinedYaml(NamedTuple):
    """A file's value, and the line (from 1) of each key path in it."""

    path: Path
    value: object
    lines: dict[tuple[str, ...], int]

    def place(self, key: tuple[str, ...]) -> str:
        """File and line of this key, or of the nearest one above it."""
        while key and key not in self.lines:
            key = key[:-1]
        return f"{self.path}:{self.lines.get(key, 1)}"


def read_lined_yaml(path: Path, key: str) -> LinedYaml:
    """Read a file that the settings name under `key`. Raises BadSettings."""
    try:
        return _read(path)
    except OSError as error:
        raise _problem(key, f"{path}: {error.strerror}") from error
    except yaml.MarkedYAMLError as error:
        line = error.problem_mark.line + 1 if error.problem_mark else 1
        raise _problem(key, f"{path}:{line}: not valid YAML: {error.problem}") from error
    except (ValueError, yaml.YAMLError) as error:
        raise _problem(key, f"{path}: {error}") from error


def _read(path: Path) -> LinedYaml:
    data = path.read_bytes()
    if len(data) > _LONGEST_BYTES:
        raise ValueError(f"expected at most {_LONGEST_BYTES} bytes, got {len(data)}")
    text = data.decode("utf-8")
    if any(isinstance(event, yaml.AliasEvent) for event in yaml.parse(text)):
        raise ValueError("aliases are not allowed here; write it out")
    node = yaml.compose(text, yaml.SafeLoader)
    lines: dict[tuple[str, ...], int] = {}
    return LinedYaml(path, _value(node, (), lines) if node else None, lines)


def _problem(key: str, reason: str) -> BadSettings:
    return BadSettings((SettingProblem(key, reason),))


def _value(node: yaml.Node, path: tuple[str, ...], lines: dict[tuple[str, ...], int]) -> Any:
    lines.setdefault(path, node.start_mark.line + 1)
    if isinstance(node, yaml.MappingNode):
        return {str(key.value): _entry(key, value, path, lines) for key, value in node.value}
    if isinstance(node, yaml.SequenceNode):
        return tuple(
            _value(item, (*path, str(number)), lines) for number, item in enumerate(node.value)
        )
    return yaml.SafeLoader("").construct_object(node)


def _entry(
    key: yaml.Node, value: yaml.Node, path: tuple[str, ...], lines: dict[tuple[str, ...], int]
) -> Any:
    inner = (*path, str(key.value))
    if inner in lines:
        raise ValueError(f"line {key.start_mark.line + 1}: {key.value!r} was already given")
    lines[inner] = key.start_mark.line + 1
    return _value(value, inner, lines)
