"""`trunnion torture` as a process: a long run that somebody has had enough of."""

import re
import signal
import subprocess

from tests.end_to_end.station import TRUNNION

COMMAND = (*TRUNNION, "torture", "--seed", "3", "--count", "400")


def test_a_run_that_is_ended_early_tells_what_was_flown() -> None:
    with subprocess.Popen(
        [*COMMAND, "--workers", "2"], stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True
    ) as process:
        try:
            process.wait(timeout=9.0)
        except subprocess.TimeoutExpired:
            process.send_signal(signal.SIGINT)
        told, complaints = process.communicate(timeout=60.0)
    assert process.returncode == 1
    assert re.search(r"ended early, after \d+ of 400 stations", complaints)
    assert "Traceback" not in complaints
    assert re.search(r"^[1-9]\d* stations, \d+ contacts, \d+ mishaps", told, re.MULTILINE)
