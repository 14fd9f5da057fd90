"""Whole functions on a terminal: the fraction bar, and where long sums are broken."""

from __future__ import annotations

import re
from fractions import Fraction

import pytest

from symcirc.transfer.layout import WIDTH, broken, function_text
from symcirc.transfer.standard import coefficient_forms, monic_forms
from tests.transfer.arithmetic import value_of
from tests.transfer.samples import C1, C2, R1, R2, R3, K, fractions_for, function, ladder, value_at

MULTIPLE_FEEDBACK = function([-R2], [R1, C2 * (R1 * R2 + R1 * R3 + R2 * R3), R1 * R2 * R3 * C1 * C2])


def test_a_function_is_shown_over_a_bar() -> None:
    assert function_text(coefficient_forms(MULTIPLE_FEEDBACK), "H") == "\n".join(
        [
            "                              -R2",
            "H = -------------------------------------------------------",
            "    s**2*R1*R2*R3*C1*C2 + s*C2*(R1*R2 + R1*R3 + R2*R3) + R1",
        ]
    )


def test_the_standard_form_is_shown_over_a_bar() -> None:
    assert function_text(monic_forms(MULTIPLE_FEEDBACK)) == "\n".join(
        [
            "                 -1/(R1*R3*C1*C2)",
            "--------------------------------------------------",
            "s**2 + s*(1/R1 + 1/R2 + 1/R3)/C1 + 1/(R2*R3*C1*C2)",
        ]
    )


def test_a_function_without_a_denominator_has_no_bar() -> None:
    assert function_text(coefficient_forms(function([R1, R2 * K], [1])), "Z") == "Z = s*R2*k + R1"
    assert function_text(coefficient_forms(function([], [R1]))) == "0\n--\nR1"


def test_a_sum_is_broken_before_its_operators() -> None:
    assert broken("R1*R2*C1 + (R1 + R2)*C2 - R3*C3", 22) == ["R1*R2*C1", "+ (R1 + R2)*C2 - R3*C3"]


def test_a_long_bracket_is_broken_under_its_first_term() -> None:
    inside = " + ".join(f"R{k}*C{k}" for k in range(10, 25))
    lines = broken(f"s**2 - s*k*({inside})/R1 + 1", 60)
    assert lines[0] == "s**2"
    assert lines[1] == "- s*k*(R10*C10 + R11*C11 + R12*C12 + R13*C13 + R14*C14"
    assert lines[2] == "       + R15*C15 + R16*C16 + R17*C17 + R18*C18 + R19*C19"
    assert lines[-2:] == ["       + R20*C20 + R21*C21 + R22*C22 + R23*C23 + R24*C24)/R1", "+ 1"]


def test_a_long_product_is_broken_before_a_factor() -> None:
    assert broken("-R1*R2**2*(R3 + R4)*R5/(R6*R7)", 20) == ["-R1*R2**2*(R3 + R4)", "    *R5/(R6*R7)"]


def test_a_bracket_that_would_begin_far_to_the_right_begins_on_a_line_of_its_own() -> None:
    lines = broken("R1*R2*R3*R4*R5*R6*R7*R8*(" + " + ".join(f"R{k}" for k in range(10, 30)) + ")", 60)
    assert lines == [
        "R1*R2*R3*R4*R5*R6*R7*R8",
        "    *(R10 + R11 + R12 + R13 + R14 + R15 + R16 + R17 + R18",
        "      + R19 + R20 + R21 + R22 + R23 + R24 + R25 + R26 + R27",
        "      + R28 + R29)",
    ]


def test_what_cannot_be_broken_stays_whole() -> None:
    assert broken("R" * 30 + " + 1", 20) == ["R" * 30, "+ 1"]


@pytest.mark.parametrize("sections", [3, 4, 5, 6])
@pytest.mark.parametrize("width", [60, WIDTH])
def test_broken_lines_keep_to_the_width_and_mean_the_function(sections: int, width: int) -> None:
    low_pass = ladder(sections)
    values = {**fractions_for(low_pass.ring, sections), "s": Fraction(3, 7)}
    shown = function_text(monic_forms(low_pass), "H", width)
    assert max(map(len, shown.splitlines())) <= width
    above, below = re.split(r"H = -+", shown)
    expected = 1 / sum(value_at(c, values) * values["s"] ** k for k, c in enumerate(low_pass.denominator))
    parts = [value_of(" ".join(part.split()), values, Fraction) for part in (above, below)]
    assert parts[0] / parts[1] == expected
