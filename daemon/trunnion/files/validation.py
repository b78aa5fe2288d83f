"""A YAML text against a model: either the value, or every problem with its line."""

from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from inspect import signature
from pathlib import Path
from typing import NamedTuple, TypeVar

from pydantic import BaseModel, ValidationError

from trunnion.files.problems import FileProblems, Problem
from trunnion.files.wording import in_words, shown
from trunnion.files.yaml_text import KeyPath, YamlText

_FOLLOWS_FROM_ANOTHER = "default_factory_not_called"
_KEY_ITSELF = "[key]"

Model = TypeVar("Model", bound=BaseModel)


class Contradiction(NamedTuple):
    """Two sections that cannot both be meant: the key to blame, and the reason."""

    path: KeyPath
    message: str


Check = Callable[..., Iterator[Contradiction]]
"""Looks for contradictions between sections; its parameters are the sections' names."""


def validated(
    model: type[Model], text: YamlText, folder: Path, checks: Sequence[Check] = ()
) -> Model:
    """Return the text as a value of the model.

    Relative paths in it begin at `folder`. A check runs as soon as the sections that it compares
    are sound, so that one misspelt key elsewhere hides nothing. Raises FileProblems.
    """
    if not isinstance(text.value, dict):
        message = f"expected a mapping of keys, got {shown(text.value)}"
        raise FileProblems([text.problem((), message)])
    try:
        value = model.model_validate(text.value, context={"folder": folder})
    except ValidationError as error:
        sections = _sound_sections(model, text.value, folder, error)
        raise FileProblems(
            [*_found(model, text, error), *_contradictions(checks, sections, text)]
        ) from None
    sections = {name: getattr(value, name) for name in model.model_fields}
    if problems := list(_contradictions(checks, sections, text)):
        raise FileProblems(problems)
    return value


def _found(model: type[BaseModel], text: YamlText, error: ValidationError) -> Iterator[Problem]:
    for detail in error.errors(include_url=False):
        if detail["type"] != _FOLLOWS_FROM_ANOTHER:
            path = tuple(part for part in detail["loc"] if part != _KEY_ITSELF)
            yield text.problem(path, in_words(detail, model))


def _sound_sections(
    model: type[BaseModel], raw: Mapping[str, object], folder: Path, error: ValidationError
) -> dict[str, object]:
    unsound = {detail["loc"][0] for detail in error.errors(include_url=False)}
    sections: dict[str, object] = {}
    for name, info in model.model_fields.items():
        kind = info.annotation
        if name not in unsound and isinstance(kind, type) and issubclass(kind, BaseModel):
            given = raw.get(name, {})
            sections[name] = kind.model_validate(given, context={"folder": folder})
    return sections


def _contradictions(
    checks: Iterable[Check], sections: Mapping[str, object], text: YamlText
) -> Iterator[Problem]:
    for check in checks:
        needed = signature(check).parameters.keys()
        if needed <= sections.keys():
            for path, message in check(**{name: sections[name] for name in needed}):
                yield text.problem(path, message)
