"""Rings, polynomials and transfer functions for the tests of their presentation."""

from __future__ import annotations

import random
from fractions import Fraction

from sympy.polys.domains import QQ
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.transfer.function import TransferFunction

RING = PolyRing(["R1", "R2", "R3", "R4", "R10", "C1", "C2", "L1", "k"], QQ, lex)
R1, R2, R3, R4, R10, C1, C2, L1, K = RING.gens
ONE = RING.one
PARTS = {"R1", "R2", "R3", "R4", "R10", "C1", "C2", "L1"}
NAMES = [str(symbol) for symbol in RING.symbols]


def function(numerator: list[PolyElement], denominator: list[PolyElement]) -> TransferFunction:
    """Return a function of the sample ring; whole numbers may stand for constants."""
    above, below = ([RING(c) if isinstance(c, int) else c for c in side] for side in (numerator, denominator))
    return TransferFunction(below[0].ring, tuple(above), tuple(below))


def ladder(sections: int) -> TransferFunction:
    """Return V_out/V_in of series resistors and shunt capacitors, built from its end towards its drive."""
    names = [f"{letter}{k + 1}" for letter in "RC" for k in range(sections)]
    ring = PolyRing(names, QQ, lex)
    voltage, current = [ring.one], [ring.zero]
    for k in reversed(range(sections)):
        resistor, capacitor = ring.gens[k], ring.gens[sections + k]
        current = _add(current, [ring.zero, *(capacitor * c for c in voltage)])
        voltage = _add(voltage, [resistor * c for c in current])
    while not voltage[-1]:
        voltage.pop()
    return TransferFunction(ring, (ring.one,), tuple(voltage))


def _add(first: list[PolyElement], second: list[PolyElement]) -> list[PolyElement]:
    ring = first[0].ring
    size = max(len(first), len(second))
    return [sum((side[k] for side in (first, second) if k < len(side)), ring.zero) for k in range(size)]


def fractions_for(ring: PolyRing, seed: int) -> dict[str, Fraction]:
    """Return random positive rational values for the symbols of a ring."""
    chance = random.Random(seed)
    return {
        str(symbol): Fraction(chance.randrange(1, 10**6), chance.randrange(1, 10**6))
        for symbol in ring.symbols
    }


def value_at(polynomial: PolyElement, values: dict[str, Fraction]) -> Fraction:
    """Return a polynomial's value at rational values, product by product."""
    total = Fraction(0)
    for monomial, coefficient in polynomial.items():
        value = Fraction(int(coefficient.numerator), int(coefficient.denominator))
        for symbol, exponent in zip(polynomial.ring.symbols, monomial, strict=True):
            value *= values[str(symbol)] ** exponent
        total += value
    return total
