"""How much it takes to believe in an edit that fills in something: the less, the more often a hand errs so."""

from __future__ import annotations

from fractions import Fraction

from symcirc.sheet.expression import Expression, Name, Sum
from symcirc.slips.points import Monomial
from symcirc.slips.spots import Spot
from symcirc.slips.vocabulary import Vocabulary

#: Numbers that are lost more often than others.
_COMMON = (2, Fraction(1, 2), 4, Fraction(1, 4), -1)


def of_name(name: Name, rank: int, vocabulary: Vocabulary) -> float:
    """Return what a name costs: one that the working has not used, that is far away, or is one of several."""
    cost = 0.4 * rank
    if name.text not in vocabulary.used:
        cost += 0.8 if name.text.startswith("I_") else 0.3
    return cost + (0.2 if name.text in vocabulary.distant else 0.0)


def of_exchange(old: Expression, new: Name) -> float:
    """Return what it costs that a name stands where another belongs."""
    if not isinstance(old, Name):
        return 2.2
    return 1.1 if old.text[:1] == new.text[:1] else 1.9


def of_number(number: Fraction) -> float:
    """Return what a lost number costs."""
    if number == 1:
        return 0.0
    return 0.2 if number in _COMMON else 0.6 if abs(number.numerator) + number.denominator <= 12 else 2.0


def of_quotient(monomial: Monomial) -> float:
    """Return what the names below the line of a lost product cost."""
    return 0.3 * sum(power < 0 for _, power in monomial.powers)


def of_depth(spot: Spot) -> float:
    """Return what it costs that something is lost deep in brackets."""
    depth = 0
    while spot.parent is not None:
        spot, depth = spot.parent, depth + isinstance(spot.node, Sum)
    return 0.15 * depth
