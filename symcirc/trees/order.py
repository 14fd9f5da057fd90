"""The order in which the parts are decided: it sets the width of the frontier, and so the number of states.

Two greedy rules, each from several starts; the order of least cost is taken. The cost of an order is the sum
over its levels of 2 to the power of the frontier's width, both graphs counted, which follows the number of
states well. How other rules compare is measured by ``tests/benchmarks/orders.py``.

- By part: next comes the part that leaves the frontier least wide.
- By node: next comes the node whose leaving brings in the fewest new ones; all parts at it are decided.

What is chosen depends on the circuit alone, never on the clock, so that a run can be repeated.
"""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass
from heapq import heappop, heappush

from symcirc.trees.graphs import Root, TwoGraphs
from symcirc.trees.laws import Choice

#: With this cost a part or less, the first order is taken.
_GOOD_ENOUGH = 64.0
#: So much cost for each part pays for one more start; measured, it keeps the search below a third of the
#: walk.
_COST_OF_A_START = 2000.0
_MOST_STARTS = 64
#: Beyond this width an order is hopeless, and two to its power no longer fits a float.
_WIDEST = 500


@dataclass(frozen=True)
class Incidence:
    """Parts and vertices by number; a node is a vertex in each of the two graphs.

    ``touched[part]`` are the vertices of a part, ``parts[vertex]`` the parts at a vertex, ``asked`` the
    vertices of the roots, which are on the frontier from the first.
    """

    touched: tuple[tuple[int, ...], ...]
    parts: tuple[tuple[int, ...], ...]
    asked: tuple[int, ...]


