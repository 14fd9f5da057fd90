"""The invariants of walk and diagram hold, and the checks fire when one is broken."""

from __future__ import annotations

from dataclasses import replace

import pytest

from symcirc.trees.answer import determinants
from symcirc.trees.collect import collected
from symcirc.trees.consistent import assert_consistent, assert_walk_consistent
from symcirc.trees.count import count
from symcirc.trees.diagram import diagram
from symcirc.trees.frontier import TooManyStates
from symcirc.trees.graphs import two_graphs
from symcirc.trees.laws import Weight
from symcirc.trees.order import best_order, by_node, by_part, incidence, widths
from symcirc.trees.relevance import relevant
from symcirc.trees.walk import walk
from tests.benchmarks.families import discrete_amplifier, finite_gain_chain, grid, ladder
from tests.trees.samples import random_case


def test_walks_and_diagrams_are_consistent():
    cases = [random_case(seed) for seed in range(5_000_000, 5_000_300)]
    for case in [ladder(30), grid(5), finite_gain_chain(4), discrete_amplifier(), *cases]:
        graphs = relevant(two_graphs(*case))
        found = walk(graphs, best_order(graphs))
        assert_walk_consistent(found)
        made = diagram(found, graphs.idle)
        assert_consistent(made)
        assert_consistent(collected(made))


def _ladder_diagram():
    return determinants(*ladder(3))


def _with_level(made, number, **changes):
    levels = list(made.levels)
    levels[number] = replace(levels[number], **changes)
    return replace(made, levels=tuple(levels))


def _with_code(made, number, choice, state, code):
    codes = [list(column) for column in made.levels[number].codes]
    codes[choice][state] = code
    return _with_level(made, number, codes=tuple(codes))


@pytest.mark.parametrize(
    ("corrupted", "fault"),
    [
        (lambda d: replace(d, roots=(0, 0)), "a state is out of reach"),
        (lambda d: replace(d, roots=(9, 1)), "a root leads to no state"),
        (lambda d: _with_code(d, 1, 0, 0, 9), "a code leads to no state"),
        (lambda d: _with_code(d, 2, 0, 2, -1), "first sign is turned"),
        (lambda d: _with_code(_with_code(d, 2, 0, 0, 0), 2, 1, 0, 0), "a state is a dead end"),
        (
            lambda d: _with_level(d, 1, codes=tuple((*c, c[0]) for c in d.levels[1].codes)),
            "two states say the same",
        ),
        (lambda d: _with_level(d, 1, codes=d.levels[1].codes[:1]), "a level decides nothing"),
        (lambda d: _with_level(d, 0, codes=([0, 0], d.levels[0].codes[1])), "a choice leads nowhere"),
        (lambda d: _with_level(d, 1, codes=(d.levels[1].codes[0], [1])), "unlike length"),
        (lambda d: _with_level(d, 0, weights=(Weight(1, "R1", 1),) * 2), "all weights share a symbol"),
        (
            lambda d: _with_level(d, 0, weights=(Weight(1, "C1", 1, 1), Weight(1, None, 0, 1))),
            "share a power of s",
        ),
        (lambda d: replace(d, ends=(0,)), "an end is not positive"),
        (lambda d: replace(d, ends=(1, 1)), "an end is out of reach"),
    ],
)
def test_a_corrupted_diagram_is_noticed(corrupted, fault):
    made = _ladder_diagram()
    assert_consistent(made)
    with pytest.raises(AssertionError, match=fault):
        assert_consistent(corrupted(made))


@pytest.mark.parametrize(
    ("corrupted", "fault"),
    [
        (lambda w: replace(w, roots=(0, 0)), "a state is out of reach"),
        (
            lambda w: replace(w, states=(w.states[0], w.states[1] * 2, *w.states[2:])),
            "two states are the same",
        ),
        (lambda w: replace(w, states=(*w.states[:-1], (*w.states[-1], w.states[1][0]))), "unlike width"),
    ],
)
def test_a_corrupted_walk_is_noticed(corrupted, fault):
    graphs = two_graphs(*ladder(3))
    found = walk(graphs, best_order(graphs))
    with pytest.raises(AssertionError, match=fault):
        assert_walk_consistent(corrupted(found))


def test_a_partition_that_is_no_growth_string_is_noticed():
    graphs = two_graphs(*ladder(3))
    found = walk(graphs, best_order(graphs))
    found.catalogue.partitions[found.states[1][0] >> 32] = b"\x01\x00"
    with pytest.raises(AssertionError, match="growth string"):
        assert_walk_consistent(found)


def test_an_order_holds_every_part_once():
    for seed in range(5_100_000, 5_100_100):
        graphs = relevant(two_graphs(*random_case(seed)))
        inc = incidence(graphs)
        orders = [best_order(graphs)]
        orders += [rule(inc, start) for rule in (by_part, by_node) for start in range(min(3, len(inc.parts)))]
        for order in orders:
            assert sorted(order) == list(range(len(graphs.elements)))
            assert widths(inc, order)[-1:] in ([], [0])


def test_the_order_keeps_the_frontier_of_a_chain_narrow():
    for case in (ladder(50), finite_gain_chain(12)):
        graphs = relevant(two_graphs(*case))
        assert max(widths(incidence(graphs), best_order(graphs))) <= 8


def test_a_walk_can_be_bounded():
    with pytest.raises(TooManyStates):
        determinants(*grid(6), most_states=100)
    assert determinants(*grid(3), most_states=10_000).roots == determinants(*grid(3)).roots


def test_a_hopelessly_wide_frontier_is_refused():
    graphs = two_graphs(*ladder(300))
    resistors_first = sorted(range(600), key=lambda number: graphs.elements[number].name)[::-1]
    with pytest.raises(TooManyStates):
        walk(graphs, resistors_first)


def test_the_answer_does_not_depend_on_the_order():
    graphs = relevant(two_graphs(*grid(4)))
    size = len(graphs.elements)
    counts = {count(diagram(walk(graphs, order), ())) for order in (range(size), range(size - 1, -1, -1))}
    assert len(counts) == 1
