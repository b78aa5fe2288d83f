"""What pydantic found, in plain words: what was expected, and what came."""

from collections.abc import Callable, Iterator, Mapping
from typing import Any, get_args

from pydantic import BaseModel
from pydantic_core import ErrorDetails

from trunnion.files.problems import did_you_mean

_KINDS = {
    "bool_type": "true or false",
    "dict_type": "a mapping of keys",
    "float_type": "a number",
    "int_from_float": "a whole number",
    "int_type": "a whole number",
    "model_type": "a mapping of keys",
    "string_type": "a text",
    "tuple_type": "a list",
    "finite_number": "a finite number",
}
_LONGEST = 60


def in_words(error: ErrorDetails, model: type[BaseModel]) -> str:
    """Return one finding of pydantic about `model` as a sentence for the user."""
    kind, context = error["type"], error.get("ctx", {})
    if kind == "missing":
        return "this key is required, and missing"
    if kind == "extra_forbidden":
        return _unknown_key(error, model)
    if kind == "value_error":
        return str(context["error"])
    return f"expected {_expected(kind, context, error['msg'])}, got {shown(error['input'])}"


def shown(value: object) -> str:
    """Return a value as it would stand in the file, cut short where it is long."""
    match value:
        case None | "":
            return "nothing"
        case bool():
            return str(value).lower()
        case dict():
            return "a mapping of keys"
        case tuple():
            text = f"[{', '.join(map(shown, value))}]"
        case str():
            text = repr(value)
        case _:
            text = str(value)
    return text if len(text) <= _LONGEST else f"{text[:_LONGEST]}…"


def known_keys(model: type[BaseModel]) -> list[str]:
    """Return the keys that a section knows, as they are written in the file."""
    return [info.alias or name for name, info in model.model_fields.items()]


def _expected(kind: str, context: Mapping[str, Any], message: str) -> str:
    if kind in _KINDS:
        return _KINDS[kind]
    if kind in _BOUNDS:
        return _BOUNDS[kind](context)
    return message.removeprefix("Input should be ").removesuffix(".")


def _choice(expected: str) -> str:
    return f"one of {expected.replace(' or ', ', ')}" if " or " in expected else expected


_BOUNDS: Mapping[str, Callable[[Mapping[str, Any]], str]] = {
    "greater_than": lambda c: f"a number above {c['gt']:g}",
    "greater_than_equal": lambda c: f"{c['ge']:g} or more",
    "less_than": lambda c: f"a number below {c['lt']:g}",
    "less_than_equal": lambda c: f"{c['le']:g} or less",
    "too_short": lambda c: f"at least {c['min_length']} items",
    "too_long": lambda c: f"at most {c['max_length']} items",
    "string_too_short": lambda c: f"at least {c['min_length']} characters",
    "string_too_long": lambda c: f"at most {c['max_length']} characters",
    "string_pattern_mismatch": lambda _: "a name of printable characters",
    "enum": lambda c: _choice(c["expected"]),
}


def _unknown_key(error: ErrorDetails, model: type[BaseModel]) -> str:
    *sections, key = error["loc"]
    keys = known_keys(_section_at(model, sections))
    return "unknown key" + (did_you_mean(str(key), keys) or f"; known here: {', '.join(keys)}")


def _section_at(model: type[BaseModel], path: list[str | int]) -> type[BaseModel]:
    for part in path:
        inner = {info.alias or name: info for name, info in model.model_fields.items()}
        if part in inner:
            model = next(_models_in(inner[str(part)].annotation), model)
    return model


def _models_in(annotation: object) -> Iterator[type[BaseModel]]:
    if isinstance(annotation, type) and issubclass(annotation, BaseModel):
        yield annotation
    for argument in get_args(annotation):
        yield from _models_in(argument)
