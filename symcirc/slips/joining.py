"""Puts one more factor or term where a hand would write it."""

from __future__ import annotations

from collections.abc import Sequence

from symcirc.sheet.expression import Expression, Name, Negative, Number, Power, Product, Reciprocal, Sum
from symcirc.slips.edits import NEW, is_one, parallel_branches, product


def times(node: Expression, factor: Expression) -> Expression:
    """Return a node with one more factor: before the line, or at the end below it; numbers and s come first."""
    if isinstance(factor, Negative):
        return Negative(times(node, factor.operand), NEW)
    return _times(node, list(factor.factors) if isinstance(factor, Product) else [factor])


def _times(node: Expression, extra: Sequence[Expression]) -> Expression:
    is_product = isinstance(node, Product) and parallel_branches(node) is None
    factors = list(node.factors) if isinstance(node, Product) and is_product else [node]
    extra = [factor for factor in extra if not _raised(factors, factor)]
    above = [factor for factor in extra if not isinstance(factor, Reciprocal) and not is_one(factor)]
    below = [factor.operand for factor in extra if isinstance(factor, Reciprocal)]
    if above and isinstance(factors[0], Negative):
        factors[0] = Negative(_times(factors[0].operand, above), NEW)
    elif above:
        _put_above(factors, above)
    if below:
        _put_below(factors, below)
    return product(factors)


def _put_above(factors: list[Expression], above: Sequence[Expression]) -> None:
    line = next((k for k, factor in enumerate(factors) if isinstance(factor, Reciprocal)), len(factors))
    if line == 1 and is_one(factors[0]):
        factors[:1] = above
        return
    start = 1 if any(isinstance(factor, Number) for factor in factors[:line]) else 0
    in_front = all(isinstance(factor, Number) for factor in above) or any(map(_is_s, above))
    spot = start if in_front else line
    factors[spot:spot] = above


def _put_below(factors: list[Expression], below: list[Expression]) -> None:
    last = factors[-1]
    if isinstance(last, Reciprocal):
        line = [last.operand, *below]
        line.sort(key=lambda factor: not isinstance(factor, Number))  # a number never stands behind a factor
        factors[-1] = Reciprocal(product(line), NEW)
    else:
        factors.append(Reciprocal(product(below), NEW))


def _raised(factors: list[Expression], factor: Expression) -> bool:
    """Raise a power of a name that stands among factors already by one; tell whether it did."""
    for k, known in enumerate(factors):
        base, exponent = (known.base, known.exponent) if isinstance(known, Power) else (known, 1)
        if isinstance(base, Name) and isinstance(factor, Name) and base.text == factor.text and exponent > 0:
            factors[k] = Power(base, exponent + 1, NEW)
            return True
    return False


def _is_s(factor: Expression) -> bool:
    base = factor.base if isinstance(factor, Power) else factor
    return isinstance(base, Name) and base.text == "s"


def plus(node: Expression, term: Expression) -> Expression:
    """Return a node with one more term, at the end, but before a first one that is subtracted."""
    if isinstance(node, Number) and node.value == 0:
        return term
    terms = node.terms if isinstance(node, Sum) else (node,)
    if isinstance(terms[0], Negative) and not isinstance(term, Negative):
        return Sum((term, *terms), NEW)
    return Sum((*terms, term), NEW)
