"""The example configuration loads, every file of it, and explains every key."""

import json
from collections.abc import Iterator
from pathlib import Path

import pytest
import yaml
from jsonschema import Draft202012Validator

from trunnion.files.mask import load_mask
from trunnion.files.plan import load_plan
from trunnion.files.schema import FileKind, json_schema
from trunnion.files.station import effective_settings, load_station

EXAMPLE = Path(__file__).parents[2] / "config"


def test_the_station_and_all_that_it_names_load() -> None:
    station = load_station(EXAMPLE / "station.yaml")
    assert station.files.plan == EXAMPLE / "plan.yaml"
    assert len(load_plan(station.files.plan).contacts) == 7
    assert station.safety.horizon_mask is not None
    assert len(load_mask(station.safety.horizon_mask)) == 17


def keys_of(settings: object) -> Iterator[str]:
    if isinstance(settings, dict):
        for key, value in settings.items():
            yield key
            yield from keys_of(value)


def test_the_station_example_shows_every_key() -> None:
    written = set(keys_of(yaml.safe_load((EXAMPLE / "station.yaml").read_text())))
    in_force = set(keys_of(effective_settings(load_station(EXAMPLE / "station.yaml"))))
    assert in_force <= written


@pytest.mark.parametrize("kind", FileKind)
def test_the_schema_is_sound_and_takes_the_example(kind: FileKind) -> None:
    schema = json_schema(kind)
    Draft202012Validator.check_schema(schema)
    example = yaml.load((EXAMPLE / f"{kind.value}.yaml").read_text(), yaml.BaseLoader)
    numbers = json.loads(json.dumps(example), object_hook=with_numbers)
    assert list(Draft202012Validator(schema).iter_errors(numbers)) == []


def with_numbers(section: dict[str, object]) -> dict[str, object]:
    return {key: number_in(value) for key, value in section.items()}


def number_in(value: object) -> object:
    if isinstance(value, list):
        return [number_in(item) for item in value]
    try:
        return json.loads(value) if isinstance(value, str) else value
    except json.JSONDecodeError:
        return value


@pytest.mark.parametrize(
    ("section", "key", "value"),
    [
        ("site", "latitude_deg", 95),
        ("site", "latitude", 45),
        ("mount", "stow_deg", [0]),
        ("sky", "refraction", "radar"),
        ("safety", "stow_on_exit", "yes"),
    ],
)
def test_the_schema_refuses_what_the_program_refuses(section: str, key: str, value: object) -> None:
    station = yaml.safe_load((EXAMPLE / "station.yaml").read_text())
    station[section] = {**station[section], key: value}
    assert list(Draft202012Validator(json_schema(FileKind.STATION)).iter_errors(station))


def described(schema: object, name: str = "") -> Iterator[tuple[str, bool]]:
    if isinstance(schema, dict):
        for key, inner in schema.get("properties", {}).items():
            yield f"{name}.{key}", "description" in inner or "$ref" in inner
        for key, inner in schema.items():
            yield from described(inner, key)


@pytest.mark.parametrize("kind", FileKind)
def test_every_key_of_the_schema_is_described(kind: FileKind) -> None:
    undescribed = [name for name, told in described(json_schema(kind)) if not told]
    assert undescribed == []
