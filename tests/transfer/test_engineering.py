"""Numbers with units: as engineers write them, and so that a stage sheet reads them back."""

from __future__ import annotations

import math
from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symcirc.complaints import Place, Source
from symcirc.sheet.quantity import read_number, read_unit
from symcirc.transfer.engineering import engineering

WRITTEN = [
    (1200, "Hz", 5, "1.2 kHz"),
    (-3.0103, "dB", 3, "-3.01 dB"),
    (22e-9, "F", 5, "22 nF"),
    (4700, "ohm", 5, "4.7 kohm"),
    (1e6, "ohm", 5, "1 Mohm"),
    (999_999.9, "ohm", 5, "1 Mohm"),
    (999.994, "Hz", 6, "999.994 Hz"),
    (123_456_789, "rad/s", 6, "123.457 Mrad/s"),
    (0.70710678, "", 5, "0.70711"),
    (12345.678, "", 5, "12346"),
    (123_456_789, "", 5, "1.2346e8"),
    (1.5e-7, "", 4, "1.5e-7"),
    (5e-13, "F", 4, "5e-13 F"),
    (3e16, "Hz", 4, "3e16 Hz"),
    (0, "ohm", 4, "0 ohm"),
    (0, "", 4, "0"),
    (-45, "deg", 4, "-45 deg"),
    (0.05, "s", 4, "50 ms"),
    (1e-6, "s", 4, "1 us"),
    (math.inf, "", 4, "infinite"),
    (math.inf, "Hz", 4, "infinite Hz"),
]


@pytest.mark.parametrize(("value", "unit", "digits", "expected"), WRITTEN, ids=[w[3] for w in WRITTEN])
def test_a_number_is_written_with_its_prefix(value: float, unit: str, digits: int, expected: str) -> None:
    assert engineering(value, unit, digits) == expected


@settings(max_examples=200, derandomize=True)
@given(
    st.floats(min_value=1e-29, max_value=1e29),
    st.sampled_from(["ohm", "F", "H", "Hz", "rad/s", "s", "S"]),
    st.integers(4, 6),
)
def test_what_is_written_reads_back_to_the_digits_shown(value: float, unit: str, digits: int) -> None:
    written = engineering(value, unit, digits)
    number, _, behind = written.partition(" ")
    place = Place(1, 1, 2, Source("a.stage", written))
    factor, read = read_unit(behind, number, place)
    assert read == unit
    back = read_number(number, place) * factor
    assert abs(back - Fraction(value)) <= Fraction(value) * Fraction(6, 10**digits)
    assert sum(c.isdigit() for c in number.partition("e")[0].strip("0.")) <= digits + 2
