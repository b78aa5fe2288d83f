"""The real daemon as a process: a contact, a stop, a death, a restart, a reset, an end."""

import json
import signal
import socket
import subprocess
from collections.abc import Iterator
from pathlib import Path

import pytest

from tests.end_to_end.station import Station
from trunnion.cli.init import example_folder


@pytest.fixture
def station(tmp_path: Path) -> Station:
    return Station(tmp_path)


@pytest.fixture
def daemons() -> Iterator[list[subprocess.Popen[str]]]:
    running: list[subprocess.Popen[str]] = []
    yield running
    for each in running:
        each.kill()
        each.wait()


def test_a_contact_a_stop_a_death_a_restart_and_a_reset(
    station: Station, daemons: list[subprocess.Popen[str]]
) -> None:
    daemons.append(station.run())
    tracking = station.wait_for_phase("tracking")
    assert tracking["contact"]["id"] == "the-contact"
    assert tracking["mount"]["reading_deg"] == pytest.approx([3.7, 83.1], abs=0.4)

    assert station.command("stop", str(station.file), "--cause", "a cow").returncode == 0
    halted = station.wait_for_phase("halted")
    assert "a cow" in halted["emergency_stop"]["cause"]
    place = halted["mount"]["reading_deg"]
    refused = station.command("resume", str(station.file))
    assert refused.returncode == 1
    assert "reset it first" in refused.stderr

    daemons[-1].kill()
    daemons[-1].wait()
    daemons.append(station.run())
    still = station.wait_for(lambda status: status["mount"]["reading_deg"] is not None)
    assert still["phase"] == "halted"
    assert "a cow" in still["emergency_stop"]["cause"]
    assert still["mount"]["reading_deg"] == pytest.approx(place, abs=0.1)

    assert station.command("reset", str(station.file)).returncode == 0
    holding = station.wait_for_phase("holding")
    assert holding["emergency_stop"] is None
    assert holding["mount"]["order_deg"] is None

    daemons[-1].kill()
    daemons[-1].wait()
    daemons.append(station.run())
    station.wait_for(lambda status: status["phase"] == "holding" and not status["is_planning"])

    assert station.command("resume", str(station.file)).returncode == 0
    station.wait_for_phase("tracking")


def test_killed_in_mid_contact_it_takes_it_up_by_itself(
    station: Station, daemons: list[subprocess.Popen[str]]
) -> None:
    daemons.append(station.run())
    station.wait_for_phase("tracking")
    daemons[-1].kill()
    daemons[-1].wait()
    daemons.append(station.run())
    station.wait_for_phase("tracking")
    contacts = json.loads(station.command("records", str(station.file), "--json").stdout)
    assert "interrupted" in json.dumps(contacts)


def test_told_to_end_it_halts_records_and_leaves_nothing_behind(
    station: Station, daemons: list[subprocess.Popen[str]]
) -> None:
    daemons.append(station.run())
    station.wait_for_phase("tracking")
    daemons[-1].send_signal(signal.SIGTERM)
    assert daemons[-1].wait(timeout=20) == 0
    assert not (station.folder / "control.sock").exists()
    contacts = json.loads(station.command("records", str(station.file), "--json").stdout)
    assert "cut short" in json.dumps(contacts)
    silent = station.command("status", str(station.file))
    assert (silent.returncode, silent.stdout) == (1, "")
    assert "no daemon is listening" in silent.stderr


def test_told_to_end_it_stows_first_where_the_station_wants_it(
    station: Station, daemons: list[subprocess.Popen[str]]
) -> None:
    text = station.file.read_text()
    station.file.write_text(text.replace("stow_on_exit: false", "stow_on_exit: true"))
    daemons.append(station.run())
    station.wait_for_phase("tracking")
    daemons[-1].send_signal(signal.SIGTERM)
    assert daemons[-1].wait(timeout=60) == 0
    first_deg, second_deg = map(float, (station.folder / "mount.json").read_text().split())
    assert (first_deg, second_deg) == pytest.approx((0.0, 88.0), abs=0.1)


