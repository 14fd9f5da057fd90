"""Exact formulas and polynomials computed over arrays of numbers."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import reduce

import numpy as np
import sympy
from numpy.typing import NDArray
from sympy.polys.rings import PolyElement

from symcirc.complaints import InternalFault
from symcirc.transfer.function import TransferFunction

Real = NDArray[np.float64]
Monomials = dict[tuple[int, ...], float]
#: The value of a name of the ring that no coefficient holds.
_NOWHERE: Real = np.array(np.nan)


def evaluate(formula: sympy.Expr, values: Mapping[str, Real]) -> Real:
    """Return a formula's values, nan where it is not real.

    Args:
        formula: sums, products and powers of names and numbers.
        values: for every name in it an array, all of one shape.

    >>> x = sympy.Symbol("x", positive=True)
    >>> evaluate(sympy.sqrt(x) / 2, {"x": np.array([4.0, 9.0])})
    array([1. , 1.5])
    """
    with np.errstate(all="ignore"):
        return np.asarray(_evaluate(formula, values), float)


def _evaluate(formula: sympy.Expr, values: Mapping[str, Real]) -> Real | float:
    if formula.is_Symbol:
        return values[str(formula)]
    if formula.is_number:
        return float(sympy.N(formula, 20))
    operands = [_evaluate(operand, values) for operand in formula.args]
    if formula.is_Add:
        return sum(operands[1:], start=operands[0])
    if formula.is_Mul:
        product = operands[0]
        for operand in operands[1:]:
            product = product * operand
        return product
    if formula.is_Pow:
        exponent = formula.exp
        if exponent == sympy.Rational(1, 2):
            return np.asarray(np.sqrt(operands[0]), float)
        return np.asarray(np.power(operands[0], float(exponent)), float)
    raise InternalFault(f"a design equation holds {formula.func.__name__}")


@dataclass(frozen=True)
class Nested:
    """The polynomial ``base^exponent * inner + rest``; a number is itself."""

    base: int
    exponent: int
    inner: Nested | float
    rest: Nested | float


def nested(terms: Monomials) -> Nested | float:
    """Return a polynomial with common factors drawn out, which takes fewer products.

    Horner's scheme for several variables, the one in most terms first.

    >>> nested({(1, 1): 2.0, (1, 0): 3.0, (0, 0): 1.0})
    Nested(base=0, exponent=1, inner=Nested(base=1, exponent=1, inner=2.0, rest=3.0), rest=1.0)
    """
    counts = [sum(1 for exponents in terms if exponents[k]) for k in range(len(next(iter(terms), ())))]
    if not any(counts):
        return sum(terms.values())
    base = counts.index(max(counts))
    least = min(exponents[base] for exponents in terms if exponents[base])
    inner: Monomials = {}
    rest: Monomials = {}
    for exponents, number in terms.items():
        if exponents[base]:
            lowered = (*exponents[:base], exponents[base] - least, *exponents[base + 1 :])
            inner[lowered] = number
        else:
            rest[exponents] = number
    return Nested(base, least, nested(inner), nested(rest) if rest else 0.0)


def value_of(polynomial: Nested | float, variables: list[Real]) -> Real | float:
    """Return a polynomial's value for each entry of arrays that broadcast against each other."""
    if not isinstance(polynomial, Nested):
        return polynomial
    base = variables[polynomial.base]
    inner = value_of(polynomial.inner, variables)
    factor = base if polynomial.exponent == 1 else base**polynomial.exponent
    product = factor if isinstance(inner, float) and inner == 1.0 else factor * inner
    rest = value_of(polynomial.rest, variables)
    return product if isinstance(rest, float) and rest == 0.0 else product + rest


class Coefficients:
    """Numerator and denominator of a product of transfer functions, ready for arrays of part values.

    Args:
        functions: as they were derived.
        known: numbers of names, put in once and for all.
        frequency: the unit of s, in rad/s: coefficients are those of powers of s over it.
    """

    def __init__(
        self, functions: Sequence[TransferFunction], known: Mapping[str, float], frequency: float = 1.0
    ) -> None:
        self._stages = [_Stage(function, known, frequency) for function in functions]
        #: The powers of s that numerator and denominator hold.
        self.powers = (
            _powers([stage.numerator for stage in self._stages]),
            _powers([stage.denominator for stage in self._stages]),
        )

    def __call__(self, values: Mapping[str, Real]) -> tuple[list[Real | float], list[Real | float]]:
        """Return both rows of coefficients, ascending, for arrays that broadcast against each other.

        >>> from sympy.polys import QQ, ring
        >>> made, r, c = ring("R1, C1", QQ)
        >>> low_pass = TransferFunction(made, (made(1),), (made(1), r * c))
        >>> Coefficients([low_pass, low_pass], {"C1": 2.0})({"R1": np.array([1.0, 5.0])})[1]
        [1.0, array([ 4., 20.]), array([  4., 100.])]
        """
        with np.errstate(all="ignore"):
            rows = [(_row(s.numerator, s, values), _row(s.denominator, s, values)) for s in self._stages]
            over, under = (reduce(_multiplied, side) for side in zip(*rows, strict=True))
        return over, under


class _Stage:
    """One transfer function with numbers put in; ``names`` are those that are left."""

    def __init__(self, function: TransferFunction, known: Mapping[str, float], frequency: float) -> None:
        gens = [str(symbol) for symbol in function.ring.symbols]
        numbers = {**known, "pi": float(np.pi)}
        self._kept = [k for k, name in enumerate(gens) if name not in numbers]
        self._replaced = [(k, numbers[name]) for k, name in enumerate(gens) if name in numbers]
        self._to_number = function.ring.domain.to_sympy
        self.names = [gens[k] for k in self._kept]
        self.numerator = [
            self._numeric(polynomial, frequency**power) for power, polynomial in enumerate(function.numerator)
        ]
        self.denominator = [
            self._numeric(polynomial, frequency**power)
            for power, polynomial in enumerate(function.denominator)
        ]

    def _numeric(self, polynomial: PolyElement, factor: float) -> Nested | float:
        terms: Monomials = {}
        for exponents, coefficient in polynomial.terms():
            number = float(self._to_number(coefficient)) * factor
            for k, value in self._replaced:
                number *= value ** exponents[k]
            left = tuple(exponents[k] for k in self._kept)
            terms[left] = terms.get(left, 0.0) + number
        return nested(terms)


def _powers(rows: list[list[Nested | float]]) -> list[int]:
    """Return the powers that a product of rows holds."""
    held = {0}
    for row in rows:
        own = [power for power, polynomial in enumerate(row) if polynomial != 0.0]
        held = {one + other for one in held for other in own}
    return sorted(held)


def _row(polynomials: list[Nested | float], stage: _Stage, values: Mapping[str, Real]) -> list[Real | float]:
    variables = [values.get(name, _NOWHERE) for name in stage.names]
    return [value_of(polynomial, variables) for polynomial in polynomials]


def _multiplied(one: list[Real | float], other: list[Real | float]) -> list[Real | float]:
    """Return the product of two polynomials in s."""
    product: list[Real | float] = [0.0] * (len(one) + len(other) - 1)
    for k, a in enumerate(one):
        for m, b in enumerate(other):
            if not (isinstance(a, float) and a == 0.0) and not (isinstance(b, float) and b == 0.0):
                product[k + m] = product[k + m] + a * b
    return product
