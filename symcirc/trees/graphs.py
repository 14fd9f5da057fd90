"""The two graphs of a circuit and an ask: who receives the current, and who controls it.

Every quantity that can be asked for is a linear functional of the unknowns, and by Cramer's rule it is the
determinant whose last row is that functional, over the determinant whose last row is the drive's. These two
determinants, here the two roots, differ by an edge only, so that both are walked at once.

- A voltage V_a - V_b puts the voltage edge (a, b) beside the drive's current edge.
- A current is read in a branch of zero volts. Its voltage edge is merged for good, beside the drive's current edge
  in the root that asks for it; its current edge is contracted in the root that does not.

Signs that both roots share are left out throughout.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import TypeVar

from symcirc.circuit.model import Circuit, Setup
from symcirc.sheet.model import GROUND
from symcirc.trees.laws import Choice, Edge, Law, device_law, part_law
from symcirc.trees.merging import Merging
from symcirc.trees.wiring import Asked, Branch, Wiring, wired


@dataclass(frozen=True)
class Element:
    """A part that is still to be decided: exactly one of its choices is taken."""

    name: str
    choices: tuple[Choice, ...]


@dataclass(frozen=True)
class Root:
    """What one of the two determinants contracts beyond what both share, and its sign."""

    sign: int
    current: tuple[Edge, ...]
    voltage: tuple[Edge, ...]


@dataclass(frozen=True)
class TwoGraphs:
    """The current graph and the voltage graph of one ask, ready to be walked.

    ``roots`` are over and under; None stands for a determinant that is zero by structure. The grounds are
    among the nodes. ``idle`` names the parts that only multiply both determinants, and so cannot change the
    ratio.
    """

    elements: tuple[Element, ...]
    current_nodes: tuple[str, ...]
    voltage_nodes: tuple[str, ...]
    current_ground: str
    voltage_ground: str
    roots: tuple[Root | None, Root | None]
    idle: tuple[str, ...]


def two_graphs(circuit: Circuit, setup: Setup) -> TwoGraphs:
    """Build the two graphs of one ask.

    Args:
        circuit: parts and devices; its ``graph`` is not read.
        setup: drive, shorts, and the quantities over and under the line.

    Returns:
        The graphs, with all nodes merged that no choice can keep apart.

    Raises:
        KeyError: an asked part is not in the circuit, or a device is of an unknown kind.
    """
    wiring, over, under = wired(circuit, setup)
    laws = [part_law(part) for part in wiring.parts.values()]
    laws += [device_law(device) for device in wiring.devices.values()]
    branches = tuple(dict.fromkeys(asked for asked in (over, under) if isinstance(asked, Branch)))
    current, voltage = Merging(), Merging()
    sound = current.merge_all([*wiring.shorts, wiring.drive])
    sound &= voltage.merge_all([*wiring.shorts, *((branch.tail, branch.head) for branch in branches)])
    for law in laws:
        sound &= current.merge_all(law.current)
        sound &= voltage.merge_all(law.voltage)
    nodes = _nodes(wiring, laws, (over, under))
    roots = (_root(over, branches), _root(under, branches)) if sound else (None, None)
    elements = tuple(Element(law.name, law.choices) for law in laws if law.choices)
    return merged(TwoGraphs(elements, nodes, nodes, GROUND, GROUND, roots, ()), current, voltage)


def merged(graphs: TwoGraphs, current: Merging, voltage: Merging) -> TwoGraphs:
    """Return the graphs with their nodes merged, and without the choices that have become loops.

    A part of which a single choice without an edge is left multiplies both determinants alike: it is idle.
    """
    current_block = {node: current.block(node) for node in graphs.current_nodes}
    voltage_block = {node: voltage.block(node) for node in graphs.voltage_nodes}
    kept: list[Element] = []
    idle = list(graphs.idle)
    for element in graphs.elements:
        moved = (_moved(choice, current_block, voltage_block) for choice in element.choices)
        choices = tuple(choice for choice in moved if choice is not None)
        if not choices:
            return replace(graphs, elements=(), roots=(None, None))
        if len(choices) == 1 and not choices[0].current and not choices[0].voltage:
            idle.append(element.name)
        else:
            kept.append(Element(element.name, choices))
    over, under = (root and _moved(root, current_block, voltage_block) for root in graphs.roots)
    return TwoGraphs(
        tuple(kept),
        tuple(dict.fromkeys(current_block.values())),
        tuple(dict.fromkeys(voltage_block.values())),
        current_block[graphs.current_ground],
        voltage_block[graphs.voltage_ground],
        (over, under),
        tuple(idle),
    )


_Contracts = TypeVar("_Contracts", Choice, Root)


def _moved(
    one: _Contracts, current_block: Mapping[str, str], voltage_block: Mapping[str, str]
) -> _Contracts | None:
    """Return a choice or a root with its edges between blocks; None where one is a loop."""
    current = tuple([(current_block[first], current_block[second]) for first, second in one.current])
    voltage = tuple([(voltage_block[first], voltage_block[second]) for first, second in one.voltage])
    if any(first == second for first, second in current + voltage):
        return None
    if current == one.current and voltage == one.voltage:
        return one
    return replace(one, current=current, voltage=voltage)


def _root(asked: Asked, branches: tuple[Branch, ...]) -> Root:
    """Return what the root of ``asked`` contracts.

    With the drive's current edge d and branches b1, b2 the full lists of pairs (current/voltage) are, for a
    voltage f: d/f, b1/b1, ...; for the current of b1: d/b1, b2/b2. The edges d in the one graph and b1, b2 in
    the other are merged before; bringing them to the front costs the sign.
    """
    closed = tuple((branch.tail, branch.head) for branch in branches if branch != asked)
    if isinstance(asked, Branch):
        return Root(-1 if branches.index(asked) % 2 else 1, closed, ())
    return Root(-1 if len(branches) % 2 else 1, closed, (asked,))


def _nodes(wiring: Wiring, laws: list[Law], asked: tuple[Asked, Asked]) -> tuple[str, ...]:
    edges = [wiring.drive, *wiring.shorts]
    for one in asked:
        edges.append((one.tail, one.head) if isinstance(one, Branch) else one)
    for law in laws:
        edges.extend((*law.current, *law.voltage))
        for choice in law.choices:
            edges.extend((*choice.current, *choice.voltage))
    return tuple(dict.fromkeys([GROUND, *(node for edge in edges for node in edge)]))
