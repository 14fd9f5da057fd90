"""The decision diagram of the two determinants, in compact arrays.

A level decides one part. Each of its states has, for every choice of the part, a code: 0 where that choice
leads nowhere, ``k + 1`` where it leads to state k of the next level, ``-(k + 1)`` where it does so with the
sign turned. So with ``signed = [0, *values, *reversed(negated values)]`` the value behind a code is
``signed[code]``.

Every path from a root to the end is one product. The two roots, over and under, are codes of the first level.
"""

from __future__ import annotations

from array import array
from collections.abc import Sequence
from dataclasses import dataclass

from symcirc.trees.laws import Weight
from symcirc.trees.walk import Codes, Walk


@dataclass(frozen=True)
class Level:
    """One part: the weight of each choice, signs left out, and its code for every state."""

    name: str
    weights: tuple[Weight, ...]
    codes: tuple[Codes, ...]

    @property
    def size(self) -> int:
        """The number of states."""
        return len(self.codes[0])

    @property
    def symbol(self) -> str | None:
        """The symbol that the weights hold, if any: that of the part or of its parameter."""
        return next((weight.symbol for weight in self.weights if weight.symbol), None)


@dataclass(frozen=True)
class Diagram:
    """The two determinants, all their states alive.

    Attributes:
        levels: from the first part that is decided to the last.
        roots: codes of over and under in the first level; 0 where the determinant is zero by structure.
        ends: the values of the states after the last level, positive integers.
        idle: the parts that cancel from the ratio.
    """

    levels: tuple[Level, ...]
    roots: tuple[int, int]
    ends: tuple[int, ...]
    idle: tuple[str, ...]

    @property
    def size(self) -> int:
        """The number of states of all levels."""
        return sum(level.size for level in self.levels)


def diagram(walk: Walk, idle: tuple[str, ...]) -> Diagram:
    """Return the diagram of a walk; ``idle`` are the parts that were set aside before it."""
    levels = [
        Level(element.name, tuple(choice.weight for choice in element.choices), codes)
        for element, codes in zip(walk.elements, walk.codes, strict=True)
    ]
    return trimmed(Diagram(tuple(levels), walk.roots, (1,) * len(walk.states[-1]), idle))


def trimmed(untrimmed: Diagram) -> Diagram:
    """Return the diagram without dead ends, equal states, and parts that do not matter.

    Here ``ends`` may be any integers; an end of value zero is a dead one.

    States of a level that lead to the same states with the same signs, or with all signs turned, are one. A
    part with one choice left multiplies over and under alike: it goes, and so do the powers of a symbol and
    of s that all choices of a part share.
    """
    levels: list[Level] = []
    idle = list(untrimmed.idle)
    ends = tuple(dict.fromkeys(abs(value) for value in untrimmed.ends if value))
    images = [
        (ends.index(abs(value)) + 1) * (1 if value > 0 else -1) if value else 0 for value in untrimmed.ends
    ]
    known: dict[tuple[object, ...], tuple[tuple[Codes, ...], list[int]]] = {}
    for level in reversed(untrimmed.levels):
        key = (*map(id, level.codes), tuple(images))
        if key not in known:
            known[key] = _merged_states(level.codes, images)
        columns, images = known[key]
        alive = [number for number, column in enumerate(columns) if any(column)]
        if len(alive) > 1:
            weights = _without_shared(tuple(level.weights[number] for number in alive))
            levels.append(Level(level.name, weights, tuple(columns[number] for number in alive)))
            continue
        idle.append(level.name)
        if alive:
            images = [_followed(columns[alive[0]], code) for code in images]
    over, under = (_followed(images, code) for code in untrimmed.roots)
    levels.reverse()
    if _first_sign(levels, under) < 0:
        over, under = -over, -under
    return Diagram(tuple(levels), (over, under), ends, tuple(idle))


def narrows(diagram: Diagram) -> dict[int, tuple[int, int]]:
    """Return the levels at which over has one state only and under has one state only, another one.

    Returns:
        {level: (state of over, state of under)}. All ways pass through them, so there each polynomial is a
        product. Empty where a root is zero.
    """
    if 0 in diagram.roots:
        return {}
    found = {}
    over, under = ({abs(root) - 1} for root in diagram.roots)
    for number, level in enumerate(diagram.levels):
        if number and len(over) == len(under) == 1 and over != under:
            found[number] = (min(over), min(under))
        over, under = _after(level, over), _after(level, under)
    return found


def _after(level: Level, states: set[int]) -> set[int]:
    return {abs(codes[state]) - 1 for codes in level.codes for state in states if codes[state]}


def signed_codes(values: Sequence[int]) -> list[int]:
    """Return the list in which a code finds its value, zero and negative codes included.

    >>> signed_codes([5, 7])[-2]
    -7
    """
    return [0, *values, *(-value for value in reversed(values))]


def _merged_states(codes: tuple[Codes, ...], images: list[int]) -> tuple[tuple[Codes, ...], list[int]]:
    """Return the codes of the states that are left, and where every old state has gone.

    Args:
        codes: of one level, into the states of the next as they were.
        images: where these have gone, as codes.
    """
    unchanged = list(range(1, len(images) + 1)) == images
    find = signed_codes(images).__getitem__
    columns = codes if unchanged else [list(map(find, column)) for column in codes]
    rows = list(zip(*columns, strict=True))
    turned = (
        [_leads_negative(row) for row in rows]
        if any(min(column, default=0) < 0 for column in columns)
        else []
    )
    if any(turned):
        rows = [tuple(-code for code in row) if turn else row for row, turn in zip(rows, turned, strict=True)]
    kept = dict.fromkeys(rows)
    kept.pop((0,) * len(codes), None)
    if unchanged and len(kept) == len(rows) and not any(turned):
        return codes, list(range(1, len(rows) + 1))
    place = {row: number for number, row in enumerate(kept, 1)}
    gone = [place.get(row, 0) for row in rows]
    if any(turned):
        gone = [-code if turn else code for code, turn in zip(gone, turned, strict=True)]
    left = zip(*kept, strict=True) if kept else iter([()] * len(codes))
    return tuple(array("i", column) for column in left), gone


def _leads_negative(row: tuple[int, ...]) -> bool:
    """Return True where the first code that leads somewhere turns the sign."""
    return next(filter(None, row), 0) < 0


def _first_sign(levels: Sequence[Level], code: int) -> int:
    """Return the sign of the first product of a root."""
    sign = 1
    for level in levels:
        if not code:
            return 0
        sign = sign if code > 0 else -sign
        code = next(codes[abs(code) - 1] for codes in level.codes if codes[abs(code) - 1])
    return sign if code > 0 else -sign


def _followed(codes: Codes, code: int) -> int:
    """Return the code one level further on: ``codes`` are those of the states that ``code`` counts."""
    if not code:
        return 0
    return codes[code - 1] if code > 0 else -codes[-code - 1]


def _without_shared(weights: tuple[Weight, ...]) -> tuple[Weight, ...]:
    """Return the weights without the powers that all of them share, and without their signs."""
    exponent = min(weight.exponent for weight in weights)
    s_power = min(weight.s_power for weight in weights)
    if not exponent and not s_power and all(weight.coefficient > 0 for weight in weights):
        return weights
    left_over = []
    for weight in weights:
        left = weight.exponent - exponent
        left_over.append(Weight(1, weight.symbol if left else None, left, weight.s_power - s_power))
    return tuple(left_over)
