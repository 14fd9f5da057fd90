"""What is tied put in: expressions of the sheet as quotients in a polynomial ring, and their substitution."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass

import sympy
from sympy.polys.domains import QQ
from sympy.polys.orderings import lex
from sympy.polys.rings import PolyElement, PolyRing

from symcirc.complaints import Complaint
from symcirc.ratio import Coefficient, Ratio
from symcirc.sheet.exact import exact_number, is_number
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
    fold,
    names,
    refuse_zero_division,
    roots,
)
from symcirc.sheet.fixes import tie_order

#: More different square roots in one sheet's ties than this are refused: the number field grows as 2 to their count.
MOST_ROOTS = 4


@dataclass(frozen=True)
class Quotient:
    """``above / below`` in one ring."""

    above: PolyElement
    below: PolyElement


def natural_key(name: str) -> tuple[int, tuple[tuple[int, int, str], ...]]:
    """Return a key that sorts R before C before L before the rest, and R2 before R10; blocks keep to that too.

    >>> sorted(["C1", "R10", "k", "R2", "S1_C1", "S1_R1"], key=natural_key)
    ['R2', 'R10', 'S1_R1', 'C1', 'S1_C1', 'k']
    """
    own = name.rsplit("_", 1)[-1]
    kind = "RCLZY".find(own[0]) if own[1:2].isdigit() else -1
    pieces = re.findall(r"[0-9]+|[^0-9]+", name)
    return kind % 6, tuple((1, int(p), "") if p.isdigit() else (0, 0, p) for p in pieces)


def ring_for(symbols: Iterable[str], ties: Mapping[str, Expression]) -> PolyRing:
    """Return the ring in s and all free symbols, over the rationals or a field with the roots in the ties.

    >>> ring_for(["R2", "R1"], {}).symbols
    (s, R1, R2)
    """
    free = {n for n in symbols if n not in ties}
    free |= {name.text for tie in ties.values() for name in names(tie) if name.text not in ties} - {"s"}
    return PolyRing(["s", *sorted(free, key=natural_key)], _field(ties.values()), lex)


def _field(ties: Iterable[Expression]) -> sympy.polys.domains.Field:
    found: dict[sympy.Expr, Root] = {}
    for tie in ties:
        for root in roots(tie):
            for atom in exact_number(root).atoms(sympy.Pow):
                if atom.exp == sympy.Rational(1, 2):
                    found.setdefault(atom, root)
    if len(found) > MOST_ROOTS:
        last = list(found.values())[-1]
        raise Complaint(
            last.place,
            f"more than {MOST_ROOTS} different square roots stand in the fixes",
            "choose names for some of them",
        )
    return QQ.algebraic_field(*found) if found else QQ


def expression_in(ring: PolyRing, expression: Expression, known: Mapping[str, Quotient]) -> Quotient:
    """Return an expression as a quotient in the ring; ``known`` are the tied names in it.

    Raises Complaint where it divides by zero.
    """
    generators = {
        str(symbol): Quotient(gen, ring.one) for symbol, gen in zip(ring.symbols, ring.gens, strict=True)
    }

    def combine(node: Expression, operands: list[Quotient]) -> Quotient:
        match node:
            case Number(value=value):
                return Quotient(ring(QQ(value.numerator, value.denominator)), ring.one)
            case Name(text=text):
                return known[text] if text in known else generators[text]
            case Negative():
                return Quotient(-operands[0].above, operands[0].below)
            case Reciprocal():
                if not operands[0].above:
                    raise refuse_zero_division(node.place)
                return Quotient(operands[0].below, operands[0].above)
            case Power(exponent=exponent):
                return _power(operands[0], exponent, node)
            case Sum():
                return _sum(operands)
            case Product():
                return _product(operands)
            case Root():
                assert is_number(node)  # the sheet's reader lets no name stand under a root
                number = ring.domain.from_sympy(exact_number(node))
                return Quotient(ring(number), ring.one)

    return fold(expression, combine)


def _power(base: Quotient, exponent: int, node: Power) -> Quotient:
    if exponent < 0:
        if not base.above:
            raise refuse_zero_division(node.place)
        base = Quotient(base.below, base.above)
    return Quotient(base.above ** abs(exponent), base.below ** abs(exponent))


def _sum(terms: list[Quotient]) -> Quotient:
    total = terms[0]
    for term in terms[1:]:
        if term.below == total.below:
            total = Quotient(total.above + term.above, total.below)
        else:
            total = Quotient(total.above * term.below + term.above * total.below, total.below * term.below)
    return total


def _product(factors: list[Quotient]) -> Quotient:
    product = factors[0]
    for factor in factors[1:]:
        product = Quotient(product.above * factor.above, product.below * factor.below)
    return product


def put_in(ratio: Ratio, ties: Mapping[str, Expression]) -> Quotient:
    """Return a ratio as a quotient in :func:`ring_for`, the tied symbols replaced by what they are tied to."""
    ring = ring_for(ratio.symbols, ties)
    known: dict[str, Quotient] = {}
    for name in tie_order(ties):
        known[name] = expression_in(ring, ties[name], known)
    tied = [k for k, symbol in enumerate(ratio.symbols) if symbol in known]
    highest = [_highest(ratio, k) for k in tied]
    values = [known[ratio.symbols[k]] for k in tied]
    positions = {str(symbol): i for i, symbol in enumerate(ring.symbols)}
    places = [positions.get(symbol) for symbol in ratio.symbols]

    def convert(coefficients: tuple[Coefficient, ...]) -> PolyElement:
        groups: dict[tuple[int, ...], PolyElement] = {}
        for power, coefficient in enumerate(coefficients):
            for exponents, count in coefficient.items():
                monomial = [0] * ring.ngens
                monomial[0] = power
                for place, exponent in zip(places, exponents, strict=True):
                    if place is not None:
                        monomial[place] = exponent
                group = groups.setdefault(tuple(exponents[k] for k in tied), ring.zero)
                group[tuple(monomial)] = ring.domain(count)
        total = ring.zero
        for powers, group in groups.items():
            for value, power, top in zip(values, powers, highest, strict=True):
                group = group * value.above**power * value.below ** (top - power)
            total += group
        return total

    return Quotient(convert(ratio.numerator), convert(ratio.denominator))


def _highest(ratio: Ratio, k: int) -> int:
    coefficients = (*ratio.numerator, *ratio.denominator)
    return max((exponents[k] for coefficient in coefficients for exponents in coefficient), default=0)
