"""A polynomial in many symbols split into factors, quickly enough to be done for every coefficient.

Symbols x and y stand in the same irreducible factor of f just when f f_xy - f_x f_y is not zero: divided by
f^2 that is the mixed derivative of log f, in which a factor that holds both leaves a double pole, all others
nothing. One random point modulo a prime decides it for every pair. Where every symbol occurs to the first
power only, two factors cannot share a symbol, so the classes of symbols are the factors, and each can be read
off from the products of f that agree with one of them outside its class (compare A. Shpilka and I. Volkovich,
"On the relation between polynomial identity testing and finding variable disjoint factors", ICALP 2010; from
memory).
"""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray
from sympy.polys.domains import QQ
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.transfer.common import remove_common_factor
from symcirc.transfer.residues import Element, Residues, residues_for

#: Beyond these a factor with every symbol to a higher power is left as it is: to factor it may take long.
MOST_TERMS, MOST_SYMBOLS, HIGHEST_DEGREE = 24, 6, 12


@dataclass(frozen=True)
class Factors:
    """``number`` times the monomial times each polynomial to its exponent.

    The polynomials have no monomial factor and, where they can be made so, whole coefficients without a
    common divisor, of which the first is positive.
    """

    number: Element
    monomial: tuple[int, ...]
    polynomials: tuple[tuple[PolyElement, int], ...]


def factorize(polynomial: PolyElement) -> Factors:
    """Return the factors of a polynomial that is not zero: irreducible, within the bounds of this module.

    >>> ring = PolyRing(["R1", "R2", "C1", "C2"], QQ)
    >>> r1, r2, c1, c2 = ring.gens
    >>> factorize(-2*r1*(r1*c1 + r1*c2 + r2*c1 + r2*c2)).polynomials
    ((R1 + R2, 1), (C1 + C2, 1))
    """
    monomial = tuple(min(exponents) for exponents in zip(*polynomial, strict=True))
    rest = shifted(polynomial, monomial)
    number, rest = primitive(rest)
    if rest == polynomial.ring.one:
        return Factors(number, monomial, ())
    found: list[tuple[PolyElement, int]] = []
    for factor in _split(rest):
        found.extend(_powers(factor))
    number *= _missing(rest, found)
    return Factors(number, monomial, tuple(found))


def shifted(polynomial: PolyElement, monomial: tuple[int, ...]) -> PolyElement:
    """Return a polynomial divided by a monomial that divides every product of it."""
    if not any(monomial):
        return polynomial
    return polynomial.ring.from_dict(
        {tuple(e - d for e, d in zip(m, monomial, strict=True)): c for m, c in polynomial.items()}
    )


def primitive(polynomial: PolyElement) -> tuple[Element, PolyElement]:
    """Return (number, polynomial / number), the latter with whole coprime coefficients, the first positive.

    Over a field with roots that is so where all coefficients are rational multiples of the first; else the
    coefficients are left as they are. The polynomial is a new one, as sympy's division leaves a hash behind
    that is not that of its result, and factors are looked up by their hash.

    >>> ring = PolyRing(["R1", "R2"], QQ)
    >>> primitive(ring.gens[0] / 2 - ring.gens[1] / 3)[1]
    3*R1 - 2*R2
    """
    ring = polynomial.ring
    first = polynomial.LC
    if ring.domain == QQ:
        number = polynomial.content()
        number = -number if first < 0 else number
        return number, polynomial.copy() if number == 1 else polynomial.quo_ground(number)
    ratios = [(coefficient / first).to_list() for coefficient in polynomial.values()]
    if any(len(ratio) > 1 for ratio in ratios):
        return ring.domain.one, polynomial.copy()
    number = first * ring.domain(_content(ratio[0] for ratio in ratios))
    return number, polynomial.mul_ground(ring.domain.one / number)


def _content(rationals: Iterable[Element]) -> Element:
    content = QQ.zero
    for rational in rationals:
        content = QQ.gcd(content, rational)
    return content


def _missing(polynomial: PolyElement, found: list[tuple[PolyElement, int]]) -> Element:
    """Return the number that is missing in the factors, from the leading coefficients."""
    number = polynomial.LC
    for factor, exponent in found:
        number /= factor.LC**exponent
    return number


# classes of symbols -----------------------------------------------------------------------------------------


def _split(polynomial: PolyElement) -> list[PolyElement]:
    """Return the finest factors without a symbol in common; proved by multiplying them out."""
    if len(polynomial) < 4:
        return [polynomial]  # each factor has two products at least
    present = [k for k in range(polynomial.ring.ngens) if any(m[k] for m in polynomial)]
    classes = _classes(polynomial, present, residues_for(polynomial.ring))
    if len(classes) == 1:
        return [polynomial]
    factors = [_read_off(polynomial, members) for members in classes]
    if math.prod(len(factor) for factor in factors) != len(polynomial):
        return [polynomial]  # an unlucky point
    multiplied = polynomial.ring.one
    for factor in factors:
        multiplied *= factor
    return factors if multiplied.monic() == polynomial.monic() else [polynomial]


