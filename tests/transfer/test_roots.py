"""Poles and zeros for numbers, against known roots and sympy's own (a general-purpose library)."""

from __future__ import annotations

import itertools
import random
from fractions import Fraction

import mpmath
import numpy as np
import pytest
import sympy

from symcirc.transfer.roots import poles, roots, zeros
from tests.transfer.samples import C1, C2, R1, R2, RING, K, function, ladder


def polynomial(known: list[Fraction]) -> list[Fraction]:
    """Return the ascending coefficients of the polynomial with these roots."""
    result = [Fraction(1)]
    for root in known:
        shifted = [Fraction(0), *result]
        result = [a - root * b for a, b in itertools.zip_longest(shifted, result, fillvalue=Fraction(0))]
    return result


def test_wilkinsons_roots_come_out_to_the_last_place() -> None:
    """The polynomial of J. H. Wilkinson (1959), of which floating point loses the roots altogether."""
    known = [Fraction(-k) for k in range(1, 21)]
    assert roots(polynomial(known)) == [complex(-k) for k in range(1, 21)]


def test_roots_many_decades_apart_come_out() -> None:
    known = [-(Fraction(10) ** k) for k in range(-3, 12, 2)]
    found = roots(polynomial(known))
    assert [root.real for root in found] == pytest.approx([float(k) for k in known], rel=1e-14)
    assert all(root.imag == 0 for root in found)


def test_roots_that_occur_more_than_once_come_out_exactly() -> None:
    known = [Fraction(-1, 3)] * 4 + [Fraction(0)] * 2 + [Fraction(-5)] * 3
    assert roots(polynomial(known)) == pytest.approx([0, 0, *[-1 / 3] * 4, *[-5] * 3], rel=1e-15)


def test_complex_roots_come_in_exact_pairs() -> None:
    found = roots([Fraction(10**8), Fraction(2 * 10**3), Fraction(1)])
    assert found[0] == found[1].conjugate()
    assert found[1].real == pytest.approx(-1000, rel=1e-15)
    assert found[1].imag == pytest.approx((10**8 - 10**6) ** 0.5, rel=1e-15)


def test_roots_on_the_axis_have_no_real_part() -> None:
    assert [root.real for root in roots([Fraction(7), Fraction(0), Fraction(1, 3)])] == [0.0, 0.0]


@pytest.mark.parametrize("seed", range(6))
def test_random_polynomials_have_the_roots_that_mpmath_finds(seed: int) -> None:
    chance = random.Random(seed)
    degree = chance.randint(2, 12)
    given = [Fraction(chance.randint(1, 1000), chance.randint(1, 50)) for _ in range(degree + 1)]
    with mpmath.workdps(60):
        numbers = [mpmath.mpf(c.numerator) / c.denominator for c in reversed(given)]
        expected = [complex(root) for root in mpmath.polyroots(numbers, maxsteps=200, extraprec=200)]
    found = roots(given)
    for root in found:
        nearest = min(expected, key=lambda other: abs(other - root))
        assert abs(root - nearest) <= 1e-14 * abs(root)
    assert len(found) == degree


def test_poles_of_a_ladder_are_real_and_those_of_its_numbers() -> None:
    low_pass = ladder(5)
    values = {
        str(s): Fraction(1000 if str(s)[0] == "R" else Fraction(1, 10**8)) for s in low_pass.ring.symbols
    }
    found = poles(low_pass, values)
    # n equal sections: 2 sin((2k - 1) pi/(4n + 2)) squared, over R C (the tridiagonal matrix's eigenvalues)
    expected = [-4 * np.sin((2 * k - 1) * np.pi / 22) ** 2 * 1e5 for k in range(1, 6)]
    assert [root.real for root in found] == pytest.approx(expected, rel=1e-12)
    assert all(root.imag == 0 for root in found)


def test_values_that_are_not_rational_give_their_poles() -> None:
    root = sympy.sqrt(2)
    low_pass = function([1], [1, R1 * C1, R1**2 * C1**2])
    found = poles(low_pass, {"R1": root, "C1": sympy.pi})
    expected = 1 / (float(root) * np.pi) * np.exp(2j * np.pi / 3)
    assert found[1] == pytest.approx(complex(expected), rel=1e-14)


def test_zeros_at_the_origin_and_elsewhere_are_found() -> None:
    band = function([0, R1, R2 * C1], [1, C2, R1])
    assert zeros(band, {"R1": 2, "R2": 3, "C1": 5, "C2": 1}) == [0, pytest.approx(-2 / 15)]
    assert zeros(function([], [1, R1]), {"R1": 1}) == []
    assert zeros(function([RING(3)], [1, R1]), {"R1": 1}) == []
    assert zeros(function([K], [1, R1]), {"R1": 1, "k": 0}) == []
    assert zeros(function([K], [1, R1]), {"R1": 1, "k": sympy.pi}) == []


def test_a_leading_coefficient_that_is_zero_for_the_numbers_lowers_the_order() -> None:
    cancelled = function([1], [1, R1, (K - 1) * C1])
    assert poles(cancelled, {"R1": 2, "k": 1, "C1": 1}) == [-0.5]
