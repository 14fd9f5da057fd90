"""The ring a match is solved in: what its generators stand for, and which sign a polynomial in them has.

The generators are the unknown parts, the chosen quantities (symbols, all positive) and constants: exact numbers
that are no fractions, kept as symbols through the algebra, as arithmetic in their field would be slow, and put in
where it counts. A polynomial is zero where its value is below 1e-50 of the sum of the sizes of its terms, the
constants taken to 80 digits.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import sympy
from sympy.polys.domains import ZZ
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.match.decimals import NEGLIGIBLE, reals

Monomial = tuple[int, ...]

#: The relative size below which an equation counts as met at a point that was found by rounded arithmetic.
_MET = reals.mpf(10) ** -30


@dataclass(frozen=True)
class Quantities:
    """What the generators of ``ring`` (over the integers) stand for; quantities go by their position in it.

    ``unknowns`` are to be solved for; those in ``signless`` may be of any sign. ``meanings`` are the symbols or
    expressions that the generators stand for. ``decimals`` are the values of the constants, which are positive
    numbers, ``squares`` the squares of those for which it is an integer, ``numbers`` the known values of chosen
    quantities.
    """

    ring: PolyRing
    unknowns: tuple[int, ...]
    signless: frozenset[int]
    meanings: Mapping[int, sympy.Expr]
    decimals: Mapping[int, Any]
    squares: Mapping[int, int]
    numbers: Mapping[int, Any]

    def name(self, position: int) -> str:
        """Return the name of a generator."""
        return str(self.ring.symbols[position])

    def group(self, polynomial: PolyElement) -> dict[Monomial, Any]:
        """Return the polynomial as monomials without constants, each with its decimal coefficient.

        What is zero by the constants' numbers is left out.
        """
        if not self.decimals:
            return {monomial: reals.mpf(int(c)) for monomial, c in polynomial.items()}
        sums: dict[Monomial, list[Any]] = defaultdict(list)
        for monomial, coefficient in polynomial.items():
            value = reals.mpf(int(coefficient))
            for position, decimal in self.decimals.items():
                if monomial[position]:
                    value *= decimal ** monomial[position]
            sums[self._without_constants(monomial)].append(value)
        totals = {monomial: total(values) for monomial, values in sums.items()}
        return {monomial: value for monomial, value in totals.items() if value}

    def _without_constants(self, monomial: Monomial) -> Monomial:
        return tuple(0 if k in self.decimals else e for k, e in enumerate(monomial))

    def sign(self, polynomial: PolyElement) -> int | None:
        """Return the sign that the polynomial has for all positive quantities: -1, 0 or 1; None where it is open.

        Decided by equal signs of all terms, or for a quadratic by the sign of its discriminant.
        """
        groups = self.group(polynomial)
        if not groups:
            return 0
        return self._plain_sign(groups) or self._quadratic_sign(polynomial)

    def _plain_sign(self, groups: Mapping[Monomial, Any]) -> int | None:
        signs = {1 if value > 0 else -1 for value in groups.values()}
        odd = any(monomial[k] % 2 for monomial in groups for k in self.signless)
        return signs.pop() if len(signs) == 1 and not odd else None

    def _quadratic_sign(self, polynomial: PolyElement) -> int | None:
        for position in range(self.ring.ngens):
            if position in self.decimals or polynomial.degree(position) != 2:
                continue
            c, b, a = by_powers(polynomial, position)
            outer, open_below = self.group(a), self.group(4 * a * c - b**2)
            if open_below and self._plain_sign(open_below) == 1:
                return self._plain_sign(outer)
        return None

    def reduced(self, polynomial: PolyElement) -> PolyElement:
        """Return the polynomial with the squares of roots multiplied out and without what is zero."""
        if not self.decimals:
            return polynomial
        if any(monomial[k] > 1 for monomial in polynomial for k in self.squares):
            reduced = self.ring.zero
            for monomial, coefficient in polynomial.items():
                exponents = list(monomial)
                for k, square in self.squares.items():
                    coefficient *= square ** (exponents[k] // 2)
                    exponents[k] %= 2
                key = tuple(exponents)
                reduced[key] = reduced.get(key, 0) + coefficient
            reduced.strip_zero()
            polynomial = reduced
        kept = self.group(polynomial)
        if all(self._without_constants(monomial) in kept for monomial in polynomial):
            return polynomial
        left = {m: c for m, c in polynomial.items() if self._without_constants(m) in kept}
        return self.ring.from_dict(left)

    def cleaned(self, polynomial: PolyElement) -> PolyElement:
        """Return what is left of an equation ``polynomial = 0`` without the factors that are never zero in sight.

        These are numbers and the powers of positive quantities.
        """
        polynomial = self.reduced(polynomial)
        if not polynomial:
            return polynomial
        common = common_monomial(polynomial)
        common = tuple(0 if k in self.signless else e for k, e in enumerate(common))
        polynomial = divided_by_monomial(polynomial, common).primitive()[1]
        return -polynomial if polynomial.LC < 0 else polynomial


def total(values: Sequence[Any]) -> Any:
    """Return a sum, exactly 0 where it is negligible beside the sizes of its terms.

    >>> total([reals.mpf(1), reals.mpf(-1), reals.mpf(10) ** -60])
    mpf('0.0')
    """
    result = reals.fsum(values)
    return result if abs(result) > NEGLIGIBLE * reals.fsum(values, absolute=True) else reals.mpf(0)


def value_at(polynomial: PolyElement, values: Sequence[Any]) -> Any:
    """Return the polynomial's value in decimals; 0 where it is negligible. ``values`` are by position."""
    terms = []
    for monomial, coefficient in polynomial.items():
        term = reals.mpf(int(coefficient))
        for value, exponent in zip(values, monomial, strict=True):
            if exponent:
                term *= value**exponent
        terms.append(term)
    return total(terms)


