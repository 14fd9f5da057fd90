"""Writes edited sides as LaTeX, into the row that its author wrote."""

from __future__ import annotations

import re
from collections.abc import Sequence

from symcirc.sheet.expression import Expression, Number, Product, Reciprocal
from symcirc.slips.edits import NEW, is_one, parallel_branches
from symcirc.slips.plain import decimal, is_decimal, spelled
from symcirc.slips.writing import PARALLEL, POWER, PRODUCT, SUM, Writer
from symcirc.transfer.latex import latex_name

_SPELLED = {"omega": r"\omega", "w": r"\omega", "w0": r"\omega_0", "f0": "f_0"}


class LatexWriter(Writer):
    r"""Writes in display mathematics: ``\frac`` for quotients, ``\left( \right)`` for brackets."""

    @property
    def text(self) -> str:
        """The whole file."""
        return self.written.source.text

    def span(self, node: Expression) -> tuple[int, int]:
        """Return a node's stretch of the file."""
        return self.written.stretch(node.place.column - 1, node.place.end - 1)

    def bracketed(self, text: str) -> str:
        """Return a text in brackets."""
        return rf"\left( {text} \right)"

    def bare(self, text: str) -> str | None:
        """Return what stands in a text's brackets."""
        if text.startswith(r"\left(") and text.endswith(r"\right)"):
            inner = text[len(r"\left(") : -len(r"\right)")]
            return inner if _is_balanced(inner) else None
        return text[1:-1] if _closes_at_end(text, "(", ")") else None

    def bare_level(self, node: Expression) -> int:
        """Return how tightly a node binds; a fraction binds as a power does."""
        if node.place != NEW and self.slice(node).startswith((r"\frac", r"\dfrac", r"\tfrac")):
            return POWER
        return super().bare_level(node)

    def visible(self, text: str) -> str:
        """Return a text without braces around it, which nobody sees."""
        return text[1:-1].strip() if _closes_at_end(text, "{", "}") else text

    def replaced(self, old: str, new: str) -> str:
        """Return a text in braces where what was there stood in braces."""
        return f"{{{self.visible(new)}}}" if _closes_at_end(old, "{", "}") else new

    def name(self, key: str) -> str:
        r"""Return a name as LaTeX: ``V_{out}``, ``R_{1}``, ``\omega``."""
        word = spelled(key, self.written.text)
        return _SPELLED.get(word) or latex_name(word)

    def new_number(self, node: Number) -> str:
        """Return a new number."""
        number = node.value
        if is_decimal(number):
            return decimal(number)
        return rf"\frac{{{number.numerator}}}{{{number.denominator}}}"

    def power(self, base: str, exponent: int) -> str:
        """Return a new power."""
        return f"{base}^{{{exponent}}}"

    def root(self, operand: str) -> str:
        """Return a new square root."""
        return rf"\sqrt{{{operand}}}"

    def product(self, node: Product) -> str:
        """Return a new product."""
        branches = parallel_branches(node)
        if branches is not None:
            return r" \parallel ".join(self.at_least(branch, PRODUCT) for branch in branches)
        above = [
            factor for factor in node.factors if not isinstance(factor, Reciprocal) and not is_one(factor)
        ]
        below = [factor.operand for factor in node.factors if isinstance(factor, Reciprocal)]
        if not below:
            return self._juxtaposed(above)
        return rf"\frac{{{self._juxtaposed(above) or '1'}}}{{{self._juxtaposed(below)}}}"

    def _juxtaposed(self, factors: Sequence[Expression]) -> str:
        if len(factors) == 1:
            return self.at_least(factors[0], SUM)
        return " ".join(
            self.at_least(factor, PARALLEL + 1 if k == 0 else POWER) for k, factor in enumerate(factors)
        )


def _closes_at_end(text: str, opening: str, closing: str) -> bool:
    """Tell whether the bracket that opens a text is closed at its end."""
    if not text.startswith(opening) or not text.endswith(closing):
        return False
    depth = 0
    for k, character in enumerate(text):
        depth += (character == opening) - (character == closing)
        if depth == 0:
            return k == len(text) - 1
    return False


def _is_balanced(text: str) -> bool:
    depth = 0
    for piece in re.findall(r"\\left|\\right", text):
        depth += 1 if piece == r"\left" else -1
        if depth < 0:
            return False
    return depth == 0
