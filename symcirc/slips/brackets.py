"""Slips of brackets: one lost, one too many, one that closes too early or too late."""

from __future__ import annotations

from collections.abc import Iterator

from symcirc.sheet.expression import Expression, Negative, Product, Reciprocal, Sum
from symcirc.slips.edits import NEW, Edit, parallel_branches, product, total
from symcirc.slips.spots import Spot

#: In a sum of more terms no brackets are tried.
MOST_TERMS = 12


def bracket_edits(spot: Spot) -> Iterator[Edit]:
    """Yield the edits of brackets whose outcome replaces a sum, or a product that becomes one."""
    node = spot.node
    if isinstance(node, Sum) and len(node.terms) <= MOST_TERMS:
        yield from _inserted(spot, node)
        for k, term in enumerate(node.terms):
            yield from _removed(spot, node.terms[:k], term, node.terms[k + 1 :])
            yield from _longer(spot, node.terms, k)
    elif not (spot.parent is not None and isinstance(spot.parent.node, Sum | Negative)):
        yield from _removed(spot, (), node, ())


def _factors(term: Expression) -> tuple[bool, tuple[Expression, ...]]:
    """Return whether a term is subtracted, and its factors."""
    is_minus = isinstance(term, Negative)
    bare = term.operand if isinstance(term, Negative) else term
    if isinstance(bare, Product) and parallel_branches(bare) is None:
        return is_minus, bare.factors
    return is_minus, (bare,)


def _signed(is_minus: bool, factors: list[Expression]) -> Expression:
    bare = product(factors)
    return Negative(bare, NEW) if is_minus else bare


def _inserted(spot: Spot, node: Sum) -> Iterator[Edit]:
    """Yield ``a b + c`` as ``a (b + c)``, ``a + b c`` as ``(a + b) c``, ``-a + b`` as ``-(a + b)``, and so on."""
    terms = node.terms
    for i in range(len(terms) - 1):
        minus, first = _factors(terms[i])
        for j in range(i + 1, len(terms)):
            if (
                i == 0
                and j == len(terms) - 1
                and not minus
                and len(first) == 1
                and len(_factors(terms[j])[1]) == 1
            ):
                continue
            last_minus, last = _factors(terms[j])
            for cut in range(len(first)):
                head, opened = _opened(first, cut)
                for end in range(1, len(last) + 1):
                    if cut == 0 and not minus and end == len(last):
                        continue
                    inner = [opened, *terms[i + 1 : j], _signed(last_minus, list(last[:end]))]
                    grouped = total(inner)
                    middle = Reciprocal(grouped, NEW) if isinstance(first[cut], Reciprocal) else grouped
                    whole = _signed(minus, [*head, middle, *last[end:]])
                    changed = total([*terms[:i], whole, *terms[j + 1 :]])
                    yield Edit(spot, changed, 1.3, "bracket lost", grouped)


def _opened(factors: tuple[Expression, ...], cut: int) -> tuple[list[Expression], Expression]:
    """Return what stands before a bracket opened at a factor, and what stands first in it."""
    factor = factors[cut]
    inside = [factor.operand if isinstance(factor, Reciprocal) else factor, *factors[cut + 1 :]]
    return list(factors[:cut]), product(inside)


def _removed(
    spot: Spot, before: tuple[Expression, ...], term: Expression, after: tuple[Expression, ...]
) -> Iterator[Edit]:
    """Yield ``a (b + c) d`` as ``a b + c d``, and with its last or first terms moved out of the bracket."""
    minus, factors = _factors(term)
    for k, factor in enumerate(factors):
        inner = factor.operand if isinstance(factor, Reciprocal) else factor
        if not isinstance(inner, Sum) or (len(factors) == 1 and not minus):
            continue
        head, tail = list(factors[:k]), list(factors[k + 1 :])
        is_below = isinstance(factor, Reciprocal)

        def opening(
            terms: tuple[Expression, ...], head: list[Expression] = head, low: bool = is_below
        ) -> Expression:
            bare = total(list(terms))
            return _signed(minus, [*head, Reciprocal(bare, NEW) if low else bare])

        for cut in range(1, len(inner.terms)):
            last = inner.terms[-1]
            closing = [*inner.terms[cut:-1], _with_tail(last, tail)]
            changed = total([*before, opening(inner.terms[:cut]), *closing, *after])
            yield Edit(spot, changed, 1.2 if cut == 1 else 1.3, "bracket too many", inner)


def _with_tail(term: Expression, tail: list[Expression]) -> Expression:
    if not tail:
        return term
    if isinstance(term, Negative):
        return Negative(product([term.operand, *tail]), NEW)
    return product([term, *tail])


def _longer(spot: Spot, terms: tuple[Expression, ...], k: int) -> Iterator[Edit]:
    """Yield ``a (b + c) + d`` as ``a (b + c + d)``: the bracket closes too early."""
    minus, factors = _factors(terms[k])
    last = factors[-1]
    inner = last.operand if isinstance(last, Reciprocal) else last
    if not isinstance(inner, Sum):
        return
    for end in range(k + 2, len(terms) + 1):
        wide = total([*inner.terms, *terms[k + 1 : end]])
        factor = Reciprocal(wide, NEW) if isinstance(last, Reciprocal) else wide
        changed = total([*terms[:k], _signed(minus, [*factors[:-1], factor]), *terms[end:]])
        yield Edit(spot, changed, 1.3, "bracket closed early", wide)
