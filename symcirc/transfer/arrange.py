"""A quotient of two polynomials, grouped the way an engineer writes it.

Several ways of writing the same thing are made, and the one that costs the reader least is taken (of equals
the plainest): factors, each divided by what stands under the line or not; a sum collected by its capacitors
and inductors; a sum collected by the symbol that most of its products share. However it was found, a form is
proved equal to the quotient before it is handed out.
"""

from __future__ import annotations

import itertools
from collections import Counter, defaultdict
from collections.abc import Iterator, Mapping

from sympy.polys.rings import PolyElement, PolyRing

from symcirc.transfer.assemble import (
    Alphabet,
    Exponents,
    Rank,
    alphabet_of,
    assemble,
    is_negative,
    joined,
    rank,
)
from symcirc.transfer.common import remove_common_factor
from symcirc.transfer.cost import cost
from symcirc.transfer.factors import Factors, factorize
from symcirc.transfer.form import ZERO, Form, power
from symcirc.transfer.residues import Element, require_equal

#: Brackets inside brackets go no deeper than this, not counting those of factors.
DEPTH = 3
#: Sums with more products than these are not collected by a shared symbol, and not collected at all.
MOST_COLLECTED, MOST_GROUPED = 20, 20_000
#: All ways to divide a factor are weighed up to so many symbols and products, and besides none and all so
#: many of them tried; beyond, only none and all; in still longer sums, none.
MOST_DIVISORS, MOST_DIVIDED, MOST_TRIED, MOST_DISTRIBUTED = 4, 12, 2, 200

#: A sum of products in which exponents may be negative.
Terms = Mapping[Exponents, Element]
Summands = list[tuple[Rank, Form]]


def form_of(above: PolyElement, below: PolyElement) -> Form:
    """Return the form of ``above / below``, two elements of one ring, the latter not zero.

    Raises FormMismatch where the form that was made is not equal to it: a fault of the program.

    >>> from sympy.polys.domains import QQ
    >>> ring = PolyRing(["R1", "R2", "C1"], QQ)
    >>> r1, r2, c1 = ring.gens
    >>> from symcirc.transfer.text import text
    >>> text(form_of(r1 + r2, r1*r2*c1)), text(form_of(r1*r2, r1 + r2))
    ('(1/R1 + 1/R2)/C1', 'R1*R2/(R1 + R2)')
    """
    form = _arranged(above, below)
    require_equal(form, above, below)
    return form


def _arranged(above: PolyElement, below: PolyElement) -> Form:
    if not above:
        return ZERO
    above, below, _ = remove_common_factor(above, below)
    letters = alphabet_of(above.ring)
    under = _oriented(letters, factorize(below), _common_sign(above))
    if not under.polynomials:
        return _divided(letters, above, under)
    brackets = [joined(_split(letters, polynomial, DEPTH)) for polynomial, _ in under.polynomials]
    names = [f"_{k}" for k in range(len(brackets))]
    ring = PolyRing([*map(str, above.ring.symbols), *names], above.ring.domain, above.ring.order)
    letters = alphabet_of(ring, brackets)
    lifted = _lifted(above, ring)
    candidates = [_divided(letters, lifted, under)]
    if len(above) <= MOST_COLLECTED:
        candidates.append(_divided(letters, _in_brackets(lifted, under), under))
    return min(candidates, key=cost)


def _divided(letters: Alphabet, above: PolyElement, under: Factors) -> Form:
    """Return the form of a polynomial over a monomial in the alphabet: its brackets are the factors below."""
    exponents = (*under.monomial, *(exponent for _, exponent in under.polynomials))
    terms = {m: c / under.number for m, c in _over(above, exponents).items()}
    return joined(_summands(letters, terms, DEPTH))


def _lifted(polynomial: PolyElement, ring: PolyRing) -> PolyElement:
    """Return a polynomial in a ring with more generators at the end."""
    more = (0,) * (ring.ngens - polynomial.ring.ngens)
    return ring.from_dict({(*m, *more): c for m, c in polynomial.items()})


