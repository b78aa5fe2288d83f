"""What the daemon costs while it tracks over a serial line, beside a bench in another process."""

import os
import subprocess
import sys
import time
from pathlib import Path
from tempfile import TemporaryDirectory

from tests.bench.row import Row
from tests.drivers.benches import DIALECTS
from tests.end_to_end.station import Station

SETTLING_S, LASTS_S = 10.0, 30.0
LARGEST_SHARE = 0.03


def rows() -> list[Row]:
    """Measure the real daemon on the bench."""
    with TemporaryDirectory() as folder:
        station = on_bench(Path(folder))
        bench = [sys.executable, "-m", "trunnion_drivers.bench", "--quiet", str(station.file)]
        with subprocess.Popen(bench, stdout=subprocess.DEVNULL) as far:
            daemon = station.run()
            try:
                station.wait_for_phase("tracking")
                return [processor_share(daemon.pid)]
            finally:
                daemon.terminate()
                daemon.wait(timeout=30)
                far.terminate()


def on_bench(folder: Path) -> Station:
    """The example station, its driver a described controller at a port of the bench."""
    station = Station(folder)
    text = station.file.read_text()
    begin, end = text.index("driver:\n"), text.index("cadence:\n")
    dialect = DIALECTS / "reedmace.yaml"
    driver = f"driver:\n  kind: dialect\n  dialect: {dialect}\n  url: {folder / 'port'}\n\n"
    station.file.write_text(text[:begin] + driver + text[end:])
    return station


def processor_share(pid: int) -> Row:
    """Processor time of the daemon, user and system, of the time that passes."""
    time.sleep(SETTLING_S)
    begin_s, used_s = time.monotonic(), processor_s(pid)
    time.sleep(LASTS_S)
    share = (processor_s(pid) - used_s) / (time.monotonic() - begin_s)
    return Row(
        "processor time of `run` at 10 Hz, lines of text at 9600 baud",
        f"{share:.2%} of a core",
        f"{LARGEST_SHARE:.0%}",
        share / LARGEST_SHARE,
        1.0,
        is_at_least=False,
    )


def processor_s(pid: int) -> float:
    """Seconds of processor time that a process has used: proc(5), fields 14 and 15 of stat."""
    fields = Path(f"/proc/{pid}/stat").read_text().rpartition(")")[2].split()
    return (int(fields[11]) + int(fields[12])) / os.sysconf("SC_CLK_TCK")
