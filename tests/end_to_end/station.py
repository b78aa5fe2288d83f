"""A station in a folder of its own, and the real daemon on it as a user would start it."""

import os
import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path
from typing import Any

from trunnion.cli.init import example_folder
from trunnion.service.control.client import ControlClient
from trunnion.service.control.errors import ControlError
from trunnion.sky.instants import format_utc

TRUNNION = (sys.executable, "-c", "from trunnion.cli.main import main; main()")
PATIENCE_S = 40.0


class Station:
    """The example station with a contact that is on now, and its simulated mount kept on disk."""

    def __init__(self, folder: Path) -> None:
        self.folder = folder
        self.file = folder / "station.yaml"
        for name in ("elements.tle", "horizon.txt"):
            (folder / name).write_bytes((example_folder() / name).read_bytes())
        text = (example_folder() / "station.yaml").read_text()
        kind = "kind: simulator"
        assert kind in text
        self.file.write_text(text.replace(kind, f"{kind}\n  memory: mount.json\n  #"))
        self.plan(begin_in_s=-5.0, length_s=600.0)

    def plan(self, begin_in_s: float, length_s: float, target: str = "fixed:3.7,83.1") -> None:
        """Replace the plan by one contact."""
        begin_s = time.time() + begin_in_s
        (self.folder / "plan.yaml").write_text(
            f"contacts:\n  - id: the-contact\n    target: {target}\n"
            f"    from: {format_utc(begin_s)}\n    until: {format_utc(begin_s + length_s)}\n"
        )

    def run(self, **environment: str) -> subprocess.Popen[str]:
        """Start the daemon, with these variables set besides."""
        with (self.folder / "log").open("a") as log:
            return subprocess.Popen(
                [*TRUNNION, "run", str(self.file)],
                stderr=log,
                stdout=subprocess.DEVNULL,
                text=True,
                env={**os.environ, **environment},
            )

    def command(self, *arguments: str) -> subprocess.CompletedProcess[str]:
        """Run one command of the command line to its end."""
        return subprocess.run(
            [*TRUNNION, *arguments], capture_output=True, text=True, timeout=60, check=False
        )

    def status(self) -> dict[str, Any]:
        """What the daemon says of itself; empty while it does not answer."""
        try:
            with ControlClient(self.folder / "control.sock") as client:
                return client.request("status")
        except ControlError:
            return {}

    def wait_for(self, is_so: Callable[[dict[str, Any]], bool]) -> dict[str, Any]:
        """Ask until something is so: a real process keeps its own time."""
        until_s = time.monotonic() + PATIENCE_S
        status: dict[str, Any] = {}
        while time.monotonic() < until_s:
            status = self.status()
            if status.get("mount") and is_so(status):
                return status
            time.sleep(0.1)
        raise AssertionError(f"waited in vain; last: {status}; log: {self.log()}")

    def wait_for_phase(self, phase: str) -> dict[str, Any]:
        """Ask until the daemon is in this phase."""
        return self.wait_for(lambda status: status["phase"] == phase)

    def log(self) -> str:
        """Everything the daemon has said."""
        return (self.folder / "log").read_text()
