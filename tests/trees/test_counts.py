"""The number of products against the matrix-tree theorem and closed forms.

Outside references: the matrix-tree theorem (Kirchhoff) by exact integer determinants of sympy's domain
matrices; the Fibonacci numbers for RC ladders (common knowledge).
"""

from __future__ import annotations

import random

import networkx as nx
import pytest
from sympy import ZZ
from sympy.polys.matrices import DomainMatrix

from symcirc.circuit.model import CurrentDrive, VoltageDrive
from symcirc.sheet.model import GROUND
from symcirc.trees.answer import determinants, ratio
from symcirc.trees.collect import collected
from symcirc.trees.count import count
from tests.benchmarks.families import discrete_amplifier, grid, ladder
from tests.trees.samples import circuit, node_current, part, random_case, setup, voltage


def spanning_trees(graph: nx.MultiGraph) -> int:
    laplacian = nx.laplacian_matrix(graph).toarray()[1:, 1:]
    rows = [[ZZ(int(entry)) for entry in row] for row in laplacian]
    return int(DomainMatrix(rows, (len(rows), len(rows)), ZZ).charpoly()[-1]) * (-1) ** len(rows)


@pytest.mark.parametrize("side", [2, 3, 5, 6])
def test_a_grid_has_as_many_products_as_spanning_trees(side):
    graph = nx.MultiGraph(nx.grid_2d_graph(side, side))
    assert count(determinants(*grid(side)))[1] == spanning_trees(graph)


@pytest.mark.parametrize("seed", range(40))
def test_random_resistors_have_as_many_products_as_spanning_trees(seed):
    rng = random.Random(seed)
    nodes = [GROUND, *(f"n{k}" for k in range(1, rng.randint(3, 9)))]
    edges = [(node, nodes[rng.randrange(place)]) for place, node in enumerate(nodes) if place]
    edges += [tuple(rng.sample(nodes, 2)) for _ in range(rng.randint(1, 14))]
    graph = nx.MultiGraph(edges)
    made = circuit([part(f"R{number}", *ends) for number, ends in enumerate(edges)])
    impedance = setup(CurrentDrive("n1"), voltage("n1"), node_current("n1"))
    merged = nx.contracted_nodes(graph, GROUND, "n1", self_loops=False)
    over, under = count(determinants(made, impedance))
    # bridges that hang on no asked node are idle: they are in every tree, on both sides
    assert over * spanning_trees(graph) == under * spanning_trees(merged)
    assert spanning_trees(graph) % under == 0


@pytest.mark.parametrize("sections", [1, 2, 10, 300])
def test_a_ladder_has_a_fibonacci_number_of_products(sections):
    one, other = 0, 1
    for _ in range(2 * sections):
        one, other = other, one + other
    assert count(determinants(*ladder(sections))) == (1, other)


def test_a_long_ladder_is_counted_exactly():
    over, under = count(determinants(*ladder(2000)))
    assert over == 1
    assert len(str(under)) == 836


def test_a_discrete_amplifier_has_trillions_of_products():
    over, under = count(determinants(*discrete_amplifier()))
    assert under > 10**24
    assert over > 10**21


def test_counts_after_collection_are_those_of_the_expanded_polynomials():
    repeated = 0
    for seed in range(3_000_000, 3_000_400):
        made, asked = random_case(seed, 9, ("conveyor", "transformer"))
        walked = determinants(made, asked)
        left = count(collected(walked))
        answer = ratio(made, asked)
        assert left == tuple(sum(map(len, side)) for side in (answer.numerator, answer.denominator))
        assert all(one >= other for one, other in zip(count(walked), left, strict=True))
        repeated += count(walked) != left
    assert repeated > 10


def test_each_free_symbol_gives_a_coefficient_of_one():
    drive = VoltageDrive("in", GROUND)
    for seed in range(30):
        rng = random.Random(seed)
        nodes = [GROUND, "in", "a", "b", "c"]
        parts = [part(f"{rng.choice('RCL')}{k}", *rng.sample(nodes, 2)) for k in range(9)]
        answer = ratio(circuit(parts), setup(drive, voltage("c"), voltage("in")))
        coefficients = [c for power in answer.numerator + answer.denominator for c in power.values()]
        assert set(coefficients) <= {1, -1}
