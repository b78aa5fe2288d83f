"""The daemon's start-up and memory, against an interpreter that imports the same packages."""

import os
import re
import shutil
import socket
import subprocess
import sys
import time
from pathlib import Path
from tempfile import TemporaryDirectory

from tests.bench.row import Row

CONFIG = Path(__file__).parents[2] / "config"
RUN = "from trunnion.cli.main import main; main()"
TELLING = (
    "import atexit, sys, sysconfig\n"
    "home = sysconfig.get_path('purelib')\n"
    "def tell():\n"
    "    loaded = [(name, str(getattr(m, '__file__', ''))) for name, m in sys.modules.items()]\n"
    "    print(*(name for name, file in loaded if file.startswith(home)), file=sys.stderr)\n"
    "atexit.register(tell)\n"
)
BARE = (
    "import importlib, os, socket, sys\n"
    "for name in sys.argv[1:]: importlib.import_module(name)\n"
    "told = socket.socket(socket.AF_UNIX, socket.SOCK_DGRAM)\n"
    "told.sendto(b'READY=1', os.environ['NOTIFY_SOCKET'])\n"
    "sys.stdin.read()\n"
)
ROUNDS = 12
SETTLING_S = 3.0
LONGEST_S = 60.0
LARGEST_MIB = 90.0


def rows() -> list[Row]:
    """Start both in turn, several times; the quickest start of each is the least disturbed one."""
    with TemporaryDirectory() as folder:
        station = example(Path(folder))
        cache = Path(folder) / "bytecode"
        packages = third_party_of(station, cache)
        ours_s, bare_s, ours_mib = list[float](), list[float](), list[float]()
        for _ in range(ROUNDS):
            with Started([RUN, "run", str(station)], cache) as ours:
                ours_s.append(ours.ready_s)
                time.sleep(SETTLING_S if not ours_mib else 0.0)
                ours_mib.append(ours.resident_mib())
            with Started([BARE, *packages], cache) as bare:
                bare_s.append(bare.ready_s)
    return [
        Row(
            f"run: exec to ready, {len(packages)} modules of other packages",
            f"{1e3 * min(ours_s):.0f} ms",
            f"{1e3 * min(bare_s):.0f} ms",
            min(ours_s) / min(bare_s),
            1.8,
            is_at_least=False,
        ),
        Row(
            "run: resident memory, MiB",
            f"{max(ours_mib):.1f} MiB",
            f"{LARGEST_MIB:g} MiB",
            max(ours_mib),
            LARGEST_MIB,
            is_at_least=False,
        ),
    ]


class Started:
    """A Python process that has said that it is ready; told to end when left."""

    def __init__(self, arguments: list[str], cache: Path) -> None:
        with (
            TemporaryDirectory() as folder,
            socket.socket(socket.AF_UNIX, socket.SOCK_DGRAM) as ear,
        ):
            ear.bind(f"{folder}/notify")
            ear.settimeout(LONGEST_S)
            begin_s = time.perf_counter()
            self._process = subprocess.Popen(
                [sys.executable, "-c", *arguments],
                env=os.environ | installed(cache) | {"NOTIFY_SOCKET": f"{folder}/notify"},
                stdin=subprocess.PIPE,
                stderr=subprocess.PIPE,
            )
            while b"READY=1" not in ear.recv(4096):
                pass
            self.ready_s = time.perf_counter() - begin_s

    def resident_mib(self) -> float:
        """Resident memory of the process now (`VmRSS` of proc(5))."""
        status = Path(f"/proc/{self._process.pid}/status").read_text()
        found = re.search(r"VmRSS:\s+(\d+) kB", status)
        return int(found[1]) / 1024 if found else float("nan")

    def __enter__(self) -> "Started":
        return self

    def __exit__(self, *_: object) -> None:
        self.end()

    def end(self) -> str:
        """Have it end; what it said on standard error."""
        if self._process.returncode is not None:
            return ""
        self._process.terminate()
        _, told = self._process.communicate(timeout=LONGEST_S)
        return told.decode(errors="replace")


def example(folder: Path) -> Path:
    """A copy of the example station, in a folder of its own."""
    shutil.copytree(CONFIG, folder, dirs_exist_ok=True)
    return folder / "station.yaml"


def installed(cache: Path) -> dict[str, str]:
    """Both sides find their bytecode compiled, as an installer leaves it."""
    return {"PYTHONDONTWRITEBYTECODE": "", "PYTHONPYCACHEPREFIX": str(cache)}


def third_party_of(station: Path, cache: Path) -> list[str]:
    """The modules of other packages that the daemon imports until it is ready, in order."""
    with Started([TELLING + RUN, "run", str(station)], cache) as telling:
        names = telling.end().splitlines()[-1].split()
    return [name for name in names if not name.startswith("trunnion")]
