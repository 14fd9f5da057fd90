"""Plants one slip in a true line: the kinds that hands make, by code of its own that knows nothing of the search."""

from __future__ import annotations

import random
from collections.abc import Callable, Iterator

from symcirc.sheet.expression import (
    Expression,
    Name,
    Negative,
    Power,
    Product,
    Reciprocal,
    Sum,
    children,
    nodes,
)
from symcirc.slips.apply import edited
from symcirc.slips.edits import NEW, is_one, parallel, parallel_branches, product, total
from symcirc.slips.plain import PlainWriter
from symcirc.working import Equation
from symcirc.working.written import Written


def planted(rng: random.Random, equation: Equation, kind: str) -> str | None:
    """Return the line of an equality with one slip of a kind in it, or None where it has no place for one."""
    sides = (equation.left, equation.right)
    choices = [choice for side in sides for choice in _choices(rng, side, kind, equation)]
    if not choices:
        return None
    node, new = rng.choice(choices)
    text = equation.written.text
    for side in reversed(sides):
        changed = edited(side, {id(node): new})
        if changed.tree is not side:
            first, last = side.place.column - 1, side.place.end - 1
            written = Written(text, 1, equation.written.source)
            text = text[:first] + PlainWriter(written, changed).write() + text[last:]
    return text.strip()


def _choices(
    rng: random.Random, side: Expression, kind: str, equation: Equation
) -> Iterator[tuple[Expression, Expression]]:
    parents = {id(child): node for node in nodes(side) for child in children(node)}
    hidden = {id(inner) for node in nodes(side) if parallel_branches(node) for inner in _hidden(node)}
    for node in nodes(side):
        if id(node) in hidden:
            continue
        parent = parents.get(id(node))
        if kind == "name exchanged":
            yield from ((node, new) for new in _exchanged(rng, node, equation))
        else:
            yield from ((node, new) for new in KINDS[kind](node, parent))


def _hidden(node: Expression) -> Iterator[Expression]:
    """Yield what nobody wrote of parallel parts: the sum of their reciprocals."""
    inverse = children(node)[0]
    yield from (inverse, children(inverse)[0], *children(children(inverse)[0]))


def _exchanged(rng: random.Random, node: Expression, equation: Equation) -> Iterator[Expression]:
    if not isinstance(node, Name):
        return
    lexicon = equation.lexicon
    pool = [n.text for side in (equation.left, equation.right) for n in nodes(side) if isinstance(n, Name)]
    pool += [*lexicon.symbols, *lexicon.defined.values(), *(f"V_{n}" for n in lexicon.sheet.node_places)]
    same = sorted({name for name in pool if name[0] == node.text[0] and name != node.text} - {"V_gnd"})
    if same:
        yield Name(rng.choice(same), NEW)


def _factors(node: Expression) -> tuple[Expression, ...]:
    is_product = isinstance(node, Product) and parallel_branches(node) is None
    return node.factors if isinstance(node, Product) and is_product and len(node.factors) > 1 else ()


def _without(factors: tuple[Expression, ...], k: int, *instead: Expression) -> Expression:
    return product([*factors[:k], *instead, *factors[k + 1 :]])


def _is_s(node: Expression) -> bool:
    return isinstance(node, Name) and node.text == "s"


