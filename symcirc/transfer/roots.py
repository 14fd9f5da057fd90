"""Poles and zeros for fixed numbers, to full precision."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from typing import Any

import mpmath
import numpy as np
from sympy.polys.domains import QQ
from sympy.polys.sqfreetools import dup_sqf_list

from symcirc.transfer.evaluate import Exact, exact_coefficients
from symcirc.transfer.function import TransferFunction

#: Digits of the refinement, and the most steps it takes; simple roots need five or so.
DIGITS, MOST_STEPS = 50, 200


def poles(function: TransferFunction, values: Mapping[str, Exact]) -> list[complex]:
    """Return the poles in rad/s for exact values of the symbols, the slowest first.

    Each occurs as often as it is a pole. Raises MissingValue where a symbol has no value.

    >>> from symcirc.ratio import Ratio
    >>> from symcirc.transfer.build import build_function
    >>> low_pass = Ratio(("R1", "C1"), ({(0, 0): 1},), ({(0, 0): 1}, {(1, 1): 1}))
    >>> poles(build_function(low_pass, {}).function, {"R1": 1000, "C1": Fraction(1, 10**6)})
    [(-1000+0j)]
    """
    return roots(exact_coefficients(function, values)[1])


def zeros(function: TransferFunction, values: Mapping[str, Exact]) -> list[complex]:
    """Return the zeros in rad/s, as :func:`poles`."""
    return roots(exact_coefficients(function, values)[0])


def roots(coefficients: list[Any]) -> list[complex]:
    """Return the roots of a polynomial with ascending coefficients, fractions or mpmath's numbers.

    Roots that occur more than once are split off exactly where the coefficients are fractions. Each root is
    found from its companion matrix (numpy) and refined with 50 digits by the method of O. Aberth, "Iteration
    methods for finding all zeros of a polynomial simultaneously", Math. Comp. 27 (1973) (from memory): simple
    roots come out correct to the last place or two of a float.

    >>> roots([Fraction(4), Fraction(4), Fraction(1)])
    [(-2+0j), (-2+0j)]
    """
    rest = list(coefficients)
    while rest and not rest[-1]:
        rest.pop()
    at_zero = next((k for k, c in enumerate(rest) if c), 0)
    found = [0j] * at_zero
    for factor, times in _square_free(rest[at_zero:]):
        found += [root for root in _simple_roots(factor) for _ in range(times)]
    return sorted(found, key=lambda root: (abs(root), root.imag))


def _square_free(coefficients: list[Any]) -> list[tuple[list[Any], int]]:
    if not all(isinstance(c, Fraction) for c in coefficients):
        return [(coefficients, 1)]
    dense = [QQ(c.numerator, c.denominator) for c in reversed(coefficients)]
    if len(dense) < 2:
        return []
    _, factors = dup_sqf_list(dense, QQ)
    return [
        ([Fraction(int(c.numerator), int(c.denominator)) for c in reversed(factor)], times)
        for factor, times in factors
    ]


def _simple_roots(coefficients: list[Any]) -> list[complex]:
    degree = len(coefficients) - 1
    if degree < 1:
        return []
    with mpmath.workdps(DIGITS):
        exact = [_mpf(c) for c in reversed(coefficients)]
        scale = abs(exact[-1] / exact[0]) ** (mpmath.mpf(1) / degree)
        scaled = [c / exact[0] / scale**k for k, c in enumerate(exact)]
        start = [mpmath.mpc(root) for root in np.roots([float(c) for c in scaled])]
        return [_to_float(root * scale) for root in _refined(scaled, start)]


def _mpf(number: Any) -> Any:
    if isinstance(number, Fraction):
        return mpmath.mpf(number.numerator) / number.denominator
    return mpmath.mpf(number)


def _refined(scaled: list[Any], found: list[Any]) -> list[Any]:
    """Move all approximations together until none moves any more."""
    derivative = [c * (len(scaled) - 1 - k) for k, c in enumerate(scaled[:-1])]
    for _ in range(MOST_STEPS):
        largest = mpmath.mpf(0)
        for k, root in enumerate(found):
            value, slope = mpmath.polyval(scaled, root), mpmath.polyval(derivative, root)
            if not value:
                continue
            others = mpmath.fsum(
                1 / (root - other) for j, other in enumerate(found) if j != k and other != root
            )
            step = value / (slope - value * others)
            found[k] = root - step
            largest = max(largest, abs(step / root))
        if largest < mpmath.mpf(10) ** (8 - DIGITS):
            break
    return found


def _to_float(root: Any) -> complex:
    """Round, and take a part that is rounding only (the coefficients are real) for zero."""
    size = abs(root) * mpmath.mpf(10) ** (-DIGITS // 2)
    real = 0.0 if abs(root.real) < size else float(root.real)
    return complex(real, 0.0 if abs(root.imag) < size else float(root.imag))
