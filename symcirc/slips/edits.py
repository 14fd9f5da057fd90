"""The slips that a hand makes, as edits of a tree: each takes one subtree back to what may have been meant.

Here are the edits that need no search: what they write is made of what stands there already. ``lost.py`` looks for
what is not there.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from fractions import Fraction

from symcirc.complaints import Place, Source
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
)
from symcirc.slips.spots import Spot

#: The place of a node that nobody wrote.
NEW = Place(0, 0, 0, Source("", ""))
ONE = Number(Fraction(1), NEW)


@dataclass(frozen=True)
class Edit:
    """A spot's subtree and what replaces it.

    ``kind`` and ``subject`` say what the slip is, ``instead`` what belongs there; ``cost`` orders edits by how
    often a hand makes them.
    """

    spot: Spot
    replacement: Expression
    cost: float
    kind: str
    subject: Expression | None = None
    instead: Expression | None = None


def edits_at(spot: Spot) -> Iterator[Edit]:
    """Yield the edits of one spot."""
    yield from _signs(spot)
    yield from _reciprocals(spot)
    match spot.node:
        case Product():
            yield from _products(spot, spot.node)
        case Sum():
            yield from _sums(spot, spot.node)
        case Power():
            yield from _powers(spot, spot.node)
        case Root():
            yield Edit(spot, spot.node.operand, 1.6, "root too many", spot.node)


# signs, reciprocals, exponents ------------------------------------------------------------------------------------


def _signs(spot: Spot) -> Iterator[Edit]:
    node = spot.node
    is_term = spot.parent is None or isinstance(spot.parent.node, Sum)
    if isinstance(node, Negative):
        yield Edit(spot, node.operand, 1.0, "sign", node.operand)
    elif is_term:
        if isinstance(node, Product) and isinstance(node.factors[0], Negative):
            yield Edit(spot, product([node.factors[0].operand, *node.factors[1:]]), 1.0, "sign", node)
        else:
            yield Edit(spot, Negative(node, NEW), 1.05, "sign", node)


def _reciprocals(spot: Spot) -> Iterator[Edit]:
    node, parent = spot.node, spot.parent
    is_factor = parent is not None and isinstance(parent.node, Product | Reciprocal | Negative)
    is_group = isinstance(node, Product | Sum) and parallel_branches(node) is None
    if is_group and not isinstance(parent and parent.node, Root):
        yield Edit(
            spot,
            Root(node, NEW),
            1.6 if parent and isinstance(parent.node, Reciprocal) else 1.8,
            "root lost",
            node,
        )
    if is_factor and not isinstance(node, Product):
        return
    if isinstance(node, Negative):
        yield Edit(spot, Negative(inverted(node.operand), NEW), 1.5, "reciprocal", node.operand)
    else:
        yield Edit(spot, inverted(node), 1.5, "reciprocal", node)


def _powers(spot: Spot, node: Power) -> Iterator[Edit]:
    for exponent in (node.exponent - 1, node.exponent + 1, -node.exponent):
        if exponent == 1:
            yield Edit(spot, node.base, 1.2, "exponent", node, node.base)
        elif exponent:
            changed = Power(node.base, exponent, NEW)
            yield Edit(spot, changed, 1.3, "exponent", node, changed)


# products ---------------------------------------------------------------------------------------------------------


def _products(spot: Spot, node: Product) -> Iterator[Edit]:
    factors = node.factors
    branches = parallel_branches(node)
    if branches is not None:
        yield Edit(spot, total(branches), 1.5, "series for parallel", node)
        yield Edit(spot, product(branches), 1.7, "product for parallel", node)
        return
    for k, factor in enumerate(factors):
        rest = [*factors[:k], *factors[k + 1 :]]
        turned = factor.operand if isinstance(factor, Reciprocal) else Reciprocal(factor, NEW)
        if len(factors) > 1 and not (k == 0 and is_one(factor)):
            bare = factor.operand if isinstance(factor, Reciprocal) else factor
            if isinstance(bare, Negative):
                yield Edit(spot, product([Negative(ONE, NEW), *rest]), 1.7, "factor too many", bare.operand)
            else:
                yield Edit(spot, product(rest), 1.2, "factor too many", bare)
                yield Edit(spot, _turned(factors, k, turned), 1.5, "wrong side", bare)
        if isinstance(factor, Sum | Product):
            yield Edit(
                spot,
                product([*factors[:k], Power(factor, 2, NEW), *factors[k + 1 :]]),
                1.8,
                "exponent",
                factor,
            )
        inner = factor.operand if isinstance(factor, Reciprocal) else None
        if isinstance(inner, Product):
            yield from _inner_factors(spot, factors, k, inner)
    yield from _tighter(spot, factors)
    yield from _sums_for_products(spot, factors)


def _turned(factors: tuple[Expression, ...], k: int, turned: Expression) -> Expression:
    """Return a product with a factor on the other side of its line, beside what stands there."""
    rest = [*factors[:k], *factors[k + 1 :]]
    line = next((j for j, factor in enumerate(rest) if isinstance(factor, Reciprocal)), None)
    if not isinstance(turned, Reciprocal) or line is None:
        return product([*factors[:k], turned, *factors[k + 1 :]])
    below = rest[line]
    assert isinstance(below, Reciprocal)
    rest[line] = Reciprocal(product([below.operand, turned.operand]), NEW)
    return product(rest)


def _inner_factors(spot: Spot, factors: tuple[Expression, ...], k: int, inner: Product) -> Iterator[Edit]:
    """Yield ``a/(b c)`` with a factor on the other side of the line, or with its bracket removed."""
    for j, factor in enumerate(inner.factors):
        if is_one(factor):
            continue
        below = [*inner.factors[:j], *inner.factors[j + 1 :]]
        above = factor.operand if isinstance(factor, Reciprocal) else factor
        if not isinstance(factor, Reciprocal):
            line = [Reciprocal(product(below), NEW)] if below else []
            head = factors[:k] if not (k == 1 and is_one(factors[0])) else ()
            yield Edit(spot, product([*head, above, *line, *factors[k + 1 :]]), 1.5, "wrong side", above)
    loose = [Reciprocal(inner.factors[0], NEW), *inner.factors[1:]]
    yield Edit(spot, product([*factors[:k], *loose, *factors[k + 1 :]]), 1.7, "bracket too many", inner)


def _tighter(spot: Spot, factors: tuple[Expression, ...]) -> Iterator[Edit]:
    """Yield the tighter readings of a product: ``1/R C`` meant as ``1/(R C)``."""
    for k, factor in enumerate(factors):
        if not isinstance(factor, Reciprocal):
            continue
        for end in range(k + 2, len(factors) + 1):
            group = product([factor.operand, *factors[k + 1 : end]])
            tight = product([*factors[:k], Reciprocal(group, NEW), *factors[end:]])
            yield Edit(spot, tight, 1.1, "bracket lost", group)


def _sums_for_products(spot: Spot, factors: tuple[Expression, ...]) -> Iterator[Edit]:
    line = next((k for k, factor in enumerate(factors) if isinstance(factor, Reciprocal)), len(factors))
    for end in {line, len(factors)}:
        for k in range(1, end):
            if not isinstance(factors[k], Reciprocal) and len(factors) > 2:
                added = total([product(factors[:k]), product(factors[k:end])])
                yield Edit(spot, product([added, *factors[end:]]), 1.7, "product for sum", added)
    for k in range(len(factors) - 1):
        one, other = factors[k], factors[k + 1]
        if not isinstance(one, Reciprocal) and not isinstance(other, Reciprocal):
            added = total([one, other])
            yield Edit(spot, product([*factors[:k], added, *factors[k + 2 :]]), 1.6, "product for sum", added)


# sums -------------------------------------------------------------------------------------------------------------


def _sums(spot: Spot, node: Sum) -> Iterator[Edit]:
    terms = node.terms
    for k, term in enumerate(terms):
        yield Edit(spot, total([*terms[:k], *terms[k + 1 :]]), 1.35, "term too many", term)
    for k in range(len(terms) - 1):
        pair = product([terms[k], terms[k + 1]])
        if not isinstance(terms[k + 1], Negative):
            yield Edit(spot, total([*terms[:k], pair, *terms[k + 2 :]]), 1.7, "sum for product", pair)
            beside = parallel([terms[k], terms[k + 1]])
            yield Edit(spot, total([*terms[:k], beside, *terms[k + 2 :]]), 1.5, "parallel for series", beside)
            over = product([terms[k], terms[k + 1], Reciprocal(total([terms[k], terms[k + 1]]), NEW)])
            yield Edit(spot, total([*terms[:k], over, *terms[k + 2 :]]), 1.6, "parallel for series", over)
    if len(terms) > 2 and not any(isinstance(term, Negative) for term in terms):
        yield Edit(spot, parallel(list(terms)), 1.6, "parallel for series", node)


# small trees ------------------------------------------------------------------------------------------------------


def is_one(node: Expression) -> bool:
    """Tell whether a node is the number 1."""
    return isinstance(node, Number) and node.value == 1


def product(factors: Iterable[Expression]) -> Expression:
    """Return a product of factors, without ones, that stands on its own."""
    kept: list[Expression] = []
    for factor in factors:
        if isinstance(factor, Product) and _melts(factor):
            kept += factor.factors
        else:
            kept.append(factor)
    plain = [factor for factor in kept if not is_one(factor)]
    if not plain:
        return ONE
    if all(isinstance(factor, Reciprocal) for factor in plain):
        return Product((ONE, *plain), NEW)
    if isinstance(plain[0], Reciprocal):  # what stands above the line comes first
        first = next(k for k, factor in enumerate(plain) if not isinstance(factor, Reciprocal))
        plain.insert(0, plain.pop(first))
    return plain[0] if len(plain) == 1 else Product(tuple(plain), NEW)


def _melts(factor: Product) -> bool:
    """Tell whether a product needs no brackets of its own inside another."""
    if parallel_branches(factor) is not None:
        return False
    return factor.place == NEW or not any(isinstance(inner, Reciprocal) for inner in factor.factors)


def total(terms: list[Expression]) -> Expression:
    """Return a sum of terms."""
    return terms[0] if len(terms) == 1 else Sum(tuple(terms), NEW)


def inverted(node: Expression) -> Expression:
    """Return one over a node; a quotient is turned over."""
    if isinstance(node, Product) and parallel_branches(node) is None:
        turned = [
            f.operand if isinstance(f, Reciprocal) else Reciprocal(f, NEW)
            for f in node.factors
            if not is_one(f)
        ]
        above = [f for f in turned if not isinstance(f, Reciprocal)]
        below = [f.operand for f in turned if isinstance(f, Reciprocal)]
        line = [Reciprocal(product(below), NEW)] if below else []
        return product([*above, *line])
    if isinstance(node, Reciprocal):
        return node.operand
    return Product((ONE, Reciprocal(node, NEW)), NEW)


def parallel(branches: list[Expression]) -> Expression:
    """Return branches in parallel, in the shape in which the reader makes them."""
    inverse = Sum(tuple(Reciprocal(branch, NEW) for branch in branches), NEW)
    return Product((Reciprocal(inverse, NEW),), NEW)


def parallel_branches(node: Expression) -> list[Expression] | None:
    """Return the branches of what was written as parallel, or None."""
    if not isinstance(node, Product) or len(node.factors) != 1:
        return None
    only = node.factors[0]
    if not isinstance(only, Reciprocal) or not isinstance(only.operand, Sum):
        return None
    branches = [term.operand for term in only.operand.terms if isinstance(term, Reciprocal)]
    return branches if len(branches) == len(only.operand.terms) else None


def is_atom(node: Expression) -> bool:
    """Tell whether a node is a bare name or number."""
    return isinstance(node, Name | Number)
