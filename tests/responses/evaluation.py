"""Plain evaluation of polynomials and transfer functions in mpmath, for the tests of the responses."""

from __future__ import annotations

import functools
from collections.abc import Sequence

import mpmath
import sympy

from symcirc.responses import (
    Prototype,
    bessel,
    butterworth,
    chebyshev,
    critical,
    digits,
    elliptic,
    gaussian,
    inverse_chebyshev,
    legendre,
    linear_phase,
)

DIGITS = 55
ORDERS = range(1, 21)
#: All orders up to 7, and of the higher ones one with cosines, one with square roots, and the highest.
SOME_ORDERS = (*range(1, 8), 11, 12, 20)
HALF_DB = sympy.Rational(1, 2)
STOP_DB = sympy.Integer(60)


def prototypes(orders: Sequence[int] = ORDERS) -> list[Prototype]:
    """Return a prototype of every family and order, Chebyshev and linear phase with two ripples."""
    return [
        prototype
        for n in orders
        for prototype in (
            butterworth(n),
            chebyshev(n, HALF_DB),
            chebyshev(n, sympy.Integer(3)),
            inverse_chebyshev(n, STOP_DB),
            elliptic(n, HALF_DB, STOP_DB),
            bessel(n),
            gaussian(n),
            legendre(n),
            linear_phase(n, sympy.Rational(1, 20)),
            linear_phase(n, sympy.Rational(1, 2)),
            critical(n),
        )
    ]


def label(prototype: Prototype) -> str:
    """Name a prototype in a test's identifier."""
    ripple = "" if prototype.ripple_db is None else f"-{prototype.ripple_db}dB"
    degrees = "" if prototype.ripple_deg is None else f"-{float(prototype.ripple_deg)}deg"
    return f"{prototype.family}-{prototype.order}{ripple}{degrees}"


def numbers(coefficients: Sequence[sympy.Expr]) -> list[mpmath.mpf]:
    """Return the coefficients as mpmath numbers of 55 digits."""
    return [_number(c) for c in coefficients]


@functools.cache
def _number(c: sympy.Expr) -> mpmath.mpf:
    with mpmath.workdps(DIGITS):
        return mpmath.mpf(str(digits(c, DIGITS)))


def value(coefficients: Sequence[mpmath.mpf], s: mpmath.mpc) -> mpmath.mpc:
    """Return the polynomial's value at s; ascending powers."""
    return mpmath.polyval(list(coefficients)[::-1], s)


def squared_loss(prototype: Prototype, omega: mpmath.mpf) -> mpmath.mpf:
    """Return 1/|H(jω)|², by its factors: near many zeros the expanded numerator loses half of the digits."""
    s = mpmath.mpc(0, omega)
    over = numbers(prototype.numerator)[-1] * mpmath.fprod(x - omega**2 for x in numbers(prototype.zeros))
    under = mpmath.fprod(value(numbers(section), s) for section in prototype.sections)
    return abs(under / over) ** 2


def convolved(a: Sequence[mpmath.mpf], b: Sequence[mpmath.mpf]) -> list[mpmath.mpf]:
    """Return the product of two polynomials."""
    result = [mpmath.mpf(0)] * (len(a) + len(b) - 1)
    for i, x in enumerate(a):
        for j, y in enumerate(b):
            result[i + j] += x * y
    return result
