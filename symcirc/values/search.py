"""The search over preferred values: every set in a window around each exact set, in blocks that fit the cache."""

from __future__ import annotations

import itertools
import time
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from math import prod

import numpy as np
from numpy.typing import NDArray

from symcirc.progress import Progress
from symcirc.values.arithmetic import Coefficients
from symcirc.values.choices import Choices
from symcirc.values.departure import Measure

Real = NDArray[np.float64]
Whole = NDArray[np.int64]
#: About so many sets are in a block: their responses at all frequencies of the search stay in the cache.
BLOCK = 4096


@dataclass(frozen=True)
class Axis:
    """A part that takes preferred values: ``width`` of its choices from ``starts`` on, which differ by exact set."""

    part: str
    choices: Choices
    starts: Whole
    width: int


@dataclass(frozen=True)
class Space:
    """What is searched: for each exact set (one entry of every array) all combinations of the axes' windows.

    ``held`` are the names with one value in an exact set: chosen parts, and what is not bought.
    """

    axes: tuple[Axis, ...]
    held: Mapping[str, Real]
    centres: int

    @property
    def size(self) -> int:
        """The number of sets."""
        return self.centres * prod(axis.width for axis in self.axes)


@dataclass(frozen=True)
class Kept:
    """The best sets: scores over the frequencies of the search, exact sets, and a column of choices an axis.

    Every set that was searched and is not here has a score of at least ``threshold``. ``searched`` counts them all.
    """

    scores: Real
    centres: Whole
    choices: Whole
    threshold: float
    searched: int
    complete: bool


def window(choices: Choices, exact: Real, reach: int) -> tuple[Whole, int]:
    """Return where the windows around exact values begin, and how many choices each holds.

    A window reaches so many values to both sides of the choice nearest to the exact value; at an end of the range it
    is moved inwards.

    >>> from fractions import Fraction
    >>> window(Choices("R", [Fraction(n) for n in (10, 12, 15, 18, 22)]), np.array([14.0, 99.0]), 1)
    (array([1, 2]), 3)
    """
    values = choices.values
    width = min(2 * reach + 1, len(values))
    above = np.searchsorted(values, exact)
    below = np.clip(above - 1, 0, len(values) - 1)
    above = np.clip(above, 0, len(values) - 1)
    is_below = exact * exact < values[below] * values[above]
    nearest = np.where(is_below, below, above)
    return np.clip(nearest - reach, 0, len(values) - width), width


class _Best:
    """The best sets so far; a set enters where it is better than the worst of enough."""

    def __init__(self, most: int, axes: int) -> None:
        self._most = most
        self.threshold = np.inf
        self.table = (np.empty(0), np.empty(0, np.int64), np.empty((0, axes), np.int64))

    def add(self, scores: Real, centres: Whole, choices: Whole) -> None:
        table = tuple(
            np.concatenate(both) for both in zip(self.table, (scores, centres, choices), strict=True)
        )
        if len(table[0]) > self._most:
            order = np.argpartition(table[0], self._most)
            self.threshold = min(self.threshold, float(table[0][order[self._most]]))
            table = tuple(column[order[: self._most]] for column in table)
        self.table = (table[0], table[1], table[2])


def search(
    space: Space,
    coefficients: Coefficients,
    measure: Measure,
    most: int,
    progress: Progress,
    counted: Counted,
) -> Kept:
    """Go through all sets of a space and keep the best.

    Args:
        most: how many are kept.
        counted: what is in stock.

    Ctrl-C ends it early, with the best so far and ``complete`` false.
    """
    best = _Best(most, len(space.axes))
    searched, begun, complete = 0, time.monotonic(), True
    try:
        for block in _blocks(space):
            values = _values(space, block)
            over, under = coefficients(values)
            scores = measure.score(over, under, block.shape)
            better = np.flatnonzero(scores < best.threshold)
            if len(better):
                found = _positions(space, block, better)
                allowed = counted.allows(*found)
                best.add(scores[better][allowed], found[0][allowed], found[1][allowed])
            searched += len(scores)
            progress(_line(searched, space.size, time.monotonic() - begun))
    except KeyboardInterrupt:
        complete = False
    scores, kept, choices = best.table
    return Kept(scores, kept, choices, best.threshold, searched, complete)


def _line(searched: int, size: int, seconds: float) -> str:
    left = seconds * (size - searched) / searched
    return f"{searched:,} of {size:,} sets searched, about {left:,.0f} s left"


