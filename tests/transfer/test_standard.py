"""The standard form, the lists for JSON, and the gains at both ends."""

from __future__ import annotations

from fractions import Fraction

from symcirc.transfer.standard import (
    coefficient_forms,
    limit_at_infinity,
    limit_at_zero,
    monic,
    monic_forms,
    texts,
)
from tests.transfer.arithmetic import value_of
from tests.transfer.samples import C1, C2, ONE, R1, R2, R3, RING, K, fractions_for, function, ladder, value_at

#: A unity-gain two-pole low-pass whose series resistors are R1, R2, with C1 to the output and C2 to ground
#: (R. P. Sallen and E. L. Key, "A practical method of designing RC active filters", IRE Trans. Circuit Theory
#: CT-2 (1955) 74-85; from memory), with a gain k.
KEY = function([K], [1, R1 * C1 * (1 - K) + C2 * (R1 + R2), R1 * R2 * C1 * C2])


def test_the_lists_are_ascending_with_an_entry_for_every_power() -> None:
    forms = coefficient_forms(function([0, R1 * C1], [1, 0, R1 * R2 * C1 * C2]))
    assert texts(forms.numerator) == ["0", "R1*C1"]
    assert texts(forms.denominator) == ["1", "0", "R1*R2*C1*C2"]


def test_the_standard_form_of_the_two_pole_low_pass_is_the_published_one() -> None:
    forms = monic_forms(KEY)
    assert texts(forms.numerator) == ["k/(R1*R2*C1*C2)"]
    assert texts(forms.denominator) == ["1/(R1*R2*C1*C2)", "(1/R1 + 1/R2)/C1 + (1 - k)/(R2*C2)", "1"]


def test_the_standard_form_ends_with_one_and_shares_no_factors() -> None:
    above, below = monic(function([R1 * R2], [R1, C1 * R1 * (R2 + R3)]))
    assert (above[0].above, above[0].below) == (R2, C1 * (R2 + R3))
    assert (below[1].above, below[1].below) == (ONE, ONE)


def test_a_function_that_is_zero_has_the_numerator_0() -> None:
    zero = function([], [1, R1 * C1])
    assert texts(monic_forms(zero).numerator) == texts(coefficient_forms(zero).numerator) == ["0"]
    assert limit_at_zero(zero).size == limit_at_infinity(zero).size == "zero"


def test_the_lists_of_a_ladder_mean_its_coefficients() -> None:
    low_pass = ladder(5)
    values = fractions_for(low_pass.ring, 3)
    highest = value_at(low_pass.denominator[-1], values)
    written = texts(monic_forms(low_pass).denominator)
    assert [value_of(text, values, Fraction) for text in written] == [
        value_at(c, values) / highest for c in low_pass.denominator
    ]


def test_gains_at_the_ends_are_finite_zero_or_infinite() -> None:
    low_pass = limit_at_zero(KEY), limit_at_infinity(KEY)
    assert [limit.size for limit in low_pass] == ["finite", "zero"]
    assert (low_pass[0].leading.above, low_pass[0].leading.below) == (K, ONE)
    assert low_pass[1].power == -2
    integrator = function([-1], [0, R1 * C1])
    assert limit_at_zero(integrator).size == "infinite"
    assert (limit_at_zero(integrator).leading.above, limit_at_zero(integrator).power) == (-ONE, -1)
    differentiator = function([0, -R1 * C1], [1])
    assert limit_at_zero(differentiator).size == "zero"
    assert limit_at_infinity(differentiator).size == "infinite"
    inverting = function([-R2, 0, -R2 * C1], [R1, R1 * C2, R1 * C1])
    assert (limit_at_infinity(inverting).leading.above, limit_at_infinity(inverting).leading.below) == (
        -R2,
        R1,
    )


def test_a_constant_function_has_a_list_of_one_entry() -> None:
    forms = coefficient_forms(function([-R2], [R1]))
    assert (texts(forms.numerator), texts(forms.denominator)) == (["-R2"], ["R1"])
    assert texts(monic_forms(function([-R2], [R1])).numerator) == ["-R2/R1"]
    assert RING.ngens == 9
