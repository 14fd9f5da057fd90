"""The common factor of two polynomials in many symbols, found through its symbols.

A general algorithm for the greatest common divisor carries all symbols at once, and a circuit has dozens. Here
the symbols that the common factor holds are found first: two polynomials have a common factor that holds x just
when their images in x alone, the other symbols at random values, have one (but for unlucky values, which can only
show a factor that is not there, never hide one: the leading coefficients are checked). The factor then lies in
few symbols, and divides every coefficient of both polynomials with respect to all the others. Symbols that the
factor alone holds (its image takes up the whole degree of both) get numbers while it is looked for: what remains
of both when it is divided out does not change.
"""

from __future__ import annotations

from collections import defaultdict

from sympy.ntheory import prime
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
        degrees = shared_symbols(above, below)
        common = _common_of(above, below, degrees)
        if common.is_ground:  # nothing is shared, or the image was unlucky
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


def shared_symbols(above: PolyElement, below: PolyElement) -> dict[int, int]:
    """Return the positions of the generators that a common factor of both can hold, and its degree in each."""
    ring = above.ring
    present = [k for k in range(ring.ngens) if above.degree(k) > 0 and below.degree(k) > 0]
    if not present:
        return {}
    point = residues_for(ring)
    terms = [
        [(monomial, value) for (monomial, _), value in zip(p.terms(), point.terms(p), strict=True)]
        for p in (above, below)
    ]
    degrees = {k: _image_degree(terms, k, point) for k in present}
    return {k: degree for k, degree in degrees.items() if degree > 0}


def _image_degree(terms: list[list[tuple[tuple[int, ...], int]]], k: int, point: Residues) -> int:
    modulus = point.prime
    inverse = pow(point.values[k], -1, modulus)
    images = []
    for polynomial in terms:
        image: dict[int, int] = defaultdict(int)
        for monomial, residue in polynomial:
            exponent = monomial[k]
            image[exponent] = (image[exponent] + residue * pow(inverse, exponent, modulus)) % modulus
        images.append(gf_from_dict(dict(image), modulus, ZZ))
    return int(gf_degree(gf_gcd(images[0], images[1], modulus, ZZ)))


def _common_of(above: PolyElement, below: PolyElement, degrees: dict[int, int]) -> PolyElement:
    """Return the greatest common divisor, whose degree in each symbol it holds is known."""
    ring = above.ring
    if not degrees:
        return ring.one
    alone = [k for k, degree in degrees.items() if degree == above.degree(k) == below.degree(k)]
    if not alone:
        return _common_in(above, below, list(degrees))
    some_above, some_below = _with_numbers(above, alone), _with_numbers(below, alone)
    others = [k for k in degrees if k not in alone]
    piece = _common_in(some_above, some_below, others) if others else ring.one
    common, rest = above.div(some_above.exquo(piece))
    if rest or common * some_below.exquo(piece) != below:  # an unlucky image
        return _common_in(above, below, list(degrees))
    return common.monic()


def _with_numbers(polynomial: PolyElement, positions: list[int]) -> PolyElement:
    """Put small primes in the place of the generators at these positions."""
    ring = polynomial.ring
    numbers = {k: ring.domain(prime(3 + i)) for i, k in enumerate(positions)}
    image: PolyElement = ring.zero
    for monomial, coefficient in polynomial.terms():
        for k, number in numbers.items():
            coefficient = coefficient * number ** monomial[k]
        kept = tuple(0 if k in numbers else e for k, e in enumerate(monomial))
        image[kept] = image.get(kept, ring.domain.zero) + coefficient
    image.strip_zero()
    return image


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
