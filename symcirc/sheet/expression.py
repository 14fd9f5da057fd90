"""Arithmetic as it was written: a small tree whose every node keeps its place, and how it is read.

Sums and products are n-ary, so a line with a million terms is a flat node and no deep recursion. Nothing here
ever reaches ``eval`` or sympy's own text parsers.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import TypeVar

from symcirc.complaints import Complaint, Place

T = TypeVar("T")

#: The largest size of a written number, and the smallest but zero.
LARGEST, SMALLEST = Fraction(10**30), Fraction(1, 10**30)
#: The largest size of an exponent.
LARGEST_EXPONENT = 64


@dataclass(frozen=True)
class Number:
    """An exact number."""

    value: Fraction
    place: Place


@dataclass(frozen=True)
class Name:
    """A name: a part, a parameter, an ask, ``s``, ``pi``, or a quantity ``V_n`` or ``I_n``."""

    text: str
    place: Place


@dataclass(frozen=True)
class Sum:
    """The sum of two or more terms; a difference holds a :class:`Negative`."""

    terms: tuple[Expression, ...]
    place: Place


@dataclass(frozen=True)
class Product:
    """The product of two or more factors, left to right; a quotient holds a :class:`Reciprocal`."""

    factors: tuple[Expression, ...]
    place: Place


@dataclass(frozen=True)
class Negative:
    """Minus the operand."""

    operand: Expression
    place: Place


@dataclass(frozen=True)
class Reciprocal:
    """One over the operand: a factor of a :class:`Product` that stands under the line."""

    operand: Expression
    place: Place


@dataclass(frozen=True)
class Power:
    """The base to a whole exponent."""

    base: Expression
    exponent: int
    place: Place


@dataclass(frozen=True)
class Root:
    """The square root of the operand."""

    operand: Expression
    place: Place


Expression = Number | Name | Sum | Product | Negative | Reciprocal | Power | Root


def children(node: Expression) -> tuple[Expression, ...]:
    """Return the operands of a node, in the order in which they are written."""
    match node:
        case Sum(terms=operands) | Product(factors=operands):
            return operands
        case Negative() | Reciprocal() | Root():
            return (node.operand,)
        case Power():
            return (node.base,)
        case _:
            return ()


def fold(expression: Expression, combine: Callable[[Expression, list[T]], T]) -> T:
    """Compute a value bottom-up: ``combine(node, values of its operands)`` for every node.

    The walk keeps its own stack, so the depth of the tree is no matter.
    """
    waiting: list[tuple[Expression, bool]] = [(expression, False)]
    done: list[T] = []
    while waiting:
        node, operands_done = waiting.pop()
        operands = children(node)
        if operands_done or not operands:
            count = len(operands)
            values = done[len(done) - count :]
            del done[len(done) - count :]
            done.append(combine(node, values))
        else:
            waiting.append((node, True))
            waiting.extend((operand, False) for operand in reversed(operands))
    return done[0]


def nodes(expression: Expression) -> Iterator[Expression]:
    """Yield every node of the expression, in the order in which they are written."""
    waiting = [expression]
    while waiting:
        node = waiting.pop()
        yield node
        waiting.extend(reversed(children(node)))


def names(expression: Expression) -> Iterator[Name]:
    """Yield every name in the expression, in the order in which they are written."""
    return (node for node in nodes(expression) if isinstance(node, Name))


def roots(expression: Expression) -> Iterator[Root]:
    """Yield every square root in the expression, in the order in which they are written."""
    return (node for node in nodes(expression) if isinstance(node, Root))


def with_children(node: Expression, operands: Sequence[Expression]) -> Expression:
    """Return a node with other operands, at the same place."""
    match node:
        case Sum():
            return Sum(tuple(operands), node.place)
        case Product():
            return Product(tuple(operands), node.place)
        case Power():
            return Power(operands[0], node.exponent, node.place)
        case Negative() | Reciprocal() | Root():
            return type(node)(operands[0], node.place)
        case _:
            return node


def rename(expression: Expression, new_text: Callable[[Name], str]) -> Expression:
    """Return the expression with every name's text replaced by ``new_text(name)``."""

    def combine(node: Expression, operands: list[Expression]) -> Expression:
        return Name(new_text(node), node.place) if isinstance(node, Name) else with_children(node, operands)

    return fold(expression, combine)


def refuse_zero_division(place: Place) -> Complaint:
    """Return the complaint about an expression that divides by zero."""
    return Complaint(
        place, "this divides by zero", "change what stands under the line so that it is not zero"
    )


def refuse_negative_root(place: Place) -> Complaint:
    """Return the complaint about the square root of a negative number."""
    return Complaint(place, "this is the square root of a negative number", "change the sign under the root")
