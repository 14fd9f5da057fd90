"""How high the powers of a line go, definitions put in: beyond a bound the line is not read."""

from __future__ import annotations

from collections.abc import Mapping

from symcirc.complaints import Complaint
from symcirc.sheet.expression import Expression, Name, Number, Power, Product, Reciprocal, Sum, fold

#: The highest degree of a line's numerator and denominator.
HIGHEST_DEGREE = 2000
#: Bounds on the degree of a numerator and of a denominator.
Degrees = tuple[int, int]


def degrees(expression: Expression, known: Mapping[str, Degrees]) -> Degrees:
    """Return bounds on the degrees of numerator and denominator; raises Complaint where they are too high.

    ``known`` gives those of defined names. Any other name has degree 1, and so has a number, as powers multiply its
    digits.
    """
    return fold(expression, lambda node, operands: _combine(node, operands, known))


def _combine(node: Expression, operands: list[Degrees], known: Mapping[str, Degrees]) -> Degrees:
    match node:
        case Number():
            above, below = 1, 0
        case Name():
            above, below = known.get(node.text, (1, 0))
        case Sum():
            below = sum(under for _, under in operands)
            above = max(over + below - under for over, under in operands)
        case Product():
            above, below = sum(over for over, _ in operands), sum(under for _, under in operands)
        case Reciprocal():
            below, above = operands[0]
        case Power():
            above, below = (degree * abs(node.exponent) for degree in operands[0])
            above, below = (above, below) if node.exponent >= 0 else (below, above)
        case _:
            above, below = operands[0]
    if max(above, below) > HIGHEST_DEGREE:
        raise Complaint(
            node.place,
            f"the powers here go up to {HIGHEST_DEGREE:,} and more",
            "write it in simpler terms",
        )
    return above, below
