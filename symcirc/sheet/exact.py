"""From a written expression to an exact sympy number, within bounds."""

from __future__ import annotations

from collections.abc import Mapping

import mpmath
import sympy
from sympy.core.evalf import PrecisionExhausted

from symcirc.complaints import Complaint, Place
from symcirc.sheet.expression import (
    LARGEST,
    SMALLEST,
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
    names,
    refuse_negative_root,
    refuse_zero_division,
)

#: Numbers on the way to a value may be larger than a value may; one of more bits than this is refused unmade.
MOST_BITS = 8_000
#: An exact number of more operations than this is refused.
MOST_OPERATIONS = 400
#: Two exact numbers that agree in so many digits are taken to be equal.
DIGITS = 500


def is_number(expression: Expression) -> bool:
    """Tell whether an expression holds no name but ``pi``."""
    return all(name.text == "pi" for name in names(expression))


def exact_number(expression: Expression, known: Mapping[str, sympy.Expr] | None = None) -> sympy.Expr:
    """Return the exact value of an expression: a rational, or with ``pi`` and square roots.

    ``known`` gives the values of the names in it, or symbols for them; without it there may be none but
    ``pi``. Raises Complaint where it divides by zero, roots a negative number or grows out of bounds.

    >>> from symcirc.complaints import Source
    >>> here = Place(1, 1, 2, Source("a.stage", "?"))
    >>> from fractions import Fraction
    >>> exact_number(Root(Number(Fraction(8), here), here))
    2*sqrt(2)
    """
    values = known or {}
    return fold(expression, lambda node, operands: _combine(node, operands, values))


def _combine(node: Expression, operands: list[sympy.Expr], values: Mapping[str, sympy.Expr]) -> sympy.Expr:
    match node:
        case Number(value=value):
            return sympy.Rational(value.numerator, value.denominator)
        case Name(text=text):
            return sympy.pi if text == "pi" else values[text]
        case Sum():
            return _sum(operands, node.place)
        case Product():
            return _product(operands, node.place)
        case Negative():
            return -operands[0]
        case Reciprocal():
            return 1 / _nonzero(operands[0], node.place)
        case Power(exponent=exponent):
            return _power(operands[0], exponent, node.place)
        case Root():
            if operands[0].is_number and sign_of(operands[0]) < 0:
                raise refuse_negative_root(node.place)
            return _bounded(sympy.sqrt(operands[0]), node.place)


def _sum(terms: list[sympy.Expr], place: Place) -> sympy.Expr:
    rational, others = sympy.Integer(0), []
    for term in terms:  # one by one: a common denominator can grow with every term
        if term.is_Rational:
            rational = _bounded(rational + term, place)
        else:
            others.append(term)
    return _bounded(sympy.Add(rational, *others), place)


def _product(factors: list[sympy.Expr], place: Place) -> sympy.Expr:
    if sum(_bits(factor) for factor in factors) > MOST_BITS:
        raise _too_large(place)
    return _bounded(sympy.Mul(*factors), place)


def _power(base: sympy.Expr, exponent: int, place: Place) -> sympy.Expr:
    if exponent < 0:
        _nonzero(base, place)
    if _bits(base) * abs(exponent) > MOST_BITS:
        raise _too_large(place)
    return _bounded(base**exponent, place)


def _nonzero(number: sympy.Expr, place: Place) -> sympy.Expr:
    zero = sign_of(number) == 0 if number.is_number else sympy.expand(number) == 0
    if zero:
        raise refuse_zero_division(place)
    return number


def sign_of(number: sympy.Expr) -> int:
    """Return the sign of an exact real number; 0 too where it cannot be told from 0 in 500 digits.

    >>> sign_of(sympy.sqrt(2) + sympy.sqrt(3) - sympy.sqrt(5 + 2 * sympy.sqrt(6)))
    0
    """
    value = number if number.is_Rational else _decimal(number)
    return int(bool(value > 0)) - int(bool(value < 0))


def in_bounds(number: sympy.Expr) -> bool:
    """Tell whether an exact number is 0, or of a size from 1e-30 to 1e30.

    >>> in_bounds(sympy.Integer(10) ** 31), in_bounds(sympy.pi)
    (False, True)
    """
    size = abs(number if number.is_Rational else _decimal(number))
    least, most = sympy.Rational(1, SMALLEST.denominator), sympy.Integer(LARGEST.numerator)
    return bool(size == 0 or least <= size <= most)


def _decimal(number: sympy.Expr) -> sympy.Expr:
    """Return 15 correct digits of an irrational number, or 0 where it cannot be told from 0."""
    try:
        return number.evalf(15, maxn=DIGITS, strict=True)
    except PrecisionExhausted:
        return sympy.Integer(0)


def _bits(number: sympy.Expr) -> int:
    """Return the bits that an exact number needs, or those of its size where it is irrational."""
    if number.is_Rational:
        return int(max(abs(number.p).bit_length(), number.q.bit_length()))
    size = _decimal(number) if number.is_number else 0
    return abs(int(mpmath.mag(size))) if size != 0 else 0


def _bounded(number: sympy.Expr, place: Place) -> sympy.Expr:
    if number.is_Rational and _bits(number) > MOST_BITS:
        raise _too_large(place)
    if not number.is_Rational and number.is_number and number.count_ops() > MOST_OPERATIONS:
        raise Complaint(place, "this number is too long to be kept exact", "write it as a decimal number")
    return number


def _too_large(place: Place) -> Complaint:
    return Complaint(
        place, "a number in this expression grows out of range", "use numbers between 1e-30 and 1e30"
    )
