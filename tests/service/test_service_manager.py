"""What the service manager hears of the turns."""

import socket
from pathlib import Path

from tests.service.turns import turn_at
from trunnion.pilot.phase import Phase
from trunnion.service.notify import Notifier
from trunnion.service.service_manager import ServiceManagerReport


def test_it_hears_each_change_of_what_the_mount_does_once(tmp_path: Path) -> None:
    with socket.socket(socket.AF_UNIX, socket.SOCK_DGRAM) as ear:
        ear.bind(str(tmp_path / "ear"))
        ear.settimeout(0.0)
        notifier = Notifier(str(tmp_path / "ear"))
        report = ServiceManagerReport(notifier, longest_age_s=1.0)
        report.note(turn_at(1.0, assignment=None, phase=Phase.STOWED))
        report.note(turn_at(1.1, assignment=None, phase=Phase.STOWED))
        report.note(turn_at(1.2, 0.1))
        heard: list[str] = []
        while not heard or heard[-1] != "STATUS=tracking evening":
            heard.append(ear.recv(4096).decode())
        notifier.close()
    assert [each for each in heard if each.startswith("STATUS")] == [
        "STATUS=stowed",
        "STATUS=tracking evening",
    ]
