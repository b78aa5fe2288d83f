"""NMEA 0183 wind sentences against a published one, and against pynmea2.

`$WIMWV,214.8,R,0.1,K,A*28` is the example in E. Raymond's "NMEA Revealed" (gpsd.io), from memory;
its checksum proves the memory.
"""

import pynmea2
import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion_drivers.interface.errors import Garbled
from trunnion_drivers.wind.nmea import sentences, wind_of

PUBLISHED = b"$WIMWV,214.8,R,0.1,K,A*28\r\n"


def test_the_published_sentence_is_read() -> None:
    (sentence,), left = sentences(PUBLISHED)
    wind = wind_of(sentence)
    assert wind is not None
    assert wind.direction_deg == 214.8
    assert wind.speed_m_s == pytest.approx(0.1 / 3.6)
    assert left == b"\r\n"


@given(st.integers(0, 3599), st.integers(0, 999), st.sampled_from("KMN"), st.sampled_from("RT"))
def test_what_an_independent_library_writes_is_read(
    angle: int, speed: int, unit: str, reference: str
) -> None:
    fields = (f"{angle / 10:05.1f}", reference, f"{speed / 10:.1f}", unit, "A")
    written = str(pynmea2.MWV("WI", "MWV", fields)).encode() + b"\r\n"
    told = pynmea2.parse(written.decode())
    (sentence,), _ = sentences(written)
    wind = wind_of(sentence)
    assert wind is not None
    in_m_s = {"K": 1 / 3.6, "M": 1.0, "N": 1852 / 3600}[unit]
    assert wind.direction_deg == pytest.approx(float(told.wind_angle))
    assert wind.speed_m_s == pytest.approx(float(told.wind_speed) * in_m_s)


@given(st.integers(0, 23), st.integers(1, 127))
def test_a_damaged_sentence_is_passed_over(at: int, change: int) -> None:
    damaged = bytearray(PUBLISHED)
    damaged[at] ^= change
    for sentence in sentences(bytes(damaged))[0]:
        pytest.fail(f"{sentence!r} was taken for sound")


@given(st.binary(max_size=300))
def test_noise_is_nothing(noise: bytes) -> None:
    for sentence in sentences(noise)[0]:
        try:
            wind_of(sentence)
        except Garbled:
            continue


@pytest.mark.parametrize(
    "sentence",
    [
        "WIMWV,214.8,R,0.1,K,V",
        "WIMWV,214.8,R,,K,A",
        "WIMWV,1,R,0.1,X,A",
        "WIMWV,1,R,-3,M,A",
        "WIMWV,1",
    ],
)
def test_a_sentence_that_is_not_valid_is_not_calm(sentence: str) -> None:
    with pytest.raises(Garbled):
        wind_of(sentence)


def test_other_sentences_are_none_of_ours() -> None:
    assert wind_of("GPZDA,201530.00,04,07,2002,00,00") is None
