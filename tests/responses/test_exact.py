"""Digits that can be relied on, cosines in square roots, products of polynomials."""

from __future__ import annotations

import mpmath
import pytest
import sympy
from sympy import Rational, cos, pi, sqrt

from symcirc.responses import ResponseError, digits
from symcirc.responses.exact import product, scaled, two_cosine


def test_digits_survive_cancellation() -> None:
    # (√2)^80 is 2^40: √2 as a fraction of 80 digits leaves nothing but the difference.
    with mpmath.workdps(200):
        root = mpmath.sqrt(2)
        near = Rational(int(mpmath.floor(root * 10**80)), 10**80)
        expected = root - mpmath.mpf(near.p) / near.q
        found = mpmath.mpf(str(digits(sqrt(2) - near, 50)))
        assert abs(found / expected - 1) < mpmath.mpf(10) ** -49


@pytest.mark.parametrize("count", [5, 15, 50, 60])
def test_digits_are_as_many_as_asked(count: int) -> None:
    value = digits(pi * sqrt(3) + 10 ** Rational(1, 20), count)
    with mpmath.workdps(80):
        expected = mpmath.pi * mpmath.sqrt(3) + mpmath.mpf(10) ** (mpmath.mpf(1) / 20)
        assert abs(mpmath.mpf(str(value)) - expected) < expected * mpmath.mpf(10) ** (1 - count)
    assert len(str(value).replace(".", "")) >= count


def test_a_whole_number_and_zero_have_their_digits() -> None:
    assert str(digits(sympy.Integer(7), 30)) == "7." + "0" * 29
    assert digits(sympy.S.Zero, 30).is_zero


@pytest.mark.parametrize(
    ("expression", "words"),
    [
        (sympy.Symbol("f0") + 1, "depends on f0"),
        (sympy.Symbol("b") * sympy.Symbol("a"), "depends on a, b"),
        (sympy.Float("1.5", 20) * pi, "known to 10"),
        (sqrt(5 + 2 * sqrt(6)) - sqrt(2) - sqrt(3), "zero in disguise"),
        (sqrt(-2), "not real"),
        (sympy.zoo, "not real"),
    ],
)
def test_what_has_no_reliable_digits_is_refused(expression: sympy.Expr, words: str) -> None:
    with pytest.raises(ResponseError, match=words) as refusal:
        digits(expression, 30)
    assert refusal.value.mend


@pytest.mark.parametrize("denominator", range(1, 41))
def test_two_cosine_is_twice_the_cosine(denominator: int) -> None:
    with mpmath.workdps(60):
        for numerator in range(denominator + 1):
            value = two_cosine(Rational(numerator, denominator))
            expected = 2 * mpmath.cos(mpmath.pi * numerator / denominator)
            found = mpmath.mpf(0) if value == 0 else mpmath.mpf(str(digits(value, 50)))
            assert abs(found - expected) < mpmath.mpf(10) ** -48


@pytest.mark.parametrize("denominator", [1, 2, 3, 4, 5, 6, 8, 10, 12, 16, 20, 24, 32, 40])
def test_two_cosine_is_in_square_roots_for_powers_of_two_times_one_three_or_five(denominator: int) -> None:
    values = [two_cosine(Rational(k, denominator)) for k in range(denominator + 1)]
    assert not any(value.has(cos) for value in values)


def test_product_and_scaled_keep_a_monic_polynomial_monic() -> None:
    w = sympy.Symbol("w", positive=True)
    assert product([]) == (1,)
    assert product([(2, 1), (3, 1), (0, 1)]) == (0, 6, 5, 1)
    assert scaled(product([(2, 1), (3, 1)]), 2, w) == (6 * w**2, 5 * w, 1)
