"""Real roots counted and found: against roots that are put in, and against sympy's isolation of roots."""

import random

import pytest
import sympy

from symcirc.match.decimals import reals
from symcirc.match.roots import complex_roots, positive_roots, real_roots


def _polynomial(roots: list[object]) -> list[object]:
    """Return the ascending coefficients of a product of (x - root)."""
    result = [reals.mpf(1)]
    for root in roots:
        result = [a - root * b for a, b in zip([0, *result], [*result, 0], strict=True)]
    return result


def test_roots_that_are_put_in_come_out() -> None:
    generator = random.Random(1829)
    for _ in range(30):
        roots = [
            reals.mpf(generator.choice([-1, 1])) * reals.mpf(10) ** generator.uniform(-6, 6) for _ in range(5)
        ]
        positive = sorted(r for r in roots if r > 0)
        found = positive_roots(_polynomial(roots))
        assert [float(r) for r in found] == pytest.approx([float(r) for r in positive], rel=1e-14)
        everything = [float(r) for r in real_roots(_polynomial(roots))]
        assert everything == pytest.approx(sorted(map(float, roots)), rel=1e-14)


def test_multiple_roots_come_once() -> None:
    third = reals.mpf(1) / 3
    assert [float(r) for r in positive_roots(_polynomial([third, third, 5]))] == pytest.approx([1 / 3, 5])
    assert [float(r) for r in positive_roots(_polynomial([third] * 4))] == pytest.approx([1 / 3])
    found = sorted(float(r) for r in complex_roots(_polynomial([third, third, 5])))
    assert found == pytest.approx([1 / 3, 5])


def test_roots_that_only_nearly_meet_are_two_or_none() -> None:
    gap = reals.mpf(10) ** -20
    for coefficients, count in (([1 - gap, -2, 1], 2), ([1 + gap, -2, 1], 0), ([1, -2, 1], 1)):
        assert len(positive_roots([reals.mpf(c) for c in coefficients])) == count


def test_numbers_of_real_roots_are_those_that_sympy_isolates() -> None:
    """sympy.Poly.count_roots, which isolates roots by continued fractions in exact arithmetic."""
    generator = random.Random(7)
    x = sympy.Symbol("x")
    for _ in range(60):
        whole = [generator.randrange(-9, 10) for _ in range(6)] + [generator.choice([-2, 1, 3])]
        polynomial = sympy.Poly(whole[::-1], x)
        simple = polynomial.sqf_part()
        decimals = [reals.mpf(c) for c in whole]
        assert len(real_roots(decimals)) == simple.count_roots()
        zero = 1 if whole[0] == 0 else 0
        assert len(positive_roots(decimals)) == simple.count_roots(0, sympy.oo) - zero


def test_zero_and_constants_have_no_positive_root() -> None:
    assert positive_roots([reals.mpf(0), reals.mpf(3)]) == []
    assert positive_roots([reals.mpf(2)]) == []
    assert positive_roots([reals.mpf(1), reals.mpf(1), reals.mpf(0)]) == []
    assert complex_roots([reals.mpf(0), reals.mpf(0), reals.mpf(1), reals.mpf(1)])[:1] == [0]
