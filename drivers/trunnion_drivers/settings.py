"""A driver's settings as a typed value, with everything that is wrong with them said at once."""

from collections.abc import Callable, Iterator, Mapping
from difflib import get_close_matches
from typing import Any, TypeVar, get_args

from pydantic import BaseModel, ConfigDict, ValidationError
from pydantic_core import ErrorDetails

from trunnion_drivers.interface.errors import BadSettings, SettingProblem


class Settings(BaseModel):
    """Base of a driver's settings: unknown keys are refused, and a number is a finite number."""

    model_config = ConfigDict(extra="forbid", frozen=True, strict=True, allow_inf_nan=False)


Model = TypeVar("Model", bound=BaseModel)


def checked(model: type[Model], settings: Mapping[str, object]) -> Model:
    """Read settings into their model; raises BadSettings."""
    try:
        return model.model_validate(settings)
    except ValidationError as error:
        raise BadSettings(tuple(problems(error, model))) from None


def problems(error: ValidationError, model: type[BaseModel]) -> Iterator[SettingProblem]:
    """Say what pydantic found in plain words, with the dotted key of each finding."""
    for found in error.errors(include_url=False):
        yield SettingProblem(".".join(map(str, found["loc"])), _in_words(found, model))


def did_you_mean(word: str, known: list[str]) -> str:
    """End a sentence with the nearest known word, or with all of them."""
    near = get_close_matches(word, known, n=1, cutoff=0.7)
    return f"did you mean {near[0]!r}?" if near else f"known here: {', '.join(known)}"


_EXPECTED: Mapping[str, Callable[[Mapping[str, Any]], str]] = {
    "bool_type": lambda _: "true or false",
    "float_type": lambda _: "a number",
    "int_type": lambda _: "a whole number",
    "string_type": lambda _: "a text",
    "tuple_type": lambda _: "a list",
    "finite_number": lambda _: "a finite number",
    "model_type": lambda _: "a mapping of keys",
    "dict_type": lambda _: "a mapping of keys",
    "model_attributes_type": lambda _: "a mapping of keys",
    "greater_than": lambda c: f"a number above {c['gt']:g}",
    "greater_than_equal": lambda c: f"{c['ge']:g} or more",
    "less_than": lambda c: f"a number below {c['lt']:g}",
    "less_than_equal": lambda c: f"{c['le']:g} or less",
}


def _in_words(found: ErrorDetails, model: type[BaseModel]) -> str:
    kind, context = found["type"], found.get("ctx", {})
    if kind == "missing":
        return "this key is required, and missing"
    if kind == "extra_forbidden":
        known = list(_model_at(model, found["loc"][:-1]).model_fields)
        return f"unknown key; {did_you_mean(str(found['loc'][-1]), known)}"
    if kind == "value_error":
        return str(context["error"])
    expected = _EXPECTED.get(kind)
    words = expected(context) if expected else found["msg"].removeprefix("Input should be ")
    return f"expected {words}, got {found['input']!r}"


def _model_at(model: type[BaseModel], path: tuple[int | str, ...]) -> type[BaseModel]:
    for part in path:
        field = model.model_fields.get(str(part))
        if field is not None:
            model = next(_models_in(field.annotation), model)
    return model


def _models_in(annotation: object) -> Iterator[type[BaseModel]]:
    if isinstance(annotation, type) and issubclass(annotation, BaseModel):
        yield annotation
    for argument in get_args(annotation):
        yield from _models_in(argument)
