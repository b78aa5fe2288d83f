"""Orbit element files: what is read, and what is refused in which words."""

from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion.files.element_lines import WIDTH, catalogue_number, checksum
from trunnion.files.elements import load_elements
from trunnion.files.problems import FileProblems
from trunnion.sky.instants import parse_utc

NAME = "QUILLON-1"
FIRST = "1 90117U 26903A   26334.75000000  .00000000  00000-0  31000-4 0  1123"
SECOND = "2 90117  97.4500  60.0000 0011000  83.2000 320.0000 15.17962949 22042"
OTHER_FIRST = "1 90118U 26903B   26334.75000000  .00000000  00000-0  27000-4 0   982"
OTHER_SECOND = "2 90118  44.6000  31.0000 0008000  41.9000  18.0000 15.01263869 17403"


def written(folder: Path, *lines: str, name: str = "sets.tle", end: str = "\n") -> Path:
    path = folder / name
    path.write_text(end.join(lines) + end, encoding="utf-8", newline="")
    return path


def resummed(line: str) -> str:
    return f"{line[: WIDTH - 1]}{checksum(line)}"


def problems(path: Path) -> list[tuple[int | None, str]]:
    with pytest.raises(FileProblems) as caught:
        load_elements(path)
    return [(each.line, each.message) for each in caught.value.problems]


def test_three_lines_give_name_number_and_epoch(tmp_path: Path) -> None:
    (found,) = load_elements(written(tmp_path, NAME, FIRST, SECOND))
    assert (found.name, found.catalogue_number) == (NAME, 90117)
    assert found.epoch_utc_s == parse_utc("2026-11-30T18:00:00Z")
    assert (found.line_1, found.line_2) == (FIRST, SECOND)


def test_two_lines_a_leading_zero_comments_gaps_and_windows_line_ends(tmp_path: Path) -> None:
    path = written(
        tmp_path,
        *("# by hand", "", FIRST, SECOND, "  ", "0 QUILLON-2", OTHER_FIRST + "  ", OTHER_SECOND),
        end="\r\n",
    )
    assert [each.name for each in load_elements(path)] == ["90117", "QUILLON-2"]


def test_a_folder_gives_the_sets_of_its_element_files(tmp_path: Path) -> None:
    written(tmp_path, NAME, FIRST, SECOND, name="a.tle")
    written(tmp_path, "QUILLON-2", OTHER_FIRST, OTHER_SECOND, name="b.TXT")
    written(tmp_path, "no elements", name="README.md")
    written(tmp_path, "no elements", name=".hidden.tle")
    assert [each.name for each in load_elements(tmp_path)] == ["QUILLON-1", "QUILLON-2"]


def test_a_folder_without_element_files_is_told(tmp_path: Path) -> None:
    assert problems(tmp_path) == [
        (None, "expected element files in the folder (.tle, .txt, .omm, …), got none")
    ]


def test_a_file_without_elements_and_a_missing_one_are_told(tmp_path: Path) -> None:
    assert problems(written(tmp_path, "# nothing")) == [(None, "expected orbit elements, got none")]
    assert problems(tmp_path / "missing.tle") == [(None, "no such file")]


def test_every_problem_of_a_file_is_told_with_its_line(tmp_path: Path) -> None:
    path = written(
        tmp_path,
        *(NAME, FIRST[:-1] + "4", SECOND[:-3]),
        *("QUILLON-2", OTHER_SECOND, OTHER_FIRST),
        *("ALONE", "ALONE TOO", FIRST, OTHER_SECOND),
        *(SECOND, "STILL ALONE"),
        FIRST,
    )
    assert problems(path) == [
        (2, "expected the checksum 3, got '4'"),
        (3, "expected 69 characters, got 66"),
        (5, "expected line 1 before line 2, got them swapped"),
        (7, "expected an element set after the name, got 'ALONE'"),
        (10, "expected the catalogue number of line 1, 90117, got 90118"),
        (11, "expected line 1 of the element set before it, got none"),
        (13, "expected line 2 of the element set after it, got none"),
    ]


def test_problems_of_all_files_in_a_folder_are_told_together(tmp_path: Path) -> None:
    written(tmp_path, NAME, name="a.tle")
    written(tmp_path, FIRST, name="b.tle")
    with pytest.raises(FileProblems) as caught:
        load_elements(tmp_path)
    assert {Path(each.file).name for each in caught.value.problems} == {"a.tle", "b.tle"}


@pytest.mark.parametrize(
    ("line", "begin", "text", "message"),
    [
        (1, 20, "367.55", "expected the epoch's day of the year from 1 to 367, got 367.55000000"),
        (1, 18, "2x", "expected the epoch's year in columns 19 to 20, got '2x'"),
        (1, 53, " 31000*4", "expected the drag term in columns 54 to 61, got ' 31000*4'"),
        (2, 8, "197.4500", "expected the inclination from 0 to 180, got 197.4500"),
        (2, 26, "00 1000", "expected the eccentricity in columns 27 to 33, got '00 1000'"),
        (2, 52, "00.001", "expected the mean motion from 0.01 to 20, got 00.00162949"),
    ],
)
def test_a_value_out_of_place_or_bounds_is_named(
    tmp_path: Path, line: int, begin: int, text: str, message: str
) -> None:
    lines = [FIRST, SECOND]
    whole = lines[line - 1]
    lines[line - 1] = resummed(whole[:begin] + text + whole[begin + len(text) :])
    assert problems(written(tmp_path, *lines)) == [(line, message)]


def test_letters_carry_catalogue_numbers_beyond_five_digits() -> None:
    """Examples of the scheme as the Space Force describes it (from memory)."""
    assert catalogue_number("A0000") == 100_000
    assert catalogue_number("H9999") == 179_999
    assert catalogue_number("J0001") == 180_001  # I is left out
    assert catalogue_number("Z9999") == 339_999
    assert catalogue_number("    5") == 5


def test_a_number_with_a_letter_is_read(tmp_path: Path) -> None:
    lines = [resummed(line[:2] + "E8493" + line[7:]) for line in (FIRST, SECOND)]
    (found,) = load_elements(written(tmp_path, *lines))
    assert (found.name, found.catalogue_number) == ("148493", 148_493)


@given(st.integers(0, WIDTH - 1), st.characters(codec="ascii", categories=("Nd", "Lu", "P")))
def test_one_digit_changed_is_never_read_in_silence(place: int, other: str) -> None:
    """The published checksum finds every single wrong digit."""
    was = FIRST[place]
    changed = FIRST[:place] + other + FIRST[place + 1 :]
    if was.isdigit() and other.isdigit() and was != other:
        assert changed[-1] != str(checksum(changed))


@given(st.text(max_size=300))
def test_any_text_gives_sets_or_problems_and_nothing_else(
    tmp_path_factory: pytest.TempPathFactory, text: str
) -> None:
    path = tmp_path_factory.mktemp("any") / "any.tle"
    path.write_bytes(text.encode("utf-8", errors="surrogatepass"))
    assert problems(path)