def _sign(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    if isinstance(node, Negative):
        yield node.operand
    elif parent is None or isinstance(parent, Sum):
        yield Negative(node, NEW)


def _factor_lost(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    for k, factor in enumerate(_factors(node)):
        bare = factor.operand if isinstance(factor, Reciprocal) else factor
        if isinstance(bare, Name):
            yield _without(_factors(node), k)


def _factor_doubled(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    for k, factor in enumerate(_factors(node)):
        if isinstance(factor, Name):
            yield _without(_factors(node), k, factor, factor)


def _wrong_side(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    for k, factor in enumerate(_factors(node)):
        if isinstance(factor, Name):
            yield product([_without(_factors(node), k), Reciprocal(factor, NEW)])
        elif isinstance(factor, Reciprocal) and isinstance(factor.operand, Name | Sum):
            yield _without(_factors(node), k, factor.operand)


def _product_for_sum(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    terms = node.terms if isinstance(node, Sum) else ()
    if len(terms) == 2 and not any(is_one(term) or isinstance(term, Negative) for term in terms):
        yield product(terms)


def _sum_for_product(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    factors = _factors(node)
    if len(factors) == 2 and all(isinstance(factor, Name | Sum) for factor in factors):
        yield total(list(factors))


def _series_for_parallel(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    branches = parallel_branches(node)
    if branches:
        yield total(branches)


def _parallel_for_series(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    if isinstance(node, Sum) and len(node.terms) == 2 and all(isinstance(term, Name) for term in node.terms):
        yield parallel(list(node.terms))


def _s_lost(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    for k, factor in enumerate(_factors(node)):
        if _is_s(factor):
            yield _without(_factors(node), k)


def _s_too_many(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    if any(_is_s(factor) for factor in _factors(node)):
        yield product([Name("s", NEW), *_factors(node)])


def _bracket(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    """Yield ``a (b + c)`` as ``a b + c``."""
    if isinstance(node, Sum):
        for k, term in enumerate(node.terms):
            yield from (total([*node.terms[:k], *opened, *node.terms[k + 1 :]]) for opened in _opened(term))
    elif not isinstance(parent, Sum | Negative):
        yield from (total(opened) for opened in _opened(node))


def _opened(term: Expression) -> Iterator[list[Expression]]:
    factors = _factors(term)
    if factors and isinstance(inner := factors[-1], Sum):
        yield [product([*factors[:-1], inner.terms[0]]), *inner.terms[1:]]


def _term_lost(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    for k in range(len(node.terms)) if isinstance(node, Sum) else ():
        yield total([*node.terms[:k], *node.terms[k + 1 :]])


def _reciprocal(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    if _factors(node) and not isinstance(parent, Product | Reciprocal | Negative | Power):
        yield product(
            [f.operand if isinstance(f, Reciprocal) else Reciprocal(f, NEW) for f in _factors(node)]
        )
    elif isinstance(node, Name) and isinstance(parent, Sum):
        yield product([Reciprocal(node, NEW)])


def _exponent(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    if isinstance(node, Power):
        yield node.base if node.exponent == 2 else Power(node.base, node.exponent - 1, NEW)
        yield Power(node.base, node.exponent + 1, NEW)


def _bracket_below(node: Expression, parent: Expression | None) -> Iterator[Expression]:
    """Yield ``a/(b c)`` as ``a/b c``."""
    for k, factor in enumerate(_factors(node)):
        inner = _factors(factor.operand) if isinstance(factor, Reciprocal) else ()
        if inner and not any(isinstance(f, Reciprocal) for f in inner):
            loose = [Reciprocal(inner[0], NEW), *inner[1:]]
            yield Product((*_factors(node)[:k], *loose, *_factors(node)[k + 1 :]), NEW)


KINDS: dict[str, Callable[[Expression, Expression | None], Iterator[Expression]]] = {
    "sign": _sign,
    "factor lost": _factor_lost,
    "factor doubled": _factor_doubled,
    "wrong side": _wrong_side,
    "name exchanged": lambda node, parent: iter(()),  # wants the names at hand: _exchanged
    "product for sum": _product_for_sum,
    "sum for product": _sum_for_product,
    "series for parallel": _series_for_parallel,
    "parallel for series": _parallel_for_series,
    "s lost": _s_lost,
    "s too many": _s_too_many,
    "bracket": _bracket,
    "term lost": _term_lost,
    "reciprocal": _reciprocal,
    "exponent": _exponent,
    "bracket below": _bracket_below,
}
