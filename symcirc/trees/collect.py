"""Every product once: the diagram in which no two paths have the same product.

Where each symbol is used once no product repeats. But both choices of a conveyor weigh the same, and so do
two of the four of a transformer: then several paths end in one product, and may cancel. Here such choices
become one, which leads to a sum of states. In the diagram of such sums (a subset construction, with signs)
every path is another product, its coefficient stands at its end, and a sum that cannot come to anything is a
dead end: a determinant is zero as algebra where, and only where, its root is 0.

Method: from memory, Rabin and Scott (1959), the subset construction; here over the integers.
"""

from __future__ import annotations

from array import array
from collections.abc import Sequence

from symcirc.trees.diagram import Diagram, Level, trimmed
from symcirc.trees.walk import Codes

#: A sum of states: (state, factor) by ascending state, the first factor positive.
Sum = tuple[tuple[int, int], ...]


def collected(diagram: Diagram) -> Diagram:
    """Return a diagram of the same two polynomials in which every product has one path.

    Its roots are 0 exactly where the determinants are zero. A diagram in which no product can repeat is
    returned as it is.
    """
    if not any(len(set(level.weights)) < len(level.weights) for level in diagram.levels):
        return diagram
    sums: dict[Sum, int] = {}
    roots = tuple(
        _code(sums, {abs(root) - 1: 1 if root > 0 else -1} if root else {}) for root in diagram.roots
    )
    levels = []
    for level in diagram.levels:
        following: dict[Sum, int] = {}
        weights = tuple(dict.fromkeys(level.weights))
        codes = []
        for weight in weights:
            alike = [
                codes for codes, other in zip(level.codes, level.weights, strict=True) if other == weight
            ]
            codes.append(array("i", [_code(following, _stepped(alike, one)) for one in sums]))
        levels.append(Level(level.name, weights, tuple(codes)))
        sums = following
    ends = tuple(sum(factor * diagram.ends[state] for state, factor in one) for one in sums)
    return trimmed(Diagram(tuple(levels), (roots[0], roots[1]), ends, diagram.idle))


def _stepped(alike: Sequence[Codes], one: Sum) -> dict[int, int]:
    """Return the factors of the states to which choices of the same weight lead from a sum of states."""
    total: dict[int, int] = {}
    for codes in alike:
        for state, factor in one:
            code = codes[state]
            if code:
                following = abs(code) - 1
                total[following] = total.get(following, 0) + (factor if code > 0 else -factor)
    return total


def _code(places: dict[Sum, int], factors: dict[int, int]) -> int:
    """Return the code of a sum, which gets the next place where it is new."""
    one = tuple(sorted((state, factor) for state, factor in factors.items() if factor))
    if not one:
        return 0
    if one[0][1] > 0:
        return places.setdefault(one, len(places) + 1)
    turned = tuple((state, -factor) for state, factor in one)
    return -places.setdefault(turned, len(places) + 1)
