"""Dialect files: what is wrong with them is told all at once, by file, line and key."""

from pathlib import Path

import pytest

from tests.drivers.benches import DIALECTS
from tests.drivers.mounts import FACTS, HandClock
from trunnion_drivers.dialect.driver import DialectDriver
from trunnion_drivers.dialect.load import load_dialect
from trunnion_drivers.dialect.speech import spoken
from trunnion_drivers.interface.errors import BadSettings
from trunnion_drivers.interface.values import DriverMotion, JointFacts, MountFacts

GOOD = """\
format: 1
name: Sandpiper
coding: text
end: "\\r"
commands:
  read:
    - {send: "P", reply: "p{first:06.2f},{second:06.2f}"}
  move:
    - {send: "M{first:+07.2f},{second:+07.2f}", reply: "ok"}
  halt:
    - {send: "S"}
"""


def problems_of(text: str, folder: Path) -> list[str]:
    path = folder / "sandpiper.yaml"
    path.write_text(text)
    with pytest.raises(BadSettings) as caught:
        load_dialect(path)
    assert {problem.key for problem in caught.value.problems} == {"dialect"}
    return [problem.reason.replace(f"{path}", "FILE") for problem in caught.value.problems]


def test_a_good_file_loads(tmp_path: Path) -> None:
    path = tmp_path / "good.yaml"
    path.write_text(GOOD)
    assert load_dialect(path).name == "Sandpiper"


@pytest.mark.parametrize("path", sorted(DIALECTS.glob("*.yaml")), ids=lambda path: path.stem)
def test_every_example_loads_and_holds_the_travel(path: Path) -> None:
    settings = {"url": "/dev/null", "dialect": str(path)}
    DialectDriver.from_settings(settings, FACTS, HandClock())


@pytest.mark.parametrize(
    ("old", "new", "expected"),
    [
        ('  halt:\n    - {send: "S"}\n', "", "FILE:5: commands: expected a command `halt`"),
        ("name:", "nmae:", "FILE:2: nmae: unknown key; did you mean 'name'?"),
        ("coding: text", "coding: morse", "FILE:3: coding: expected 'text' or 'binary'"),
        ("{first:06.2f},{second", "{first:.2f}{second", "FILE:7: commands.read.0.reply: ambiguous"),
        ("p{first:06.2f}", "p", "FILE:6: commands.read: expected replies with {first}"),
        ("{second:+07.2f}", "0", "FILE:8: commands.move: expected messages with {second}"),
        ("{first:+07.2f}", "{firts:+07.2f}{first:+07.2f}", "commands.move: unknown field {firts}"),
        ("{first:06.2f}", "{first:6.2}", "expected a format such as"),
        ("{first:06.2f}", "{first:06.2f", "a brace itself is doubled"),
        (
            '"S"',
            '"S{checksum:02X}"',
            "FILE:11: commands.halt.0.send: expected a section `checksum`",
        ),
        ('"S"', '"é"', "expected ASCII"),
        (
            "  halt:",
            '  engage_brake: [{send: "B"}]\n  halt:',
            "commands.engage_brake: expected a command `release_brake` beside it",
        ),
        (
            "end:",
            "refusals: ['p{code:06.2f},{other:06.2f}']\nend:",
            "could be one of the refusals",
        ),
        ("format: 1", "format: 2", "FILE:1: format: expected 1 or less"),
        ("format: 1", "format: 1\nformat: 1", "'format' was already given"),
        ("format: 1", "format: &a 1\nname: *a", "aliases"),
        ("commands:", "commands: [", "not valid YAML"),
    ],
)
def test_what_is_wrong_is_told(old: str, new: str, expected: str, tmp_path: Path) -> None:
    assert old in GOOD
    assert any(expected in reason for reason in problems_of(GOOD.replace(old, new, 1), tmp_path))


def test_everything_is_told_at_once(tmp_path: Path) -> None:
    bad = GOOD.replace("{first:06.2f}", "{first:6.2}").replace("{first:+07.2f}", "{first:s}")
    assert len(problems_of(bad, tmp_path)) == 2


def test_a_missing_file_is_told(tmp_path: Path) -> None:
    with pytest.raises(BadSettings, match="No such file"):
        load_dialect(tmp_path / "none.yaml")


def test_a_field_too_narrow_for_the_travel_is_told(tmp_path: Path) -> None:
    path = tmp_path / "narrow.yaml"
    path.write_text(GOOD.replace("M{first:+07.2f}", "M{first:06.2f}"))
    settings = {"url": "/dev/null", "dialect": path.name}
    wide = MountFacts(FACTS.first, FACTS.second, 17.3, 61.9, tmp_path)
    with pytest.raises(BadSettings, match=r"too narrow: -263\.7 needs more than 6 characters"):
        DialectDriver.from_settings(settings, wide, HandClock())
    one_turn = MountFacts(JointFacts(0, 359, 5, 3), FACTS.second, 17.3, 61.9, tmp_path)
    DialectDriver.from_settings(settings, one_turn, HandClock())


def test_decimal_digits_in_bytes_hold_the_travel_from_their_zero(tmp_path: Path) -> None:
    path = tmp_path / "decimal.yaml"
    text = """\
format: 1
name: Dunlin
coding: binary
begin: "10"
end: "16"
first: {units_per_deg: 100, zero_deg: -270}
second: {units_per_deg: 10}
commands:
  read: [{send: "41", reply: "61 {first:bcd6} {second:dec4+30}"}]
  move: [{send: "42 {first:bcd6} {second:dec4+30}"}]
  halt: [{send: "43"}]
"""
    path.write_text(text)
    settings = {"url": "/dev/null", "dialect": str(path)}
    DialectDriver.from_settings(settings, FACTS, HandClock())
    (said,) = spoken(load_dialect(path), DriverMotion(-263.71, 61.9, 0.0, 0.0))
    assert said.sent == bytes.fromhex("10 42 00 06 29 30 36 31 39 16")
    path.write_text(text.replace(", zero_deg: -270", ""))
    with pytest.raises(BadSettings, match=r"commands\.move.*-26370 is not a number of 6"):
        DialectDriver.from_settings(settings, FACTS, HandClock())


@pytest.mark.parametrize(
    ("url", "reason"),
    [("socket://nowhere", "host:port"), ("spy:///dev/x", "expected a device"), ("", "character")],
)
def test_a_url_that_is_none_is_told(url: str, reason: str) -> None:
    settings = {"url": url, "dialect": str(DIALECTS / "reedmace.yaml")}
    with pytest.raises(BadSettings, match=reason):
        DialectDriver.from_settings(settings, FACTS, HandClock())


def test_a_socket_has_no_stop_input() -> None:
    settings = {
        "url": "socket://localhost:4001",
        "dialect": str(DIALECTS / "reedmace.yaml"),
        "stop_input": "cts",
    }
    with pytest.raises(BadSettings, match="modem-control"):
        DialectDriver.from_settings(settings, FACTS, HandClock())
