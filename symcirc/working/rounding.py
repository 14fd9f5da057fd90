"""Numbers as they were written, with the rounding that their digits allow."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

import mpmath

from symcirc.complaints import Place
from symcirc.sheet.expression import Expression, Negative, Number, nodes
from symcirc.working import measured
from symcirc.working.measured import Measured

#: A number of fewer digits is taken exactly.
FEWEST_DIGITS = 2


@dataclass(frozen=True)
class Rounding:
    """How the rounded numbers of an equality are read: each off by half of its last digit's worth.

    ``digits`` is how many the shortest of them has.
    """

    digits: int
    halves: dict[Place, Fraction]

    def number(self, node: Number) -> Measured:
        """Return a written number with its rounding."""
        half = self.halves.get(node.place, Fraction(0))
        plain = measured.of_fraction(node.value)
        return Measured(plain.value, plain.error + mpmath.mpf(half.numerator) / half.denominator)


def rounding_of(left: Expression, right: Expression) -> Rounding | None:
    """Return the rounding of an equality's numbers, or None where all of them are exact.

    Rounded are numbers written with a decimal point or an exponent, and a number that is a whole side.
    """
    halves, digits = {}, []
    for side in (left, right):
        whole = side.operand if isinstance(side, Negative) else side
        for number in (node for node in nodes(side) if isinstance(node, Number)):
            count, half = _last_digit(_written(number))
            rounded = number is whole or any(c in ".eE" for c in _written(number))
            if rounded and count >= FEWEST_DIGITS:
                halves[number.place] = half
                digits.append(count)
    return Rounding(min(digits), halves) if digits else None


def _written(number: Number) -> str:
    place = number.place
    return place.source.line(place.line)[place.column - 1 : place.end - 1].strip("() ")


def _last_digit(text: str) -> tuple[int, Fraction]:
    """Return how many digits a number was written with, and half of what the last is worth.

    >>> _last_digit("338.6"), _last_digit("1.2e3")
    ((4, Fraction(1, 20)), (2, Fraction(50, 1)))
    """
    mantissa, _, power = text.lower().partition("e")
    whole, _, decimals = mantissa.partition(".")
    digits = (whole + decimals).lstrip("0")
    return len(digits), Fraction(10) ** (int(power or "0") - len(decimals)) / 2
