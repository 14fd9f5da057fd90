"""Linear equations in the field: sparse elimination, and a growing basis of rows."""

from __future__ import annotations

from collections.abc import Hashable, Mapping
from typing import Generic, TypeVar

from symcirc.working.field import PRIME, inverse

K = TypeVar("K", bound=Hashable)
#: A row: the factor of every unknown that stands in it.
Row = dict[K, int]


def solve(rows: list[Row[K]], right: list[int], unknowns: tuple[K, ...]) -> dict[K, int] | None:
    """Return the one solution of square equations, or None where there is none or many.

    The shortest waiting row gives the next pivot, at its least used unknown, which keeps the rows short.

    >>> solve([{"x": 1, "y": 1}, {"x": 1, "y": -1}], [3, 1], ("x", "y"))
    {'x': 2, 'y': 1}
    """
    left = [{k: v % PRIME for k, v in row.items() if v % PRIME} for row in rows]
    constants = [value % PRIME for value in right]
    holders: dict[K, set[int]] = {unknown: set() for unknown in unknowns}
    for number, row in enumerate(left):
        for key in row:
            holders[key].add(number)
    waiting, pivots = set(range(len(left))), {}
    while waiting:
        number = min(waiting, key=lambda n: (len(left[n]), n))
        waiting.discard(number)
        row = left[number]
        if not row:
            if constants[number]:
                return None
            continue
        pivot = min(row, key=lambda key: (len(holders[key]), str(key)))
        pivots[pivot] = number
        scale = inverse(row[pivot])
        left[number] = row = {key: value * scale % PRIME for key, value in row.items()}
        constants[number] = constants[number] * scale % PRIME
        for other in list(holders[pivot]):
            if other != number:
                factor = left[other][pivot]
                constants[other] = (constants[other] - factor * constants[number]) % PRIME
                _subtract(left[other], row, factor, other, holders)
    if len(pivots) < len(unknowns):
        return None
    return {unknown: constants[pivots[unknown]] for unknown in unknowns}


def _subtract(
    target: Row[K], row: Mapping[K, int], factor: int, number: int, holders: dict[K, set[int]]
) -> None:
    for key, value in row.items():
        difference = (target.get(key, 0) - factor * value) % PRIME
        if difference:
            target[key] = difference
            holders[key].add(number)
        elif target.pop(key, None) is not None:
            holders[key].discard(number)


class Basis(Generic[K]):
    """Rows in echelon form, one pivot each."""

    def __init__(self) -> None:
        self._rows: dict[K, Row[K]] = {}

    def reduced(self, row: Row[K]) -> Row[K]:
        """Return what is left of a row when the rows of the basis are taken off: nothing where it follows."""
        left = {key: value % PRIME for key, value in row.items() if value % PRIME}
        for pivot, known in self._rows.items():
            factor = left.get(pivot, 0)
            if factor:
                for key, value in known.items():
                    difference = (left.get(key, 0) - factor * value) % PRIME
                    if difference:
                        left[key] = difference
                    else:
                        left.pop(key, None)
        return left

    def add(self, row: Row[K]) -> None:
        """Add a row; one that follows from the basis changes nothing."""
        left = self.reduced(row)
        if left:
            pivot = next(iter(left))
            scale = inverse(left[pivot])
            self._rows[pivot] = {key: value * scale % PRIME for key, value in left.items()}

    def copy(self) -> Basis[K]:
        """Return a basis that may grow on its own."""
        other: Basis[K] = Basis()
        other._rows = dict(self._rows)
        return other
