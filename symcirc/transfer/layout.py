"""A transfer function on a terminal: numerator over denominator, with a bar, long sums broken over lines."""

from __future__ import annotations

import itertools
import re

from symcirc.transfer.form import ONE, polynomial_in_s
from symcirc.transfer.standard import Forms
from symcirc.transfer.text import text

WIDTH = 100
#: How far to the right the lines of a broken product go, and how much room a broken bracket must have.
_INDENT, _NARROWEST = 4, 40


def function_text(forms: Forms, name: str = "", width: int = WIDTH) -> str:
    """Return a function as it is shown on a terminal, in descending powers of s.

    Args:
        forms: the coefficients, from :func:`~symcirc.transfer.standard.coefficient_forms` or ``monic_forms``.
        name: what stands to the left of the equals sign; nothing and no equals sign where it is empty.
        width: sums are broken so that no line is wider, where an operator allows it.

    >>> from symcirc.transfer.form import Symbol
    >>> print(function_text(Forms((Symbol("k"),), (ONE, Symbol("T"))), "H"))
           k
    H = -------
        s*T + 1
    """
    left = f"{name} = " if name else ""
    above, below = (polynomial_in_s(list(side)) for side in (forms.numerator, forms.denominator))
    upper = broken(text(above), width - len(left))
    if below == ONE:
        return "\n".join((left if k == 0 else " " * len(left)) + line for k, line in enumerate(upper))
    lower = broken(text(below), width - len(left))
    bar = max(map(len, [*upper, *lower]))
    indent = " " * len(left)
    lines = [indent + line for line in _centred(upper, bar)]
    return "\n".join([*lines, left + "-" * bar, *(indent + line for line in _centred(lower, bar))])


def _centred(lines: list[str], width: int) -> list[str]:
    margin = (width - max(map(len, lines))) // 2
    return [" " * margin + line for line in lines]


def broken(arithmetic: str, width: int) -> list[str]:
    """Break plain arithmetic into lines: before the plus and minus signs of its outermost sum.

    A term too long for a line is broken before its ``*`` and ``/``, further to the right; a bracket too long
    for a line is broken like a sum, under the bracket's first term.

    >>> broken("R1*R2 + R3*R4 - R5", 12)
    ['R1*R2', '+ R3*R4 - R5']
    """
    if len(arithmetic) <= width:
        return [arithmetic]
    lines: list[str] = []
    open_line = False
    for term in _pieces(arithmetic, r" [+-] "):
        if open_line and len(lines[-1]) + 1 + len(term) <= width:
            lines[-1] += " " + term
            continue
        open_line = len(term) <= width
        lines += [term] if open_line else _broken_term(term, width)
    return lines


def _pieces(arithmetic: str, operator: str) -> list[str]:
    """Split before the operators outside brackets."""
    inside = _depths(arithmetic)
    starts = [m.start() for m in re.finditer(operator, arithmetic)]
    cuts = [0, *(start for start in starts if start and not inside[start]), len(arithmetic)]
    return [arithmetic[a:b].strip() for a, b in itertools.pairwise(cuts)]


def _depths(arithmetic: str) -> list[int]:
    """Return how many brackets are open at each character, a bracket itself not counted as inside."""
    depths, depth = [], 0
    for character in arithmetic:
        depth -= character == ")"
        depths.append(depth)
        depth += character == "("
    return depths


def _broken_term(term: str, width: int) -> list[str]:
    """Break a product: factors go on while they fit; a long bracket is broken where it begins."""
    lines = [""]
    for factor in _pieces(term, r"(?<!\*)\*(?!\*)|/"):
        begun = len(lines[-1])
        if (not begun and "(" not in factor) or begun + len(factor) <= width:
            lines[-1] += factor
        elif len(factor) <= width - _INDENT or "(" not in factor:
            lines.append(" " * _INDENT + factor)
        else:
            if begun + _NARROWEST > width:
                lines.append(" " * _INDENT)
            lines[-1:] = _broken_bracket(lines[-1], factor, width)
    return lines


def _broken_bracket(before: str, factor: str, width: int) -> list[str]:
    """Break the inside of a factor such as ``*(A + B)**2``, which stands behind the beginning of a line."""
    start, end = factor.index("(") + 1, factor.rindex(")")
    before += factor[:start]
    inner = broken(factor[start:end], max(width - len(before) - 1, _NARROWEST))
    lines = [before + inner[0], *(" " * len(before) + line for line in inner[1:])]
    lines[-1] += factor[end:]
    return lines
