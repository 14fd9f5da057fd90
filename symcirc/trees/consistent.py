"""What must hold of a walk and of a diagram, checked in full."""

from __future__ import annotations

from collections.abc import Collection, Sequence

from symcirc.trees.diagram import Diagram
from symcirc.trees.walk import Codes, Walk, partitions


def assert_consistent(diagram: Diagram) -> None:
    """Check a diagram.

    Every code leads to a state of the next level; every state can be reached from a root and leads to an end;
    no two states of a level say the same, with all signs turned or not; every level decides something, and
    its weights share no power.

    Raises:
        AssertionError: one of these does not hold; it says which, and at which level.
    """
    sizes = [*(level.size for level in diagram.levels), len(diagram.ends)]
    reached = {abs(root) - 1 for root in diagram.roots if root}
    _claim(all(state < sizes[0] for state in reached), "a root leads to no state", 0)
    for number, level in enumerate(diagram.levels):
        _claim(len(level.codes) == len(level.weights) > 1, "a level decides nothing", number)
        _claim(all(len(codes) == level.size for codes in level.codes), "choices of unlike length", number)
        rows = list(zip(*level.codes, strict=True))
        _claim(all(map(any, rows)), "a state is a dead end", number)
        _claim(all(map(any, level.codes)), "a choice leads nowhere", number)
        _claim(all(next(filter(None, row)) > 0 for row in rows), "a state's first sign is turned", number)
        _claim(len(set(rows)) == len(rows), "two states say the same", number)
        _claim(min(weight.exponent for weight in level.weights) == 0, "all weights share a symbol", number)
        _claim(min(weight.s_power for weight in level.weights) == 0, "all weights share a power of s", number)
        reached = _following(level.codes, reached, level.size, sizes[number + 1], number)
    _claim(reached == set(range(len(diagram.ends))), "an end is out of reach", len(diagram.levels))
    _claim(all(end > 0 for end in diagram.ends), "an end is not positive", len(diagram.levels))
    _claim(len(set(diagram.ends)) == len(diagram.ends), "two ends are the same", len(diagram.levels))


def assert_walk_consistent(walk: Walk) -> None:
    """Check a walk.

    Every code leads to a state of the next level; every state is there once and can be reached; its two
    partitions are in canonical form and as long as those of its level; both graphs are short of the same
    number of edges.

    Raises:
        AssertionError: one of these does not hold; it says which, and at which level.
    """
    reached = {abs(root) - 1 for root in walk.roots if root}
    for number, states in enumerate(walk.states):
        _claim(len(set(states)) == len(states), "two states are the same", number)
        pairs = [partitions(walk, state) for state in states]
        _claim(
            all(_is_canonical(one) and _is_canonical(other) for one, other in pairs),
            "no growth string",
            number,
        )
        _claim(len({(len(one), len(other)) for one, other in pairs}) < 2, "frontiers of unlike width", number)
        _claim(
            len({_blocks(one) - _blocks(other) for one, other in pairs}) < 2,
            "the graphs differ in edges",
            number,
        )
        if number < len(walk.codes):
            reached = _following(
                walk.codes[number], reached, len(states), len(walk.states[number + 1]), number
            )
    _claim(reached == set(range(len(walk.states[-1]))), "a state is out of reach", len(walk.codes))


def _following(codes: Collection[Codes], reached: set[int], size: int, after: int, number: int) -> set[int]:
    """Check that a level is reached and leads somewhere; return what is reached from it."""
    _claim(reached == set(range(size)), "a state is out of reach", number)
    found = {abs(code) - 1 for column in codes for code in column if code}
    _claim(all(state < after for state in found), "a code leads to no state", number)
    return found


def _is_canonical(partition: Sequence[int]) -> bool:
    """Return True for a growth string: blocks are numbered by first appearance."""
    return all(label <= max(partition[:place], default=-1) + 1 for place, label in enumerate(partition))


def _blocks(partition: Sequence[int]) -> int:
    return len(set(partition))


def _claim(holds: bool, fault: str, level: int) -> None:
    if not holds:
        raise AssertionError(f"{fault} at level {level}")