def _in_brackets(polynomial: PolyElement, under: Factors) -> PolyElement:
    """Write a polynomial in powers of the factors below, so that they cancel where they can.

    R1 + R2 + R3 over R1 (R2 + R3) is 1/(R2 + R3) + 1/R1 with the bracket as a symbol of its own.
    """
    ring = polynomial.ring
    for k, (factor, _) in enumerate(reversed(under.polynomials), start=1):
        bracket, divisor = ring.gens[-k], _lifted(factor, ring)
        result, times = ring.zero, ring.one
        while polynomial:
            polynomial, rest = polynomial.div(divisor)
            result, times = result + rest * times, times * bracket
        polynomial = result
    return polynomial


# signs ------------------------------------------------------------------------------------------------------


def _oriented(letters: Alphabet, factors: Factors, outer: int = 1) -> Factors:
    """Let every factor begin with a positive product, then take a minus in front into a factor that can.

    ``outer`` is the sign of what else stands in the product, 0 where it is not known.
    """
    number = factors.number
    polynomials = []
    domain = letters.ring.domain
    for polynomial, exponent in factors.polynomials:
        first = min(polynomial, key=lambda m: rank(letters, m))
        if is_negative(domain, polynomial[first]):
            polynomial, number = -polynomial, number * (-1) ** exponent
        polynomials.append((polynomial, exponent))
    if outer and is_negative(domain, number) == (outer > 0):
        for k, (polynomial, exponent) in enumerate(polynomials):
            if exponent % 2 and _common_sign(polynomial) == 0:
                polynomials[k] = (-polynomial, exponent)
                return Factors(-number, factors.monomial, tuple(polynomials))
    return Factors(number, factors.monomial, tuple(polynomials))


def _common_sign(polynomial: PolyElement) -> int:
    """Return +1 or -1 where all coefficients have that sign, else 0."""
    signs = {is_negative(polynomial.ring.domain, c) for c in polynomial.values()}
    return 0 if len(signs) > 1 else -1 if signs.pop() else 1


# products ---------------------------------------------------------------------------------------------------


def _summands(letters: Alphabet, terms: Terms, depth: int) -> Summands:
    """Return one product where the terms share something or can be factored, else a grouped sum."""
    least = min(rank(letters, m) for m in terms)
    lowest = tuple(map(min, zip(*terms, strict=True)))
    ring = letters.ring
    factors = factorize(ring.from_dict(_over(terms, lowest)))
    irreducible = len(factors.polynomials) == 1 and factors.polynomials[0][1] == 1
    if irreducible and not any(lowest) and factors.number in (ring.domain.one, -ring.domain.one):
        return _split(letters, terms, depth)
    return [(least, _product(letters, _oriented(letters, factors), lowest, depth))]


def _product(letters: Alphabet, factors: Factors, monomial: Exponents, depth: int) -> Form:
    """Return a product of factors and a monomial, each factor divided by what stands below or not."""
    one = letters.ring.domain.one
    written: Summands = []
    for polynomial, exponent in factors.polynomials:
        choices = [
            (power(joined(_split(letters, _over(polynomial, divisor), depth)), exponent), divisor)
            for divisor in (_divisors(polynomial, monomial) if exponent == 1 else [(0,) * len(monomial)])
        ]

        def total(choice: tuple[Form, Exponents], monomial: Exponents = monomial) -> int:
            return cost(assemble(letters, one, _plus(monomial, choice[1]), [choice[0]]))

        form, divisor = min(choices, key=total)
        monomial = _plus(monomial, divisor)
        written.append((min(rank(letters, m) for m in _over(polynomial, divisor)), form))
    written.sort(key=lambda summand: summand[0])
    return assemble(letters, factors.number, monomial, [form for _, form in written])


def _plus(first: Exponents, second: Exponents) -> Exponents:
    return tuple(map(int.__add__, first, second))


def _over(terms: Terms, divisor: Exponents) -> Terms:
    return {tuple(map(int.__sub__, m, divisor)): c for m, c in terms.items()}


