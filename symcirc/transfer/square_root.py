"""Square roots of quotients as they are written: squares in front, and the rest where it reads best."""

from __future__ import annotations

import math
from collections import Counter

from sympy import factorint
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.transfer.arrange import form_of
from symcirc.transfer.assemble import is_negative
from symcirc.transfer.cost import cost
from symcirc.transfer.factors import factorize
from symcirc.transfer.form import ONE, Divided, Form, Negative, Product, Root, power, product
from symcirc.transfer.residues import Element, require_square
from symcirc.transfer.signs import sign_of
from symcirc.transfer.ties import Quotient

#: Primes up to this are taken out of whole numbers under a root; what is left is only tried as a square.
LARGEST_PRIME = 1000

#: Factors are multiplied out, to be grouped anew, up to so many products.
MOST_MULTIPLIED = 60

#: Exponents of factors, each an element of one ring, -1 one of them.
Powers = Counter[PolyElement]


def square_root(radicand: Quotient, front: Quotient, positive: set[str]) -> Form:
    """Return the form of ``front * sqrt(radicand)``; both in one ring, the radicand not zero.

    ``positive`` names the symbols whose values are positive: only what is known to be positive leaves the
    root. Of three ways to write the rest (a quotient under the root, all of it above or all of it below the
    line) the cheapest is taken. Raises FormMismatch where the form's square is not what it must be.

    >>> from sympy.polys.domains import QQ
    >>> r1, c1, c2 = PolyRing(["R1", "C1", "C2"], QQ).gens
    >>> from symcirc.transfer.text import text
    >>> one = Quotient(r1.ring.one, r1.ring.one)
    >>> text(square_root(Quotient(r1.ring.one, r1**2*c1*c2), one, {"R1", "C1", "C2"}))
    '1/(R1*sqrt(C1*C2))'
    >>> text(square_root(Quotient(c1, 4*c2), one, {"R1", "C1", "C2"}))
    'sqrt(C1/C2)/2'
    """
    number, inside = _powers(radicand, positive)
    times, outside = _powers(front, positive)
    ring = radicand.above.ring
    inside.update(_number_powers(ring, number * times**2))
    outside[-ring.one] += is_negative(ring.domain, times)
    candidates = [_written(ring, *_shared_out(inside, outside, positive, odd)) for odd in (0, 1, -1)]
    form = min(candidates, key=cost)
    require_square(form, radicand, front)
    return form


def _powers(quotient: Quotient, positive: set[str]) -> tuple[Element, Powers]:
    """Return the number and the other factors of a quotient, those of one sign made positive."""
    ring = quotient.above.ring
    number = ring.domain.one
    powers: Powers = Counter()
    for polynomial, side in ((quotient.above, 1), (quotient.below, -1)):
        factors = factorize(polynomial)
        number *= factors.number**side
        powers.update({g: side * e for g, e in zip(ring.gens, factors.monomial, strict=True)})
        for factor, exponent in factors.polynomials:
            negative = sign_of(factor, positive) < 0
            powers[-factor if negative else factor] += side * exponent
            number *= (-1) ** (exponent * negative)
    return number, powers


def _number_powers(ring: PolyRing, number: Element) -> Powers:
    """Return the factors of a number: -1, primes, what is left; a number with roots is left whole."""
    powers: Powers = Counter()
    if is_negative(ring.domain, number):
        powers[-ring.one], number = 1, -number
    rational = ring.domain.to_sympy(number)
    if not rational.is_Rational:
        powers[ring(number)] += 1
        return powers
    for whole, side in ((int(rational.p), 1), (int(rational.q), -1)):
        for factor, exponent in factorint(whole, limit=LARGEST_PRIME).items():
            factor, exponent = int(factor), int(exponent)
            root = math.isqrt(factor)
            square = root * root == factor
            powers[ring(root if square else factor)] += side * exponent * (2 if square else 1)
    return powers


def _shared_out(
    inside: Powers, outside: Powers, positive: set[str], odd: int
) -> tuple[dict[PolyElement, int], dict[PolyElement, int]]:
    """Return the exponents under the root and in front of it.

    A positive factor that is there an odd number of times leaves one under the root: above the line (``odd``
    1), below it (-1), or on the side where it is (0). Other factors stay where they are.
    """
    under, before = dict(inside), dict(outside)
    for factor in {*inside, *outside}:
        if not _is_positive(factor, positive):
            continue
        halves = inside[factor] + 2 * outside[factor]
        left = halves % 2 and (odd or (1 if halves > 0 else -1))
        under[factor], before[factor] = left, (halves - left) // 2
    return under, before


def _is_positive(factor: PolyElement, positive: set[str]) -> bool:
    if factor.is_ground:
        return not is_negative(factor.ring.domain, factor.LC)
    if factor in factor.ring.gens:
        return str(factor) in positive
    return sign_of(factor, positive) > 0


def _written(ring: PolyRing, under: dict[PolyElement, int], before: dict[PolyElement, int]) -> Form:
    """Return the form of the root and what stands in front; below the line if nothing is above it."""
    root, front = _quotient(ring, under), _quotient(ring, before)
    if root == ONE:
        return front
    if isinstance(root, Divided) and root.above == ONE:
        return _with_factor(front, ONE, Root(root.below))
    return _with_factor(front, Root(root), ONE)


def _quotient(ring: PolyRing, powers: dict[PolyElement, int]) -> Form:
    """Return the form of a product of factors: multiplied out and grouped anew, unless that would be long."""
    powers = {f: e % 2 if f == -ring.one else e for f, e in powers.items()}
    long = [f for f, e in powers.items() if len(f) > 1 and e]
    if math.prod(len(f) ** abs(powers[f]) for f in long) <= MOST_MULTIPLIED:
        long = []
    above, below = (
        math.prod((f ** max(side * e, 0) for f, e in powers.items() if f not in long), start=ring.one)
        for side in (1, -1)
    )
    form = form_of(above, below)
    for factor in long:
        bracket = power(form_of(factor, ring.one), abs(powers[factor]))
        form = _with_factor(form, *((bracket, ONE) if powers[factor] > 0 else (ONE, bracket)))
    return form


def _with_factor(form: Form, above: Form, below: Form) -> Form:
    """Return a form times ``above`` and over ``below``, which stand last on their side of the line."""
    if isinstance(form, Negative):
        return Negative(_with_factor(form.operand, above, below))
    upper, lower = (form.above, form.below) if isinstance(form, Divided) else (form, ONE)
    upper, lower = product([*_factors(upper), above]), product([*_factors(lower), below])
    return upper if lower == ONE else Divided(upper, lower)


def _factors(form: Form) -> tuple[Form, ...]:
    return form.factors if isinstance(form, Product) else (form,)