@dataclass(frozen=True)
class _Block:
    """A piece of a space: the exact sets from ``start`` to ``stop``, and a range of the places in each axis' window."""

    start: int
    stop: int
    places: tuple[range, ...]

    @property
    def shape(self) -> tuple[int, ...]:
        """One dimension for the exact sets, and one for each axis."""
        return (self.stop - self.start, *map(len, self.places))


def _blocks(space: Space) -> Iterator[_Block]:
    """Yield a space in pieces of about BLOCK sets: as many last axes whole as fit, and steps along the one before."""
    widths = [axis.width for axis in space.axes]
    whole = len(widths)
    while whole and prod(widths[whole - 1 :]) <= BLOCK:
        whole -= 1
    inner = prod(widths[whole:])
    chunk = min(space.centres, BLOCK // inner)
    steps = [1] * whole + widths[whole:]
    if whole:
        steps[whole - 1] = min(widths[whole - 1], max(1, BLOCK // (inner * chunk)))
    pieces = [
        [range(place, min(place + step, width)) for place in range(0, width, step)]
        for width, step in zip(widths, steps, strict=True)
    ]
    for start in range(0, space.centres, chunk):
        for places in itertools.product(*pieces):
            yield _Block(start, min(start + chunk, space.centres), places)


def _values(space: Space, block: _Block) -> dict[str, Real]:
    """Return the values of a block, each in the one dimension it changes along beside that of the exact sets."""
    count, *_ = block.shape
    ones = [1] * len(space.axes)
    values = {
        name: array[block.start : block.stop].reshape(count, *ones) for name, array in space.held.items()
    }
    for k, (axis, places) in enumerate(zip(space.axes, block.places, strict=True)):
        positions = axis.starts[block.start : block.stop, None] + np.arange(places.start, places.stop)
        own = [count, *ones]
        own[k + 1] = len(places)
        values[axis.part] = axis.choices.values[positions].reshape(own)
    return values


def _positions(space: Space, block: _Block, chosen: NDArray[np.intp]) -> tuple[Whole, Whole]:
    """Return the exact sets of some sets of a block, and the choices of their axes, one column each."""
    row, *inside = np.unravel_index(chosen, block.shape)
    rows = np.asarray(row, np.int64) + block.start
    choices = np.empty((len(rows), len(space.axes)), np.int64)
    for k, (axis, places) in enumerate(zip(space.axes, block.places, strict=True)):
        choices[:, k] = axis.starts[rows] + places.start + inside[k]
    return rows, choices


class Counted:
    """What is in stock: tells which sets take no more pieces of a value than there are.

    Args:
        space: what is searched.
        chosen: for parts held at a choice, the choices and the position of each exact set's one.
        times: how often a part's value is taken, more than once where parts are tied to be equal to it.
    """

    def __init__(
        self,
        space: Space,
        chosen: Mapping[str, tuple[Choices, Whole]],
        times: Mapping[str, int],
    ) -> None:
        self._axes = space.axes
        self._chosen = chosen
        self._times = times
        every = [axis.choices for axis in space.axes] + [choices for choices, _ in chosen.values()]
        self._counts = {choices.kind: choices.counts for choices in every if choices.counts is not None}

    def allows(self, centres: Whole, choices: Whole) -> NDArray[np.bool_]:
        """Return for each set whether there are pieces enough.

        Args:
            centres: the exact set of each.
            choices: the positions of its axes' choices, one column each.
        """
        allowed = np.ones(len(centres), bool)
        for kind, counts in self._counts.items():
            taken = self._taken(kind, centres, choices)
            for piece in np.unique(taken[taken >= 0]):
                allowed &= (taken == piece).sum(axis=1) <= counts[piece]
        return allowed

    def _taken(self, kind: str, centres: Whole, choices: Whole) -> Whole:
        """Return the pieces that each set takes of one kind, -1 where there is none, one column each."""
        columns: list[Whole] = []
        for k, axis in enumerate(self._axes):
            if axis.choices.kind == kind:
                columns += self._pieces(axis.part, axis.choices, choices[:, k])
        for name, (stock, positions) in self._chosen.items():
            if stock.kind == kind:
                columns += self._pieces(name, stock, positions[centres])
        return np.column_stack(columns)

    def _pieces(self, part: str, stock: Choices, positions: Whole) -> list[Whole]:
        return [stock.first[positions], stock.second[positions]] * self._times.get(part, 1)
