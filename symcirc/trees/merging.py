"""Merging the nodes of one graph."""

from __future__ import annotations

from collections.abc import Iterable


class Merging:
    """Nodes merged into blocks (disjoint sets with path halving; from memory: Tarjan, 1975).

    >>> merging = Merging()
    >>> merging.merge("a", "b"), merging.merge("b", "a")
    (True, False)
    >>> merging.block("a") == merging.block("b")
    True
    """

    def __init__(self) -> None:
        self._above: dict[str, str] = {}

    def block(self, node: str) -> str:
        """Return the node that stands for the block of ``node``."""
        above = self._above
        while (upper := above.get(node, node)) != node:
            above[node] = above.get(upper, upper)
            node = upper
        return node

    def merge(self, one: str, other: str) -> bool:
        """Merge two blocks; False where they were one block already."""
        kept, gone = self.block(one), self.block(other)
        if kept == gone:
            return False
        self._above[gone] = kept
        return True

    def merge_all(self, edges: Iterable[tuple[str, str]]) -> bool:
        """Merge along every edge; False where one of them closed a loop."""
        sound = True
        for edge in edges:
            sound &= self.merge(*edge)
        return sound
