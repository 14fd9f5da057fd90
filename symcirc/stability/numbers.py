"""The numbers of a sheet as exact fractions, and the values of polynomials for them."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from fractions import Fraction
from typing import Any

import sympy
from sympy.polys.domains import QQ
from sympy.polys.rings import PolyElement

#: Decimal digits to which pi and roots are taken.
DIGITS = 60


def decimal(number: sympy.Expr) -> Fraction:
    """Return a real number as a fraction that is right to 60 digits.

    >>> abs(decimal(sympy.sqrt(2)) ** 2 - 2) < Fraction(1, 10**58)
    True
    """
    digits = sympy.Rational(str(sympy.N(number, DIGITS)))
    return Fraction(int(digits.p), int(digits.q))


#: The one value of pi here: where pi cancels in a formula, this fraction cancels as well.
PI = decimal(sympy.pi)


def as_fraction(number: sympy.Expr) -> Fraction:
    """Return an exact number of a sheet as a fraction: itself where rational, else with pi and roots to 60 digits.

    Every pi becomes the same fraction, so that what cancels in pi still cancels.

    >>> as_fraction(1 / (2 * sympy.pi)) * 2 * PI
    Fraction(1, 1)
    """
    if not number.is_Rational:
        number = number.xreplace({sympy.pi: sympy.Rational(PI.numerator, PI.denominator)})
        roots = {power: decimal(power) for power in number.atoms(sympy.Pow)}
        number = number.xreplace({p: sympy.Rational(f.numerator, f.denominator) for p, f in roots.items()})
    return Fraction(int(number.p), int(number.q))


def root_of(number: Fraction) -> Fraction:
    """Return the square root of a fraction, exact where it is one and else to 60 digits.

    >>> root_of(Fraction(9, 4))
    Fraction(3, 2)
    """
    product = number.numerator * number.denominator
    whole = math.isqrt(product)
    if whole * whole == product:
        return Fraction(whole, number.denominator)
    return decimal(sympy.sqrt(sympy.Rational(number.numerator, number.denominator)))


def values_in(polynomials: Sequence[PolyElement], numbers: Mapping[str, sympy.Expr]) -> tuple[Fraction, ...]:
    """Return the values of polynomials of one ring for a sheet's numbers.

    Args:
        polynomials: in a ring whose symbols are names of the sheet, or ``pi``.
        numbers: ``Sheet.numbers``, in SI base units; every symbol that a polynomial holds must be there.

    Raises:
        KeyError: a symbol has no number.

    >>> from sympy.polys.rings import ring
    >>> r, x = ring("R1", QQ)
    >>> values_in([2 * x, r(3)], {"R1": sympy.Rational(1, 4)})
    (Fraction(1, 2), Fraction(3, 1))
    """
    known: dict[str, Fraction] = {"pi": PI}

    def value(name: str) -> Fraction:
        if name not in known:
            known[name] = as_fraction(numbers[name])
        return known[name]

    def product(polynomial: PolyElement, monomial: tuple[int, ...], factor: Any) -> Fraction:
        names = polynomial.ring.symbols
        powers = (value(str(names[k])) ** e for k, e in enumerate(monomial) if e)
        return math.prod(powers, start=_constant(polynomial, factor))

    return tuple(
        sum((product(p, monomial, factor) for monomial, factor in p.terms()), start=Fraction(0))
        for p in polynomials
    )


def _constant(polynomial: PolyElement, factor: Any) -> Fraction:
    domain = polynomial.ring.domain
    if domain == QQ:
        return Fraction(int(factor.numerator), int(factor.denominator))
    return as_fraction(sympy.expand(domain.to_sympy(factor)))
