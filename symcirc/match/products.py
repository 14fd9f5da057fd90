"""Polynomials of the ring written as an engineer writes them: a number, powers of symbols, sums in brackets."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import gcd, lcm
from typing import Any

import sympy
from sympy.polys.rings import PolyElement

from symcirc.match.decimals import decimal, exact, reals
from symcirc.match.quantities import Monomial, Quantities

#: Polynomials with more terms are not factored.
MOST_FACTORED_TERMS = 120


@dataclass(frozen=True)
class Sum:
    """A sum of at least two terms without common factor, fractions cleared; most of its terms are positive."""

    terms: tuple[tuple[Monomial, Any], ...]


@dataclass(frozen=True)
class Product:
    """``number`` times the powers of symbols in ``monomial`` (negative ones too) times powers of sums."""

    number: Any
    monomial: Monomial
    sums: Mapping[Sum, int]

    def __mul__(self, other: Product) -> Product:
        return self._with(other, 1)

    def __truediv__(self, other: Product) -> Product:
        return self._with(other, -1)

    def _with(self, other: Product, sign: int) -> Product:
        sums = dict(self.sums)
        for key, exponent in other.sums.items():
            sums[key] = sums.get(key, 0) + sign * exponent
        monomial = tuple(a + sign * b for a, b in zip(self.monomial, other.monomial, strict=True))
        number = self.number * other.number if sign > 0 else self.number / other.number
        return Product(number, monomial, {key: e for key, e in sums.items() if e})


def one(quantities: Quantities) -> Product:
    """Return the product of nothing."""
    return Product(reals.mpf(1), (0,) * quantities.ring.ngens, {})


def factored(polynomial: PolyElement, quantities: Quantities) -> Product:
    """Return a polynomial, not zero, as a product of its factors.

    >>> from symcirc.match.quantities import plain_quantities
    >>> quantities = plain_quantities("", "a b")
    >>> a, b = quantities.ring.gens
    >>> expression(factored(2 * a**3 - 2 * a * b**2, quantities), quantities)
    2*a*(a - b)*(a + b)
    """
    if len(polynomial) > MOST_FACTORED_TERMS:
        return whole(polynomial, quantities)
    number, found = polynomial.factor_list()
    result = whole(polynomial.ring(number), quantities)
    for factor, exponent in found:
        for _ in range(exponent):
            result *= whole(factor, quantities)
    return result


def whole(polynomial: PolyElement, quantities: Quantities) -> Product:
    """Return a polynomial, not zero, as a number times a monomial times one sum."""
    return of_terms(quantities.group(polynomial))


def of_terms(terms: Mapping[Monomial, Any]) -> Product:
    """Return terms, at least one, as a number times a monomial times one sum."""
    common = tuple(map(min, zip(*terms, strict=True)))
    lowered = {tuple(a - b for a, b in zip(m, common, strict=True)): c for m, c in terms.items()}
    if len(lowered) == 1:
        return Product(next(iter(lowered.values())), common, {})
    number, relative = _without_content(lowered)
    return Product(number, common, {Sum(tuple(sorted(relative.items(), reverse=True))): 1})


def _without_content(terms: Mapping[Monomial, Any]) -> tuple[Any, dict[Monomial, Any]]:
    """Return a common number and the terms divided by it.

    Where all ratios are fractions the terms become integers without common factor, else as many of them as can
    be become numbers without roots and with pi above the line.
    """
    first = terms[max(terms)]
    ratios = {monomial: exact(value / first) for monomial, value in terms.items()}
    lead = min(dict.fromkeys(ratios.values()), key=lambda r: sum(_burden(v / r) for v in ratios.values()))
    shares = [(ratio / lead).as_coeff_Mul(rational=True)[0] for ratio in ratios.values()]
    fractions = [Fraction(int(share.p), int(share.q)) for share in shares]
    scale = Fraction(lcm(*(f.denominator for f in fractions)), gcd(*(f.numerator for f in fractions)))
    if any(ratio.has(sympy.Float) for ratio in ratios.values()):
        scale = Fraction(1)
    negative = sum(bool((ratio / lead).is_negative) for ratio in ratios.values())
    if 2 * negative > len(ratios):
        scale = -scale
    number = first * decimal(lead) * scale.denominator / scale.numerator
    return number, {monomial: value / number for monomial, value in terms.items()}


def _burden(number: sympy.Expr) -> int:
    """Return how much a number burdens a formula."""
    if number.has(sympy.Float):
        return 0 if number == 1 else 20
    powers_of = number.as_powers_dict()
    of_pi = powers_of.get(sympy.pi, 0)
    return int(of_pi if of_pi >= 0 else -3 * of_pi) + sum(not e.is_Integer for e in powers_of.values())


def expression(product: Product, quantities: Quantities) -> sympy.Expr:
    """Return a product as an expression, its numbers exact where they are short, its sign in a sum if it can be."""
    product = without_sign(product)
    sums = [sum_expression(s, quantities) ** e for s, e in product.sums.items()]
    return sympy.Mul(exact(product.number), powers(product.monomial, quantities), *sums)


def without_sign(product: Product) -> Product:
    """Return a product with a negative number made positive at the cost of a sum that has terms of both signs."""
    if product.number > 0:
        return product
    for key, exponent in product.sums.items():
        if exponent % 2 and any(value < 0 for _, value in key.terms):
            turned = Sum(tuple((monomial, -value) for monomial, value in key.terms))
            sums = {turned if k is key else k: e for k, e in product.sums.items()}
            return Product(-product.number, product.monomial, sums)
    return product


def powers(monomial: Sequence[int], quantities: Quantities) -> sympy.Expr:
    """Return a product of powers of the quantities."""
    return sympy.Mul(*(quantities.meanings[k] ** e for k, e in enumerate(monomial) if e))


def sum_expression(terms: Sum, quantities: Quantities) -> sympy.Expr:
    """Return a sum as an expression; what its positive or its negative terms have in common stands before a bracket.

    >>> from symcirc.match.quantities import plain_quantities
    >>> quantities = plain_quantities("", "C1 C2 g")
    >>> C1, C2, g = quantities.ring.gens
    >>> expression(whole(C1 - 4 * C2 - 4 * C2 * g, quantities), quantities)
    C1 - 4*C2*(g + 1)
    """
    positive = {monomial: value for monomial, value in terms.terms if value > 0}
    negative = {monomial: -value for monomial, value in terms.terms if value < 0}
    parts = [(1, positive), (-1, negative)]
    return sympy.Add(*(sign * _common_first(part, quantities) for sign, part in parts if part))


def _common_first(terms: Mapping[Monomial, Any], quantities: Quantities) -> sympy.Expr:
    shared = of_terms(terms)
    if any(shared.monomial) and len(terms) > 1:
        ((key, _),) = shared.sums.items()
        inner = sympy.Add(*(exact(v) * powers(m, quantities) for m, v in key.terms))
        return sympy.Mul(exact(shared.number), powers(shared.monomial, quantities), inner)
    return sympy.Add(*(exact(value) * powers(monomial, quantities) for monomial, value in terms.items()))


def root_expression(product: Product, degree: int, quantities: Quantities) -> sympy.Expr:
    """Return the real root of a product that is positive, whole powers of symbols taken out of it."""
    product = without_sign(product)
    sign = reals.sign(product.number)
    outside = [e // degree if e % degree == 0 else 0 for e in product.monomial]
    inside = tuple(e - degree * o for e, o in zip(product.monomial, outside, strict=True))
    number = exact(reals.root(abs(product.number), degree))
    below_root = expression(Product(sign, inside, product.sums), quantities)
    return number * powers(outside, quantities) * below_root ** sympy.Rational(1, degree)
