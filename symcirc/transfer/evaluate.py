"""The values of a transfer function: at frequencies, for single part values and for whole arrays of them."""

from __future__ import annotations

import math
from collections.abc import Mapping
from fractions import Fraction
from typing import Any

import mpmath
import numpy as np
import sympy
from numpy.typing import ArrayLike, NDArray
from sympy.polys.domains import QQ
from sympy.polys.rings import PolyElement

from symcirc.transfer.function import TransferFunction, symbols_in

#: Digits with which numbers with roots or pi are first computed, and at most.
FIRST_DIGITS, MOST_DIGITS = 40, 1300

#: An exact number: sympy's, a fraction or a whole number (a float is taken for the fraction that it is).
Exact = Any
#: A coefficient's value: a fraction, or one of mpmath's numbers with many digits.
Number = Any


class MissingValue(ValueError):
    """A symbol of the function has no value; ``names`` are those that are missing."""

    def __init__(self, names: list[str]) -> None:
        super().__init__(f"no value is given for {', '.join(names)}")
        self.names = names


def evaluate(
    function: TransferFunction, values: Mapping[str, ArrayLike], s: ArrayLike
) -> NDArray[np.complex128]:
    """Return the function's values in floating point.

    Args:
        function: the transfer function.
        values: for each of its symbols a number, or an array of them, in SI base units.
        s: the complex frequency in rad/s, j*2*pi*f for a frequency f in Hz, or an array.

    All arrays are broadcast against each other, as numpy does; the result has their common shape, () for
    numbers alone. At a pole it is infinite or not a number. Raises MissingValue.

    >>> from symcirc.ratio import Ratio
    >>> from symcirc.transfer.build import build_function
    >>> low_pass = Ratio(("R1", "C1"), ({(0, 0): 1},), ({(0, 0): 1}, {(1, 1): 1}))
    >>> function = build_function(low_pass, {}).function
    >>> complex(evaluate(function, {"R1": 1000, "C1": 1e-6}, 1000j))
    (0.5-0.5j)
    """
    known = _known(function, values)
    columns = [np.asarray(known.get(str(name), np.nan), dtype=np.float64) for name in function.ring.symbols]
    frequency = np.asarray(s, dtype=np.complex128)
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        above, below = (
            _horner([_floating(c, columns) for c in side], frequency)
            for side in (function.numerator, function.denominator)
        )
        shape = np.broadcast_shapes(frequency.shape, *(c.shape for c in columns))
        return np.broadcast_to(np.asarray(above / below, dtype=np.complex128), shape).copy()


def _known(function: TransferFunction, values: Mapping[str, Any]) -> dict[str, Any]:
    known: dict[str, Any] = {"pi": sympy.pi, **values} if "pi" not in values else dict(values)
    missing = sorted(symbols_in(function) - known.keys())
    if missing:
        raise MissingValue(missing)
    return known


def _horner(coefficients: list[NDArray[np.float64]], s: NDArray[np.complex128]) -> NDArray[np.complex128]:
    value = np.zeros((), dtype=np.complex128)
    for coefficient in reversed(coefficients):
        value = value * s + coefficient
    return value


def _floating(polynomial: PolyElement, columns: list[NDArray[np.float64]]) -> NDArray[np.float64]:
    """Return a polynomial's values; powers are made once, and each product from left to right."""
    domain = polynomial.ring.domain
    powers: dict[tuple[int, int], NDArray[np.float64]] = {}
    total = np.zeros((), dtype=np.float64)
    for monomial, coefficient in polynomial.terms():
        value = np.asarray(_float(domain, coefficient))
        for k, exponent in enumerate(monomial):
            if exponent:
                if (k, exponent) not in powers:
                    powers[k, exponent] = columns[k] ** exponent
                value = value * powers[k, exponent]
        total = total + value
    return total


def _float(domain: Any, coefficient: Any) -> float:
    if domain == QQ:
        return float(Fraction(int(coefficient.numerator), int(coefficient.denominator)))
    return float(domain.to_sympy(coefficient).evalf(20))


