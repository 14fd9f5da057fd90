"""The walk: all parts in one order, keeping for each graph only how the frontier is connected.

Partial choices that leave both graphs connected in the same way are one state; the states of all levels, with
the steps between them, are the diagram. Its size depends on the width of the frontier, not on the number of
products.

Method: from memory, Sekine, Imai and Tani, "Computing the Tutte polynomial of a graph of moderate size"
(1995), the frontier computation over spanning trees; here on two graphs at once, with signs.
"""

from __future__ import annotations

from array import array
from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from symcirc.trees.frontier import Catalogue, Step, Table, TooManyStates, steps
from symcirc.trees.graphs import Element, TwoGraphs
from symcirc.trees.laws import Choice, Edge

#: A state packs the numbers of its two partitions: current << _HALF | voltage.
_HALF = 32
_MASK = (1 << _HALF) - 1

States = tuple[int, ...]
Codes = Sequence[int]


@dataclass(frozen=True)
class Walk:
    """What the walk found, dead ends included.

    ``states[k]`` are the states before element k of ``elements``, the last ones those after all.
    ``codes[k][c]`` says where choice c of element k leads from each of them: 0 nowhere, ``j + 1`` to state j
    of ``states[k + 1]``, ``-(j + 1)`` there with the sign turned. ``roots`` are such codes into
    ``states[0]``.
    """

    elements: tuple[Element, ...]
    roots: tuple[int, int]
    states: tuple[States, ...]
    codes: tuple[tuple[Codes, ...], ...]
    catalogue: Catalogue


def walk(graphs: TwoGraphs, order: Sequence[int], most_states: int | None = None) -> Walk:
    """Walk the two graphs.

    Args:
        graphs: what is walked.
        order: the numbers of the elements, as they are to be decided.
        most_states: give up beyond this number of states; without it, never.

    Raises:
        TooManyStates: there are more states than ``most_states``, or the frontier is hopelessly wide.
    """
    elements = tuple(graphs.elements[number] for number in order)
    catalogue = Catalogue()
    levels = _steps(graphs, elements)
    roots, states = _start(graphs, catalogue, *next(levels))
    found: list[States] = [states]
    codes: list[tuple[Codes, ...]] = []
    known: dict[tuple[object, ...], tuple[tuple[Codes, ...], States]] = {}
    total = len(states)
    for element, (current, voltage) in zip(elements, levels, strict=True):
        key = (current, voltage, states, tuple(map(_manner, element.choices)))
        step = known.get(key)
        if step is None:
            tables = [
                (
                    catalogue.table(current, number, lone > 0),
                    catalogue.table(voltage, number, lone < 0),
                    turned,
                )
                for number, (turned, lone) in enumerate(map(_manner, element.choices))
            ]
            step = known[key] = _advanced(states, tables)
        codes.append(step[0])
        states = step[1]
        found.append(states)
        total += len(states)
        if most_states is not None and total > most_states:
            raise TooManyStates(f"more than {most_states} states")
    return Walk(elements, roots, tuple(found), tuple(codes), catalogue)


def partitions(walk: Walk, state: int) -> tuple[bytes, bytes]:
    """Return the partitions of the current and of the voltage frontier that a state packs."""
    return walk.catalogue.partitions[state >> _HALF], walk.catalogue.partitions[state & _MASK]


def _steps(graphs: TwoGraphs, elements: Sequence[Element]) -> Iterator[tuple[Step, Step]]:
    """Yield the steps of both graphs: first that of the roots, then one for each element."""
    roots = [root for root in graphs.roots if root is not None]
    current: list[tuple[tuple[Edge, ...], ...]] = [tuple(root.current for root in roots)]
    voltage: list[tuple[tuple[Edge, ...], ...]] = [tuple(root.voltage for root in roots)]
    for element in elements:
        current.append(tuple(choice.current for choice in element.choices))
        voltage.append(tuple(choice.voltage for choice in element.choices))
    # both are complete before the first is used: a frontier that is too wide is noticed before the walk
    both = [*steps(graphs.current_nodes, current)], [*steps(graphs.voltage_nodes, voltage)]
    return zip(*both, strict=True)


def _start(
    graphs: TwoGraphs, catalogue: Catalogue, current: Step, voltage: Step
) -> tuple[tuple[int, int], States]:
    empty = catalogue.number(b"")
    states: States = ()
    roots: list[int] = []
    choice = 0
    for root in graphs.roots:
        if root is None:
            roots.append(0)
            continue
        tables = (
            catalogue.table(current, choice, False),
            catalogue.table(voltage, choice, False),
            root.sign < 0,
        )
        ((code,),), reached = _advanced((empty << _HALF | empty,), [tables])
        choice += 1
        if code and reached[0] not in states:
            states += reached
        roots.append((states.index(reached[0]) + 1) * code if code else 0)
    return (roots[0], roots[1]), states


def _manner(choice: Choice) -> tuple[bool, int]:
    """Return whether a choice turns the sign, and in which graph it has an edge without a partner, if any."""
    return choice.weight.coefficient < 0, len(choice.current) - len(choice.voltage)


def _advanced(
    states: States, tables: Sequence[tuple[Table, Table, bool]]
) -> tuple[tuple[Codes, ...], States]:
    """Take one step from all states: the codes of each choice, and the states of the next level."""
    following: dict[int, int] = {}
    place = following.setdefault
    codes: list[Codes] = []
    for current, voltage, turned in tables:
        column = array("i")
        append = column.append
        for state in states:
            one = current[state >> _HALF]
            other = voltage[state & _MASK] if one >= 0 else -1
            if other < 0:
                append(0)
                continue
            code = place(one >> 1 << _HALF | other >> 1, len(following) + 1)
            append(-code if (one ^ other ^ turned) & 1 else code)
        codes.append(column)
    return tuple(codes), tuple(following)
