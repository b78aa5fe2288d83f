import shutil
from pathlib import Path

import pytest

from trunnion.files.problems import FileProblems
from trunnion.files.station import StationFile, load_station
from trunnion.service.targets import TargetBook, UnknownTarget, resolve_target
from trunnion.service.viewpoint import viewpoint_of
from trunnion.sky.elements import Satellite
from trunnion.sky.fixed import FixedDirection
from trunnion.sky.look import Target
from trunnion.sky.sun import Sun

EXAMPLE = Path(__file__).parents[2] / "config"


@pytest.fixture
def station(tmp_path: Path) -> StationFile:
    for name in ("station.yaml", "horizon.txt", "elements.tle"):
        shutil.copy(EXAMPLE / name, tmp_path)
    return load_station(tmp_path / "station.yaml")


def book_of(station: StationFile) -> TargetBook:
    return TargetBook(station, viewpoint_of(station))


def number_of(target: Target) -> int:
    assert isinstance(target, Satellite)
    return target.element_set.catalogue_number


@pytest.mark.parametrize("text", ["QUILLON-2", "quillon-2", "90118", "090118"])
def test_elements_are_found_by_name_and_by_catalogue_number(
    station: StationFile, text: str
) -> None:
    assert number_of(resolve_target(text, station, viewpoint_of(station))) == 90118


def test_the_stations_own_names_come_first(station: StationFile) -> None:
    assert number_of(book_of(station).resolve("relay")) == 90455
    beacon = book_of(station).resolve("beacon")
    assert beacon == FixedDirection(251.3, 18.5)


def test_the_sun_and_fixed_directions_need_no_elements(station: StationFile) -> None:
    station.files.elements[0].unlink()
    assert isinstance(book_of(station).resolve("sun"), Sun)
    assert book_of(station).resolve("fixed:12.5,7.25") == FixedDirection(12.5, 7.25)


@pytest.mark.parametrize(
    ("text", "answer"),
    [
        ("QUILON-2", r"got 'QUILON-2'; did you mean 'QUILLON-2'\?"),
        ("Zebra", "got 'Zebra'; known here: beacon, relay, QUILLON-1, "),
        ("fixed:12", "expected fixed:AZIMUTH,ELEVATION"),
        ("12", "expected a known target, got '12'"),
    ],
)
def test_an_unknown_name_gets_a_suggestion(station: StationFile, text: str, answer: str) -> None:
    with pytest.raises(UnknownTarget, match=answer):
        book_of(station).resolve(text)


def lines_of(station: StationFile) -> list[str]:
    return station.files.elements[0].read_text().splitlines()


def test_a_name_that_two_spacecraft_share_is_refused(station: StationFile) -> None:
    lines = lines_of(station)
    lines[0] = lines[3]
    station.files.elements[0].write_text("\n".join(lines) + "\n")
    with pytest.raises(
        UnknownTarget, match=r"one spacecraft, got 2: QUILLON-2 \(90117\), QUILLON-2 \(90118\)"
    ):
        book_of(station).resolve("QUILLON-2")
    assert number_of(book_of(station).resolve("90117")) == 90117


def with_epoch_day(line_1: str, day: str) -> str:
    changed = line_1[:20] + day + line_1[23:68]
    total = sum(int(c) if c.isdigit() else c == "-" for c in changed)
    return f"{changed}{total % 10}"


def test_of_several_sets_of_one_spacecraft_the_newest_counts(
    station: StationFile, tmp_path: Path
) -> None:
    name, line_1, line_2 = lines_of(station)[:3]
    folder = tmp_path / "many"
    folder.mkdir()
    for day in ("333", "335", "331"):
        file = folder / f"day-{day}.tle"
        file.write_text("\n".join([name, with_epoch_day(line_1, day), line_2]) + "\n")
    (folder / ".hidden").write_text("no elements")
    text = station.path.read_text().replace("elements: elements.tle", "elements: many")
    station.path.write_text(text)
    target = book_of(load_station(station.path)).resolve("QUILLON-1")
    assert isinstance(target, Satellite)
    assert target.element_set.line_1[20:23] == "335"


def test_a_file_with_one_set_serves_on_the_command_line(
    station: StationFile, tmp_path: Path
) -> None:
    lines = lines_of(station)
    one, many = tmp_path / "one.tle", tmp_path / "many.tle"
    one.write_text("\n".join(lines[3:6]) + "\n")
    many.write_text("\n".join(lines) + "\n")
    assert number_of(book_of(station).resolve_or_read(str(one))) == 90118
    with pytest.raises(UnknownTarget, match="to mean one spacecraft, got 5"):
        book_of(station).resolve_or_read(str(many))
    with pytest.raises(UnknownTarget, match="expected a known target"):
        book_of(station).resolve(str(one))


def test_a_file_that_is_not_there_is_told_as_one(station: StationFile) -> None:
    with pytest.raises(FileProblems, match=r"gone\.tle: no such file"):
        book_of(station).resolve_or_read("gone.tle")


def test_all_problems_of_all_element_files_come_at_once(
    station: StationFile, tmp_path: Path
) -> None:
    text = station.path.read_text().replace("elements: elements.tle", "elements: [a.tle, b.tle]")
    station.path.write_text(text)
    with pytest.raises(FileProblems) as caught:
        book_of(load_station(station.path)).resolve("QUILLON-1")
    files = [Path(problem.file).name for problem in caught.value.problems]
    assert files == ["a.tle", "b.tle"]
