from contextlib import suppress
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion.files.mask import load_mask
from trunnion.files.problems import FileProblems


def written(folder: Path, text: str) -> Path:
    file = folder / "horizon.txt"
    file.write_text(text, encoding="utf-8")
    return file


def test_pairs_comments_commas_and_steps_are_read(tmp_path: Path) -> None:
    file = written(tmp_path, "# ridge\n\n 17  3.5 # lake\r\n118,8\n118, 13\n")
    assert load_mask(file) == ((17.0, 3.5), (118.0, 8.0), (118.0, 13.0))


def test_everything_wrong_is_told_with_its_line(tmp_path: Path) -> None:
    file = written(tmp_path, "370 3\n20 95\n30\n40 x\nnan 3\n50 4\n45 4\n1 2 3\n")
    with pytest.raises(FileProblems) as caught:
        load_mask(file)
    assert [(p.line, p.message) for p in caught.value.problems] == [
        (1, "expected an azimuth from 0 to below 360, got 370"),
        (2, "expected an elevation of -90 to 90, got 95"),
        (3, "expected azimuth and elevation in degrees, got '30'"),
        (4, "expected azimuth and elevation in degrees, got '40 x'"),
        (5, "expected azimuth and elevation in degrees, got 'nan 3'"),
        (7, "expected azimuths in rising order, got 45 after 50"),
        (8, "expected azimuth and elevation in degrees, got '1 2 3'"),
    ]


def test_an_empty_mask_is_refused(tmp_path: Path) -> None:
    with pytest.raises(FileProblems, match="got none"):
        load_mask(written(tmp_path, "# nothing yet\n"))


@given(st.text(max_size=80))
def test_any_text_is_a_mask_or_a_list_of_problems(
    tmp_path_factory: pytest.TempPathFactory, text: str
) -> None:
    file = tmp_path_factory.mktemp("mask") / "horizon.txt"
    file.write_text(text, encoding="utf-8", errors="replace")
    with suppress(FileProblems):
        points = load_mask(file)
        assert all(0 <= azimuth < 360 and -90 <= elevation <= 90 for azimuth, elevation in points)
