"""Rules for the order of the parts, compared: the widest frontier, and the states that the walk then has.

    python -m tests.benchmarks.orders

The two greedy rules and the best of several are the engine's; the others stand here only to be measured. A
dash means more than a million states.
"""

from __future__ import annotations

import time
from collections import deque
from collections.abc import Callable, Iterator

import networkx as nx

from symcirc.trees.frontier import TooManyStates
from symcirc.trees.graphs import TwoGraphs, two_graphs
from symcirc.trees.order import Incidence, best_order, by_node, by_part, incidence, widths
from symcirc.trees.relevance import relevant
from symcirc.trees.walk import walk
from tests.benchmarks.families import (
    Case,
    discrete_amplifier,
    finite_gain_chain,
    grid,
    ladder,
    low_pass_chain,
)
from tests.trees.samples import random_case

MOST_STATES = 1_000_000
#: Seeds whose circuits keep more than 25 parts that matter.
RANDOM_SEEDS = (20, 23, 77)


def breadth_first(inc: Incidence) -> list[int]:
    """Vertices breadth first from what is asked for; a part comes with its last vertex."""
    place: dict[int, int] = {}
    for start in (*inc.asked, *range(len(inc.parts))):
        waiting = deque([start])
        while waiting:
            vertex = waiting.popleft()
            if vertex not in place:
                place[vertex] = len(place)
                waiting.extend(other for part in inc.parts[vertex] for other in inc.touched[part])
    return _by_last_vertex(inc, place)


def minimum_degree(inc: Incidence) -> list[int]:
    """Vertices by minimum degree of what is left when they are eliminated; each takes its parts along."""
    near = {vertex: set() for vertex in range(len(inc.parts))}
    for vertices in inc.touched:
        for vertex in vertices:
            near[vertex].update(vertices)
    order: dict[int, None] = {}
    while near:
        vertex = min(near, key=lambda v: (len(near[v]), v))
        others = near.pop(vertex) - {vertex}
        for other in others:
            near[other] |= others
            near[other].discard(vertex)
        order.update(dict.fromkeys(inc.parts[vertex]))
    return list(order)


def nested_dissection(inc: Incidence) -> list[int]:
    """One side of a smallest vertex cut between two far ends, the cut, the other side; and so on."""
    graph = nx.Graph()
    graph.add_nodes_from(range(len(inc.parts)))
    graph.add_edges_from((a, b) for vertices in inc.touched for a in vertices for b in vertices if a < b)
    place = {vertex: number for number, vertex in enumerate(_dissected(graph))}
    return _by_last_vertex(inc, place)


def _dissected(graph: nx.Graph) -> Iterator[int]:
    if len(graph) < 4:
        yield from graph
        return
    parts = list(nx.connected_components(graph))
    if len(parts) == 1:
        ends = max(nx.single_source_shortest_path_length(graph, min(graph)), key=lambda v: (v,))
        far = list(nx.single_source_shortest_path_length(graph, ends))[-1]
        if graph.has_edge(ends, far):
            yield from graph
            return
        cut = nx.minimum_node_cut(graph, ends, far)
        parts = list(nx.connected_components(graph.subgraph(set(graph) - cut)))
        parts.insert(len(parts) // 2, set())
        for part in parts:
            yield from _dissected(graph.subgraph(part)) if part else sorted(cut)
        return
    for part in parts:
        yield from _dissected(graph.subgraph(part))


def _by_last_vertex(inc: Incidence, place: dict[int, int]) -> list[int]:
    return sorted(
        range(len(inc.touched)), key=lambda part: sorted((place[v] for v in inc.touched[part]), reverse=True)
    )


RULES: dict[str, Callable[[TwoGraphs, Incidence], object]] = {
    "as written": lambda graphs, inc: range(len(inc.touched)),
    "breadth first": lambda graphs, inc: breadth_first(inc),
    "minimum degree": lambda graphs, inc: minimum_degree(inc),
    "nested dissection": lambda graphs, inc: nested_dissection(inc),
    "greedy by part": lambda graphs, inc: by_part(inc, (*inc.asked, 0)[0]),
    "greedy by node": lambda graphs, inc: by_node(inc, (*inc.asked, 0)[0]),
    "best of several": lambda graphs, inc: best_order(graphs),
}


def cases() -> Iterator[tuple[str, Case]]:
    yield "ladder, 40 sections", ladder(40)
    yield "grid, 5 by 5", grid(5)
    yield "grid, 7 by 7", grid(7)
    yield "grid, 4 by 20", grid(4, 20)
    yield "low-pass chain, 10 stages", low_pass_chain(10)
    yield "finite-gain chain, 10 stages", finite_gain_chain(10)
    yield "24 transistors", discrete_amplifier()
    for seed in RANDOM_SEEDS:
        yield f"random, seed {seed}", random_case(seed, 60)


def main() -> None:
    for name, case in cases():
        graphs = relevant(two_graphs(*case))
        inc = incidence(graphs)
        print(f"{name}: {len(inc.touched)} parts, {len(inc.parts)} vertices")
        for rule, order_of in RULES.items():
            begun = time.perf_counter()
            order = list(order_of(graphs, inc))
            spent = 1e3 * (time.perf_counter() - begun)
            widest = max(widths(inc, order), default=0)
            try:
                states = (
                    f"{sum(map(len, walk(graphs, order, MOST_STATES).states)):10,}"
                    if widest < 40
                    else f"{'-':>10}"
                )
            except TooManyStates:
                states = f"{'-':>10}"
            print(f"    {rule:18} widest frontier {widest:4}   states {states}   found in {spent:8.2f} ms")


if __name__ == "__main__":
    main()
