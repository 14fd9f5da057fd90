"""Elimination by expansion in minors, row by row, each minor made once.

Gentleman and Johnson, "Analysis of algorithms, a case study: determinants of matrices with polynomial entries",
ACM Trans. Mathematical Software 2 (1976), from memory. Nothing is divided, so every intermediate is a polynomial;
on the sparse matrices of circuits few column sets are alive at once.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from sympy.polys.rings import PolyElement, PolyRing

from symcirc.progress import Progress

Row = Mapping[int, PolyElement]


def maximal_minors(
    rows: Sequence[Row], columns: int, ring: PolyRing, allowed: set[int], progress: Progress
) -> dict[int, PolyElement]:
    """Return, for a matrix with one column more than rows, its minor without each allowed column.

    ``rows`` hold the entries that are not zero, by column. The minors carry the plain determinant's sign, the
    columns that remain taken in order. ``progress`` is called with a line about how far the work has come.
    """
    order = _row_order(rows, columns)
    last_use = {c: max((i for i, r in enumerate(order) if c in rows[r]), default=-1) for c in range(columns)}
    forced = _forced(last_use, allowed, len(order))
    alive: dict[int, PolyElement] = {0: ring(_permutation_sign(order))}
    for step, r in enumerate(order):
        progress(f"elimination: row {step + 1} of {len(order)}, {len(alive)} minors alive")
        following: dict[int, PolyElement] = {}
        for used, minor in alive.items():
            for column, entry in rows[r].items():
                bit = 1 << column
                if used & bit:
                    continue
                now = used | bit
                if not _can_finish(now, forced[step]):
                    continue
                after = bin(used >> column).count("1")
                product = minor * (-entry if after % 2 else entry)
                known = following.get(now)
                following[now] = product if known is None else known + product
        alive = {used: minor for used, minor in following.items() if minor}
    everything = (1 << columns) - 1
    return {(everything ^ used).bit_length() - 1: minor for used, minor in alive.items()}


def _row_order(rows: Sequence[Row], columns: int) -> list[int]:
    """Take next the row that closes most columns and opens fewest: the fewer are open, the fewer minors live."""
    remaining = set(range(len(rows)))
    uses = {c: sum(1 for row in rows if c in row) for c in range(columns)}
    opened: set[int] = set()
    order: list[int] = []
    while remaining:
        best = min(
            remaining,
            key=lambda r: (
                sum(1 for c in rows[r] if c not in opened) - sum(1 for c in rows[r] if uses[c] == 1),
                len(rows[r]),
                r,
            ),
        )
        remaining.discard(best)
        order.append(best)
        for column in rows[best]:
            opened.add(column)
            uses[column] -= 1
    return order


def _permutation_sign(order: Sequence[int]) -> int:
    sign, seen = 1, [False] * len(order)
    for start in range(len(order)):
        length = 0
        while not seen[start]:
            seen[start] = True
            start = order[start]
            length += 1
        if length and length % 2 == 0:
            sign = -sign
    return sign


def _forced(last_use: Mapping[int, int], allowed: set[int], steps: int) -> list[tuple[int, int]]:
    """For each step, (columns that must be used by then, columns of which one may be left) as bit sets."""
    result = []
    for step in range(steps):
        closed = [c for c, last in last_use.items() if last <= step]
        must = sum(1 << c for c in closed if c not in allowed)
        may = sum(1 << c for c in closed if c in allowed)
        result.append((must, may))
    return result


def _can_finish(used: int, forced: tuple[int, int]) -> bool:
    must, may = forced
    return not must & ~used and bin(may & ~used).count("1") <= 1