def test_a_second_daemon_on_the_same_mount_is_refused(
    station: Station, daemons: list[subprocess.Popen[str]]
) -> None:
    daemons.append(station.run())
    station.wait_for_phase("tracking")
    second = station.command("run", str(station.file))
    assert second.returncode == 1
    assert second.stderr.count("\n") == 1
    assert "another daemon is listening" in second.stderr


def test_a_new_plan_is_taken_up_and_a_bad_one_is_not(
    station: Station, daemons: list[subprocess.Popen[str]]
) -> None:
    daemons.append(station.run())
    station.wait_for_phase("tracking")
    (station.folder / "plan.yaml").write_text("contacts: [{target: sun, form: 2026}]\n")
    troubled = station.wait_for(lambda status: bool(status["trouble"]))
    assert troubled["phase"] == "tracking"
    assert "form" in troubled["trouble"][0]
    station.plan(begin_in_s=-3.0, length_s=300.0, target="fixed:5.3,81.9")
    station.wait_for(lambda status: status["contact"]["target"] == "fixed:5.3,81.9")
    station.wait_for_phase("tracking")


def test_the_signal_for_an_emergency_stop_stops(
    station: Station, daemons: list[subprocess.Popen[str]]
) -> None:
    daemons.append(station.run())
    station.wait_for_phase("tracking")
    daemons[-1].send_signal(signal.SIGUSR1)
    assert "signal" in station.wait_for_phase("halted")["emergency_stop"]["cause"]


def test_a_file_stops_and_keeps_it_stopped_until_it_is_gone(
    station: Station, daemons: list[subprocess.Popen[str]]
) -> None:
    text = station.file.read_text()
    assert "stop_request: null" in text
    station.file.write_text(text.replace("stop_request: null", "stop_request: stop-here"))
    daemons.append(station.run())
    station.wait_for_phase("tracking")
    (station.folder / "stop-here").touch()
    assert "stop-here" in station.wait_for_phase("halted")["emergency_stop"]["cause"]
    refused = station.command("reset", str(station.file))
    assert (refused.returncode, "stop-here asks for it" in refused.stderr) == (1, True)
    (station.folder / "stop-here").unlink()
    assert station.command("reset", str(station.file)).returncode == 0
    station.wait_for_phase("holding")


def test_no_reset_is_taken_while_the_button_is_pressed(
    station: Station, daemons: list[subprocess.Popen[str]]
) -> None:
    pressed = "  faults: [{after_s: 0.0, for_s: 6.0, stop_pressed: true}]\n  memory: mount.json\n"
    text = station.file.read_text()
    assert "  memory: mount.json\n" in text
    station.file.write_text(text.replace("  memory: mount.json\n", pressed))
    daemons.append(station.run())
    stopped = station.wait_for(lambda status: status["link"]["stop_pressed"])
    assert stopped["phase"] == "halted"
    assert "hardware stop input" in stopped["emergency_stop"]["cause"]
    refused = station.command("reset", str(station.file))
    assert (refused.returncode, "is pressed" in refused.stderr) == (1, True)
    still = station.wait_for(lambda status: not status["link"]["stop_pressed"])
    assert still["phase"] == "halted"
    assert station.command("reset", str(station.file)).returncode == 0
    station.wait_for_phase("holding")


def test_a_broken_station_file_is_told_without_a_traceback(station: Station) -> None:
    station.file.write_text(station.file.read_text().replace("tick_hz", "tick_h"))
    done = station.command("run", str(station.file))
    assert done.returncode == 2
    assert "did you mean 'tick_hz'" in done.stderr
    assert "Traceback" not in done.stderr


