"""The values that can be had of a kind of part: single pieces, and pairs of them."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

import numpy as np
from numpy.typing import NDArray

#: How two pieces are joined for a sum of their values, and for the product over the sum, by kind of part.
_SUMMED = {"R": "series", "L": "series", "C": "parallel"}
_HARMONIC = {"R": "parallel", "L": "parallel", "C": "series"}
#: Two floating-point values nearer than this to each other are one value.
_SAME = 1e-12


@dataclass(frozen=True)
class Choice:
    """A value that can be had, exact, in ohm, farad or henry: one piece, or two ``joined`` in series or parallel."""

    value: Fraction
    pieces: tuple[Fraction, ...]
    joined: str = ""


class Choices:
    """All values of a kind of part, ascending.

    Args:
        kind: R, C or L.
        pieces: the single values, exact, each once.
        pairs: whether two pieces may make a value.
        counts: how many there are of each piece; None where that is no matter.

    Of equal values made of different pieces the one of fewer pieces is kept, unless pieces are counted.

    >>> choices = Choices("R", [Fraction(100), Fraction(220)], pairs=True)
    >>> [round(float(value)) for value in choices.values]
    [50, 69, 100, 110, 200, 220, 320, 440]
    >>> choices[1].joined, choices[6].joined
    ('parallel', 'series')
    """

    def __init__(
        self,
        kind: str,
        pieces: Sequence[Fraction],
        *,
        pairs: bool = False,
        counts: Sequence[int] | None = None,
    ) -> None:
        self.kind = kind
        self.pieces = tuple(sorted(pieces))
        order = sorted(range(len(pieces)), key=lambda k: pieces[k])
        self.counts = None if counts is None else np.array([counts[k] for k in order])
        single = np.array([float(piece) for piece in self.pieces])
        first = np.arange(len(single))
        table = [(single, first, np.full_like(first, -1), np.zeros_like(first))]
        if pairs:
            one, other = np.triu_indices(len(single))
            if self.counts is not None:
                enough = (one != other) | (self.counts[one] > 1)
                one, other = one[enough], other[enough]
            total = single[one] + single[other]
            table += [(total, one, other, np.ones_like(one))]
            table += [(single[one] * single[other] / total, one, other, np.full_like(one, 2))]
        values, *made = (np.concatenate(columns) for columns in zip(*table, strict=True))
        ranks = np.lexsort((made[1] >= 0, values))
        if self.counts is None:
            ranks = _without_repeats(values, made[1] >= 0, ranks)
        #: The values as floating-point numbers, ascending.
        self.values: NDArray[np.float64] = values[ranks]
        #: Positions of each value's pieces; the second is -1 where there is one.
        self.first, self.second, self._joined = (column[ranks] for column in made)

    def __len__(self) -> int:
        return len(self.values)

    def __getitem__(self, position: int) -> Choice:
        one = self.pieces[self.first[position]]
        if self.second[position] < 0:
            return Choice(one, (one,))
        other = self.pieces[self.second[position]]
        if self._joined[position] == 1:
            return Choice(one + other, (one, other), _SUMMED[self.kind])
        return Choice(one * other / (one + other), (one, other), _HARMONIC[self.kind])


def _without_repeats(
    values: NDArray[np.float64], is_pair: NDArray[np.bool_], ranks: NDArray[np.intp]
) -> NDArray[np.intp]:
    """Return the ranks without later ones of equal value; a single piece is the one that stays."""
    ordered = values[ranks]
    begins = np.ones(len(ranks), bool)
    begins[1:] = np.diff(ordered) > _SAME * ordered[1:]
    group = np.cumsum(begins) - 1
    best = np.lexsort((is_pair[ranks], group))
    _, firsts = np.unique(group[best], return_index=True)
    kept: NDArray[np.intp] = ranks[best[firsts]]
    return kept
