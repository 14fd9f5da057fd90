"""What an expression in names may hold: declared names, and a bounded size."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping

from symcirc.complaints import Complaint, nearest
from symcirc.sheet.exact import is_number
from symcirc.sheet.expression import (
    Expression,
    Name,
    Number,
    Power,
    Product,
    Reciprocal,
    Sum,
    fold,
    names,
    roots,
)
from symcirc.sheet.model import Symbol

#: An expression of more products than this, or of a higher power, is refused before it is multiplied out.
MOST_PRODUCTS, HIGHEST_POWER = 5_000, 200
#: Products above the line, products below it, and degree of an expression that is multiplied out.
Size = tuple[int, int, int]


def check_names(expression: Expression, symbols: Mapping[str, Symbol], *, s_allowed: bool) -> None:
    """Raise Complaint for a name that is not declared, and for ``s`` or a root of names where none may be."""
    for name in names(expression):
        if name.text == "pi" or name.text in symbols or (name.text == "s" and s_allowed):
            continue
        raise Complaint(name.place, *_unknown(name.text, symbols))
    for root in roots(expression):
        if not is_number(root):
            raise Complaint(
                root.place,
                "a square root of names is not a ratio of polynomials",
                "name the root itself (choose q) and write its square where the name stood (k = q^2)",
            )


def _unknown(text: str, symbols: Mapping[str, Symbol]) -> tuple[str, str]:
    if text == "s":
        return "`s` cannot stand here", "only Z, Y, an amplifier's gain and a target may depend on s"
    if text.startswith(("V_", "I_")):
        return (
            f"`{text}` is a voltage or a current, and only parts and parameters can stand here",
            "use the names of parts and parameters",
        )
    hint = nearest(text, symbols)
    return f"`{text}` is not declared", hint or f"declare it: fix {text} = value, or choose {text}"


# size -------------------------------------------------------------------------------------------------------


def check_size(expression: Expression, known: Mapping[str, Size] | None = None) -> Size:
    """Return a bound on the size of an expression; ``known`` has the sizes of the names that are tied.

    Raises Complaint where multiplying out would make too many products or too high a power, before it is
    done.
    """
    sizes = known or {}

    def combine(node: Expression, operands: list[Size]) -> Size:
        above, below, degree = _size(node, operands, sizes)
        if max(above, below) > MOST_PRODUCTS or degree > HIGHEST_POWER:
            raise Complaint(
                node.place,
                "this expression is too large when multiplied out",
                "simplify it, or choose a name for an inner part",
            )
        return above, below, degree

    return fold(expression, combine)


def _size(node: Expression, operands: list[Size], known: Mapping[str, Size]) -> Size:
    match node:
        case Number():
            return 1, 1, 0
        case Name(text=text):
            return known.get(text, (1, 1, 1))
        case Sum():
            below = _product(b for _, b, _ in operands)
            degree = max(d for _, _, d in operands) if below == 1 else sum(d for _, _, d in operands)
            return sum(a * (below // b) for a, b, _ in operands), below, degree
        case Product():
            above, below = _product(a for a, _, _ in operands), _product(b for _, b, _ in operands)
            return above, below, sum(d for _, _, d in operands)
        case Power(exponent=exponent):
            above, below, degree = operands[0]
            e = abs(exponent)
            powers = math.comb(above + e - 1, e), math.comb(below + e - 1, e)
            return (*(powers if exponent >= 0 else powers[::-1]), degree * e)
        case Reciprocal():
            above, below, degree = operands[0]
            return below, above, degree
        case _:
            return operands[0]


def _product(counts: Iterable[int]) -> int:
    """Return the product of counts, or some number beyond the bound once it is passed."""
    product = 1
    for count in counts:
        product = min(product * count, (MOST_PRODUCTS + 1) ** 2)
    return product
