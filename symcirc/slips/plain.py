"""Writes edited sides as plain text."""

from __future__ import annotations

from fractions import Fraction

from symcirc.sheet.expression import Expression, Number, Product, Reciprocal
from symcirc.slips.edits import is_one, parallel_branches
from symcirc.slips.worlds import LARGEST_FRACTION
from symcirc.slips.writing import POWER, PRODUCT, Writer
from symcirc.working.names import CONSTANTS


class PlainWriter(Writer):
    """Writes in the language of workings, products and parallel parts as the line has them."""

    @property
    def text(self) -> str:
        """The line."""
        return self.written.text

    def span(self, node: Expression) -> tuple[int, int]:
        """Return a node's columns, from 0."""
        return node.place.column - 1, node.place.end - 1

    def bracketed(self, text: str) -> str:
        """Return a text in brackets."""
        return f"({text})"

    def bare(self, text: str) -> str | None:
        """Return what stands in a text's brackets."""
        return text[1:-1] if is_one_bracket(text) else None

    def name(self, key: str) -> str:
        """Return a name as its author writes it."""
        return spelled(key, self.text)

    def new_number(self, node: Number) -> str:
        """Return a new number."""
        number = node.value
        if is_decimal(number):
            return decimal(number)
        return f"({number.numerator}/{number.denominator})"

    def power(self, base: str, exponent: int) -> str:
        """Return a new power."""
        return f"{base}^{exponent if exponent > 0 else f'({exponent})'}"

    def root(self, operand: str) -> str:
        """Return a new square root."""
        return f"sqrt({operand})"

    def product(self, node: Product) -> str:
        """Return a new product."""
        branches = parallel_branches(node)
        if branches is not None:
            sign = next((sign for sign in ("∥", "//", "||") if sign in self.text), "||")
            return f" {sign} ".join(self.at_least(branch, PRODUCT) for branch in branches)
        times = " " if "*" not in self.text else " * " if " * " in self.text else "*"
        text = self.at_least(node.factors[0], PRODUCT)
        for k, factor in enumerate(node.factors[1:], 1):
            if isinstance(factor, Reciprocal):
                text += "/" + self.at_least(factor.operand, POWER)
            elif k == 1 and is_one(node.factors[0]):
                text = self.at_least(factor, PRODUCT)
            else:
                piece = self.at_least(factor, POWER)
                text += ("*" if piece[0].isdigit() else times) + piece
        return text


def is_one_bracket(text: str) -> bool:
    """Tell whether a text is one pair of brackets and what is in it."""
    if not text.startswith("(") or not text.endswith(")"):
        return False
    depth = 0
    for k, character in enumerate(text):
        depth += (character == "(") - (character == ")")
        if depth == 0:
            return k == len(text) - 1
    return False


def is_decimal(number: Fraction) -> bool:
    """Tell whether a number is written in one go: a whole one, or one of a few decimals that is no short fraction."""
    return (
        number.denominator == 1
        or number.denominator > LARGEST_FRACTION
        or number.denominator in (10, 100, 1000)
    )


def decimal(number: Fraction) -> str:
    """Return a number with its digits.

    >>> decimal(Fraction(4)), decimal(Fraction("0.0001254"))
    ('4', '0.0001254')
    """
    return str(number.numerator) if number.denominator == 1 else f"{float(number):.12g}"


def spelled(key: str, line: str) -> str:
    """Return a name as its author writes it in a line.

    >>> spelled("Va@3", ""), spelled("@w", "omega C1")
    ('Va', 'omega')
    """
    if not key.startswith("@"):
        return key.split("@")[0]
    words = [word for word, meant in CONSTANTS.items() if meant == key]
    return next((word for word in words if word in line), words[0])
