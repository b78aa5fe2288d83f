"""The program as an installed wheel, in an empty folder, without the source checkout."""

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
RUN = "from trunnion.cli.main import main; main()"
MORNING = "2026-12-01T00:00Z"


@pytest.fixture(scope="module")
def installed(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A folder that holds the wheel's content, as an installer leaves it."""
    built = tmp_path_factory.mktemp("built")
    build = [sys.executable, "-m", "build", "--wheel", "--no-isolation", "--outdir", str(built)]
    subprocess.run([*build, str(ROOT)], check=True, capture_output=True, timeout=120)
    (wheel,) = built.glob("*.whl")
    place = tmp_path_factory.mktemp("installed")
    install = [sys.executable, "-m", "pip", "install", "-q", "--no-deps", "--target", str(place)]
    subprocess.run([*install, str(wheel)], check=True, capture_output=True, timeout=120)
    return place


def trunnion(installed: Path, folder: Path, *arguments: str) -> subprocess.CompletedProcess[str]:
    """Run a command of the installed program in a folder."""
    return subprocess.run(
        [sys.executable, "-P", "-c", RUN, *arguments],
        cwd=folder,
        env={**os.environ, "PYTHONPATH": str(installed)},
        capture_output=True,
        text=True,
        timeout=120,
        check=False,
    )


def test_it_is_the_wheel_that_runs(installed: Path, tmp_path: Path) -> None:
    where = "import trunnion, trunnion_drivers; print(trunnion.__file__, trunnion_drivers.__file__)"
    done = subprocess.run(
        [sys.executable, "-P", "-c", where],
        cwd=tmp_path,
        env={**os.environ, "PYTHONPATH": str(installed)},
        capture_output=True,
        text=True,
        check=True,
    )
    assert done.stdout.count(str(installed)) == 2


def test_from_init_to_a_checked_plan(installed: Path, tmp_path: Path) -> None:
    assert trunnion(installed, tmp_path, "init").returncode == 0
    done = trunnion(installed, tmp_path, "check", "station.yaml", "--now", MORNING, "--json")
    told = json.loads(done.stdout)
    assert told["station"] == "Ternholm"
    assert {each["id"] for each in told["contacts"] if each["is_served"]} >= {
        "brindle-4-morning",
        "quillon-2-north",
    }
    again = trunnion(installed, tmp_path, "init")
    assert again.returncode == 1
    assert "nothing written" in again.stderr


def test_the_demo_needs_no_file_and_tracks_every_contact(installed: Path, tmp_path: Path) -> None:
    done = trunnion(installed, tmp_path, "demo", "--json")
    assert done.returncode == 0, done.stderr
    told = json.loads(done.stdout)
    assert {each["fate"] for each in told["contacts"]} == {"tracked"}
    assert all(each["outside_beam_s"] == 0.0 for each in told["contacts"])
    assert list(tmp_path.iterdir()) == []