def _divisors(polynomial: PolyElement, monomial: Exponents) -> list[Exponents]:
    """Return the monomials to take from below the line into a factor: none, all, and the cheapest few."""
    degrees = [max(column) for column in zip(*polynomial, strict=True)]
    most = [min(max(0, -e), degree) for e, degree in zip(monomial, degrees, strict=True)]
    none, shared = (0,) * len(most), [k for k, e in enumerate(most) if e]
    if not shared or len(polynomial) > MOST_DISTRIBUTED:
        return [none]
    if len(shared) > MOST_DIVISORS or len(polynomial) > MOST_DIVIDED:
        return [none, tuple(most)]
    divisors = [
        tuple(e if k in chosen else 0 for k, e in enumerate(most))
        for size in range(1, len(shared) + 1)
        for chosen in itertools.combinations(shared, size)
    ]

    def symbols_written(divisor: Exponents) -> int:
        inside = sum(sum(map(abs, m)) for m in _over(polynomial, divisor))
        return inside + sum(map(abs, _plus(monomial, divisor)))

    cheapest = sorted(divisors[:-1], key=symbols_written)[:MOST_TRIED]
    return [none, divisors[-1], *cheapest]


# sums -------------------------------------------------------------------------------------------------------


def _split(letters: Alphabet, terms: Terms, depth: int) -> Summands:
    """Return an irreducible sum's terms: plain, or collected in the way that costs least.

    A long sum is collected by capacitors and inductors without a comparison.
    """
    groupings: list[list[Terms]] = []
    if depth and 2 < len(terms) <= MOST_GROUPED:
        groupings.append(_by_reactive_parts(letters, terms))
        if len(terms) <= MOST_COLLECTED:
            groupings.append(_by_shared_symbols(letters, terms))
    candidates = [
        [s for group in groups for s in _summands(letters, group, depth - 1)]
        for groups in groupings
        if 1 < len(groups) < len(terms)
    ]
    if not candidates or len(terms) <= MOST_COLLECTED:
        candidates.insert(0, [(rank(letters, m), assemble(letters, c, m)) for m, c in terms.items()])
    return min(candidates, key=lambda summands: cost(joined(summands))) if candidates[1:] else candidates[0]


def _by_reactive_parts(letters: Alphabet, terms: Terms) -> list[Terms]:
    """Group products that have the same capacitors and inductors."""
    groups: dict[Exponents, dict[Exponents, Element]] = defaultdict(dict)
    for exponents, number in terms.items():
        groups[tuple(exponents[k] for k in letters.reactive)][exponents] = number
    return list(groups.values())


def _by_shared_symbols(letters: Alphabet, terms: Terms) -> list[Terms]:
    """Group products by the symbol or the two symbols whose taking out saves most, then the rest likewise.

    Of equals, two symbols come before one, and capacitors and inductors before the others.
    """
    groups: list[Terms] = []
    rest = dict(terms)
    while rest:
        counts = Counter(shared for exponents in rest for shared in _ones_and_twos(letters, exponents))
        shared = max(counts, key=lambda s: _saving(letters, s, counts[s]), default=())
        if counts[shared] < 2:
            return [*groups, *({m: c} for m, c in rest.items())]
        inside = {m: c for m, c in rest.items() if all(m[k] == e for k, e in shared)}
        groups.append(inside)
        rest = {m: c for m, c in rest.items() if m not in inside}
    return groups


def _ones_and_twos(letters: Alphabet, exponents: Exponents) -> Iterator[tuple[tuple[int, int], ...]]:
    """Yield every symbol of a product and every two, each with its exponent, in the order of writing."""
    present = [(k, exponents[k]) for k in letters.order if exponents[k]]
    yield from ((one,) for one in present)
    yield from itertools.combinations(present, 2)


def _saving(letters: Alphabet, shared: tuple[tuple[int, int], ...], count: int) -> tuple[int, ...]:
    reactive = sum(k in letters.reactive for k, _ in shared)
    return (count - 1) * len(shared), len(shared), reactive, *(-letters.order.index(k) for k, _ in shared)
