"""Exact arithmetic modulo a prime: an equality of rational functions decided at random points.

Two different rational functions agree at a random point of the field with a probability of at most their degree
over the prime's size (Schwartz, "Fast probabilistic algorithms for verification of polynomial identities", J. ACM 27
(1980), from memory). Degrees are bounded below 1e6 here and three points are taken, so a wrong verdict has a
probability below (1e6/1.1e18)^3 < 1e-35.
"""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction
from functools import cache

import sympy

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
    fold,
)

#: The largest prime below 2**60 that is 9 modulo 16 and has -1 and every prime up to 47 as a square.
PRIME = 1152921504589339081


class NotInField(Exception):
    """A number that has no one value in the field: a root of what is not a rational number of small primes."""


def inverse(value: int) -> int:
    """Return 1/value; raises ZeroDivisionError for 0."""
    if value % PRIME == 0:
        raise ZeroDivisionError
    return pow(value, -1, PRIME)


def residue(value: Fraction) -> int:
    """Return a rational number in the field; raises ZeroDivisionError where the prime divides its denominator."""
    if value.denominator == 1:
        return value.numerator % PRIME
    return value.numerator * inverse(value.denominator) % PRIME


def square_root(value: int) -> int | None:
    """Return one of the two square roots, or None where there is none."""
    if value % PRIME and pow(value, (PRIME - 1) // 2, PRIME) != 1:
        return None
    root = sympy.ntheory.sqrt_mod(value % PRIME, PRIME)
    return int(root)


@cache
def imaginary_unit() -> int:
    """Return a square root of -1."""
    root = square_root(-1)
    assert root is not None
    return root


@cache
def _root_of_prime(prime: int) -> int:
    root = square_root(prime)
    if root is None or prime > 47:  # beyond 47 a prime may have no root here: better none at all
        raise NotInField
    return root


def root_of_rational(value: Fraction) -> int:
    """Return the square root of a positive rational number, so that sqrt(6) = sqrt(2) sqrt(3).

    Raises NotInField where a prime above 47 stands to an odd power in it, or it is negative.

    >>> root_of_rational(Fraction(8)) == 2 * root_of_rational(Fraction(2)) % PRIME
    True
    """
    if value < 0 or max(value.numerator, value.denominator) > 10**12:
        raise NotInField
    result = 1
    for number, invert in ((value.numerator, False), (value.denominator, True)):
        for prime, power in sympy.factorint(number).items():
            if prime == 0:
                return 0
            factor = pow(prime, power // 2, PRIME) * (_root_of_prime(prime) if power % 2 else 1) % PRIME
            result = result * (inverse(factor) if invert else factor) % PRIME
    return result


def of_exact(number: sympy.Expr, pi: int) -> int:
    """Return an exact sympy number in the field, ``pi`` being one more value; raises NotInField."""
    if number.is_Rational:
        return residue(Fraction(int(number.p), int(number.q)))
    if number == sympy.pi:
        return pi
    if number.is_Pow and number.exp == sympy.Rational(1, 2) and number.base.is_Rational:
        return root_of_rational(Fraction(int(number.base.p), int(number.base.q)))
    if number.is_Pow and number.exp.is_Integer:
        return power(of_exact(number.base, pi), int(number.exp))
    operands = [of_exact(operand, pi) for operand in number.args]
    if number.is_Add:
        return sum(operands) % PRIME
    if number.is_Mul:
        return product(operands)
    raise NotInField


def product(factors: list[int]) -> int:
    """Return the product of residues."""
    result = 1
    for factor in factors:
        result = result * factor % PRIME
    return result


def power(base: int, exponent: int) -> int:
    """Return base to a whole exponent; raises ZeroDivisionError for 0 to a negative one."""
    return pow(base if exponent >= 0 else inverse(base), abs(exponent), PRIME)


def refuse_roots(operand: int) -> int:
    """Refuse the root of what is not a plain number."""
    raise NotInField


def evaluate(
    expression: Expression, value: Callable[[str], int], root: Callable[[int], int] = refuse_roots
) -> int:
    """Return an expression's value in the field.

    ``value`` gives every name's; ``root`` chooses the square root of what is not a plain number. Raises
    ZeroDivisionError, and NotInField where a root has no one value.
    """

    def combine(node: Expression, operands: list[tuple[int, Fraction | None]]) -> tuple[int, Fraction | None]:
        if isinstance(node, Root):
            plain = operands[0][1]
            return (root(operands[0][0]) if plain is None else root_of_rational(plain)), None
        return _combine(node, [v for v, _ in operands], value), _plain(node, [p for _, p in operands])

    return fold(expression, combine)[0]


def _combine(node: Expression, operands: list[int], value: Callable[[str], int]) -> int:
    match node:
        case Number():
            return residue(node.value)
        case Name():
            return value(node.text)
        case Sum():
            return sum(operands) % PRIME
        case Product():
            return product(operands)
        case Negative():
            return -operands[0] % PRIME
        case Reciprocal():
            return inverse(operands[0])
        case Power():
            return power(operands[0], node.exponent)
        case Root():
            raise AssertionError("a root is the caller's business")


def _plain(node: Expression, operands: list[Fraction | None]) -> Fraction | None:
    """Return the node's value where it is a short rational number, so that a root of it is one number."""
    if isinstance(node, Number):
        return node.value
    known = [operand for operand in operands if operand is not None]
    if len(known) < len(operands) or not known or len(known) > 4:
        return None
    match node:
        case Sum():
            return sum(known, Fraction(0))
        case Negative():
            return -known[0]
        case Reciprocal():
            return 1 / known[0]
        case Product():
            result = Fraction(1)
            for operand in known:
                result *= operand
            return result if max(result.numerator, result.denominator) < 10**40 else None
    return None