# fixed numbers ----------------------------------------------------------------------------------------------


def coefficients(function: TransferFunction, values: Mapping[str, Exact]) -> tuple[list[float], list[float]]:
    """Return the coefficients of numerator and denominator, ascending, for exact values of the symbols.

    They are computed exactly where the values are rational, else with as many digits as it takes, and rounded
    once. ``[0.0]`` is the numerator of a function that is zero. Raises MissingValue.

    >>> from symcirc.ratio import Ratio
    >>> from symcirc.transfer.build import build_function
    >>> low_pass = Ratio(("R1", "C1"), ({(0, 0): 1},), ({(0, 0): 1}, {(1, 1): 1}))
    >>> coefficients(build_function(low_pass, {}).function, {"R1": 4700, "C1": sympy.Rational(1, 10**7)})
    ([1.0], [1.0, 0.00047])
    """
    above, below = exact_coefficients(function, values)
    return [float(c) for c in above] or [0.0], [float(c) for c in below]


def exact_coefficients(
    function: TransferFunction, values: Mapping[str, Exact]
) -> tuple[list[Number], list[Number]]:
    """Return the coefficients as fractions or, where there are roots or pi, as mpmath's numbers."""
    known = _known(function, values)
    numbers = [_exact(known.get(str(name), 0)) for name in function.ring.symbols]
    sides = (function.numerator, function.denominator)
    if function.ring.domain == QQ and all(n.is_Rational for n in numbers):
        fractions = [Fraction(int(n.p), int(n.q)) for n in numbers]
        above, below = ([_rational(c, fractions) for c in side] for side in sides)
    else:
        above, below = ([_many_digits(c, numbers) for c in side] for side in sides)
    return above, below


def _exact(number: Exact) -> sympy.Expr:
    return number if isinstance(number, sympy.Basic) else sympy.Rational(number)


def _rational(polynomial: PolyElement, numbers: list[Fraction]) -> Fraction:
    """Return a polynomial's exact value, over one common denominator: no fraction is reduced on the way."""
    highest = [max((m[k] for m in polynomial), default=0) for k in range(len(numbers))]
    content = math.lcm(*(int(c.denominator) for c in polynomial.values()))
    ups = [[n.numerator**e for e in range(h + 1)] for n, h in zip(numbers, highest, strict=True)]
    downs = [[n.denominator**e for e in range(h + 1)] for n, h in zip(numbers, highest, strict=True)]
    total = 0
    for monomial, coefficient in polynomial.items():
        value = int(coefficient.numerator) * (content // int(coefficient.denominator))
        for k, exponent in enumerate(monomial):
            if highest[k]:
                value *= ups[k][exponent] * downs[k][highest[k] - exponent]
        total += value
    return Fraction(total, content * math.prod(down[-1] for down in downs))


def _many_digits(polynomial: PolyElement, numbers: list[sympy.Expr]) -> Number:
    """Return a polynomial's value to 30 digits at least, 0 where nothing is left of a thousand.

    The digits lost to cancellation are those by which the sum is smaller than the sum of the sizes.
    """
    digits = FIRST_DIGITS
    while True:
        with mpmath.workdps(digits):
            columns = [_mpf(number, digits) for number in numbers]
            total, size = mpmath.mpf(0), mpmath.mpf(0)
            for monomial, coefficient in polynomial.terms():
                value = _mpf(polynomial.ring.domain.to_sympy(coefficient), digits)
                for column, exponent in zip(columns, monomial, strict=True):
                    value *= column**exponent
                total, size = total + value, size + abs(value)
            if not size or abs(total) > size * mpmath.mpf(10) ** (32 - digits):
                return total
        if digits >= MOST_DIGITS:
            return mpmath.mpf(0)
        digits *= 3


def _mpf(number: sympy.Expr, digits: int) -> Number:
    return mpmath.mpf(sympy.N(number, digits + 5))
