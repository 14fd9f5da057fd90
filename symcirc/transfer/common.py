"""The common factor of two polynomials in many symbols, found through its symbols.

A general algorithm for the greatest common divisor carries all symbols at once, and a circuit has dozens. Here
the symbols that the common factor holds are found first: two polynomials have a common factor that holds x just
when their images in x alone, the other symbols at random values, have one (but for unlucky values, which can only
show a factor that is not there, never hide one: the leading coefficients are checked). The factor then lies in
few symbols, and divides every coefficient of both polynomials with respect to all the others.
"""

from __future__ import annotations

from collections import defaultdict

from sympy.polys.domains import ZZ
from sympy.polys.galoistools import gf_degree, gf_from_dict, gf_gcd
from sympy.polys.rings import PolyElement

from symcirc.transfer.residues import Residues, residues_for


def remove_common_factor(
    above: PolyElement, below: PolyElement
) -> tuple[PolyElement, PolyElement, PolyElement]:
    """Return (above / g, below / g, g) with g the greatest common divisor, monomials included.

    ``below`` is not zero; both lie in one ring over a field.
    """
    ring = above.ring
    if not above:
        return ring.zero, ring.one, below
    factor = ring.one
    above, below, monomial = _without_monomial(above, below)
    factor *= monomial
    while True:
        shared = shared_symbols(above, below)
        if not shared:
            return above, below, factor
        common = _common_in(above, below, shared)
        if common.is_ground:  # the image was unlucky: nothing is shared in truth
            return above, below, factor
        above, below, factor = above.exquo(common), below.exquo(common), factor * common


def _without_monomial(above: PolyElement, below: PolyElement) -> tuple[PolyElement, PolyElement, PolyElement]:
    ring = above.ring
    lowest = tuple(min(exponents) for exponents in zip(*above, *below, strict=True))
    if not any(lowest):
        return above, below, ring.one

    def shifted(polynomial: PolyElement) -> PolyElement:
        return ring.from_dict(
            {tuple(e - low for e, low in zip(m, lowest, strict=True)): c for m, c in polynomial.items()}
        )

    return shifted(above), shifted(below), ring.from_dict({lowest: ring.domain.one})


def shared_symbols(above: PolyElement, below: PolyElement) -> list[int]:
    """Return the positions of the generators that a common factor of both can hold."""
    ring = above.ring
    present = [k for k in range(ring.ngens) if above.degree(k) > 0 and below.degree(k) > 0]
    if not present:
        return []
    point = residues_for(ring)
    terms = [
        [(monomial, value) for (monomial, _), value in zip(p.terms(), point.terms(p), strict=True)]
        for p in (above, below)
    ]
    return [k for k in present if _image_shares(terms, k, point)]


def _image_shares(terms: list[list[tuple[tuple[int, ...], int]]], k: int, point: Residues) -> bool:
    prime = point.prime
    inverse = pow(point.values[k], -1, prime)
    images = []
    for polynomial in terms:
        image: dict[int, int] = defaultdict(int)
        for monomial, residue in polynomial:
            exponent = monomial[k]
            image[exponent] = (image[exponent] + residue * pow(inverse, exponent, prime)) % prime
        images.append(gf_from_dict(dict(image), prime, ZZ))
    return bool(gf_degree(gf_gcd(images[0], images[1], prime, ZZ)) > 0)


def _common_in(above: PolyElement, below: PolyElement, shared: list[int]) -> PolyElement:
    """Return the greatest common divisor of all coefficients of both with respect to the other symbols."""
    coefficients = sorted((*_coefficients(above, shared), *_coefficients(below, shared)), key=len)
    common = coefficients[0]
    for coefficient in coefficients[1:]:
        if common.is_ground:
            break
        if coefficient.rem(common):
            common = common.gcd(coefficient)
    return common.monic()


def _coefficients(polynomial: PolyElement, shared: list[int]) -> list[PolyElement]:
    ring = polynomial.ring
    keep = set(shared)
    groups: dict[tuple[int, ...], PolyElement] = {}
    for monomial, coefficient in polynomial.terms():
        outer = tuple(0 if k in keep else e for k, e in enumerate(monomial))
        inner = tuple(e if k in keep else 0 for k, e in enumerate(monomial))
        groups.setdefault(outer, ring.zero)[inner] = coefficient
    return list(groups.values())
