"""The unit, as the service manager itself judges it, and the files beside it."""

import re
import shutil
import subprocess
from configparser import ConfigParser
from pathlib import Path

import pytest

from trunnion.cli.errors import MISUSED

SYSTEMD = Path(__file__).parents[2] / "systemd"
UNIT = "trunnion@.service"
INSTALLED = "/opt/trunnion/bin/trunnion"
WORST_EXPOSURE = 2.0

needs_analyze = pytest.mark.skipif(
    shutil.which("systemd-analyze") is None, reason="systemd-analyze is not installed"
)


@pytest.fixture
def unit(tmp_path: Path) -> Path:
    """The unit as it ships, but for the program, which is not installed where tests run."""
    text = (SYSTEMD / UNIT).read_text()
    assert text.count(INSTALLED) == 1
    (tmp_path / UNIT).write_text(text.replace(INSTALLED, "/bin/true"))
    return tmp_path / "trunnion@ternholm.service"


def analyze(*arguments: str) -> subprocess.CompletedProcess[str]:
    command = ["systemd-analyze", "--no-pager", *arguments]
    return subprocess.run(command, check=False, capture_output=True, text=True, timeout=60)


@needs_analyze
def test_the_service_manager_has_nothing_to_say_against_it(unit: Path) -> None:
    verified = analyze("verify", "--man=no", str(unit))
    assert (verified.returncode, verified.stdout, verified.stderr) == (0, "", "")


@needs_analyze
def test_a_mistake_in_it_would_be_seen(unit: Path) -> None:
    template = unit.with_name(UNIT)
    template.write_text(template.read_text().replace("WatchdogSec=", "WatchDogSec="))
    assert "WatchDogSec" in analyze("verify", "--man=no", str(unit)).stderr


@needs_analyze
def test_little_is_exposed(unit: Path) -> None:
    judged = analyze("security", "--offline=true", str(unit))
    exposure = re.search(r"exposure level for \S+: ([0-9.]+)", judged.stdout)
    assert exposure is not None, judged.stderr
    assert float(exposure[1]) <= WORST_EXPOSURE


def test_it_is_watched_and_comes_back() -> None:
    parser = ConfigParser(strict=False, interpolation=None)
    parser.optionxform = str  # type: ignore[method-assign, assignment]
    parser.read(SYSTEMD / UNIT)
    service = parser["Service"]
    assert service["Type"] == "notify"
    assert service["Restart"] == "on-failure"
    assert service["RestartPreventExitStatus"] == str(MISUSED)
    assert service["RestartSec"] == "1s"
    assert service["WatchdogSec"] == "15s"
    assert (service["User"], service["SupplementaryGroups"]) == ("trunnion", "dialout")
    assert parser["Unit"]["StartLimitIntervalSec"] == "0"
    for folder in ("State", "Runtime", "Logs"):
        assert service[f"{folder}Directory"] == "trunnion/%i"


@pytest.mark.skipif(shutil.which("systemd-sysusers") is None, reason="no systemd-sysusers")
def test_the_user_is_made_with_its_group(tmp_path: Path) -> None:
    (tmp_path / "etc").mkdir()
    (tmp_path / "etc" / "group").write_text("dialout:x:20:\n")
    config = str(SYSTEMD / "trunnion.sysusers.conf")
    command = ["systemd-sysusers", f"--root={tmp_path}", config]
    subprocess.run(command, check=True, timeout=60, capture_output=True)
    passwd, group = ((tmp_path / "etc" / name).read_text() for name in ("passwd", "group"))
    assert re.search(r"^trunnion:x:\d+:\d+:Antenna pointing:/var/lib/trunnion:\S*nologin$", passwd)
    assert "dialout:x:20:trunnion" in group


def test_the_folders_are_understood(tmp_path: Path) -> None:
    config = (SYSTEMD / "trunnion.tmpfiles.conf").read_text()
    lines = [line.split() for line in config.splitlines() if not line.startswith("#")]
    assert [(line[0], line[1], line[2]) for line in lines] == [
        ("d", "/etc/trunnion", "0750"),
        ("d", "/var/lib/trunnion", "0750"),
    ]


def test_every_file_is_told_of_in_the_readme() -> None:
    readme = (SYSTEMD / "README.md").read_text()
    for file in SYSTEMD.iterdir():
        assert file.name in readme or file.name == "README.md"
