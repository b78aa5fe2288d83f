import json
from contextlib import suppress
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion.files.problems import FileProblems
from trunnion.files.yaml_text import parse_yaml, read_yaml


def problems_of(text: str) -> list[str]:
    with pytest.raises(FileProblems) as caught:
        parse_yaml(text, "f.yaml")
    return [str(problem) for problem in caught.value.problems]


def test_values_come_plain_and_every_key_knows_its_line() -> None:
    text = parse_yaml("a: 17\nb:\n  - 2.5\n  - c: true\n    d: 'x'\n", "f.yaml")
    assert text.value == {"a": 17, "b": (2.5, {"c": True, "d": "x"})}
    assert text.lines[("b", 1, "d")] == 5
    assert str(text.problem(("b", 1, "d"), "bad")) == "f.yaml:5: b[2].d: bad"


def test_a_problem_with_a_key_that_is_not_there_gets_the_line_of_its_section() -> None:
    text = parse_yaml("a: 1\nmount:\n  x: 1\n", "f.yaml")
    assert text.problem(("mount", "rate_deg_s"), "missing").line == 2


@pytest.mark.parametrize(
    ("written", "meant"),
    [
        ("no", "no"),
        ("12:30", "12:30"),
        ("010", 10),
        ("-3.5e2", -350.0),
        ("1e3", 1000.0),
        (".5", 0.5),
        ("0x1F", 31),
        ("2026-12-01", "2026-12-01"),
        ("2026-12-01T10:00:00Z", "2026-12-01T10:00:00Z"),
        ("'17'", "17"),
        ("~", None),
        ("False", False),
    ],
)
def test_scalars_mean_what_they_look_like(written: str, meant: object) -> None:
    value = parse_yaml(f"a: {written}", "f.yaml").value
    assert value == {"a": meant}
    assert isinstance(value, dict)
    assert type(value["a"]) is type(meant)


def test_anchors_and_aliases_are_refused_before_they_unfold() -> None:
    bomb = "a: &a [x, x]\n" + "".join(
        f"{name}: &{name} [*{before}, *{before}, *{before}]\n"
        for before, name in zip("abcdefghij", "bcdefghijk", strict=True)
    )
    found = problems_of(bomb)
    assert found[0] == "f.yaml:1: a: anchors and aliases are not allowed here; write it out"


def test_all_that_is_wrong_is_told_at_once() -> None:
    assert problems_of("a: .nan\nb: 1e999\na: 2\nc: !!int 3\n? [x]\n: 1\n") == [
        "f.yaml:1: a: expected a finite number, got .nan",
        "f.yaml:2: b: expected a finite number, got 1e999",
        "f.yaml:3: a: this key was already given in line 1",
        "f.yaml:4: c: tags are not allowed here; write the plain value",
        "f.yaml:5: expected a word as key, got a list or a mapping",
    ]


@pytest.mark.parametrize("text", ["[" * 100_000, "{a: " * 100_000, "- " * 40 + "1"])
def test_deep_nesting_is_refused(text: str) -> None:
    assert "nesting" in problems_of(text)[0]


def test_broken_yaml_names_its_line() -> None:
    assert problems_of("a: 1\nb: [1, 2\nc: 3\n")[0].startswith("f.yaml:3: not valid YAML: ")
    assert "indent with spaces" in problems_of("a:\n\tb: 1\n")[0]
    assert problems_of("a: 1\n---\nb: 2\n") == ["f.yaml:2: expected one document, got a second one"]


def test_a_huge_file_is_refused_by_its_size(tmp_path: Path) -> None:
    file = tmp_path / "huge.yaml"
    file.write_bytes(b"#" * 1_000_001)
    with pytest.raises(FileProblems, match="at most 1000000 bytes"):
        read_yaml(file)


@pytest.mark.parametrize("encoding", ["utf-16", "latin-1"])
def test_other_encodings_are_refused_with_the_line(tmp_path: Path, encoding: str) -> None:
    file = tmp_path / "station.yaml"
    file.write_bytes("a: 1\nname: Tärnholm\n".encode(encoding))
    line = 1 if encoding == "utf-16" else 2
    with pytest.raises(FileProblems, match=rf"station\.yaml:{line}: expected text in UTF-8"):
        read_yaml(file)


def test_a_byte_order_mark_does_no_harm(tmp_path: Path) -> None:
    file = tmp_path / "a.yaml"
    file.write_bytes("a: 1\n".encode("utf-8-sig"))
    assert read_yaml(file).value == {"a": 1}


def test_what_is_no_file_is_told(tmp_path: Path) -> None:
    with pytest.raises(FileProblems, match="no such file"):
        read_yaml(tmp_path / "gone.yaml")
    with pytest.raises(FileProblems, match="expected a file, got a folder"):
        read_yaml(tmp_path)
    with pytest.raises(FileProblems, match="expected a file, got a device or a pipe"):
        read_yaml(Path("/dev/zero"))


@given(st.text(alphabet=st.sampled_from("ab:-[]{}#&*!|>'\" \n\t0123.%@`~?,é\x00"), max_size=60))
def test_any_text_is_a_plain_value_or_a_list_of_problems(text: str) -> None:
    with suppress(FileProblems):
        json.dumps(parse_yaml(text, "f.yaml").value, allow_nan=False)