def _classes(polynomial: PolyElement, present: list[int], point: Residues) -> list[list[int]]:
    moments = _moments(polynomial, present, point)
    if moments is None:
        return [present]
    whole, single, mixed = moments
    classes = [[k] for k in range(len(present))]
    for x in range(len(present)):

        def hangs_with(y: int, x: int = x) -> bool:
            return x == y or (whole * mixed[x][y] - single[x] * single[y]) % point.prime != 0

        joined = [c for c in classes if any(map(hangs_with, c))]
        if len(joined) > 1:
            classes = [c for c in classes if c not in joined] + [sorted(y for c in joined for y in c)]
    return [[present[k] for k in members] for members in sorted(classes)]


def _moments(
    polynomial: PolyElement, present: list[int], point: Residues
) -> tuple[int, list[int], list[list[int]]] | None:
    """Return f, x f_x for every symbol x, and x y f_xy for every pair, at the point.

    They are sums over the products of f of its value times the exponents: matrix products, in which the
    values are cut in halves of 31 bits, which floating point carries exactly. None where that would overflow.
    """
    exponents = np.array([[m[k] for k in present] for m, _ in polynomial.terms()], dtype=np.float64)
    if len(exponents) * exponents.max() ** 2 > 2**22:
        return None
    values = point.terms(polynomial)
    low = np.array([v & (2**31 - 1) for v in values], dtype=np.float64)
    high = np.array([v >> 31 for v in values], dtype=np.float64)

    def whole_numbers(of_low: NDArray[np.float64], of_high: NDArray[np.float64]) -> list[int]:
        return [int(a) + (int(b) << 31) for a, b in zip(of_low.tolist(), of_high.tolist(), strict=True)]

    single = whole_numbers(low @ exponents, high @ exponents)
    mixed = [
        whole_numbers(*row)
        for row in zip(
            exponents.T @ (low[:, None] * exponents), exponents.T @ (high[:, None] * exponents), strict=True
        )
    ]
    return sum(values), single, mixed


def _read_off(polynomial: PolyElement, members: list[int]) -> PolyElement:
    """Return the factor in some symbols, from the products that agree with the first one in all others."""
    ring = polynomial.ring
    inside = set(members)

    def outer(monomial: tuple[int, ...]) -> tuple[int, ...]:
        return tuple(0 if k in inside else e for k, e in enumerate(monomial))

    first = outer(polynomial.LM)
    products = {
        tuple(e - f for e, f in zip(m, first, strict=True)): c
        for m, c in polynomial.items()
        if outer(m) == first
    }
    return primitive(ring.from_dict(products))[1]


# symbols to a higher power ----------------------------------------------------------------------------------


@lru_cache(maxsize=2048)
def _powers(polynomial: PolyElement) -> tuple[tuple[PolyElement, int], ...]:
    """Factor a polynomial whose symbols all hang together.

    With a symbol x that is never squared it is a x + b: the common factor of a and b comes out, and what is
    left is irreducible. Without such a symbol sympy factors it where it is small.
    """
    highest = [max(column) for column in zip(*polynomial, strict=True)]
    if max(highest) <= 1 or polynomial.ring.domain != QQ:
        return ((polynomial, 1),)
    if 1 not in highest:
        return _factored_by_sympy(polynomial, [k for k, degree in enumerate(highest) if degree])
    first, second = _linear(polynomial, highest.index(1))
    common = primitive(remove_common_factor(first, second)[2])[1]
    if common.is_ground:
        return ((polynomial, 1),)
    factors = factorize(common).polynomials
    return ((primitive(polynomial.exquo(common))[1], 1), *factors)


def _linear(polynomial: PolyElement, k: int) -> tuple[PolyElement, PolyElement]:
    """Return (a, b) of a polynomial a x + b in its generator x at place k."""
    ring = polynomial.ring
    first, second = ring.zero, ring.zero
    for monomial, coefficient in polynomial.items():
        if monomial[k]:
            first[(*monomial[:k], 0, *monomial[k + 1 :])] = coefficient
        else:
            second[monomial] = coefficient
    return first, second


def _factored_by_sympy(polynomial: PolyElement, present: list[int]) -> tuple[tuple[PolyElement, int], ...]:
    ring = polynomial.ring
    small = len(polynomial) <= MOST_TERMS and len(present) <= MOST_SYMBOLS
    if not small or max(map(sum, polynomial)) > HIGHEST_DEGREE:
        return ((polynomial, 1),)
    inner = PolyRing([ring.symbols[k] for k in present], QQ, ring.order)
    _, factors = inner.from_dict(
        {tuple(m[k] for k in present): c for m, c in polynomial.items()}
    ).factor_list()

    def back(factor: PolyElement) -> PolyElement:
        full = ring.zero
        for monomial, coefficient in factor.items():
            exponents = [0] * ring.ngens
            for k, exponent in zip(present, monomial, strict=True):
                exponents[k] = exponent
            full[tuple(exponents)] = coefficient
        return primitive(full)[1]

    return tuple((back(factor), exponent) for factor, exponent in factors)
