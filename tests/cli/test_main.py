import subprocess
import sys
from importlib.metadata import version
from pathlib import Path

from tests.cli.command import trunnion

TRUNNION = Path(sys.executable).parent / "trunnion"


def test_the_version_is_told() -> None:
    told = trunnion("--version")
    assert (told.exit_code, told.stdout) == (0, f"trunnion {version('trunnion')}\n")


def test_help_names_every_command_and_the_caution() -> None:
    told = trunnion("--help")
    assert told.exit_code == 0
    assert all(word in told.stdout for word in ("init", "angles", "passes", "emergency stop"))


def test_an_unknown_command_is_a_mistake_in_the_asking() -> None:
    told = subprocess.run([TRUNNION, "trakc"], capture_output=True, text=True, check=False)
    assert told.returncode == 2
    assert told.stdout == ""
    assert "trakc" in told.stderr


def test_an_error_is_one_message_and_no_traceback(tmp_path: Path) -> None:
    missing = tmp_path / "gone.yaml"
    told = subprocess.run([TRUNNION, "show", missing], capture_output=True, text=True, check=False)
    assert (told.returncode, told.stdout) == (1, "")
    assert told.stderr == f"{missing}: no such file\n"


def test_a_command_that_needs_no_astronomy_imports_none() -> None:
    heavy = {"numpy", "erfa", "sgp4", "pydantic", "rich", "yaml"}
    code = (
        "import sys; from trunnion.cli.main import build_app\n"
        "build_app()(['--version'], standalone_mode=False)\n"
        f"print(sorted({heavy!r} & sys.modules.keys()), file=sys.stderr)"
    )
    told = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert told.stderr == "[]\n"