def test_transmitting_is_permitted_on_target_and_not_after_a_stop(
    station: Station, daemons: list[subprocess.Popen[str]]
) -> None:
    text = station.file.read_text()
    assert "transmit_permit: null" in text
    station.file.write_text(text.replace("transmit_permit: null", "transmit_permit: permit"))
    permit = station.folder / "permit"
    daemons.append(station.run())
    station.wait_for(lambda status: status["transmit"]["is_permitted"])
    assert permit.read_text().startswith("permitted until_mono_s=")
    assert station.command("stop", str(station.file), "--cause", "a cow").returncode == 0
    stopped = station.wait_for(lambda status: not status["transmit"]["is_permitted"])
    assert "a cow" in stopped["transmit"]["reason"]
    assert permit.read_text() == "forbidden\n"
    daemons[-1].send_signal(signal.SIGTERM)
    daemons[-1].wait(timeout=20)
    shown = station.command("records", "show", "1", str(station.file), "--json")
    told = [each["what"] for each in json.loads(shown.stdout)["events"]]
    assert "transmitting is permitted" in told
    assert any(each.startswith("transmitting is forbidden: ") for each in told)


def test_a_port_that_is_not_there_is_told_and_tried_again(
    station: Station, daemons: list[subprocess.Popen[str]]
) -> None:
    dialect = example_folder() / "dialects" / "reedmace.yaml"
    text = station.file.read_text()
    kind = "kind: simulator\n  memory: mount.json"
    assert kind in text
    before, after = text.split(kind)
    _, cadence, rest = after.partition("\ncadence:")
    driver = f"kind: dialect\n  dialect: {dialect}\n  url: /dev/serial/by-id/no-such-adapter\n"
    station.file.write_text(before + driver + cadence + rest)
    assert station.command("check", str(station.file)).returncode == 0
    daemons.append(station.run())
    status = station.wait_for(lambda status: bool(status["link"]["last_error"]))
    assert "no-such-adapter" in status["link"]["last_error"]
    assert status["phase"] == "starting"
    assert status["mount"]["reading_deg"] is None
    assert any("link down" in sentence for sentence in status["interventions"])
    daemons[-1].send_signal(signal.SIGTERM)
    assert daemons[-1].wait(timeout=20) == 0
    assert "Traceback" not in station.log()


def test_a_stop_takes_the_power_and_the_reset_gives_it_back(
    station: Station, daemons: list[subprocess.Popen[str]]
) -> None:
    daemons.append(station.run())
    assert not station.wait_for_phase("tracking")["link"]["is_power_cut"]
    assert station.command("stop", str(station.file)).returncode == 0
    station.wait_for(lambda status: status["link"]["is_power_cut"])
    assert station.command("reset", str(station.file)).returncode == 0
    station.wait_for(lambda status: not status["link"]["is_power_cut"])
    assert station.command("resume", str(station.file)).returncode == 0
    station.wait_for_phase("tracking")


def test_a_mount_found_outside_comes_back_when_told_to(
    station: Station, daemons: list[subprocess.Popen[str]]
) -> None:
    (station.folder / "mount.json").write_text(f"{13.7:+025.12f} {4.1:+025.12f}\n")
    daemons.append(station.run())
    waiting = station.wait_for(lambda status: bool(status["mount"]["reading_deg"]))
    assert waiting["mount"]["reading_deg"] == pytest.approx([13.7, 4.1], abs=0.05)
    assert station.command("recover", str(station.file)).returncode == 0
    station.wait_for(lambda status: status["mount"]["reading_deg"][1] > 5.0)
    station.wait_for_phase("holding")
    refused = station.command("recover", str(station.file))
    assert (refused.returncode, "inside its limits" in refused.stderr) == (1, True)
    assert station.command("resume", str(station.file)).returncode == 0
    station.wait_for_phase("tracking")


def test_the_service_manager_hears_that_it_is_ready_alive_and_what_it_does(
    station: Station, daemons: list[subprocess.Popen[str]], tmp_path: Path
) -> None:
    with socket.socket(socket.AF_UNIX, socket.SOCK_DGRAM) as manager:
        manager.bind(str(tmp_path / "notify"))
        manager.settimeout(20.0)
        daemons.append(station.run(NOTIFY_SOCKET=str(tmp_path / "notify")))
        heard = {manager.recv(4096).decode()}
        while "STATUS=tracking the-contact" not in heard:
            heard.add(manager.recv(4096).decode())
        assert "READY=1" in heard
        assert "WATCHDOG=1" in heard
        daemons[-1].send_signal(signal.SIGTERM)
        while "STOPPING=1" not in heard:
            heard.add(manager.recv(4096).decode())
