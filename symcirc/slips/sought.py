"""What would have to stand somewhere, known by its value at every point, and what that value is made of."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass

from symcirc.sheet.expression import Expression, Name, Sum
from symcirc.slips.edits import NEW, product
from symcirc.slips.points import Monomial, Points
from symcirc.slips.vocabulary import Carrier, Vocabulary, written
from symcirc.slips.worlds import Value

#: The longest of two lost products that are added.
LONGEST_IN_BRACKETS = 8


@dataclass(frozen=True)
class Sought:
    """A value at every point: ``at(0)`` at the base, ``at(k)`` where the k-th name is doubled.

    ``at`` raises ZeroDivisionError where there is none.
    """

    at: Callable[[int], Value]
    vocabulary: Vocabulary

    @property
    def points(self) -> Points:
        """The points."""
        return self.vocabulary.points

    def names(self) -> list[Name]:
        """Return the names that have this value, best first."""
        try:
            return self.vocabulary.named(self.at(0))[:3]
        except ZeroDivisionError:
            return []

    def monomial(self) -> Monomial | None:
        """Return the product of powers of parts that this is, or None."""
        try:
            return self.points.monomial(self.at(0), lambda k: self.at(k + 1))
        except ZeroDivisionError:
            return None

    def carried(self) -> Iterator[tuple[Carrier, Monomial]]:
        """Yield the carriers that this is a monomial times of."""
        for carrier in self.vocabulary.carriers:
            found = self.over(carrier).monomial()
            if found is not None:
                yield carrier, found

    def carried_below(self) -> Iterator[tuple[Carrier, Monomial]]:
        """Yield the carriers that this is a monomial over."""
        for carrier in self.vocabulary.carriers:
            found = self._over(carrier, below=True).monomial()
            if found is not None:
                yield carrier, found

    def over(self, carrier: Carrier) -> Sought:
        """Return this divided by a carrier."""
        return self._over(carrier, below=False)

    def _over(self, carrier: Carrier, *, below: bool) -> Sought:
        base = self.points.base

        def at(world: int) -> Value:
            inverse = carrier.inverses[world]
            return base.multiply(self.at(world), base.invert(inverse) if below else inverse)

        return Sought(at, self.vocabulary)

    def inverse(self) -> Sought:
        """Return one over this."""
        return Sought(lambda world: self.points.base.invert(self.at(world)), self.vocabulary)

    def bracket(self) -> Sum | None:
        """Return this as a sum of two products, as in ``1 + R2/R1``, or None."""
        try:
            found = self.points.pair(self.at(0), lambda k: self.at(k + 1))
        except ZeroDivisionError:
            return None
        if found is None or max(one.size for one in found) > LONGEST_IN_BRACKETS:
            return None
        one, other = sorted(found, key=lambda monomial: (monomial.number < 0, monomial.size))
        return Sum((written(one), written(other)), NEW)


def with_carrier(carrier: Carrier, found: Monomial) -> Expression:
    """Return a monomial times what carries it, its sign left aside."""
    return product([written(unsigned(found)), carrier.expression])


def unsigned(monomial: Monomial) -> Monomial:
    """Return a monomial without its sign."""
    return Monomial(abs(monomial.number), monomial.powers)
