"""A false line as its author wrote it, and with mends put in: read, written, and read again."""

from __future__ import annotations

import re
from collections import Counter
from dataclasses import dataclass, replace

from symcirc.complaints import Complaint, Place, Source
from symcirc.sheet.expression import Expression, Name, Negative, Number, Product, Reciprocal, Sum, nodes
from symcirc.slips.edits import is_one
from symcirc.slips.latex import LatexWriter
from symcirc.slips.plain import PlainWriter
from symcirc.slips.search import Mend
from symcirc.working.check import Claim, claims
from symcirc.working.names import Lexicon
from symcirc.working.parse import Chain, Let, parse_line
from symcirc.working.read import read_lines
from symcirc.working.records import Equation
from symcirc.working.written import Written


@dataclass(frozen=True)
class Row:
    """An equality whose trees have their places in the line's plain text, and the line as it stands in its file."""

    equation: Equation
    written: Written

    @staticmethod
    def of(equation: Equation) -> Row | None:
        """Return the row of an equality that was read from a file."""
        written = equation.written
        plain = Written(written.text, 1, Source(written.source.file, written.text))
        claim = _claim(plain, equation.lexicon, equation.position)
        if claim is None:
            return None
        return Row(replace(equation, left=claim.left, right=claim.right, written=plain), written)

    @property
    def is_latex(self) -> bool:
        """Tell whether the line was written in LaTeX."""
        return self.written.spans is not None

    def place(self, place: Place | None) -> Place:
        """Return a place of the plain text as one of the file; the whole line for None."""
        if place is None:
            return self.written.place(0, len(self.written.text))
        return self.written.place(place.column - 1, place.end - 1)

    def with_mend(self, mend: Mend) -> str:
        """Return the whole line with a mend in it, in the notation that it is in."""
        sides = [(self.equation.left, mend.left), (self.equation.right, mend.right)]
        if not self.is_latex:
            text = self.written.text
            for old, new in reversed(sides):
                piece = PlainWriter(self.equation.written, new).write()
                text = text[: old.place.column - 1] + piece + text[old.place.end - 1 :]
            return text.strip()
        start, end = self.written.stretch(0, len(self.written.text))
        text = self.written.source.text[:end]
        for old, new in reversed(sides):
            writer = LatexWriter(self.written, new)
            first, last = writer.span(old)
            text = text[:first] + writer.write() + text[last:]
        return " ".join(re.sub(r"(?<!\\)%[^\n]*", "", text[start:]).split())

    def read(self, text: str) -> Claim | None:
        """Return the equality that a mended line says in its place, or None where it cannot be read."""
        if not self.is_latex:
            written = Written(text, 1, Source(self.written.source.file, text))
            return _claim(written, self.equation.lexicon, self.equation.position)
        try:
            (row,) = read_lines(Source("mend.tex", rf"\[{text}\]"))
        except (Complaint, ValueError):
            return None
        return _claim(row, self.equation.lexicon, self.equation.position)


def _claim(written: Written, lexicon: Lexicon, position: int) -> Claim | None:
    try:
        statement = parse_line(written, lexicon)
    except Complaint:
        return None
    if not isinstance(statement, Chain | Let):
        return None
    found = list(claims(statement, written))
    if position >= len(found):
        return None
    known = [name for side in (found[position].left, found[position].right) for name in nodes(side)]
    if any(isinstance(name, Name) and not lexicon.is_key(name.text) for name in known):
        return None
    return found[position]


def is_small(equation: Equation, mend: Mend) -> bool:
    """Tell whether a mend rewrites no more than a third of what was written, and adds no more than as much again."""
    old = Counter(_words(equation.left)) + Counter(_words(equation.right))
    new = Counter(_words(mend.left.tree)) + Counter(_words(mend.right.tree))
    size = old.total()
    return (old - new).total() <= max(1, size / 3) and (new - old).total() <= max(3, size)


def _words(side: Expression) -> list[object]:
    """Return the names of a side and its numbers but 1."""
    named = [node.text for node in nodes(side) if isinstance(node, Name)]
    return [*named, *(node.value for node in nodes(side) if isinstance(node, Number) and node.value != 1)]


def doubt(equation: Equation, mend: Mend) -> float:
    """Return what makes a mend less likely.

    It changes the shorter side, which says what the line is about; it leaves something that cancels; it is long.
    """
    left, right = (len(list(nodes(side))) for side in (equation.left, equation.right))
    at_left, at_right = mend.left.tree is not equation.left, mend.right.tree is not equation.right
    at_shorter = (at_left and 2 * left < right) or (at_right and 2 * right < left)
    length = sum(len(list(nodes(side.tree))) for side in (mend.left, mend.right))
    cancels = 0.5 if cancelling(mend.left.tree, mend.right.tree) else 0.0
    return (0.4 if at_shorter else 0.05 if at_left else 0.0) + 0.005 * length + cancels


def cancelling(left: Expression, right: Expression) -> int:
    """Return how many sums take a name away from itself, and how many quotients hold a name above and below."""
    shared = _plain_terms(left) & _plain_terms(right)
    return len(shared) + sum(_cancels(node) for side in (left, right) for node in nodes(side))


def _plain_terms(side: Expression) -> set[str]:
    """Return the names that are terms of a side by themselves."""
    return {
        term.text for term in (side.terms if isinstance(side, Sum) else (side,)) if isinstance(term, Name)
    }


def _cancels(node: Expression) -> bool:
    match node:
        case Sum(terms=operands):
            turned = [term.operand for term in operands if isinstance(term, Negative)]
        case Product(factors=operands):
            turned = [factor.operand for factor in operands if isinstance(factor, Reciprocal)]
        case _:
            return False
    plain = {operand.text for operand in operands if isinstance(operand, Name)}
    return any(is_one(other) or (isinstance(other, Name) and other.text in plain) for other in turned)
