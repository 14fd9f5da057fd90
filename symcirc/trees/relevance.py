"""Setting aside what cannot change the ratio: stages that multiply both determinants alike.

Both determinants are brought to block triangular form by their pattern of zeros (a perfect matching of rows
and columns, then the strongly connected components). A diagonal block that both have, without the row or the
column in which they differ, cancels from the ratio. Its rows and columns are deleted, which in the graphs is
to merge its nodes with ground.

A block may have a perfect matching and still be singular. It is set aside only where its determinant is not
zero for some numbers, so that a circuit without a solution never turns into one.

Method: from memory, Dulmage and Mendelsohn, "Coverings of bipartite graphs" (1958); Kuhn (1955) for the
matching; Tarjan (1972) for the components.
"""

from __future__ import annotations

import random
from collections import deque
from collections.abc import Iterable
from dataclasses import replace

import networkx as nx

from symcirc.trees.graphs import Element, Root, TwoGraphs, merged
from symcirc.trees.laws import Choice, Edge, Weight
from symcirc.trees.merging import Merging

#: A row or a column: that of a node, of an element's own equation or current, or of what is asked for.
Line = tuple[str, str]
Row = dict[Line, int]
Rows = dict[Line, Row]
Block = tuple[frozenset[Line], frozenset[Line]]

_ASKED = "asked", ""
_PRIME = (1 << 61) - 1


def relevant(graphs: TwoGraphs) -> TwoGraphs:
    """Return the graphs without the blocks that multiply both determinants alike.

    >>> in_or_out = Choice((("a", "g"),), (("a", "g"),), Weight()), Choice((), (), Weight(1, "R1", 1))
    >>> root = Root(1, (), ())
    >>> graphs = TwoGraphs((Element("R1", in_or_out),), ("g", "a"), ("g", "a"), "g", "g", (root, root), ())
    >>> relevant(graphs).idle
    ('R1',)
    """
    over, under = graphs.roots
    if over is None or under is None:
        return graphs
    base = _tableau(graphs)
    shared = _blocks(_with_root(base, graphs, over)) & _blocks(_with_root(base, graphs, under))
    gone = [block for block in shared if _ASKED not in block[0] | block[1] and _is_regular(base, block)]
    return _without(graphs, gone) if gone else graphs


def _tableau(graphs: TwoGraphs) -> Rows:
    """Return the equations that both determinants share, with every symbol a random number modulo a prime."""
    value = _Values()
    rows: Rows = {("node", node): {} for node in graphs.current_nodes if node != graphs.current_ground}
    for element in graphs.elements:
        own = "element", element.name
        current, voltage = _sides(element)
        column = _incidence([(edge, value(weight)) for edge, weight in current], graphs.current_ground)
        row = _incidence([(edge, value(weight)) for edge, weight in voltage], graphs.voltage_ground)
        left_out = next((c.weight for c in element.choices if not c.current and not c.voltage), None)
        if left_out is not None:
            # the weight is on both sides: the square of one random number is as random as another
            _stamp(rows, column, row, pow(value(left_out), -2, _PRIME))
            continue
        if current:
            _stamp(rows, column, {own: 1}, 1)
        if voltage:
            rows[own] = row
    return rows


def _sides(element: Element) -> tuple[list[tuple[Edge, Weight]], list[tuple[Edge, Weight]]]:
    """Return the weighted edges of each graph; the choices of an element are all pairs."""
    present = [choice for choice in element.choices if choice.current or choice.voltage]
    lead = present[0]
    current = [(c.current[0], c.weight) for c in present if c.current and c.voltage == lead.voltage]
    voltage = [(c.voltage[0], c.weight) for c in present if c.voltage and c.current == lead.current]
    return current, voltage


class _Values:
    """Random numbers modulo the prime for symbols and s, seeded so that a run can be repeated."""

    def __init__(self) -> None:
        self._random = random.Random(1)
        self._known: dict[str, int] = {}

    def __call__(self, weight: Weight) -> int:
        value = weight.coefficient
        for symbol, exponent in ((weight.symbol or "s", weight.exponent), ("s", weight.s_power)):
            if exponent:
                if symbol not in self._known:
                    self._known[symbol] = self._random.randrange(1, _PRIME)
                value = value * pow(self._known[symbol], exponent, _PRIME) % _PRIME
        return value


def _incidence(edges: Iterable[tuple[Edge, int]], ground: str) -> Row:
    """Return the sum of the edges, each its first node less its second, ground left out."""
    line: Row = {}
    for (first, second), value in edges:
        for node, signed in ((first, value), (second, -value)):
            if node != ground:
                line["node", node] = (line.get(("node", node), 0) + signed) % _PRIME
    return line


