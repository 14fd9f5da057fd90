"""Formulas of a match in spreadsheet arithmetic: ``^``, ``SQRT``, ``PI()`` and references to cells.

Two habits of spreadsheets are allowed for: a leading minus binds tighter than ``^``, and ``^`` goes left to right.
No power here has a bare sign or power for its base.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import sympy

from symcirc.match.arithmetic import Factor, Term, terms_of

#: So many characters a formula may have (OOXML, as the common programs read it: 8192), with some room.
MOST_CHARACTERS = 8000

#: The reference of the cell in which each name has its value.
Cells = Mapping[str, str]


def arithmetic(expression: sympy.Expr, cells: Cells) -> str:
    """Return an expression as spreadsheet arithmetic.

    Args:
        expression: an exact number, or arithmetic in symbols that are all in ``cells``.
        cells: references by name.

    >>> C1, C2 = sympy.symbols("C1 C2", positive=True)
    >>> arithmetic(sympy.sqrt(2) * (C1 + sympy.sqrt(C1 - 4 * C2)) / (C2 * sympy.pi**2), {"C1": "A1", "C2": "A2"})
    'SQRT(2)*(A1+SQRT(A1-4*A2))/(PI()^2*A2)'
    >>> arithmetic(-(C1**2), {"C1": "A1"})
    '-1*A1^2'
    """
    first, *others = terms_of(expression)
    lead = "" if first.sign > 0 else "-1*" if first.above and first.above[0].power != 1 else "-"
    rest = (("+" if term.sign > 0 else "-") + _product(term, cells) for term in others)
    return lead + _product(first, cells) + "".join(rest)


def summands(expression: sympy.Expr, cells: Cells) -> list[str]:
    """Return the terms of a sum as arithmetic, in groups that each fit into a cell."""
    groups: list[str] = []
    for term in sympy.Add.make_args(expression):
        text = arithmetic(term, cells)
        if groups and len(groups[-1]) + len(text) < MOST_CHARACTERS:
            groups[-1] += text if text.startswith("-") else f"+{text}"
        else:
            groups.append(text)
    return groups


def _product(term: Term, cells: Cells) -> str:
    above = _line(term.above, cells)
    if not term.below:
        return above
    below = _line(term.below, cells)
    bare = len(term.below) == 1 and len(term.below[0].bases) == 1
    return f"{above}/{below}" if bare else f"{above}/({below})"


def _line(factors: Sequence[Factor], cells: Cells) -> str:
    return "*".join(_factor(f, cells) for f in factors) or "1"


def _factor(factor: Factor, cells: Cells) -> str:
    bases = [_base(b, cells) for b in factor.bases]
    if factor.power == sympy.S.Half:
        inner = bases[0][1:-1] if len(bases) == 1 and bases[0].startswith("(") else "*".join(bases)
        return f"SQRT({inner})"
    text = f"({'*'.join(bases)})" if len(bases) > 1 else bases[0]
    if factor.power == 1:
        return text
    power = str(factor.power) if factor.power.is_Integer else f"({arithmetic(factor.power, cells)})"
    return f"{text}^{power}"


def _base(base: sympy.Expr | str, cells: Cells) -> str:
    if isinstance(base, str):
        return base.upper()
    if base == sympy.pi or str(base) == "pi":
        return "PI()"
    if base.is_Symbol:
        return cells[str(base)]
    return str(base) if base.is_Integer else f"({arithmetic(base, cells)})"
