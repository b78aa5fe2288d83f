"""The rules of the house: format, lint, strict types, and imports that run one way."""

import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
BIN = Path(sys.executable).parent

CHECKS = {
    "format": ("ruff", "format", "--check", "."),
    "lint": ("ruff", "check", "."),
    "types": ("mypy", "daemon/trunnion", "drivers/trunnion_drivers", "tests"),
    "imports": ("lint-imports", "--no-cache"),
}


@pytest.mark.parametrize("check", CHECKS)
def test_the_house_rules_hold(check: str) -> None:
    tool, *arguments = CHECKS[check]
    found = subprocess.run(
        [BIN / tool, *arguments], cwd=ROOT, capture_output=True, text=True, check=False
    )
    assert found.returncode == 0, found.stdout + found.stderr
