"""The displayed equations of a note in numbers, with 50 digits: from the printed trees, not from what they came of."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import mpmath

from symcirc.note.model import Block, Derivation, Document, Equation
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
)

DIGITS = 50


def value(form: Form, known: Mapping[str, Any]) -> Any:
    """Return the value of a form."""
    match form:
        case Integer():
            return mpmath.mpf(form.value)
        case Decimal():
            return mpmath.mpf(form.text)
        case Symbol():
            return mpmath.pi + 0 if form.name == "pi" else known[form.name]
        case Sum():
            return mpmath.fsum(value(term, known) for term in form.terms)
        case Product():
            return mpmath.fprod(value(factor, known) for factor in form.factors)
        case Divided():
            return value(form.above, known) / value(form.below, known)
        case Power():
            return value(form.base, known) ** form.exponent
        case Negative():
            return -value(form.operand, known)
    return mpmath.sqrt(value(form.operand, known))


def has_decimals(form: Form) -> bool:
    return isinstance(form, Decimal) or any(map(has_decimals, children(form)))


def equations(document: Document) -> list[Equation]:
    """Return all displayed equations, in their order."""
    found: list[Equation] = []
    blocks: tuple[Block, ...] = document.blocks
    for block in blocks:
        if isinstance(block, Equation):
            found.append(block)
        elif isinstance(block, Derivation):
            found += [step.equation for step in block.steps]
    return found


def by_anchor(document: Document) -> dict[str, Equation]:
    return {equation.anchor: equation for equation in equations(document)}
