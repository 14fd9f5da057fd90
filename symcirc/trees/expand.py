"""The expanded polynomials: every product once, grouped by the power of s.

The diagram is cut at a level in the middle. A product is a way from the root to a state on the cut, its head,
joined to a way from there to the end, its tail. Heads and tails are few and written out first; after that a
product costs one joining, or, as text, nothing but its own letters.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from itertools import repeat
from typing import TypeVar

from symcirc.trees.diagram import Diagram, Level
from symcirc.trees.laws import Weight

#: A product by its exponents, over the symbols of the diagram in the order of its levels.
Exponents = tuple[int, ...]
#: For every power of s, the coefficient of every product.
Polynomial = list[dict[Exponents, int]]
#: What stands for a product, or a part of one, and is joined by +.
Piece = TypeVar("Piece", Exponents, str)
#: Products by power of s and coefficient.
Groups = dict[tuple[int, int], list[Piece]]

_TAILS_FOR_A_HEAD = 8


def symbols(diagram: Diagram) -> tuple[str, ...]:
    """Return the symbols of the diagram, in the order of the exponents."""
    return tuple(level.symbol for level in diagram.levels if level.symbol)


def expanded(diagram: Diagram, root: int) -> Polynomial:
    """Return one polynomial as exponents and coefficients.

    Args:
        diagram: a collected diagram (see :func:`symcirc.trees.collect.collected`).
        root: one of its roots.

    Returns:
        For every power of s a dict {exponents: coefficient} without zeros; [] for a zero polynomial.

    >>> level = Level("C1", (Weight(1, "C1", 1, 1), Weight()), ((1,), (-1,)))
    >>> expanded(Diagram((level,), (1, 0), (1,), ()), 1)
    [{(0,): -1}, {(1,): 1}]
    """

    def piece(level: Level, weight: Weight) -> Exponents:
        return (weight.exponent,) if level.symbol else ()

    found: Polynomial = []
    for heads, tails in _halves(diagram, root, piece, ()):
        for (low, one), front in heads.items():
            for (high, other), back in tails.items():
                while len(found) <= low + high:
                    found.append({})
                products = [head + tail for head in front for tail in back]
                found[low + high].update(zip(products, repeat(one * other)))
    return found


def written(diagram: Diagram, root: int) -> list[str]:
    """Return one polynomial as text: for every power of s a sum of products, "0" where there is none.

    Args:
        diagram: a collected diagram.
        root: one of its roots.

    >>> level = Level("C1", (Weight(1, "C1", 1, 1), Weight()), ((1,), (-1,)))
    >>> written(Diagram((level,), (1, 0), (1,), ()), 1)
    ['-1', 'C1']
    """

    def piece(_: Level, weight: Weight) -> str:
        if not weight.exponent:
            return ""
        return f"*{weight.symbol}" if weight.exponent == 1 else f"*{weight.symbol}**{weight.exponent}"

    found: list[list[str]] = []
    for heads, tails in _halves(diagram, root, piece, ""):
        for (low, one), front in heads.items():
            for (high, other), back in tails.items():
                while len(found) <= low + high:
                    found.append([])
                found[low + high].extend(_sum_text(one * other, head, back) for head in front)
    return [_joined(texts) for texts in found]


def _joined(texts: list[str]) -> str:
    """Join the texts of a sum, each of which begins with a sign; the first plus goes."""
    if not texts:
        return "0"
    first = texts[0]
    return "".join((first[3:] if first.startswith(" + ") else "-" + first[3:], *texts[1:]))


def _sum_text(coefficient: int, head: str, tails: list[str]) -> str:
    """Return " + R1*C1 + R1*C2" for the head "*R1" and its tails: one join writes all products of a head."""
    sign = " - " if coefficient < 0 else " + "
    if head and abs(coefficient) == 1:
        return (sign + head[1:]).join(("", *tails))
    return f"{sign}{abs(coefficient)}{head}".join(("", *tails)).replace(" 1*", " ")


def _halves(
    diagram: Diagram, root: int, piece: Callable[[Level, Weight], Piece], empty: Piece
) -> Iterator[tuple[Groups[Piece], Groups[Piece]]]:
    """Yield, for every state on the cut, its heads and its tails.

    Args:
        diagram: a collected diagram.
        root: one of its roots.
        piece: what a weight of a level contributes to a product.
        empty: what contributes nothing.
    """
    pieces = [[piece(level, weight) for weight in level.weights] for level in diagram.levels]
    cut = _cut(diagram, root)
    heads = _heads(diagram.levels[:cut], pieces[:cut], root, empty)
    tails = _tails(diagram.levels[cut:], pieces[cut:], diagram.ends, empty)
    for state, groups in heads.items():
        yield groups, tails[state]


def _heads(
    levels: Sequence[Level], pieces: Sequence[Sequence[Piece]], root: int, empty: Piece
) -> dict[int, Groups[Piece]]:
    """Return the ways from a root to every state behind the levels."""
    heads: dict[int, Groups[Piece]] = {abs(root) - 1: {(0, 1 if root > 0 else -1): [empty]}} if root else {}
    for level, own in zip(levels, pieces, strict=True):
        following: dict[int, Groups[Piece]] = {}
        for state, groups in heads.items():
            for weight, piece, codes in zip(level.weights, own, level.codes, strict=True):
                if code := codes[state]:
                    target = following.setdefault(abs(code) - 1, {})
                    for key, products in groups.items():
                        longer = [product + piece for product in products] if piece else products
                        target.setdefault(_key(key, weight, code), []).extend(longer)
        heads = following
    return heads


def _tails(
    levels: Sequence[Level], pieces: Sequence[Sequence[Piece]], ends: Sequence[int], empty: Piece
) -> list[Groups[Piece]]:
    """Return the ways to the end from every state before the levels."""
    tails: list[Groups[Piece]] = [{(0, value): [empty]} for value in ends]
    for level, own in zip(reversed(levels), reversed(pieces), strict=True):
        above: list[Groups[Piece]] = [{} for _ in range(level.size)]
        for weight, piece, codes in zip(level.weights, own, level.codes, strict=True):
            for target, code in zip(above, codes, strict=True):
                for key, products in tails[abs(code) - 1].items() if code else ():
                    longer = [piece + product for product in products] if piece else products
                    target.setdefault(_key(key, weight, code), []).extend(longer)
        tails = above
    return tails


def _key(key: tuple[int, int], weight: Weight, code: int) -> tuple[int, int]:
    """Return the power of s and the coefficient after one more step."""
    return key[0] + weight.s_power, key[1] if code > 0 else -key[1]


def _cut(diagram: Diagram, root: int) -> int:
    """Return the level to cut at; heads are to be fewer, as each takes all its tails at once."""
    tails = [len(diagram.ends)]
    counts = [1] * len(diagram.ends)
    for level in reversed(diagram.levels):
        find = [0, *counts, *reversed(counts)].__getitem__
        counts = [sum(map(find, row)) for row in zip(*level.codes, strict=True)]
        tails.append(sum(counts))
    tails.reverse()
    heads = {abs(root) - 1: 1} if root else {}
    for number, level in enumerate(diagram.levels):
        if _TAILS_FOR_A_HEAD * sum(heads.values()) >= tails[number]:
            return number
        following: dict[int, int] = {}
        for state, number_of_heads in heads.items():
            for codes in level.codes:
                if code := codes[state]:
                    following[abs(code) - 1] = following.get(abs(code) - 1, 0) + number_of_heads
        heads = following
    return len(diagram.levels)
