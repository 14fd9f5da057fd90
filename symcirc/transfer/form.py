"""Formulas as they will be written: a small tree between the polynomial ring and the ways to print it.

Nothing is computed with these trees; they only say what stands where, so that every way of printing shows the
same formula.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TypeVar

T = TypeVar("T")


@dataclass(frozen=True)
class Integer:
    """A whole number, not negative."""

    value: int


@dataclass(frozen=True)
class Decimal:
    """A number in decimals, not negative: ``text`` is as in ``0.5`` or ``7.25e-12``."""

    text: str


@dataclass(frozen=True)
class Symbol:
    """A part, a parameter, ``pi`` or ``s``."""

    name: str


@dataclass(frozen=True)
class Sum:
    """Two or more terms; a difference holds a :class:`Negative`."""

    terms: tuple[Form, ...]


@dataclass(frozen=True)
class Product:
    """Two or more factors, left to right."""

    factors: tuple[Form, ...]


@dataclass(frozen=True)
class Divided:
    """``above / below``."""

    above: Form
    below: Form


@dataclass(frozen=True)
class Power:
    """The base to a whole exponent of 2 or more."""

    base: Form
    exponent: int


@dataclass(frozen=True)
class Root:
    """The square root of the operand."""

    operand: Form


@dataclass(frozen=True)
class Negative:
    """Minus the operand."""

    operand: Form


Form = Integer | Decimal | Symbol | Sum | Product | Divided | Power | Root | Negative

ZERO, ONE = Integer(0), Integer(1)


def children(form: Form) -> tuple[Form, ...]:
    """Return the operands of a node, in the order in which they are written.

    >>> children(Divided(ONE, Symbol("R1")))
    (Integer(value=1), Symbol(name='R1'))
    """
    match form:
        case Sum(terms=operands) | Product(factors=operands):
            return operands
        case Divided():
            return (form.above, form.below)
        case Power():
            return (form.base,)
        case Negative() | Root():
            return (form.operand,)
        case _:
            return ()


def symbols(form: Form) -> set[str]:
    """Return the names in a form.

    >>> sorted(symbols(Product((Symbol("R1"), Symbol("C1")))))
    ['C1', 'R1']
    """
    if isinstance(form, Symbol):
        return {form.name}
    return set().union(*(symbols(child) for child in children(form)))


def product(factors: list[Form]) -> Form:
    """Return the product of any number of factors; a factor 1 is left out, and none at all gives 1.

    >>> product([ONE, Symbol("R1")])
    Symbol(name='R1')
    """
    written = [factor for factor in factors if factor != ONE]
    if not written:
        return ONE
    return written[0] if len(written) == 1 else Product(tuple(written))


def quotient(above: list[Form], below: list[Form]) -> Form:
    """Return a product over a product; without a line where nothing stands below it.

    >>> quotient([], [Symbol("R1"), Symbol("C1")])
    Divided(above=Integer(value=1), below=Product(factors=(Symbol(name='R1'), Symbol(name='C1'))))
    """
    under = product(below)
    return product(above) if under == ONE else Divided(product(above), under)


def power(base: Form, exponent: int) -> Form:
    """Return the base to an exponent of 1 or more.

    >>> power(Symbol("R1"), 2)
    Power(base=Symbol(name='R1'), exponent=2)
    """
    return base if exponent == 1 else Power(base, exponent)


def times_s(form: Form, exponent: int) -> Form:
    """Return a form times a power of s, which is written after the numbers and before the symbols.

    >>> times_s(Divided(Integer(2), Symbol("R1")), 1)
    Divided(above=Product(factors=(Integer(value=2), Symbol(name='s'))), below=Symbol(name='R1'))
    """
    if exponent == 0 or form == ZERO:
        return form
    match form:
        case Negative():
            return Negative(times_s(form.operand, exponent))
        case Divided():
            return Divided(times_s(form.above, exponent), form.below)
    factors = form.factors if isinstance(form, Product) else (form,)
    numbers = [factor for factor in factors if not symbols(factor)]
    rest = [factor for factor in factors if symbols(factor)]
    return product([*numbers, power(Symbol("s"), exponent), *rest])


def polynomial_in_s(coefficients: list[Form]) -> Form:
    """Return a polynomial in s in descending powers from its coefficients, ascending.

    >>> polynomial_in_s([ZERO, ONE, ONE]).terms
    (Power(base=Symbol(name='s'), exponent=2), Symbol(name='s'))
    """
    terms = [times_s(form, k) for k, form in reversed(list(enumerate(coefficients))) if form != ZERO]
    if not terms:
        return ZERO
    if all(isinstance(term, Negative) for term in terms) and len(terms) > 1:
        return Negative(Sum(tuple(term.operand for term in terms if isinstance(term, Negative))))
    return terms[0] if len(terms) == 1 else _spliced(terms)


def _spliced(terms: list[Form]) -> Sum:
    """Return a sum of terms of which the last may be a sum itself (the coefficient without s)."""
    last = terms[-1]
    return Sum((*terms[:-1], *(last.terms if isinstance(last, Sum) else (last,))))
