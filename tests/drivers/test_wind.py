"""Wind inputs: over real wires, from files and commands, and what is made of their readings."""

import os
import socket
import sys
import time
from functools import reduce
from operator import xor
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.drivers.benches import SystemClock
from tests.drivers.mounts import HandClock
from trunnion_drivers.bench.endpoint import PtyEndpoint
from trunnion_drivers.interface.errors import (
    BadSettings,
    DriverError,
    Garbled,
    LinkLost,
    NoReply,
    WrongState,
)
from trunnion_drivers.interface.wind import WindReading, WindRecord
from trunnion_drivers.wind.fixed import FixedWind
from trunnion_drivers.wind.json_command import JsonCommandWind
from trunnion_drivers.wind.json_file import JsonFileWind
from trunnion_drivers.wind.json_text import wind_from_json
from trunnion_drivers.wind.nmea_input import NmeaWind


def sentence(speed_m_s: float) -> bytes:
    told = f"WIMWV,214.8,R,{speed_m_s:.1f},M,A".encode()
    return b"$%s*%02X\r\n" % (told, reduce(xor, told))


def test_a_closed_input_does_not_work(tmp_path: Path) -> None:
    wind = FixedWind.from_settings({"speed_m_s": 3.5}, tmp_path, HandClock())
    with pytest.raises(WrongState):
        wind.read()
    wind.open()
    assert wind.read() == WindReading(1234.5, 3.5)
    wind.close()
    wind.close()
    assert not wind.is_open


@pytest.mark.parametrize("settings", [{}, {"speed_m_s": -1.0}, {"speed_m_s": 1.0, "gsut": 2.0}])
def test_bad_settings_are_told(settings: dict[str, float], tmp_path: Path) -> None:
    with pytest.raises(BadSettings):
        FixedWind.from_settings(settings, tmp_path, HandClock())


def test_sentences_come_over_a_serial_port(tmp_path: Path) -> None:
    endpoint = PtyEndpoint()
    wind = NmeaWind.from_settings({"url": endpoint.url, "within_s": 0.5}, tmp_path, SystemClock())
    wind.open()
    endpoint.send(b"noise" + sentence(3.5) + sentence(12.5)[:9])
    endpoint.send(sentence(12.5)[9:] + sentence(12.6).replace(b"12.6", b"12.7"))
    reading = wind.read()
    assert reading.speed_m_s == 12.5
    assert reading.direction_deg == 214.8
    with pytest.raises(NoReply):
        wind.read()
    endpoint.close()
    with pytest.raises((LinkLost, NoReply)):
        wind.read()
    wind.close()


def test_sentences_come_as_datagrams(tmp_path: Path) -> None:
    with socket.socket(socket.AF_INET, socket.SOCK_DGRAM) as sender:
        sender.bind(("127.0.0.1", 0))
        port = sender.getsockname()[1]
    url = f"udp://127.0.0.1:{port}"
    wind = NmeaWind.from_settings({"url": url, "within_s": 2.0}, tmp_path, SystemClock())
    wind.open()
    with socket.socket(socket.AF_INET, socket.SOCK_DGRAM) as sender:
        sender.sendto(sentence(12.5), ("127.0.0.1", port))
    assert wind.read().speed_m_s == 12.5
    with pytest.raises(LinkLost, match="in use"):
        NmeaWind.from_settings({"url": url}, tmp_path, SystemClock()).open()
    wind.close()


def test_a_file_is_as_old_as_it_is(tmp_path: Path) -> None:
    clock = HandClock()
    path = tmp_path / "wind.json"
    wind = JsonFileWind.from_settings({"path": "wind.json"}, tmp_path, clock)
    wind.open()
    with pytest.raises(LinkLost, match="No such file"):
        wind.read()
    path.write_text('{"speed_m_s": 7.5, "gust_m_s": 11.25, "direction_deg": 10, "other": 1}')
    an_hour_ago = time.time() - 3600
    os.utime(path, (an_hour_ago, an_hour_ago))
    reading = wind.read()
    assert reading[1:] == (7.5, 11.25, 10)
    assert clock.monotonic_s() - reading.taken_s == pytest.approx(3600, abs=10)
    clock.sleep(5.0)
    assert wind.read().taken_s == reading.taken_s


@pytest.mark.parametrize(
    ("code", "error"),
    [
        ("print('{\"speed_m_s\": 4.5}')", None),
        ("print('calm')", Garbled),
        ("raise SystemExit(3)", LinkLost),
        ("import time; time.sleep(30)", NoReply),
    ],
)
def test_a_command_prints_json(code: str, error: type[DriverError] | None, tmp_path: Path) -> None:
    settings = {"command": (sys.executable, "-c", code), "within_s": 1.0 if error else 20.0}
    wind = JsonCommandWind.from_settings(settings, tmp_path, SystemClock())
    wind.open()
    if error is None:
        assert wind.read().speed_m_s == 4.5
    else:
        with pytest.raises(error):
            wind.read()


def test_a_missing_command_is_told(tmp_path: Path) -> None:
    wind = JsonCommandWind.from_settings({"command": ("/nowhere",)}, tmp_path, SystemClock())
    wind.open()
    with pytest.raises(LinkLost, match="/nowhere"):
        wind.read()


@given(st.binary(max_size=100))
def test_any_text_is_a_wind_or_garbled(text: bytes) -> None:
    try:
        wind_from_json(text, 5.0)
    except Garbled:
        return


@pytest.mark.parametrize(
    "text",
    [b'{"speed_m_s": NaN}', b'{"speed_m_s": 1e999}', b'{"speed_m_s": "3"}', b"[" * 5000, b"7"],
)
def test_odd_json_is_garbled(text: bytes) -> None:
    with pytest.raises(Garbled):
        wind_from_json(text, 5.0)


def test_a_wind_that_cannot_be_is_garbled(tmp_path: Path) -> None:
    path = tmp_path / "wind.json"
    path.write_text('{"speed_m_s": 400}')
    wind = JsonFileWind.from_settings({"path": str(path)}, tmp_path, HandClock())
    wind.open()
    with pytest.raises(Garbled, match="150"):
        wind.read()


def test_mean_and_gust_are_of_ten_minutes_and_three_seconds() -> None:
    record = WindRecord()
    assert record.mean_m_s() is None
    assert record.gust_m_s() is None
    for second in range(1200):
        speed = 20.0 if 700 <= second < 704 else 50.0 if second == 100 else 6.0
        record.note(WindReading(float(second), speed))
    assert record.mean_m_s() == pytest.approx((597 * 6 + 4 * 20) / 601)
    assert record.gust_m_s() == pytest.approx(20.0)
    record.note(WindReading(1200.0, 6.0, gust_m_s=33.0))
    assert record.gust_m_s() == 33.0


def test_a_reading_that_is_known_already_counts_once() -> None:
    record = WindRecord()
    for _ in range(5):
        record.note(WindReading(10.0, 9.0))
    record.note(WindReading(11.0, 3.0))
    assert record.mean_m_s() == 6.0
