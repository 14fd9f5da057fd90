"""What kind of response a function is: the shapes of filter theory, by name."""

from __future__ import annotations

import pytest

from symcirc.transfer.arrange import form_of
from symcirc.transfer.function import TransferFunction
from symcirc.transfer.kinds import character, zeros_in_words
from symcirc.transfer.text import text
from tests.transfer.samples import C1, C2, ONE, PARTS, R1, R2, R3, R4, K, function, ladder

W2, DAMP, TOP = ONE, C2 * (R1 + R2), R1 * R2 * C1 * C2

KINDS = [
    ([], [1, R1 * C1], "zero", [], "none"),
    ([-R2], [R1], "constant", [("0", "-R2/R1")], "none"),
    ([-1], [0, R1 * C1], "integrator", [], "none"),
    ([0, -R1 * C1], [1], "differentiator", [], "1 zero at s = 0"),
    ([0, 0, C1], [1], "mixed", [], "2 zeros at s = 0"),
    ([1], [1, R1 * C1], "low-pass", [("0", "1")], "none"),
    ([0, R1 * C1], [1, R1 * C1], "high-pass", [("infinity", "1")], "1 zero at s = 0"),
    ([1, -R1 * C1], [1, R1 * C1], "all-pass", [("0", "1"), ("infinity", "-1")], "1 zero at s = 1/(R1*C1)"),
    ([-1, R1 * C1], [1, R1 * C1], "all-pass", [("0", "-1"), ("infinity", "1")], "1 zero at s = 1/(R1*C1)"),
    ([1, R2 * C1], [1, (R1 + R2) * C1], "mixed", [("0", "1"), ("infinity", "R2/(R1 + R2)")],
     "1 zero at s = -1/(R2*C1)"),
    ([K], [W2, DAMP, TOP], "low-pass", [("0", "k")], "none"),
    ([0, 0, -TOP], [W2, DAMP, TOP], "high-pass", [("infinity", "-1")], "2 zeros at s = 0"),
    ([0, -R2 * C2], [W2, DAMP, TOP], "band-pass", [("omega0", "-R2/(R1 + R2)")], "1 zero at s = 0"),
    ([W2, 0, TOP], [W2, DAMP, TOP], "band-stop", [("0", "1")],
     "2 zeros at w0 = 1/sqrt(R1*R2*C1*C2) on the frequency axis"),
    ([W2, -DAMP, TOP], [W2, DAMP, TOP], "all-pass", [("0", "1"), ("infinity", "1")],
     "2 zeros at w0 = 1/sqrt(R1*R2*C1*C2) with Q = -sqrt(R1*R2*C1*C2)/(C2*(R1 + R2))"),
    ([R3 + R4, 0, R3 * TOP], [R3, R3 * DAMP, R3 * TOP], "low-pass notch", [("0", "1 + R4/R3"), ("infinity", "1")],
     "2 zeros at w0 = sqrt((1 + R4/R3)/(R1*R2*C1*C2)) on the frequency axis"),
    ([R3, 0, R3 * TOP], [R3 + R4, R3 * DAMP, R3 * TOP], "high-pass notch", [("0", "R3/(R3 + R4)"), ("infinity", "1")],
     "2 zeros at w0 = 1/sqrt(R1*R2*C1*C2) on the frequency axis"),
    ([R3, 0, R3 * TOP], [R4, R4 * DAMP, R3 * TOP], "notch", [("0", "R3/R4"), ("infinity", "1")],
     "2 zeros at w0 = 1/sqrt(R1*R2*C1*C2) on the frequency axis"),
    ([-W2, 0, TOP], [W2, DAMP, TOP], "mixed", [("0", "-1"), ("infinity", "1")], "2 zeros elsewhere"),
    ([1 - K, 0, TOP], [W2, DAMP, TOP], "mixed", [("0", "1 - k"), ("infinity", "1")],
     "2 zeros at w0 = sqrt((1 - k)/(R1*R2*C1*C2)) on the frequency axis"),
    ([1, R1 * C1], [W2, DAMP, TOP], "mixed", [("0", "1")], "1 zero at s = -1/(R1*C1)"),
    ([0, 1, R1], [0, DAMP, TOP], "mixed", [("0", "1/(C2*(R1 + R2))"), ("infinity", "1/(R2*C1*C2)")],
     "1 zero at s = 0, 1 zero at s = -1/R1"),
    ([0, R1 * C1], [1, 0, TOP], "band-pass", [], "1 zero at s = 0"),
    ([1, 0, R1], [0, DAMP, TOP], "mixed", [("infinity", "1/(R2*C1*C2)")],
     "2 zeros at w0 = 1/sqrt(R1) on the frequency axis"),
    ([1, 1, R1, C1], [W2, DAMP, TOP, C1], "mixed", [("0", "1"), ("infinity", "1")], "3 zeros elsewhere"),
    ([0, C1], [1, R1, C1, C2], "band-pass", [], "1 zero at s = 0"),
    ([1], [0, DAMP, TOP], "mixed", [], "none"),
]  # fmt: skip


@pytest.mark.parametrize(("above", "below", "kind", "gains", "zeros"), KINDS)
def test_a_function_is_named_by_its_numerator(
    above: list[object], below: list[object], kind: str, gains: list[tuple[str, str]], zeros: str
) -> None:
    found = character(function(above, below), PARTS)
    assert found.kind == kind
    assert [(g.where, text(form_of(g.value.above, g.value.below))) for g in found.gains] == gains
    assert found.zeros == zeros


def test_a_ladder_of_any_order_is_a_low_pass_of_gain_1() -> None:
    found = character(ladder(6), {f"{letter}{k}" for letter in "RC" for k in range(1, 7)})
    assert (found.kind, found.gains[0].where) == ("low-pass", "0")
    assert found.gains[0].value.above == found.gains[0].value.below


def test_an_all_pass_of_third_order_is_the_mirror_image_of_its_denominator() -> None:
    below = [ONE, R1 * C1, R1 * R2 * C1 * C2, R1 * R2 * R3 * C1 * C2**2]
    above = [-below[0], below[1], -below[2], below[3]]
    assert character(function(above, below), PARTS).kind == "all-pass"
    wrong = [-below[0], below[1], below[2], below[3]]
    assert character(function(wrong, below), PARTS).kind == "mixed"


def test_the_zeros_of_a_function_that_is_zero_are_none() -> None:
    zero = function([], [1])
    assert isinstance(zero, TransferFunction)
    assert zeros_in_words(zero, PARTS) == "none"
