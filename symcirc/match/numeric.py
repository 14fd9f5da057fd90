"""The solutions of a match whose numbers are all known, where the algebra in symbols has none or grows too long."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal, localcontext
from typing import Any

import sympy
from sympy.polys.rings import PolyElement

from symcirc.match.common_roots import common_roots
from symcirc.match.counting import PRIME, modular_point
from symcirc.match.decimals import reals
from symcirc.match.quantities import Quantities, is_met
from symcirc.match.quotient import DIGITS, WIDE, Key, NotFound, Number, Polynomial, algebra, monomial_key
from symcirc.match.work import Work


@dataclass(frozen=True)
class NumericSolutions:
    """The real positive solutions, by position in the ring, and the number of all complex ones.

    ``distinct`` counts multiple ones once, ``of_complex`` as often as they are multiple.
    """

    values: tuple[tuple[Any, ...], ...]
    of_complex: int
    distinct: int


def numeric_solutions(
    equations: Sequence[PolyElement], quantities: Quantities, known: Mapping[str, sympy.Expr], work: Work
) -> NumericSolutions:
    """Return the real positive solutions of as many equations as unknowns, multiple ones once.

    Args:
        equations: polynomials.
        quantities: the ring.
        known: exact numbers, at least of every symbol that is no unknown.
        work: counts the products.

    Raises:
        NotFound: there are infinitely or too many complex solutions, or digits were lost.
    """
    numbers = _numbers(quantities, known)
    found = algebra([_polynomial(e, numbers, quantities) for e in equations], work.count)
    others = [reals.mpf(str(value)) for _, value in numbers.values()]
    solutions = []
    roots = common_roots(found, not quantities.signless)
    for root in roots.real:
        values = (*root, *others)
        if not all(is_met(equation, values) for equation in equations):
            raise NotFound
        if all(root[k] > 0 or k in quantities.signless for k in quantities.unknowns):
            solutions.append(values)
    return NumericSolutions(tuple(solutions), found.dimension, roots.distinct)


def _numbers(quantities: Quantities, known: Mapping[str, sympy.Expr]) -> dict[int, Number]:
    """Return the number of every generator that is no unknown, with an image modulo the prime."""
    images = modular_point(quantities)
    numbers = {}
    for k in range(len(quantities.unknowns), quantities.ring.ngens):
        meaning = quantities.meanings[k]
        exact = meaning.subs({s: known[str(s)] for s in meaning.free_symbols})
        numbers[k] = (images[k], Decimal(str(exact.evalf(DIGITS + 10))))
    return numbers


def _polynomial(equation: PolyElement, numbers: dict[int, Number], quantities: Quantities) -> Polynomial:
    """Return an equation with the numbers put in."""
    count = len(quantities.unknowns)
    sums: dict[Key, tuple[int, Decimal]] = {}
    with localcontext(WIDE):
        for monomial, coefficient in equation.items():
            image, value = int(coefficient), Decimal(int(coefficient))
            for k, (factor, number) in numbers.items():
                if monomial[k]:
                    image = image * pow(factor, monomial[k], PRIME) % PRIME
                    value *= number ** monomial[k]
            key = monomial_key(monomial[:count])
            before = sums.get(key, (0, Decimal(0)))
            sums[key] = ((before[0] + image) % PRIME, before[1] + value)
    return {key: number for key, number in sums.items() if number[0]}
