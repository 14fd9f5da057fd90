"""Values of transfer functions: against scipy's and numpy's (general-purpose libraries), and exact fractions."""

from __future__ import annotations

import math
from fractions import Fraction

import numpy as np
import pytest
import scipy.signal
import sympy
from numpy.polynomial import polynomial as numpy_polynomial
from sympy.polys.domains import QQ
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyRing

from symcirc.transfer.evaluate import MissingValue, coefficients, evaluate, exact_coefficients
from symcirc.transfer.function import TransferFunction
from tests.transfer.samples import C1, C2, R1, R2, R3, K, fractions_for, function, ladder, value_at

KEY = function([K], [1, R1 * C1 * (1 - K) + C2 * (R1 + R2), R1 * R2 * C1 * C2])
VALUES = {"R1": 4700.0, "R2": 10e3, "C1": 22e-9, "C2": 4.7e-9, "k": 1.5}
EXACT = {
    "R1": sympy.Integer(4700),
    "R2": sympy.Integer(10_000),
    "C1": sympy.Rational(22, 10**9),
    "C2": sympy.Rational(47, 10**10),
    "k": sympy.Rational(3, 2),
}


def test_the_response_is_that_of_scipy_signal_freqs() -> None:
    above, below = coefficients(KEY, EXACT)
    omega, expected = scipy.signal.freqs(above[::-1], below[::-1], worN=np.logspace(1, 7, 61))
    np.testing.assert_allclose(evaluate(KEY, VALUES, 1j * omega), expected, rtol=1e-12)


def test_the_value_at_any_s_is_that_of_numpy_polynomials() -> None:
    above, below = coefficients(KEY, EXACT)
    s = np.array([[1e3 + 2e4j, -5e3 - 1e3j], [0, 1e5]])
    expected = numpy_polynomial.polyval(s, above) / numpy_polynomial.polyval(s, below)
    np.testing.assert_allclose(evaluate(KEY, VALUES, s), expected, rtol=1e-12)


def test_arrays_of_part_values_and_of_frequencies_are_broadcast() -> None:
    resistors = np.array([1e3, 4.7e3, 10e3])[:, np.newaxis]
    omega = 1j * np.logspace(3, 5, 4)
    spread = evaluate(KEY, {**VALUES, "R1": resistors}, omega)
    assert spread.shape == (3, 4)
    for row, resistor in zip(spread, resistors[:, 0], strict=True):
        np.testing.assert_array_equal(row, evaluate(KEY, {**VALUES, "R1": float(resistor)}, omega))


def test_a_value_that_the_function_does_not_hold_still_gives_its_shape() -> None:
    constant = function([-R2], [R1])
    assert evaluate(constant, {**VALUES, "C1": np.ones(3)}, 0).shape == (3,)
    assert evaluate(constant, VALUES, np.zeros(2)).tolist() == [-10e3 / 4.7e3 + 0j] * 2
    assert evaluate(constant, VALUES, 1j).shape == ()


def test_a_function_that_is_zero_is_zero_everywhere() -> None:
    assert complex(evaluate(function([], [1, R1 * C1]), VALUES, 1j)) == 0
    assert coefficients(function([], [1, R1 * C1]), EXACT)[0] == [0.0]


def test_at_a_pole_the_value_is_not_finite() -> None:
    assert not np.isfinite(evaluate(function([1], [0, R1 * C1]), VALUES, 0))


def test_values_that_are_missing_are_named() -> None:
    with pytest.raises(MissingValue, match="C2, R2") as caught:
        evaluate(KEY, {"R1": 1.0, "C1": 1.0, "k": 1.0}, 1j)
    assert caught.value.names == ["C2", "R2"]
    with pytest.raises(MissingValue, match="k"):
        coefficients(KEY, {name: value for name, value in EXACT.items() if name != "k"})


def test_coefficients_are_the_exact_ones_rounded_once() -> None:
    low_pass = ladder(6)
    values = fractions_for(low_pass.ring, 9)
    expected = [float(value_at(c, values)) for c in low_pass.denominator]
    assert coefficients(low_pass, values) == ([1.0], expected)


def test_what_cancels_in_floating_point_is_kept_in_exact_numbers() -> None:
    balanced = function([(R1 - R2) * C1], [1])
    close = {"R1": Fraction(10**15 + 1), "R2": Fraction(10**15), "C1": Fraction(1, 3)}
    assert coefficients(balanced, close)[0] == [1 / 3]
    near_pi = {"R1": sympy.pi, "R2": sympy.Rational(str(sympy.N(sympy.pi, 60))), "C1": 1}
    difference = float(sympy.N(near_pi["R1"] - near_pi["R2"], 20, maxn=200))
    assert coefficients(balanced, near_pi)[0][0] == pytest.approx(difference, rel=1e-15)
    assert 0 < abs(difference) < 1e-58


def test_numbers_that_are_equal_but_not_rational_cancel_to_zero() -> None:
    balanced = function([R1 - R2, C1], [1])
    same = {"R1": sympy.sqrt(2) + sympy.sqrt(3), "R2": sympy.sqrt(5 + 2 * sympy.sqrt(6)), "C1": 1}
    assert coefficients(balanced, same)[0] == [0.0, 1.0]


def test_roots_and_pi_in_the_function_and_in_the_values_come_out() -> None:
    field = QQ.algebraic_field(sympy.sqrt(2))
    ring = PolyRing(["R1", "pi"], field, lex)
    r1, pi = ring.gens
    root = field.from_sympy(sympy.sqrt(2))
    tied = TransferFunction(ring, (ring.one,), (root * pi * r1, ring(root)))
    above, below = coefficients(tied, {"R1": sympy.sqrt(3)})
    assert above == [1.0]
    assert below == pytest.approx([math.sqrt(6) * math.pi, math.sqrt(2)], rel=1e-15)
    assert complex(evaluate(tied, {"R1": math.sqrt(3)}, 0)) == pytest.approx(1 / below[0], rel=1e-14)
    decibels = function([K], [1])
    assert coefficients(decibels, {"k": sympy.Integer(10) ** sympy.Rational(3, 20)})[0] == [10**0.15]


def test_rational_values_give_fractions() -> None:
    above, below = exact_coefficients(
        function([R1 / 3], [1, R3 * C1]), {"R1": 2, "R3": Fraction(1, 7), "C1": 5}
    )
    assert above == [Fraction(2, 3)]
    assert below == [Fraction(1), Fraction(5, 7)]


def test_products_far_below_the_range_of_floats_are_exact_first() -> None:
    tiny = function([C1 * C2], [C1 * C2 * 3])
    assert coefficients(tiny, {"C1": Fraction(1, 10**200), "C2": Fraction(1, 10**100)}) == (
        [1e-300],
        [3e-300],
    )
