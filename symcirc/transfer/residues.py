"""Values modulo a large prime, at random values of the symbols: of ring elements, and of printed forms.

Two polynomials of degree d that differ agree at a random point modulo a prime P with a probability of at most
d/P (J. T. Schwartz, "Fast probabilistic algorithms for verification of polynomial identities", J. ACM 27,
1980; from memory). Here P has 61 bits. A field with square roots is mapped onto the integers modulo a prime
over which the minimal polynomial of its generator splits.
"""

from __future__ import annotations

import random
from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import sympy
from sympy.ntheory import nextprime
from sympy.polys.domains import QQ, ZZ
from sympy.polys.galoistools import gf_degree, gf_edf_zassenhaus, gf_gcd, gf_monic, gf_pow_mod, gf_sub
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.transfer.form import Divided, Form, Integer, Negative, Power, Product, Root, Sum, Symbol
from symcirc.transfer.ties import Quotient

#: A prime of 61 bits of no special form, so that no written number is likely to be a multiple of it.
PRIME = 1570796326794896657
#: An element of a ring's field, for which sympy has no types.
Element = Any


class FormMismatch(AssertionError):
    """A form is not equal to what it was made from: a fault of the program."""


@dataclass(frozen=True)
class Residues:
    """A point: the prime, the image of the field's generator (0 over the rationals), the symbols' values."""

    ring: PolyRing
    prime: int
    generator: int
    values: tuple[int, ...]

    def number(self, coefficient: Element) -> int:
        """Return the image of an element of the ring's field."""
        if self.ring.domain == QQ:
            return _rational(coefficient, self.prime)
        image = 0
        for rational in coefficient.to_list():
            image = (image * self.generator + _rational(rational, self.prime)) % self.prime
        return image

    def terms(self, polynomial: PolyElement) -> list[int]:
        """Return the value of each product of a polynomial, in the order of its terms.

        >>> ring = PolyRing(["R1", "R2"], QQ)
        >>> point = Residues(ring, 101, 0, (2, 3))
        >>> point.terms(ring.gens[0] ** 2 - ring.gens[1])
        [4, 98]
        """
        powers = [[1, value] for value in self.values]
        result = []
        for monomial, coefficient in polynomial.terms():
            value = self.number(coefficient)
            for known, exponent in zip(powers, monomial, strict=True):
                if exponent:
                    while len(known) <= exponent:
                        known.append(known[-1] * known[1] % self.prime)
                    value = value * known[exponent] % self.prime
            result.append(value)
        return result

    def polynomial(self, polynomial: PolyElement) -> int:
        """Return the value of a polynomial."""
        return sum(self.terms(polynomial)) % self.prime


def _rational(number: Element, prime: int) -> int:
    numerator, denominator = int(number.numerator), int(number.denominator)
    return numerator % prime if denominator == 1 else numerator * pow(denominator, -1, prime) % prime


def residues_for(ring: PolyRing) -> Residues:
    """Return a random point for a ring, the same for the same ring on every run."""
    prime, generator = _prime_for(ring.domain)
    chance = random.Random(ring.ngens)  # seeded: the same answer on every run
    return Residues(ring, prime, generator, tuple(chance.randrange(2, prime) for _ in range(ring.ngens)))


@lru_cache(maxsize=16)
def _prime_for(domain: Element) -> tuple[int, int]:
    """Return a prime and the image of the field's generator: a root of its minimal polynomial there."""
    if domain == QQ:
        return PRIME, 0
    prime = PRIME
    while True:
        minimal = gf_monic([_rational(c, prime) for c in domain.mod.to_list()], prime, ZZ)[1]
        frobenius = gf_pow_mod([ZZ(1), ZZ(0)], prime, minimal, prime, ZZ)
        linear = gf_gcd(minimal, gf_sub(frobenius, [ZZ(1), ZZ(0)], prime, ZZ), prime, ZZ)
        if gf_degree(linear) > 0:
            root = min(-factor[1] % prime for factor in gf_edf_zassenhaus(linear, 1, prime, ZZ))
            return prime, int(root)
        prime = nextprime(prime)


# forms ------------------------------------------------------------------------------------------------------


