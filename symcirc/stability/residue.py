"""Polynomials in s modulo one of degree 2, with coefficients in a ring of parts."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from sympy.polys.rings import PolyElement


@dataclass(frozen=True)
class Residue:
    """``(constant + linear s) / below``."""

    constant: PolyElement
    linear: PolyElement
    below: PolyElement


def residue(polynomial: Sequence[PolyElement], modulus: Sequence[PolyElement]) -> Residue:
    """Return what a polynomial in s leaves, by Horner's rule.

    Both are coefficients by ascending power of s, the modulus a0 + a1 s + a2 s^2.

    >>> from sympy.polys.domains import QQ
    >>> from sympy.polys.rings import ring
    >>> r, x = ring("x", QQ)
    >>> residue([r(0), r(0), x], [r(1), r(2), r(1)])  # x s^2 modulo 1 + 2 s + s^2
    Residue(constant=-x, linear=-2*x, below=1)
    """
    zero = modulus[0].ring.zero
    rest = Residue(zero, zero, zero + 1)
    for coefficient in reversed(polynomial):
        rest = _times_s(rest, modulus)
        rest = Residue(rest.constant + coefficient * rest.below, rest.linear, rest.below)
    return rest


def _times_s(rest: Residue, modulus: Sequence[PolyElement]) -> Residue:
    if not rest.linear:
        return Residue(rest.linear, rest.constant, rest.below)
    a0, a1, a2 = modulus
    return Residue(-a0 * rest.linear, a2 * rest.constant - a1 * rest.linear, a2 * rest.below)


def norm(rest: Residue, modulus: Sequence[PolyElement]) -> PolyElement:
    """Return what is zero just where a residue has a root in common with the modulus: for a constant, itself."""
    a0, a1, a2 = modulus
    c, d = rest.constant, rest.linear
    return a2 * c**2 - a1 * c * d + a0 * d**2 if d else c


def over(rest: Residue, divisor: Residue, modulus: Sequence[PolyElement]) -> Residue:
    """Return a quotient of two residues, by the conjugate: (c + d s)(a2 c - a1 d - a2 d s) is the norm of c + d s."""
    _, a1, a2 = modulus
    c, d = divisor.constant, divisor.linear
    conjugate = (a2 * c - a1 * d, -a2 * d) if d else (c.ring.one, c.ring.zero)
    product = (
        rest.constant * conjugate[0],
        rest.constant * conjugate[1] + rest.linear * conjugate[0],
        rest.linear * conjugate[1],
    )
    reduced = residue(product, modulus)
    return Residue(
        reduced.constant * divisor.below,
        reduced.linear * divisor.below,
        reduced.below * rest.below * norm(divisor, modulus),
    )
