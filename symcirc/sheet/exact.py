"""From a written expression without names to an exact sympy number, within bounds."""

from __future__ import annotations

from collections.abc import Mapping

import sympy

from symcirc.complaints import Complaint, Place
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
    names,
    refuse_zero_division,
)

#: Numbers on the way to a value may be larger than a value may; beyond this they are refused unmade.
LARGEST_DIGITS = 2000


def is_number(expression: Expression) -> bool:
    """Tell whether an expression holds no name but ``pi``."""
    return all(name.text == "pi" for name in names(expression))


def exact_number(expression: Expression, known: Mapping[str, sympy.Expr] | None = None) -> sympy.Expr:
    """Return the exact value of an expression: a rational, or with ``pi`` and square roots.

    ``known`` gives the values of the names in it; without it there may be none but ``pi``. Raises Complaint where it divides by zero, roots a negative number or grows out of bounds.

    >>> from symcirc.complaints import Source
    >>> here = Place(1, 1, 2, Source("a.stage", "?"))
    >>> from fractions import Fraction
    >>> exact_number(Root(Number(Fraction(8), here), here))
    2*sqrt(2)
    """
    values = {"pi": sympy.pi, **(known or {})}
    return fold(expression, lambda node, operands: _combine(node, operands, values))


def _combine(node: Expression, operands: list[sympy.Expr], values: Mapping[str, sympy.Expr]) -> sympy.Expr:
    match node:
        case Number(value=value):
            return sympy.Rational(value.numerator, value.denominator)
        case Name(text=text):
            return values[text]
        case Sum():
            return _bounded(sympy.Add(*operands), node.place)
        case Product():
            return _bounded(sympy.Mul(*operands), node.place)
        case Negative():
            return -operands[0]
        case Reciprocal():
            if _is_zero(operands[0]):
                raise refuse_zero_division(node.place)
            return 1 / operands[0]
        case Power(exponent=exponent):
            return _power(operands[0], exponent, node.place)
        case Root():
            if operands[0].is_negative:
                raise Complaint(
                    node.place,
                    "this is the square root of a negative number",
                    "change the sign under the root",
                )
            return _bounded(sympy.sqrt(operands[0]), node.place)


def _power(base: sympy.Expr, exponent: int, place: Place) -> sympy.Expr:
    if _is_zero(base):
        if exponent < 0:
            raise refuse_zero_division(place)
        return sympy.Integer(1) if exponent == 0 else sympy.Integer(0)
    if (
        base.is_Rational
        and max(base.p.bit_length(), base.q.bit_length()) * abs(exponent) > 4 * LARGEST_DIGITS
    ):
        raise _too_large(place)
    return _bounded(sympy.expand(base**exponent) if base.is_Add else base**exponent, place)


def _is_zero(number: sympy.Expr) -> bool:
    """Tell whether an exact number is zero; a sum of roots is settled by sympy's minimal polynomial if need be."""
    if number.is_zero is not None:
        return bool(number.is_zero)
    return bool(sympy.expand(number).equals(0))


def _bounded(number: sympy.Expr, place: Place) -> sympy.Expr:
    if number.is_Rational and max(abs(number.p), number.q).bit_length() > 4 * LARGEST_DIGITS:
        raise _too_large(place)
    if not number.is_Rational and number.count_ops() > 200:
        raise Complaint(place, "this number is too long to be kept exact", "write it as a decimal number")
    return number


def _too_large(place: Place) -> Complaint:
    return Complaint(
        place, "a number in this expression grows out of range", "use numbers between 1e-30 and 1e30"
    )