def known_value(polynomial: PolyElement, values: Sequence[Any]) -> Any:
    """Return the value of a polynomial; None where it holds a quantity without a value."""
    if any(e and values[k] is None for monomial in polynomial for k, e in enumerate(monomial)):
        return None
    return value_at(polynomial, [reals.mpf(0) if v is None else v for v in values])


def is_met(equation: PolyElement, values: Sequence[Any], tolerance: Any = _MET) -> bool:
    """Tell whether an equation holds at a point, real or complex, in proportion to the sizes of its terms."""
    sizes = equation.ring.from_dict({m: abs(c) for m, c in equation.items()})
    return bool(abs(value_at(equation, values)) <= tolerance * value_at(sizes, [abs(v) for v in values]))


def common_monomial(polynomial: PolyElement) -> Monomial:
    """Return the largest monomial that divides every term."""
    return tuple(map(min, zip(*polynomial, strict=True)))


def divided_by_monomial(polynomial: PolyElement, monomial: Monomial) -> PolyElement:
    """Return the exact quotient by a monomial that divides every term."""
    if not any(monomial):
        return polynomial
    lowered = {tuple(a - b for a, b in zip(m, monomial, strict=True)): c for m, c in polynomial.items()}
    return polynomial.ring.from_dict(lowered)


def by_powers(polynomial: PolyElement, position: int) -> list[PolyElement]:
    """Return the coefficients of a polynomial in one of its generators, ascending powers.

    >>> from sympy import ZZ, ring
    >>> _, x, y = ring("x,y", ZZ)
    >>> by_powers(3 * x**2 * y + x**2 - y, 0)
    [-y, 0, 3*y + 1]
    """
    ring = polynomial.ring
    parts = [ring.zero for _ in range(max(polynomial.degree(position), 0) + 1)]
    for monomial, coefficient in polynomial.items():
        without = (*monomial[:position], 0, *monomial[position + 1 :])
        parts[monomial[position]][without] = coefficient
    return parts


def holds(polynomial: PolyElement, position: int) -> bool:
    """Tell whether a generator occurs in a polynomial."""
    return any(monomial[position] for monomial in polynomial)


def holds_any(polynomial: PolyElement, positions: Iterable[int]) -> bool:
    """Tell whether one of these generators occurs in a polynomial."""
    return any(holds(polynomial, k) for k in positions)


def plain_quantities(unknowns: str, chosen: str = "") -> Quantities:
    """Return quantities without constants, all positive, by their names.

    >>> plain_quantities("R1 R2", "C1").ring.gens
    (R1, R2, C1)
    """
    count = len(unknowns.split())
    symbols = [sympy.Symbol(name, positive=True) for name in (unknowns + " " + chosen).split()]
    meanings = {k: sympy.Symbol(str(symbol)) for k, symbol in enumerate(symbols)}
    return Quantities(PolyRing(symbols, ZZ, lex), tuple(range(count)), frozenset(), meanings, {}, {}, {})
