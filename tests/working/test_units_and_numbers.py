"""The units of a line in words, and lines with numbers judged by the digits that were written."""

from __future__ import annotations

import pytest

from tests.working.calling import LOW_PASS, RC, WITH_VALUES, one

#: Values whose corner is known: 1/(2 pi 4.7e3 100e-9) = 338.627...
VALUES = RC + "fix R1 = 4.7 kohm, C1 = 100 nF\n"


@pytest.mark.parametrize(
    ("line", "words"),
    [
        ("V_out = V_in (R1 + C1)", "a sum of an ohm and a farad"),
        ("V_out/V_in = R2", "a ratio of voltages that comes out in ohms"),
        ("H = R1 s", "a ratio of voltages that comes out in V/A/s"),
        ("I_R1/I_C1 = C1", "a ratio of currents that comes out in farads"),
        ("I_R1 = V_in R1", "an ampere that comes out in V^2/A"),
        ("V_a = I_R1/R1", "a volt that comes out in A^2/V"),
        ("1 + s R1 = 0", "a sum of a plain number and a V/A/s"),
        ("w0 = sqrt(R1 C1)", "a 1/s that comes out in s^(1/2)"),
        ("Q = R1", "a plain number that comes out in ohms"),
        ("f0 = V_in", "a 1/s that comes out in volts"),
        ("R1 + 1/(s C1) + s = 0", "a sum of an ohm and a 1/s"),
    ],
)
def test_units_that_do_not_fit_are_said_in_words(line: str, words: str) -> None:
    found = one(LOW_PASS, line)
    assert found.verdict == "fails"
    assert found.note == f"the units do not fit: {words}"


@pytest.mark.parametrize(
    "line",
    [
        "V_in - V_a = R1 I_R1",
        "w0 Q = 3/(R1 C1)",
        "R1 = 4700",
        "R1 + 4.7e3 = 2 R1",
        "V_out = 0",
        "1 + s R1 C1 = 2",
        "f0 = 1/(2 pi R1 C1)",
        "j w R1 C1 = -1",
    ],
)
def test_units_that_fit_are_not_remarked_on(line: str) -> None:
    assert one(LOW_PASS, line).note in (None, "for the given values")


def test_a_definition_with_units_that_do_not_fit_is_remarked_on() -> None:
    line = one(LOW_PASS, "D = R1 + C1")
    assert (line.verdict, line.note) == ("defines", "the units do not fit: a sum of an ohm and a farad")


def test_a_parameter_without_a_unit_may_have_any() -> None:
    sheet = "in -- R1 -- out -- R2 -- gnd\nfix R2 = k*R1\nchoose k\nask H = V_out/V_in"
    assert one(sheet, "R2 = k R1").note == "thanks to the tie R2 = k*R1"
    assert one(sheet, "H = k/(1 + k)").verdict == "holds"


@pytest.mark.parametrize(
    ("line", "note"),
    [
        ("R1 = 4.7e3", "for the given values"),
        ("1/(2 pi R1 C1) = 338.6", "for the given values, to the 4 digits written"),
        ("1/(2 pi R1 C1) = 339", "for the given values, to the 3 digits written"),
        ("338.63 = 1/(2 pi R1 C1)", "for the given values, to the 5 digits written"),
        ("H = 1/(1 + 4.7e-4 s)", "for the given values"),
        ("H = 338.6/(338.6 + s/6.283)", "for the given values, to the 4 digits written"),
        ("1/(2 pi) = 0.159", "for the given values, to the 3 digits written"),
    ],
)
def test_rounded_numbers_are_judged_by_their_digits(line: str, note: str) -> None:
    found = one(VALUES, line)
    assert (found.verdict, found.note) == ("holds", note)


@pytest.mark.parametrize(
    "line",
    [
        "1/(2 pi R1 C1) = 338.7",
        "1/(2 pi R1 C1) = 338",
        "1/(2 pi R1 C1) = 338.62",
        "1/(R1 C1) = 338.6",
        "1/(2 pi R1 C1) = -338.6",
        "H = 1/(1 + 4.8e-4 s)",
        "1/(2 pi R1 C1) = 3e2",
    ],
)
def test_a_number_off_by_more_than_its_last_digit_fails(line: str) -> None:
    assert one(VALUES, line).verdict == "fails"


def test_without_the_sheets_numbers_a_rounded_constant_is_judged_too() -> None:
    assert one(RC, "sqrt(2)/2 = 0.707").note == "to the 3 digits written"
    assert one(RC, "sqrt(2)/2 = 0.708").verdict == "fails"


def test_w0_f0_and_q_for_the_given_values() -> None:
    # f0 = 1/(2 pi sqrt(10e3 4.7e3 22e-9 2.2e-9)), worked by a pocket calculator: 3336.9 Hz
    assert one(WITH_VALUES, "f0 = 3.34e3").note == "for the given values, to the 3 digits written"
    assert one(WITH_VALUES, "f0 = 3.35e3").verdict == "fails"


def test_a_part_that_is_not_fixed_keeps_the_line_from_holding_for_values() -> None:
    sheet = RC + "fix C1 = 100 nF\n"
    assert one(sheet, "1/(2 pi R1 C1) = 338.6").verdict == "fails"
