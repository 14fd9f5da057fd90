"""From the trees of ``grammars/expression.lark`` to expressions; the sheet and the working share it."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

from lark import Token, Transformer_NonRecursive

from symcirc.complaints import Complaint, Place, Source
from symcirc.sheet.expression import (
    LARGEST_EXPONENT,
    Expression,
    Name,
    Negative,
    Number,
    Power,
    Product,
    Reciprocal,
    Root,
    Sum,
)
from symcirc.sheet.quantity import read_number

#: What a rule's children are: tokens, and what the rules below it made.
Children = list[Any]


class ExpressionReader(Transformer_NonRecursive[Token, Any]):
    """One method a rule; a rule with a single child is not there, so a child may be a bare number or name."""

    def __init__(self, source: Source) -> None:
        super().__init__(visit_tokens=False)
        self.source = source

    def place(self, token: Token) -> Place:
        """Return the place of a token, which stands in one line."""
        line, column = token.line or 1, token.column or 1
        return Place(line, column, column + len(token), self.source)

    def name(self, token: Token) -> Name:
        """Return a token as a name."""
        return Name(str(token), self.place(token))

    def expression(self, child: Token | Expression) -> Expression:
        """Return a child as an expression."""
        if not isinstance(child, Token):
            return child
        place = self.place(child)
        if child.type == "NUMBER":
            return Number(read_number(str(child), place), place)
        return Name(str(child), place)

    def sum(self, children: Children) -> Expression:
        """``a + b - c``."""
        terms = [self.expression(children[0])]
        for sign, child in zip(children[1::2], children[2::2], strict=True):
            term = self.expression(child)
            minus = sign.type == "MINUS"
            terms.append(Negative(term, _from_to(self.place(sign), term)) if minus else term)
        return Sum(tuple(terms), _from_to(terms[0].place, terms[-1]))

    def product(self, children: Children) -> Expression:
        """``a*b/c``."""
        factors = [self.expression(children[0])]
        for sign, child in zip(children[1::2], children[2::2], strict=True):
            factor = self.expression(child)
            factors.append(Reciprocal(factor, factor.place) if sign.type == "OVER" else factor)
        return Product(tuple(factors), _from_to(factors[0].place, factors[-1]))

    def signed(self, children: Children) -> Expression:
        """``-a``."""
        operand = self.expression(children[-1])
        if not _is_minus(children[:-1]):
            return operand
        return Negative(operand, _from_to(self.place(children[0]), operand))

    def power(self, children: Children) -> Expression:
        """``a^n``."""
        base, _, *signs, last = children
        base = self.expression(base)
        exponent = self._exponent(self.expression(last))
        return Power(
            base,
            -exponent if _is_minus(signs) else exponent,
            _from_to(base.place, self.expression(last)),
        )

    def _exponent(self, written: Expression) -> int:
        sign, exponent = 1, written
        while isinstance(exponent, Negative):
            sign, exponent = -sign, exponent.operand
        if not isinstance(exponent, Number) or exponent.value.denominator != 1:
            raise Complaint(
                written.place,
                "an exponent must be a whole number",
                "write a power as x^2, and a root as sqrt(x)",
            )
        if exponent.value > LARGEST_EXPONENT:
            raise Complaint(
                written.place,
                f"exponents larger than {LARGEST_EXPONENT} are refused",
                f"use an exponent from -{LARGEST_EXPONENT} to {LARGEST_EXPONENT}",
            )
        return sign * int(exponent.value)

    def root(self, children: Children) -> Expression:
        """``sqrt(a)``."""
        operand = self.expression(children[2])
        place = self.place(children[0])
        return Root(operand, replace(place, end=self.place(children[3]).end))

    def bracket(self, children: Children) -> Expression:
        """``(a)``."""
        inner = self.expression(children[1])
        return replace(inner, place=replace(self.place(children[0]), end=self.place(children[2]).end))


def _is_minus(signs: Children) -> bool:
    return sum(1 for sign in signs if sign.type == "MINUS") % 2 == 1


def _from_to(first: Place, last: Expression) -> Place:
    """Return the stretch of a line from a place to an expression's end."""
    return Place(first.line, first.column, last.place.end, first.source)
