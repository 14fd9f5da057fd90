"""What can be told of an answer without expanding it: how many products it has, and which are the largest."""

from __future__ import annotations

from collections.abc import Container, Iterator
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

import sympy

from symcirc.complaints import Complaint, listed
from symcirc.derivation import Posed, solve_ask
from symcirc.report.big import ties_of
from symcirc.report.envelope import envelope
from symcirc.report.lines import counted, readable
from symcirc.report.quantities import ask_text
from symcirc.sheet.exact import exact_number
from symcirc.sheet.expression import names
from symcirc.sheet.model import Ask
from symcirc.stability.numbers import as_fraction
from symcirc.trees.count import count
from symcirc.trees.diagram import Diagram
from symcirc.trees.evaluate import polynomials
from symcirc.trees.largest import Product, largest

SIDES = ("numerator", "denominator")


@dataclass(frozen=True)
class Coefficient:
    """A coefficient's value for the fixed numbers and its largest products."""

    value: Fraction
    products: tuple[Product, ...]

    def share(self, product: Product) -> float:
        """Return what part of the whole coefficient a product is."""
        return float(product.value / self.value) if self.value else 0.0

    @property
    def explained(self) -> float:
        """What part of the whole coefficient the products shown make together."""
        return float(sum(p.value for p in self.products) / self.value) if self.value else 0.0


def terms(posed: Posed, wanted: Container[str] | None) -> dict[str, tuple[int, int]]:
    """Return how many products stand over and under the line of every ask, before collection."""
    return {ask.name: count(solve_ask(posed, setup).walked) for ask, setup in posed.wanted(wanted)}


def terms_json(posed: Posed, wanted: Container[str] | None) -> dict[str, Any]:
    """Return the numbers of products as the design's JSON object."""
    found = terms(posed, wanted)
    asks = {name: {"terms": dict(zip(SIDES, counts, strict=True))} for name, counts in found.items()}
    return envelope(posed.sheet.title, asks, posed.sheet.remarks)


def terms_text(posed: Posed, wanted: Container[str] | None) -> Iterator[str]:
    """Yield the numbers of products as lines."""
    yield posed.sheet.title
    for name, (over, under) in terms(posed, wanted).items():
        yield ""
        yield ask_text(posed.sheet.ask(name))
        yield f"  over    {counted(over, 'product')}"
        yield f"  under   {counted(under, 'product')}"


def largest_of(
    posed: Posed, wanted: Container[str] | None, most: int
) -> Iterator[tuple[Ask, list[list[Coefficient]]]]:
    """Yield for every ask its coefficients over and under the line, by ascending power of s.

    Raises Complaint where a symbol has no number, or one that depends on s.
    """
    for ask, setup in posed.wanted(wanted):
        diagram = solve_ask(posed, setup).collected
        values = _values(posed, ask, diagram)
        sides = []
        for root, whole in zip(diagram.roots, polynomials(diagram, values), strict=True):
            found = largest(diagram, root, values, most) if root else []
            pairs = zip(whole, found, strict=True)
            sides.append([Coefficient(value, tuple(products)) for value, products in pairs])
        yield ask, sides


def _values(posed: Posed, ask: Ask, diagram: Diagram) -> dict[str, Fraction]:
    needed = {level.symbol for level in diagram.levels if level.symbol}
    ties = ties_of(posed.ties, needed)
    known: dict[str, sympy.Expr] = dict(posed.sheet.numbers)
    for name, tie in ties.items():
        if any(n.text == "s" for n in names(tie)):
            raise Complaint(
                ask.place, f"`{name}` depends on s, so no product has one number", f"fix {name} to a number"
            )
        if all(n.text in known or n.text == "pi" for n in names(tie)):
            known[name] = exact_number(tie, known)
    missing = [name for name in posed.sheet.symbols if name in needed and name not in known]
    missing += sorted(needed - set(known) - set(missing))
    if missing:
        raise Complaint(
            ask.place,
            f"the largest products of `{ask.name}` need numbers, and {listed(missing[:8])} have none",
            f"fix {', '.join(f'{name} = value' for name in missing[:3])}",
        )
    return {name: as_fraction(known[name]) for name in needed}


def product_text(product: Product) -> str:
    """Return a product in plain arithmetic."""
    factors = [name if power == 1 else f"{name}**{power}" for name, power in product.factors]
    if abs(product.coefficient) != 1 or not factors:
        factors.insert(0, str(abs(product.coefficient)))
    return ("-" if product.coefficient < 0 else "") + "*".join(factors)


def largest_text(posed: Posed, wanted: Container[str] | None, most: int) -> Iterator[str]:
    """Yield the largest products of every coefficient as lines, with their shares of it."""
    yield posed.sheet.title
    for ask, sides in largest_of(posed, wanted, most):
        yield ""
        yield f"{ask_text(ask)}: the largest products of every coefficient, tied parts by their own names"
        for label, side in zip(("over", "under"), sides, strict=True):
            for power in reversed(range(len(side))):
                coefficient = side[power]
                if not coefficient.products:
                    continue
                yield f"  {label:7} s^{power:<3} {float(coefficient.value):.6g}, shown: {coefficient.explained:.2%}"
                for product in coefficient.products:
                    shown = readable(product_text(product))
                    yield f"    {coefficient.share(product):>9.2%}   {shown}"


def largest_json(posed: Posed, wanted: Container[str] | None, most: int) -> dict[str, Any]:
    """Return the largest products of every coefficient as JSON."""
    asks = {}
    for ask, sides in largest_of(posed, wanted, most):
        asks[ask.name] = {"largest": {name: _side(side) for name, side in zip(SIDES, sides, strict=True)}}
    return envelope(posed.sheet.title, asks, posed.sheet.remarks)


def _side(side: list[Coefficient]) -> list[dict[str, Any]]:
    return [
        {
            "value": float(c.value),
            "explained": c.explained,
            "products": [
                {"product": product_text(p), "value": float(p.value), "share": c.share(p)} for p in c.products
            ],
        }
        for c in side
    ]
