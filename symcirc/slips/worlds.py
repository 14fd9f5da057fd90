"""One random point, and the arithmetic there: what every candidate of a search is valued with.

Lines without roots are valued in the field of the verdicts, so that a value is found by looking it up; lines with
roots, w0, f0 or Q in complex numbers, looked up by their leading digits. Neither decides anything: every mend is
judged anew before it is shown.
"""

from __future__ import annotations

import cmath
import math
from collections.abc import Callable, Hashable
from dataclasses import dataclass
from fractions import Fraction
from typing import Any, Protocol

from symcirc.sheet.expression import (
    Expression,
    Name,
    Negative,
    Number,
    Power,
    Product,
    Reciprocal,
    Root,
    Sum,
    children,
)
from symcirc.working.field import PRIME, inverse, power, residue, square_root

#: A residue or a complex number, as the world has it.
Value = Any
#: Fractions with larger numbers than this are not looked for.
LARGEST_FRACTION = 1000
#: Binary digits by which complex numbers are looked up.
BITS = 36
#: Moves the sizes at which the exponent changes away from powers of two, which are what is looked up most.
OFF_POWERS = 1.2345


class World(Protocol):
    """The arithmetic of a point; ``of_name`` gives the value of a name."""

    @property
    def of_name(self) -> Callable[[str], Value]:
        """What a name is worth."""

    def with_names(self, of_name: Callable[[str], Value]) -> World:
        """Return the same arithmetic with other values of names."""

    def of_number(self, number: Fraction) -> Value:
        """Return the value of a plain number."""

    def add(self, left: Value, right: Value) -> Value:
        """Return a sum."""

    def multiply(self, left: Value, right: Value) -> Value:
        """Return a product."""

    def negative(self, value: Value) -> Value:
        """Return minus a value."""

    def invert(self, value: Value) -> Value:
        """Return one over a value; raises ZeroDivisionError."""

    def raised(self, value: Value, exponent: int) -> Value:
        """Return a power; raises ZeroDivisionError."""

    def root(self, value: Value) -> Value:
        """Return the square root; raises ZeroDivisionError where there is none here."""

    def key(self, value: Value) -> Hashable:
        """Return what values are looked up by."""

    def fraction(self, value: Value) -> Fraction | None:
        """Return a value as a short fraction, or None."""


@dataclass(frozen=True)
class FieldWorld:
    """Residues modulo the prime of the verdicts."""

    of_name: Callable[[str], int]

    def with_names(self, of_name: Callable[[str], int]) -> FieldWorld:
        """Return the same arithmetic with other values of names."""
        return FieldWorld(of_name)

    def of_number(self, number: Fraction) -> int:
        """Return a plain number."""
        return residue(number)

    def add(self, left: int, right: int) -> int:
        """Return a sum."""
        return (left + right) % PRIME

    def multiply(self, left: int, right: int) -> int:
        """Return a product."""
        return left * right % PRIME

    def negative(self, value: int) -> int:
        """Return minus a value."""
        return -value % PRIME

    def invert(self, value: int) -> int:
        """Return one over a value."""
        return inverse(value)

    def raised(self, value: int, exponent: int) -> int:
        """Return a power."""
        return power(value, exponent)

    def root(self, value: int) -> int:
        """Return a square root."""
        found = square_root(value)
        if found is None:
            raise ZeroDivisionError
        return found

    def key(self, value: int) -> Hashable:
        """Return the residue itself."""
        return value

    def fraction(self, value: int) -> Fraction | None:
        """Return the short fraction that a residue is, by Euclid's algorithm (Wang's reconstruction)."""
        above, below, a, b = PRIME, value % PRIME, 0, 1
        while below > LARGEST_FRACTION:
            quotient = above // below
            above, below, a, b = below, above - quotient * below, b, a - quotient * b
        return Fraction(below, b) if 0 < abs(b) <= LARGEST_FRACTION else None


@dataclass(frozen=True)
class ComplexWorld:
    """Complex numbers in double precision."""

    of_name: Callable[[str], complex]

    def with_names(self, of_name: Callable[[str], complex]) -> ComplexWorld:
        """Return the same arithmetic with other values of names."""
        return ComplexWorld(of_name)

    def of_number(self, number: Fraction) -> complex:
        """Return a plain number."""
        return complex(float(number))

    def add(self, left: complex, right: complex) -> complex:
        """Return a sum."""
        return left + right

    def multiply(self, left: complex, right: complex) -> complex:
        """Return a product."""
        return left * right

    def negative(self, value: complex) -> complex:
        """Return minus a value."""
        return -value

    def invert(self, value: complex) -> complex:
        """Return one over a value."""
        return 1 / value

    def raised(self, value: complex, exponent: int) -> complex:
        """Return a power."""
        try:
            return value**exponent
        except OverflowError:
            raise ZeroDivisionError from None

    def root(self, value: complex) -> complex:
        """Return the square root of positive real part."""
        return cmath.sqrt(value)

    def key(self, value: complex) -> Hashable:
        """Return the leading digits of a number, relative to its size."""
        size = max(abs(value.real), abs(value.imag)) * OFF_POWERS
        if size == 0 or not math.isfinite(size):
            return (0, 0, 0)
        exponent = BITS - math.frexp(size)[1]
        return exponent, round(math.ldexp(value.real, exponent)), round(math.ldexp(value.imag, exponent))

    def fraction(self, value: complex) -> Fraction | None:
        """Return the short fraction that a real number is close to."""
        if not math.isfinite(value.real) or abs(value.imag) > 1e-10 * abs(value.real):
            return None
        near = Fraction(value.real).limit_denominator(LARGEST_FRACTION)
        is_close = math.isclose(near, value.real, rel_tol=1e-11)
        return near if near and is_close and abs(near) <= LARGEST_FRACTION else None


def evaluate(expression: Expression, world: World, known: dict[int, Value]) -> Value:
    """Return an expression's value; ``known`` has those of nodes by their ``id``. Raises ZeroDivisionError."""
    found = known.get(id(expression))
    if found is not None:
        return found
    operands = [evaluate(operand, world, known) for operand in children(expression)]
    return combine(expression, operands, world)


def combine(node: Expression, operands: list[Value], world: World) -> Value:
    """Return a node's value from those of its operands; raises ZeroDivisionError."""
    match node:
        case Number():
            return world.of_number(node.value)
        case Name():
            return world.of_name(node.text)
        case Sum():
            return folded(world.add, operands)
        case Product():
            return folded(world.multiply, operands)
        case Negative():
            return world.negative(operands[0])
        case Reciprocal():
            return world.invert(operands[0])
        case Power():
            return world.raised(operands[0], node.exponent)
        case Root():
            return world.root(operands[0])


def folded(operation: Callable[[Value, Value], Value], operands: list[Value]) -> Value:
    """Return the operands joined from left to right."""
    result = operands[0]
    for operand in operands[1:]:
        result = operation(result, operand)
    return result
