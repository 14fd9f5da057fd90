"""Claims as inequalities that a person reads: one quantity on the left where the claim can be so written."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

import sympy

from symcirc.match.claims import Claim
from symcirc.match.decimals import reals
from symcirc.match.formula import equation_text
from symcirc.match.names import is_part, natural
from symcirc.match.problem import Condition, Relation
from symcirc.match.products import Product, expression, factored, of_terms, one, root_expression
from symcirc.match.quantities import Monomial, Quantities, holds_any

_OPPOSITE: dict[Relation, Relation] = {">": "<", ">=": "<=", "=": "="}

Terms = Mapping[Monomial, Any]


def condition(claim: Claim, quantities: Quantities, relation: Relation | None = None) -> Condition:
    """Return a claim as a condition: ``x >= expression`` where a quantity can be isolated, else ``product > 0``.

    >>> from symcirc.match.quantities import plain_quantities
    >>> quantities = plain_quantities("", "C1 C2 Q")
    >>> c1, c2, q = quantities.ring.gens
    >>> condition(Claim((c1**2 - 4 * q**2 * c1 * c2,), strict=False), quantities)
    Condition(left=C1, relation='>=', right=4*C2*Q**2)
    """
    chosen: Relation = relation or (">" if claim.strict else ">=")
    if len(claim.factors) == 1 and not holds_any(claim.factors[0], quantities.signless):
        found = list(_isolated(claim, chosen, quantities))
        if found:
            return min(found, key=lambda f: f[0])[1]
    product = one(quantities)
    for factor in claim.factors:
        product *= factored(factor, quantities)
    kept = tuple(e if k in quantities.signless else 0 for k, e in enumerate(product.monomial))
    bare = Product(reals.sign(product.number), kept, product.sums)
    return Condition(expression(bare, quantities), chosen, sympy.S.Zero)


def _isolated(
    claim: Claim, relation: Relation, quantities: Quantities
) -> Iterator[tuple[tuple[object, ...], Condition]]:
    """Yield each way to bring a quantity alone to the left, with a key that sorts the most readable first."""
    terms = quantities.group(claim.factors[0])
    for position in range(quantities.ring.ngens):
        exponents = sorted({monomial[position] for monomial in terms})
        if len(exponents) != 2:
            continue
        low, high = ({m: c for m, c in terms.items() if m[position] == e} for e in exponents)
        degree = exponents[1] - exponents[0]
        if len({value > 0 for value in high.values()}) > 1:
            continue
        rest_sign = {value > 0 for value in low.values()}
        positive = next(iter(high.values())) > 0
        bounded = len(rest_sign) == 1 and (True in rest_sign) != positive
        if degree > 1 and not bounded:
            continue
        bound = _ratio(low, high, position)
        right = _shortest(bound, quantities) if degree == 1 else root_expression(bound, degree, quantities)
        left = quantities.meanings[position]
        stated = relation if positive else _OPPOSITE[relation]
        key = (
            position not in quantities.unknowns,
            not bounded,
            degree,
            len(high),
            not is_part(quantities.name(position)),
            bounded and relation != "=" and stated not in (">", ">="),
            0 if bounded else len(equation_text(right)),
            natural(quantities.name(position)),
        )
        yield key, Condition(left, stated, right)


def _ratio(low: Terms, high: Terms, position: int) -> Product:
    """Return ``-low/high`` without the powers of the quantity that is isolated."""
    numerator = of_terms({_without(m, position): -c for m, c in low.items()})
    return numerator / of_terms({_without(m, position): c for m, c in high.items()})


def _without(monomial: Monomial, position: int) -> Monomial:
    return (*monomial[:position], 0, *monomial[position + 1 :])


def _shortest(bound: Product, quantities: Quantities) -> sympy.Expr:
    """Return a bound as a product, or its sum divided out where that is shorter to write."""
    whole = expression(bound, quantities)
    sums = {key: e for key, e in bound.sums.items() if e == 1}
    if len(bound.sums) != 1 or not sums:
        return whole
    (key,) = sums
    front = Product(bound.number, bound.monomial, {})
    divided = sympy.Add(*(expression(front * of_terms(dict([t])), quantities) for t in key.terms))
    return min((whole, divided), key=lambda formula: len(equation_text(formula)))
