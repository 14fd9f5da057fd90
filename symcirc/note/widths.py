"""How formulas are laid out in print: about how wide they are, and where long sums and products are broken.

Widths are in em, the letter height of the formula's font, from the average widths of letters in common fonts for
mathematics: good to a tenth or so, which is enough to keep a line within a page.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence

from symcirc.transfer.form import (
    Decimal,
    Divided,
    Form,
    Integer,
    Negative,
    Power,
    Product,
    Sum,
    Symbol,
    children,
    product,
)
from symcirc.transfer.naming import set_name

#: A digit or an upright letter, a slanted letter, an operator with its spaces, the space between factors, a root's
#: hook, brackets around one line and around what is higher; how small scripts and fractions inside of fractions are.
_UPRIGHT, _SLANTED, _OPERATOR, _GAP, _HOOK, _LOW, _HIGH, _SMALL = 0.5, 0.62, 1.15, 0.18, 0.9, 0.8, 1.75, 0.72


def width(form: Form, inside_fraction: bool = False) -> float:
    """Return about how wide a formula is, in em.

    >>> round(width(Product((Symbol("R1"), Symbol("C1")))), 2)
    2.32
    """
    match form:
        case Integer():
            return _UPRIGHT * len(str(form.value))
        case Decimal():
            return _UPRIGHT * len(form.text) + (_OPERATOR if "e" in form.text else 0)
        case Symbol():
            return _name_width(form.name)
        case Sum():
            return sum(term_width(term, inside_fraction) for term in form.terms) - _OPERATOR
        case Negative():
            return _OPERATOR + width(form.operand, inside_fraction)
        case Product():
            return sum(factor_width(factor, inside_fraction) for factor in form.factors)
        case Divided():
            above, after = fraction_parts(form)
            widest = max(width(above, True), width(form.below, True)) * (_SMALL if inside_fraction else 1)
            return widest + 0.3 + sum(factor_width(factor, inside_fraction) for factor in after)
        case Power():
            brackets = 0.0 if isinstance(form.base, Symbol) else _brackets(form.base)
            return width(form.base, inside_fraction) + brackets + _SMALL * _UPRIGHT * len(str(form.exponent))
    return width(form.operand, inside_fraction) + _HOOK


def fraction_parts(form: Divided) -> tuple[Form, list[Form]]:
    """Return what stands above a fraction's line, and what after it: sums of fractions, which would be too small above.

    >>> a, b = Symbol("a"), Symbol("b")
    >>> fraction_parts(Divided(Product((a, Sum((a, Divided(a, b))))), b))[0]
    Symbol(name='a')
    """
    factors = list(form.above.factors) if isinstance(form.above, Product) else [form.above]
    after: list[Form] = [factor for factor in factors if isinstance(factor, Sum) and _is_high(factor)]
    return product([factor for factor in factors if factor not in after]), after


def term_width(term: Form, inside_fraction: bool = False) -> float:
    """Return about how wide a term of a sum is, with the sign before it."""
    operand = term.operand if isinstance(term, Negative) else term
    brackets = _brackets(operand) if isinstance(operand, Sum | Negative) else 0
    return _OPERATOR + brackets + width(operand, inside_fraction)


def factor_width(factor: Form, inside_fraction: bool = False) -> float:
    """Return about how wide a factor of a product is, with the space after it."""
    brackets = _brackets(factor) if isinstance(factor, Sum | Negative) else 0
    return _GAP + brackets + width(factor, inside_fraction)


def lines(parts: Sequence[Form], width_of: Callable[[Form], float], room: float) -> list[list[Form]]:
    """Return the terms of a sum, or the factors of a product, on lines that are no wider than ``room`` if they can be.

    >>> terms = [Symbol(name) for name in "abcde"]
    >>> [len(line) for line in lines(terms, term_width, 4.0)]
    [2, 2, 1]
    """
    broken: list[list[Form]] = [[]]
    used = 0.0
    for part in parts:
        wide = width_of(part)
        if broken[-1] and used + wide > room:
            broken.append([])
            used = 0.0
        broken[-1].append(part)
        used += wide
    return broken


def _brackets(form: Form) -> float:
    return _HIGH if _is_high(form) else _LOW


def _is_high(form: Form) -> bool:
    return isinstance(form, Divided) or any(_is_high(child) for child in children(form))


def _name_width(name: str) -> float:
    written = set_name(name)
    base = _SLANTED if len(written.base) == 1 else _UPRIGHT * len(written.base)
    letters = sum(map(len, written.indices)) + max(len(written.indices) - 1, 0)
    return base + _SMALL * _UPRIGHT * letters