def _stamp(rows: Rows, column: Row, row: Row, factor: int) -> None:
    """Add the outer product of a column and a row times a factor."""
    for line, left in column.items():
        entries = rows[line]
        for place, right in row.items():
            entries[place] = (entries.get(place, 0) + left * right * factor) % _PRIME


def _with_root(base: Rows, graphs: TwoGraphs, root: Root) -> Rows:
    """Return the equations of one determinant: the shared ones, and those of what is asked."""
    rows = {line: dict(row) for line, row in base.items()}
    asked = _incidence([(edge, 1) for edge in root.voltage], graphs.voltage_ground)
    column = _incidence([(edge, 1) for edge in root.current], graphs.current_ground)
    if root.voltage:
        rows[_ASKED] = asked
    if root.current:
        _stamp(rows, column, {_ASKED: 1}, 1)
    if not root.voltage and not root.current:
        rows[_ASKED] = {_ASKED: 1}
    return rows


def _blocks(rows: Rows) -> set[Block]:
    """Return the diagonal blocks of the block triangular form; none where no perfect matching exists."""
    column_of: dict[Line, Line] = {}
    row_of: dict[Line, Line] = {}
    for line, row in rows.items():
        if line in row and line not in row_of:
            column_of[line] = row_of[line] = line
    if not all(line in column_of or _augmented(rows, column_of, row_of, line) for line in rows):
        return set()
    links = nx.DiGraph()
    links.add_nodes_from(rows)
    links.add_edges_from((line, row_of[place]) for line, row in rows.items() for place in row)
    return {
        (frozenset(block), frozenset(column_of[line] for line in block))
        for block in nx.strongly_connected_components(links)
    }


def _augmented(rows: Rows, column_of: dict[Line, Line], row_of: dict[Line, Line], start: Line) -> bool:
    """Match one more row along a shortest alternating path; False where there is none."""
    came: dict[Line, Line] = {}
    waiting = deque([start])
    while waiting:
        line = waiting.popleft()
        for place in rows[line]:
            if place in came:
                continue
            came[place] = line
            if place in row_of:
                waiting.append(row_of[place])
                continue
            step: Line | None = place
            while step is not None:
                line = came[step]
                row_of[step] = line
                column_of[line], step = step, column_of.get(line)
            return True
    return False


def _is_regular(rows: Rows, block: Block) -> bool:
    """Return True where the block's determinant is not zero modulo the prime: then it is no zero polynomial.

    Row by row, sparse: a row is freed of the columns of all pivots before it, the oldest first.
    """
    pivots: dict[Line, Row] = {}
    age: dict[Line, int] = {}
    for line, row in rows.items():
        if line not in block[0]:
            continue
        left = {place: value for place, value in row.items() if value and place in block[1]}
        while (
            found := min((place for place in left if place in age), key=age.__getitem__, default=None)
        ) is not None:
            factor = left.pop(found)
            for place, value in pivots[found].items():
                left[place] = (left.get(place, 0) - factor * value) % _PRIME
                if not left[place]:
                    del left[place]
        if not left:
            return False
        pivot = line if line in left else next(iter(left))
        inverse = pow(left.pop(pivot), -1, _PRIME)
        pivots[pivot] = {place: value * inverse % _PRIME for place, value in left.items()}
        age[pivot] = len(age)
    return True


def _without(graphs: TwoGraphs, gone: list[Block]) -> TwoGraphs:
    rows = frozenset().union(*(block[0] for block in gone))
    columns = frozenset().union(*(block[1] for block in gone))
    current, voltage = Merging(), Merging()
    current.merge_all((graphs.current_ground, name) for kind, name in rows if kind == "node")
    voltage.merge_all((graphs.voltage_ground, name) for kind, name in columns if kind == "node")
    elements: list[Element] = []
    idle = list(graphs.idle)
    for element in graphs.elements:
        own = "element", element.name
        choices = _half(element, own not in columns, own not in rows)
        if choices:
            elements.append(Element(element.name, choices))
        else:
            idle.append(element.name)
    return merged(replace(graphs, elements=tuple(elements), idle=tuple(idle)), current, voltage)


def _half(element: Element, keeps_current: bool, keeps_voltage: bool) -> tuple[Choice, ...]:
    """Return the choices that are left of an element whose own current or own equation has gone."""
    if keeps_current and keeps_voltage:
        return element.choices
    current, voltage = _sides(element)
    if keeps_current:
        return tuple(Choice((edge,), (), weight) for edge, weight in current if voltage)
    if keeps_voltage:
        return tuple(Choice((), (edge,), weight) for edge, weight in voltage if current)
    return ()
