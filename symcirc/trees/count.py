"""How many products there are, without writing out one."""

from __future__ import annotations

from symcirc.trees.diagram import Diagram


def count(diagram: Diagram) -> tuple[int, int]:
    """Return the exact numbers of products over and under the line.

    Of a diagram as it was walked, they are the products before collection; of a collected diagram, the
    products that are left after it.

    >>> from symcirc.trees.diagram import Level
    >>> from symcirc.trees.laws import Weight
    >>> level = Level("R1", (Weight(), Weight(1, "R1", 1)), ((1,), (-1,)))
    >>> count(Diagram((level,), (1, 0), (1,), ()))
    (2, 0)
    """
    counts = [1] * len(diagram.ends)
    for level in reversed(diagram.levels):
        find = [0, *counts, *reversed(counts)].__getitem__
        counts = list(map(sum, zip(*(map(find, column) for column in level.codes), strict=True)))
    found = [0, *counts, *reversed(counts)]
    return found[diagram.roots[0]], found[diagram.roots[1]]
