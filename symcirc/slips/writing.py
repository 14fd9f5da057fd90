"""Writes an edited side in the hand of its author: what was not touched stays as it was typed.

What is the same for plain text and LaTeX is here; the two kinds of text are in ``plain.py`` and ``latex.py``.
"""

from __future__ import annotations

from abc import ABC, abstractmethod

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
from symcirc.slips.apply import Edited
from symcirc.slips.edits import NEW, parallel_branches
from symcirc.working.written import Written

#: How tightly a piece of text binds.
SUM, PARALLEL, PRODUCT, SIGNED, POWER, ATOM = range(6)


class Writer(ABC):
    """Writes the nodes of one side of a line, whose places are columns of the line's plain text."""

    def __init__(self, written: Written, side: Edited) -> None:
        self.written, self.side = written, side

    @abstractmethod
    def span(self, node: Expression) -> tuple[int, int]:
        """Return where a node that was written stands in the text that is edited."""

    @property
    @abstractmethod
    def text(self) -> str:
        """The text that is edited."""

    @abstractmethod
    def bracketed(self, text: str) -> str:
        """Return a text in brackets."""

    @abstractmethod
    def bare(self, text: str) -> str | None:
        """Return what stands in a text's brackets, or None where it is not in brackets as a whole."""

    @abstractmethod
    def name(self, key: str) -> str:
        """Return a name as it is written."""

    @abstractmethod
    def product(self, node: Product) -> str:
        """Return a new product."""

    @abstractmethod
    def new_number(self, node: Number) -> str:
        """Return a new number."""

    @abstractmethod
    def power(self, base: str, exponent: int) -> str:
        """Return a new power."""

    @abstractmethod
    def root(self, operand: str) -> str:
        """Return a new square root."""

    def visible(self, text: str) -> str:
        """Return a text without what only its notation puts around it."""
        return text

    def replaced(self, old: str, new: str) -> str:
        """Return what is put in the place of a text that was written."""
        return new

    def write(self, node: Expression | None = None) -> str:
        """Return the text of a node, or of the whole side."""
        node = self.side.tree if node is None else node
        if node.place == NEW:
            return self._composed(node)
        original = self.side.originals.get(id(node))
        return self.slice(node) if original is None else self._spliced(original, node)

    def slice(self, node: Expression) -> str:
        """Return a node as it was written."""
        first, last = self.span(node)
        return self.text[first:last]

    def level(self, node: Expression) -> int:
        """Return how tightly a node's text binds."""
        if node.place != NEW and self.bare(self.visible(self.slice(node))) is not None:
            return ATOM
        return self.bare_level(node)

    def bare_level(self, node: Expression) -> int:
        """Return how tightly a node binds without brackets around it."""
        match node:
            case Sum():
                return SUM
            case Product():
                if parallel_branches(node) is not None:
                    return PARALLEL
                return PRODUCT if len(node.factors) > 1 else self.level(node.factors[0])
            case Negative():
                return SIGNED
            case Power():
                return POWER
            case Reciprocal():
                return self.level(node.operand) if node.place != NEW else PRODUCT
            case _:
                return ATOM

    def at_least(self, node: Expression, level: int) -> str:
        """Return a node's text, in brackets where it binds less tightly than it must, and without them elsewhere."""
        text = self.visible(self.write(node))
        inner = self.bare(text)
        if inner is not None and self.bare_level(node) >= level:
            return inner.strip()
        return text if inner is not None or self.level(node) >= level else self.bracketed(text)

    # what stands, with pieces changed --------------------------------------------------------------------------

    def _spliced(self, original: Expression, node: Expression) -> str:
        text, start = self.slice(original), self.span(original)[0]
        pairs = list(zip(children(original), children(node), strict=True))
        for k, (old, new) in reversed(list(enumerate(pairs))):
            if new is old:
                continue
            first, last = (offset - start for offset in self.span(old))
            if isinstance(original, Sum):
                first, piece = self._term(text, first, k, old, new)
            elif isinstance(new, Reciprocal) or parallel_branches(Product((original,), NEW)) is not None:
                piece = self.write(
                    new
                )  # its own splice brackets what it must; and nobody wrote the sum of parallel parts
            else:
                is_apart = self.visible(text[first:last]) != text[first:last]
                piece = self.at_least(new, SUM if is_apart else self._needed(original, k))
            piece = self.replaced(text[first:last], piece)
            text = text[:first] + _apart(text[:first], piece, text[last:]) + text[last:]
        return text

    def _term(self, text: str, first: int, k: int, old: Expression, new: Expression) -> tuple[int, str]:
        """Return where a term begins, its sign included, and what to write there."""
        if not isinstance(old, Negative) and isinstance(new, Negative) and k > 0:
            plus = text.rindex("+", 0, first)
            return plus, "- " + self.at_least(new.operand, PRODUCT)
        if isinstance(old, Negative) and not isinstance(new, Negative):
            is_inner = k == 0 or text[:first].rstrip().endswith("+")
            return first, ("" if is_inner else "+ ") + self.at_least(new, PARALLEL)
        if isinstance(old, Negative) and isinstance(new, Negative) and new.place == NEW and k > 0:
            return first, "- " + self.at_least(new.operand, PRODUCT)
        return first, self.at_least(new, PARALLEL)

    def _needed(self, original: Expression, k: int) -> int:
        match original:
            case Product():
                return PRODUCT if k == 0 else POWER
            case Reciprocal():
                return POWER
            case Negative():
                return PRODUCT
            case Power():
                return ATOM
            case _:
                return SUM

    # what is new -----------------------------------------------------------------------------------------------

    def _composed(self, node: Expression) -> str:
        match node:
            case Number():
                return self.new_number(node)
            case Name():
                return self.name(node.text)
            case Sum():
                return self._sum(node)
            case Product():
                return self.product(node)
            case Negative():
                operand = self.at_least(node.operand, PRODUCT)
                return operand[1:] if operand.startswith("-") else "-" + operand
            case Reciprocal():
                raise AssertionError("what stands below a line is its product's business")
            case Power():
                return self.power(self.at_least(node.base, ATOM), node.exponent)
            case Root():
                return self.root(self.at_least(node.operand, SUM))

    def _sum(self, node: Sum) -> str:
        text = self.at_least(node.terms[0], PARALLEL)
        for term in node.terms[1:]:
            minus = isinstance(term, Negative)
            bare = term.operand if isinstance(term, Negative) else term
            text += (" - " if minus else " + ") + self.at_least(bare, PRODUCT if minus else PARALLEL)
        return text


def _apart(before: str, piece: str, after: str) -> str:
    """Return a piece with spaces where it would run into its neighbours."""
    if before[-1:].isalnum() and (piece[:1].isalnum() or piece[:1] == "("):
        piece = " " + piece
    if after[:1].isalnum() and (piece[-1:].isalnum() or piece[-1:] == ")"):
        piece += " "
    return piece
