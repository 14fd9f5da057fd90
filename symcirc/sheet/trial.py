"""An expression tried with numbers: does it divide by zero, is it zero, is it negative for every value?

Names without a number get random positive values of 200 digits, so that what is zero there is zero everywhere
(Schwartz, "Fast probabilistic algorithms for verification of polynomial identities", J. ACM 27 (1980)
701-717, from memory). The sign is not tried but concluded: a sum of positive terms is positive.
"""

from __future__ import annotations

import random
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

import mpmath
import sympy

from symcirc.complaints import Place
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
    refuse_negative_root,
    refuse_zero_division,
)

#: A number of the trial's own context (mpmath has no types).
Real = Any

DIGITS = 200
_CONTEXT = mpmath.MPContext()
_CONTEXT.dps = DIGITS
_ROUNDING = _CONTEXT.mpf(10) ** (2 - DIGITS)
#: What is smaller than this many times its error is zero.
_MARGIN = 10**6


@dataclass(frozen=True)
class Trial:
    """A value with a bound on its error, and its sign where it is the same whatever the free names are.

    ``is_known`` tells that no name is free, so that the value is the only one.
    """

    value: Real
    error: Real
    sign: int | None
    is_known: bool

    @property
    def is_zero(self) -> bool:
        """Tell whether the value is zero within its error."""
        return bool(abs(self.value) <= _MARGIN * self.error)

    @property
    def whole(self) -> int | None:
        """The whole number that the value is, or None where it is another, or not known."""
        nearest = int(_CONTEXT.nint(self.value))
        is_whole = self.is_known and abs(self.value - nearest) <= _MARGIN * self.error
        return nearest if is_whole else None

    @property
    def in_bounds(self) -> bool:
        """Tell whether the value is 0, or of a size from 1e-30 to 1e30."""
        return self.is_zero or bool(1 <= abs(self.value) * 10**30 <= 10**60)


def known(number: sympy.Expr) -> Trial:
    """Return the trial of a name that has an exact number."""
    if number.is_Rational:
        return _number(_CONTEXT.mpf(int(number.p)) / int(number.q))
    return _number(_CONTEXT.mpf(number.evalf(DIGITS)))


def free(name: str, *, positive: bool) -> Trial:
    """Return the trial of a name without a number: a random one from 1 to 2, always the same for one name."""
    fraction = random.Random(name).getrandbits(3 * DIGITS)
    value = 1 + _CONTEXT.mpf(fraction) / 2 ** (3 * DIGITS)
    return Trial(value, value * _ROUNDING, 1 if positive else None, is_known=False)


def try_out(expression: Expression, names: Mapping[str, Trial]) -> Trial:
    """Return the value of an expression for the trials of its names (``s`` and ``pi`` are known).

    Raises Complaint where it divides by zero, whatever the free names are.
    """
    return fold(expression, lambda node, operands: _combine(node, operands, names))


def _number(value: Real) -> Trial:
    return Trial(value, abs(value) * _ROUNDING, int(value > 0) - int(value < 0), is_known=True)


#: What every formula knows.
_CONSTANTS = {"s": free("s", positive=False), "pi": _number(+_CONTEXT.pi)}


def _combine(node: Expression, operands: list[Trial], trials: Mapping[str, Trial]) -> Trial:
    match node:
        case Number(value=value):
            return _number(_CONTEXT.mpf(value.numerator) / value.denominator)
        case Name(text=text):
            return _CONSTANTS.get(text) or trials[text]
        case Sum():
            return _sum(operands)
        case Product():
            return _product(operands)
        case Negative():
            x = operands[0]
            return Trial(-x.value, x.error, None if x.sign is None else -x.sign, x.is_known)
        case Reciprocal():
            return _reciprocal(operands[0], node.place)
        case Power(exponent=exponent):
            base = _reciprocal(operands[0], node.place) if exponent < 0 else operands[0]
            return _product([base] * abs(exponent))
        case Root():
            return _root(operands[0], node.place)


def _sum(terms: list[Trial]) -> Trial:
    value = _CONTEXT.fsum(term.value for term in terms)
    error = _CONTEXT.fsum(term.error for term in terms) + abs(value) * _ROUNDING
    is_known = all(term.is_known for term in terms)
    signs = {term.sign for term in terms} - {0}
    if is_known:
        sign: int | None = int(value > _MARGIN * error) - int(value < -_MARGIN * error)
    elif None in signs or len(signs) > 1:
        sign = None
    else:
        sign = signs.pop() if signs else 0
    return Trial(value, error, sign, is_known)


def _product(factors: list[Trial]) -> Trial:
    value, error = _CONTEXT.mpf(1), _CONTEXT.mpf(0)
    for f in factors:
        error = abs(value) * f.error + abs(f.value) * error + error * f.error
        value = value * f.value
        error += abs(value) * _ROUNDING
    signs = [f.sign for f in factors]
    sign = 0 if 0 in signs else None if None in signs else (-1) ** signs.count(-1)
    return Trial(value, error, sign, all(f.is_known for f in factors))


def _reciprocal(operand: Trial, place: Place) -> Trial:
    if operand.is_zero:
        raise refuse_zero_division(place)
    value = 1 / operand.value
    error = 2 * operand.error * value**2 + abs(value) * _ROUNDING
    return Trial(value, error, operand.sign, operand.is_known)


def _root(operand: Trial, place: Place) -> Trial:
    if operand.is_zero:
        return Trial(_CONTEXT.mpf(0), _CONTEXT.sqrt(operand.error), 0, operand.is_known)
    if operand.value < 0:
        raise refuse_negative_root(place)
    value = _CONTEXT.sqrt(operand.value)
    return Trial(value, operand.error / value + value * _ROUNDING, 1, operand.is_known)
