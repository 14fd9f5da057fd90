"""Numbers of many digits that know how far they may be off: the second way to a verdict.

Errors are carried to first order and a little more.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

import mpmath

from symcirc.sheet.expression import (
    Expression,
    Name,
    Negative,
    Number,
    Power,
    Product,
    Reciprocal,
    Root,
    Sum,
    fold,
)

#: Digits that numbers are computed with, and the error that a plain number and a solved quantity start with: a
#: solve may lose forty digits, as it does where the values that a sheet gives lie far apart.
DIGITS = 120
UNIT, SOLVED = mpmath.mpf(10) ** -117, mpmath.mpf(10) ** -80


@dataclass(frozen=True)
class Measured:
    """A complex number of mpmath's, and the largest size of its error."""

    value: Any
    error: Any


def exact(value: Any) -> Measured:
    """Return a number that is off by rounding alone."""
    return Measured(value, abs(value) * UNIT)


def of_fraction(value: Fraction) -> Measured:
    """Return a rational number."""
    return exact(mpmath.mpf(value.numerator) / value.denominator)


def agree(left: Measured, right: Measured) -> bool:
    """Tell whether two numbers differ by no more than their errors allow."""
    return bool(abs(left.value - right.value) <= left.error + right.error)


def evaluate(
    expression: Expression,
    value: Callable[[str], Measured],
    number: Callable[[Number], Measured] = lambda node: of_fraction(node.value),
) -> Measured:
    """Return an expression's value; raises ZeroDivisionError where a divisor may be zero.

    ``value`` gives every name's, ``number`` every written number's: a rounded one has an error of its own.
    """

    def combine(node: Expression, operands: list[Measured]) -> Measured:
        match node:
            case Number():
                return number(node)
            case Name():
                return value(node.text)
            case Sum():
                total = sum(operand.value for operand in operands)
                largest = max(abs(operand.value) for operand in operands)
                return Measured(total, sum(operand.error for operand in operands) + largest * UNIT)
            case Product():
                return product(operands)
            case Negative():
                return Measured(-operands[0].value, operands[0].error)
            case Reciprocal():
                return reciprocal(operands[0])
            case Power():
                return power(operands[0], node.exponent)
            case Root():
                return root(operands[0])

    return fold(expression, combine)


def product(factors: list[Measured]) -> Measured:
    """Return a product."""
    value, error = factors[0].value, factors[0].error
    for factor in factors[1:]:
        error = abs(value) * factor.error + (abs(factor.value) + factor.error) * error
        value = value * factor.value
    return Measured(value, error + abs(value) * UNIT)


def reciprocal(operand: Measured) -> Measured:
    """Return one over a number; raises ZeroDivisionError where it may be zero."""
    size = abs(operand.value)
    if size <= operand.error:
        raise ZeroDivisionError
    return Measured(1 / operand.value, operand.error / (size * (size - operand.error)) + UNIT / size)


def power(base: Measured, exponent: int) -> Measured:
    """Return a whole power."""
    if exponent < 0:
        return reciprocal(power(base, -exponent))
    size = abs(base.value)
    value = base.value**exponent
    return Measured(value, (size + base.error) ** exponent - size**exponent + abs(value) * exponent * UNIT)


def root(operand: Measured) -> Measured:
    """Return the square root with a positive real part (of a negative number: a positive imaginary one)."""
    value = operand.value
    if abs(mpmath.im(value)) <= operand.error:
        value = mpmath.re(value)
    result = mpmath.sqrt(value)
    size = abs(result)
    error = mpmath.sqrt(operand.error) if size**2 <= operand.error else operand.error / size
    return Measured(result, error + size * UNIT)
