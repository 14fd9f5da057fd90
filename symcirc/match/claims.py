"""Inequalities between polynomials: what follows from what, and what is left to be said.

A claim is that a product of polynomials is positive. Claims are taken apart into factors, those whose sign is
certain are dropped, and so is what follows from another claim.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from sympy.polys.rings import PolyElement

from symcirc.match.decimals import reals
from symcirc.match.quantities import Monomial, Quantities, known_value, total

#: Polynomials with more terms are not factored.
MOST_FACTORED_TERMS = 120


@dataclass(frozen=True)
class Claim:
    """The product of ``factors`` is positive, or, where ``strict`` is false, not negative."""

    factors: tuple[PolyElement, ...]
    strict: bool = True

    def is_missed(self, values: Sequence[Any]) -> bool:
        """Tell whether the claim is wrong at a point, of which some values may be None: then it may be right."""
        found = [known_value(factor, values) for factor in self.factors]
        if None in found:
            return False
        product = reals.fprod(found)
        return bool(product < 0 or (product == 0 and self.strict))


def simplified(claims: Iterable[Claim], quantities: Quantities) -> list[Claim] | None:
    """Return the claims without what is certain or follows from the others; None where one is never met.

    >>> from symcirc.match.quantities import plain_quantities
    >>> quantities = plain_quantities("", "a b c")
    >>> a, b, c = quantities.ring.gens
    >>> simplified([Claim((a * c - b * c,)), Claim((2 * a - b, a + b))], quantities)
    [Claim(factors=(a - b,), strict=True)]
    """
    waiting = [_reduced(claim, quantities) for claim in claims]
    while True:
        known = [claim for claim in waiting if len(claim.factors) == 1]
        reduced = [c if len(c.factors) == 1 else _under(c, known, quantities) for c in waiting]
        if reduced == waiting:
            break
        waiting = reduced
    left = list(dict.fromkeys(claim for claim in waiting if claim.factors))
    if any(_is_never_met(claim, left, quantities) for claim in left):
        return None
    return _without_consequences(left, quantities)


def _reduced(claim: Claim, quantities: Quantities) -> Claim:
    """Return the claim with the factors that are left when squares and certain signs are taken out."""
    sign = 1
    odd: list[PolyElement] = []
    for polynomial in claim.factors:
        for factor, exponent in factors_of(quantities.reduced(polynomial)):
            known = quantities.sign(factor)
            if known is not None:
                sign *= known**exponent
            elif exponent % 2 and factor in odd:
                odd.remove(factor)
            elif exponent % 2:
                odd.append(factor)
    return _signed(sign, odd, claim)


def factors_of(polynomial: PolyElement) -> list[tuple[PolyElement, int]]:
    """Return the factors of a polynomial with their exponents, the polynomial itself where it is long."""
    if not polynomial or len(polynomial) > MOST_FACTORED_TERMS:
        return [(polynomial, 1)]
    number, found = polynomial.factor_list()
    return [(polynomial.ring(number), 1), *found]


def _signed(sign: int, factors: Sequence[PolyElement], claim: Claim) -> Claim:
    """Return the claim that a sign times factors is positive; about the sign alone where that is not so."""
    if sign > 0:
        return Claim(tuple(factors), claim.strict)
    if sign == 0 or not factors:
        return Claim((claim.factors[0].ring(sign),), claim.strict)
    return Claim((-factors[0], *factors[1:]), claim.strict)


def _under(claim: Claim, known: Sequence[Claim], quantities: Quantities) -> Claim:
    """Return a claim without the factors whose sign follows from known ones."""
    sign, left = 1, []
    for factor in claim.factors:
        found = implied_sign(factor, known, quantities)
        sign *= found or 1
        left += [] if found else [factor]
    return _signed(sign, left, claim) if len(left) < len(claim.factors) else claim


def implied_sign(polynomial: PolyElement, known: Iterable[Claim], quantities: Quantities) -> int | None:
    """Return the sign, 1 or -1, of a polynomial where the known claims, each of one factor, are met; else None."""
    for claim in known:
        if _excess(polynomial, claim, quantities):
            return 1
        if _excess(-polynomial, claim, quantities):
            return -1
    return None


def _excess(polynomial: PolyElement, claim: Claim, quantities: Quantities) -> bool:
    """Tell whether a claim makes a polynomial positive, as it is a positive multiple of it plus positive terms."""
    mine, theirs = quantities.group(polynomial), quantities.group(claim.factors[0])
    for low, value in mine.items():
        for other, divisor in theirs.items():
            if value < 0 and divisor < 0:
                shift = tuple(a - b for a, b in zip(low, other, strict=True))
                rest = _difference(mine, theirs, shift, value / divisor)
                if all(c > 0 for c in rest.values()) and (rest or claim.strict):
                    return True
    return False


def _difference(
    mine: Mapping[Monomial, Any], theirs: Mapping[Monomial, Any], shift: Monomial, factor: Any
) -> dict[Monomial, Any]:
    rest = dict(mine)
    for monomial, value in theirs.items():
        key = tuple(a + b for a, b in zip(monomial, shift, strict=True))
        rest[key] = total([rest.get(key, reals.mpf(0)), -factor * value])
    return {monomial: value for monomial, value in rest.items() if value}


def _is_never_met(claim: Claim, others: Sequence[Claim], quantities: Quantities) -> bool:
    if len(claim.factors) > 1:
        return False
    sign = quantities.sign(claim.factors[0])
    if sign is not None:
        return sign < 0 or (sign == 0 and claim.strict)
    rest = [other for other in others if len(other.factors) == 1 and other != claim]
    return implied_sign(claim.factors[0], rest, quantities) == -1


def _without_consequences(claims: Sequence[Claim], quantities: Quantities) -> list[Claim]:
    left = list(claims)
    for claim in claims:
        rest = [other for other in left if other != claim and len(other.factors) == 1]
        if len(claim.factors) == 1 and implied_sign(claim.factors[0], rest, quantities) == 1:
            left.remove(claim)
    return left
