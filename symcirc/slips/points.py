"""The points at which a search values its candidates: one at random, and for every name one with that name doubled.

What is a product of powers of names shows in how it grows from the first point to the others: by a power of two each.
"""

from __future__ import annotations

from collections.abc import Callable, Hashable
from dataclasses import dataclass, field
from fractions import Fraction
from itertools import permutations

from symcirc.slips.worlds import Value, World

#: The largest power of a name that is looked for.
LARGEST_POWER = 4
#: The same where two products are looked for that are added.
PAIR_POWER = 3


@dataclass(frozen=True)
class Monomial:
    """A number times powers of names."""

    number: Fraction
    powers: tuple[tuple[str, int], ...]

    @property
    def size(self) -> int:
        """How many factors it is written with."""
        return sum(abs(power) for _, power in self.powers)


@dataclass
class Points:
    """``base``, and in ``doubled`` for each of ``names`` a world in which that name is twice as large."""

    base: World
    names: tuple[str, ...]
    doubled: tuple[World, ...]
    _powers: dict[Hashable, int] = field(default_factory=dict)
    _twos: dict[int, Value] = field(default_factory=dict)

    def __post_init__(self) -> None:
        for power in range(-LARGEST_POWER, LARGEST_POWER + 1):
            two = self.base.of_number(Fraction(2) ** power)
            self._powers[self.base.key(two)] = power
            if abs(power) <= PAIR_POWER:
                self._twos[power] = two

    def monomial(self, value: Value, at: Callable[[int], Value]) -> Monomial | None:
        """Return what is ``value`` at the base and ``at(k)`` at the k-th other point, where it is a monomial.

        Raises ZeroDivisionError for what is zero.
        """
        inverse = self.base.invert(value)
        powers: list[tuple[str, int]] = []
        for k, name in enumerate(self.names):
            power = self._powers.get(self.base.key(self.base.multiply(at(k), inverse)))
            if power is None:
                return None
            if power:
                powers.append((name, power))
        return self._numbered(value, powers)

    def _numbered(self, value: Value, powers: list[tuple[str, int]]) -> Monomial | None:
        rest = value
        for name, power in powers:
            rest = self.base.multiply(rest, self.base.raised(self.base.of_name(name), -power))
        number = self.base.fraction(rest)
        return None if not number else Monomial(number, tuple(powers))

    def pair(self, value: Value, at: Callable[[int], Value]) -> tuple[Monomial, Monomial] | None:
        """Return the two monomials whose sum has these values, as ``monomial`` does for one.

        With t the share of the first, the sum grows by 2^a t + 2^b (1 - t) where a name is doubled: the first name
        in which a and b differ gives t, and the others confirm it.
        """
        base = self.base
        inverse = base.invert(value)
        grown = [base.multiply(at(k), inverse) for k in range(len(self.names))]
        uneven = next((g for g in grown if base.key(g) not in self._powers), None)
        if uneven is None:
            return None
        for one, other in permutations(self._twos.values(), 2):
            above = base.add(uneven, base.negative(other))
            share = base.multiply(above, base.invert(base.add(one, base.negative(other))))
            found = self._split(value, grown, share)
            if found is not None:
                return found
        return None

    def _split(self, value: Value, grown: list[Value], share: Value) -> tuple[Monomial, Monomial] | None:
        """Return the two monomials of a sum of which the first is a share, or None where there are none."""
        base = self.base
        rest = base.add(base.of_number(Fraction(1)), base.negative(share))
        first = [(power, base.multiply(two, share)) for power, two in self._twos.items()]
        second = [(power, base.multiply(two, rest)) for power, two in self._twos.items()]
        powers = {base.key(base.add(a, b)): (p, q) for p, a in first for q, b in second}
        found = [powers.get(base.key(g)) for g in grown]
        known = [(name, pair) for name, pair in zip(self.names, found, strict=True) if pair is not None]
        if len(known) < len(found):
            return None
        one = self._numbered(base.multiply(value, share), [(n, p) for n, (p, _) in known if p])
        other = self._numbered(base.multiply(value, rest), [(n, q) for n, (_, q) in known if q])
        return None if one is None or other is None else (one, other)