def best_order(graphs: TwoGraphs) -> tuple[int, ...]:
    """Return the numbers of the elements in the order in which they are to be decided."""
    inc = incidence(graphs)
    if not inc.touched:
        return ()
    size = len(inc.touched)
    start = (*inc.asked, 0)[0]
    order = by_part(inc, start)
    least = cost(inc, order)
    if least <= _GOOD_ENOUGH * size:
        return order
    least, order = min((least, order), _best(inc, inc.asked))
    starts = min(_MOST_STARTS, int(least / (_COST_OF_A_START * size)))
    if starts:
        least, order = min(
            (least, order), _best(inc, range(0, len(inc.parts), max(1, len(inc.parts) // starts)))
        )
    return order


def incidence(graphs: TwoGraphs) -> Incidence:
    """Return which part touches which vertex."""
    numbers: dict[tuple[str, str], int] = {}

    def vertices(choices: Iterable[Choice | Root]) -> tuple[int, ...]:
        found: dict[int, None] = {}
        for choice in choices:
            for graph, edges in (("current", choice.current), ("voltage", choice.voltage)):
                for edge in edges:
                    for node in edge:
                        found[numbers.setdefault((graph, node), len(numbers))] = None
        return tuple(found)

    asked = vertices(root for root in graphs.roots if root is not None)
    touched = tuple(vertices(element.choices) for element in graphs.elements)
    parts: list[list[int]] = [[] for _ in numbers]
    for part, here in enumerate(touched):
        for vertex in here:
            parts[vertex].append(part)
    return Incidence(touched, tuple(map(tuple, parts)), asked)


def widths(inc: Incidence, order: Iterable[int]) -> list[int]:
    """Return how many vertices are on the frontier after each part of the order.

    >>> widths(Incidence(((0, 1), (1, 2)), ((0,), (0, 1), (1,)), (0,)), [0, 1])
    [1, 0]
    """
    waiting = [len(parts) for parts in inc.parts]
    inside = set(inc.asked)
    width = sum(1 for vertex in inside if waiting[vertex])
    found = []
    for part in order:
        for vertex in inc.touched[part]:
            if vertex not in inside:
                inside.add(vertex)
                width += 1
            waiting[vertex] -= 1
            if not waiting[vertex]:
                width -= 1
        found.append(width)
    return found


def cost(inc: Incidence, order: Iterable[int]) -> float:
    """Return the cost of an order, which the number of states follows."""
    return sum(2.0 ** min(width, _WIDEST) for width in widths(inc, order))


def by_part(inc: Incidence, start: int) -> tuple[int, ...]:
    """Return the order by part from one vertex: new vertices less leaving ones, then age."""
    return _PartByPart(inc, start).order()


def by_node(inc: Incidence, start: int) -> tuple[int, ...]:
    """Return the order by node from one vertex: fewest new vertices, then age."""
    return _NodeByNode(inc, start).order()


def _best(inc: Incidence, starts: Iterable[int]) -> tuple[float, tuple[int, ...]]:
    """Return the least cost and its order; an infinite cost where there is no start."""
    orders = (rule(inc, start) for start in starts for rule in (by_part, by_node))
    return min(((cost(inc, order), order) for order in orders), default=(math.inf, ()))


class _PartByPart:
    """The greedy search by part. A stale entry of the heap is known by a key that has changed since."""

    def __init__(self, inc: Incidence, start: int) -> None:
        self._inc = inc
        self._waiting = [len(parts) for parts in inc.parts]
        self._new = [len(vertices) for vertices in inc.touched]
        self._leaving = [sum(self._waiting[v] == 1 for v in vertices) for vertices in inc.touched]
        self._since: list[int | None] = [None] * len(inc.touched)
        self._done = [False] * len(inc.touched)
        self._inside = [False] * len(inc.parts)
        self._reached = [False] * len(inc.parts)
        self._heap: list[tuple[int, int, int, int]] = []
        for vertex in inc.asked:
            self._enter(vertex)
        self._reach(start, 0)

    def order(self) -> tuple[int, ...]:
        order: list[int] = []
        unreached = iter(range(len(self._done)))
        while len(order) < len(self._done):
            part = self._next()
            if part is None:
                part = next(part for part in unreached if not self._done[part])
            order.append(part)
            self._take(part, len(order))
        return tuple(order)

    def _next(self) -> int | None:
        while self._heap:
            key = heappop(self._heap)
            if not self._done[key[-1]] and key == self._key(key[-1]):
                return key[-1]
        return None

    def _key(self, part: int) -> tuple[int, int, int, int]:
        return self._new[part] - self._leaving[part], -self._leaving[part], self._since[part] or 0, part

    def _offer(self, part: int) -> None:
        if not self._done[part] and self._since[part] is not None:
            heappush(self._heap, self._key(part))

    def _enter(self, vertex: int) -> None:
        if not self._inside[vertex]:
            self._inside[vertex] = True
            for part in self._inc.parts[vertex]:
                self._new[part] -= 1
                self._offer(part)

    def _reach(self, vertex: int, now: int) -> None:
        self._reached[vertex] = True
        for part in self._inc.parts[vertex]:
            if self._since[part] is None:
                self._since[part] = now
                self._offer(part)
        self._enter(vertex)

    def _take(self, part: int, now: int) -> None:
        self._done[part] = True
        for vertex in self._inc.touched[part]:
            if not self._reached[vertex]:
                self._reach(vertex, now)
            self._waiting[vertex] -= 1
            if self._waiting[vertex] == 1:
                last = next(other for other in self._inc.parts[vertex] if not self._done[other])
                self._leaving[last] += 1
                self._offer(last)


class _NodeByNode:
    """The greedy search by node, its heap like that of the search by part."""

    def __init__(self, inc: Incidence, start: int) -> None:
        self._inc = inc
        self._near: list[dict[int, None]] = [{} for _ in inc.parts]
        for vertices in inc.touched:
            for vertex in vertices:
                self._near[vertex].update(dict.fromkeys(vertices))
        self._missing = [len(near) for near in self._near]
        self._since: list[int | None] = [None] * len(inc.parts)
        self._inside = [False] * len(inc.parts)
        self._done = [False] * len(inc.parts)
        self._heap: list[tuple[int, int, int]] = []
        for vertex in inc.asked:
            self._enter(vertex)
        self._reach(start, 0)

    def order(self) -> tuple[int, ...]:
        order: dict[int, None] = {}
        unreached = iter(range(len(self._done)))
        for now in range(1, len(self._done) + 1):
            vertex = self._next()
            if vertex is None:
                vertex = next(vertex for vertex in unreached if not self._done[vertex])
            self._done[vertex] = True
            order.update(dict.fromkeys(self._inc.parts[vertex]))
            for near in self._near[vertex]:
                if self._since[near] is None:
                    self._reach(near, now)
        return tuple(order)

    def _next(self) -> int | None:
        while self._heap:
            missing, _, vertex = heappop(self._heap)
            if not self._done[vertex] and missing == self._missing[vertex]:
                return vertex
        return None

    def _enter(self, vertex: int) -> None:
        if self._inside[vertex]:
            return
        self._inside[vertex] = True
        for near in self._near[vertex]:
            self._missing[near] -= 1
            since = self._since[near]
            if since is not None:
                heappush(self._heap, (self._missing[near], since, near))

    def _reach(self, vertex: int, now: int) -> None:
        self._since[vertex] = now
        self._enter(vertex)
        heappush(self._heap, (self._missing[vertex], now, vertex))