def form_residue(form: Form, point: Residues) -> int:
    """Return the value of a form; a root in it must be of a number, and lie in the ring's field.

    >>> ring = PolyRing(["R1", "R2"], QQ)
    >>> form_residue(Sum((Symbol("R1"), Negative(Symbol("R2")))), Residues(ring, 101, 0, (2, 3)))
    100
    """
    return _value(form, point, _names(point))


def squared_residue(form: Form, point: Residues) -> int:
    """Return the value of a form's square; factors of the form, above or below, may be roots of names.

    >>> ring = PolyRing(["R1", "R2"], QQ)
    >>> squared_residue(Divided(Root(Symbol("R1")), Symbol("R2")), Residues(ring, 11, 0, (9, 2)))
    5
    """
    names = _names(point)

    def square(node: Form) -> int:
        match node:
            case Root():
                return _value(node.operand, point, names)
            case Product():
                result = 1
                for factor in node.factors:
                    result = result * square(factor) % point.prime
                return result
            case Divided():
                return square(node.above) * pow(square(node.below), -1, point.prime) % point.prime
            case Negative():
                return square(node.operand)
            case _:
                return _value(node, point, names) ** 2 % point.prime

    return square(form)


def _names(point: Residues) -> dict[str, int]:
    return {str(symbol): value for symbol, value in zip(point.ring.symbols, point.values, strict=True)}


def _value(form: Form, point: Residues, names: Mapping[str, int]) -> int:
    match form:
        case Integer():
            return form.value % point.prime
        case Symbol():
            return names[form.name]
        case Sum():
            return sum(_value(term, point, names) for term in form.terms) % point.prime
        case Product():
            result = 1
            for factor in form.factors:
                result = result * _value(factor, point, names) % point.prime
            return result
        case Divided():
            below = pow(_value(form.below, point, names), -1, point.prime)
            return _value(form.above, point, names) * below % point.prime
        case Power():
            return pow(_value(form.base, point, names), form.exponent, point.prime)
        case Negative():
            return -_value(form.operand, point, names) % point.prime
    return point.number(point.ring.domain.from_sympy(number_of(form)))


def number_of(form: Form) -> sympy.Expr:
    """Return a form without names and powers as sympy's exact number; raises ValueError for any other.

    >>> number_of(Sum((Integer(1), Root(Integer(8)))))
    1 + 2*sqrt(2)
    """
    match form:
        case Integer():
            return sympy.Integer(form.value)
        case Sum():
            return sympy.Add(*(number_of(term) for term in form.terms))
        case Product():
            return sympy.Mul(*(number_of(factor) for factor in form.factors))
        case Divided():
            return number_of(form.above) / number_of(form.below)
        case Negative():
            return -number_of(form.operand)
        case Root():
            return sympy.sqrt(number_of(form.operand))
    raise ValueError(f"{form} is not a number")


def require_equal(form: Form, above: PolyElement, below: PolyElement) -> None:
    """Raise FormMismatch unless the form is ``above / below``, at a random point modulo a prime.

    >>> ring = PolyRing(["R1", "R2"], QQ)
    >>> require_equal(Divided(Symbol("R1"), Symbol("R2")), *ring.gens)
    """
    point = residues_for(above.ring)
    if (form_residue(form, point) * point.polynomial(below) - point.polynomial(above)) % point.prime:
        raise FormMismatch("a printed form is not equal to the quotient that it was made from")


def require_square(form: Form, radicand: Quotient, front: Quotient) -> None:
    """Raise FormMismatch unless the form's square is that of ``front * sqrt(radicand)``, at a random point.

    >>> r1, r2 = PolyRing(["R1", "R2"], QQ).gens
    >>> require_square(Divided(Root(Symbol("R1")), Symbol("R2")), Quotient(r1, r2), Quotient(r1, r1 * r2))
    Traceback (most recent call last):
    symcirc.transfer.residues.FormMismatch: the square of a printed form is not equal to what it was made from
    """
    point = residues_for(radicand.above.ring)
    above = point.polynomial(radicand.above) * point.polynomial(front.above) ** 2
    below = point.polynomial(radicand.below) * point.polynomial(front.below) ** 2
    if (squared_residue(form, point) * below - above) % point.prime:
        raise FormMismatch("the square of a printed form is not equal to what it was made from")
