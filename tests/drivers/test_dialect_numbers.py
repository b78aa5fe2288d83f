"""Numbers in messages: what is written is read back, and nothing else is taken for it."""

import re

import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion_drivers.dialect.numbers import Bytes, Digits, DoesNotFit, binary

TEXTS = ["+09.3f", "08.2f", "8.2f", "+9.1f", ".4f", "d", "05d", "+5d", "04X", "6x"]
BINARY = ["u8", "i8", "u16be", "i16le", "u32le", "i32be", "f32be", "f64le"]


@given(st.floats(-1e4, 1e4), st.sampled_from(TEXTS))
def test_digits_come_back_within_their_rounding(number: float, spec: str) -> None:
    form = Digits(spec)
    try:
        written = form.encode(number)
    except DoesNotFit:
        return
    assert re.fullmatch(form.pattern, written)
    places = int(spec.split(".")[1][0]) if "." in spec else 0
    assert form.decode(written) == pytest.approx(number, abs=0.5 * 10**-places + 1e-9)


@given(st.floats(-1e5, 1e5), st.sampled_from(BINARY))
def test_bytes_come_back_within_their_rounding(number: float, name: str) -> None:
    form = Bytes(name)
    try:
        written = form.encode(number)
    except DoesNotFit:
        assert name[0] in "ui"
        return
    assert re.fullmatch(form.pattern, written)
    assert form.decode(written) == pytest.approx(number, abs=0.51, rel=1e-7)


@given(st.binary(max_size=9))
def test_what_a_stated_width_matches_has_that_width_and_is_a_number(noise: bytes) -> None:
    form = Digits("+08.2f")
    if re.fullmatch(form.pattern, noise):
        assert len(noise) == 8
        form.decode(noise)


@pytest.mark.parametrize(("spec", "number"), [("+06.2f", 123.4), ("03d", 1000), ("3d", -100)])
def test_a_number_that_is_too_wide_is_refused(spec: str, number: float) -> None:
    with pytest.raises(DoesNotFit, match="more than"):
        Digits(spec).encode(number)


def test_there_is_no_negative_zero() -> None:
    assert Digits("+07.2f").encode(-0.001) == b"+000.00"
    assert Digits("6.1f").encode(-0.01) == b"   0.0"


@pytest.mark.parametrize("spec", ["", "f", "+f", "8.2", "s", "08.2d", "99999d", "{}", "8,2f"])
def test_a_format_that_is_none_is_told(spec: str) -> None:
    with pytest.raises(ValueError, match="expected"):
        Digits(spec)


def test_unknown_bytes_are_told() -> None:
    with pytest.raises(ValueError, match="expected one of u8"):
        Bytes("u24be")


@pytest.mark.parametrize(
    ("name", "number", "written"),
    [
        ("bcd4", 1307.4, "13 07"),
        ("bcd6", 90210, "09 02 10"),
        ("dec4+30", 1307, "31 33 30 37"),
        ("dec3+A0", 59.7, "A0 A6 A0"),
        ("dec2", 95, "09 05"),
    ],
)
def test_decimal_digits_stand_in_bytes(name: str, number: float, written: str) -> None:
    form = binary(name)
    assert form.encode(number) == bytes.fromhex(written)
    assert form.decode(bytes.fromhex(written)) == round(number)
    assert re.fullmatch(form.pattern, bytes.fromhex(written))


@given(st.sampled_from(["bcd2", "bcd6", "bcd12", "dec1", "dec4+30", "dec5+F6"]), st.binary())
def test_bytes_that_are_no_decimal_digits_are_no_number(name: str, noise: bytes) -> None:
    form = binary(name)
    if re.fullmatch(form.pattern, noise):
        assert form.encode(form.decode(noise)) == noise


@pytest.mark.parametrize("noise", ["1A 00", "A1 00", "00 0F", "13", "13 07 00"])
def test_a_half_of_a_byte_above_nine_is_no_digit(noise: str) -> None:
    assert not re.fullmatch(binary("bcd4").pattern, bytes.fromhex(noise))


@pytest.mark.parametrize(("name", "number"), [("bcd4", 10000), ("bcd4", -1), ("dec3+30", 1000)])
def test_decimal_digits_have_no_sign_and_their_number(name: str, number: float) -> None:
    with pytest.raises(DoesNotFit, match="decimal digits without a sign"):
        binary(name).encode(number)


@pytest.mark.parametrize("name", ["bcd3", "bcd", "bcd14", "dec0", "dec4+3", "dec4+F7", "dec4-30"])
def test_decimal_digits_that_cannot_be_are_told(name: str) -> None:
    with pytest.raises(ValueError, match="expected"):
        binary(name)
