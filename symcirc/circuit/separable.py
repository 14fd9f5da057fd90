"""Where a circuit falls into stages, one behind the other, with an ideal voltage source between them.

A node whose voltage an ideal source to ground sets (the output of an amplifier, a vcvs or a ccvs) is a cut where
nothing else joins what follows to what stands before: neither a part, nor an amplifier's input, nor a controlled
source. The earlier stage then settles that voltage without the later one, and the later one sees it as its drive:
the nodal equations are block triangular, so that the ratio asked for is the product of the stages' own.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import networkx as nx

from symcirc.circuit.build import branch
from symcirc.circuit.model import Circuit, CurrentDrive, Setup, VoltageDrive
from symcirc.circuit.structure import FREE_CURRENTS
from symcirc.sheet.model import GROUND, Device, NodeCurrent, Part, Voltage


@dataclass(frozen=True)
class Piece:
    """One stage of a separable circuit: what stands between ``first`` and ``last``.

    ``first`` is the node that the source before it sets, or None for the piece that the ask itself drives;
    ``last`` is the node of its output.
    """

    first: str | None
    last: str
    parts: tuple[Part, ...]
    devices: tuple[Device, ...]

    @property
    def names(self) -> frozenset[str]:
        """The names of its parts and devices."""
        return frozenset(p.name for p in self.parts) | frozenset(d.name for d in self.devices)


def separable_pieces(circuit: Circuit, setup: Setup) -> tuple[Piece, ...]:
    """Return the stages between an ask's drive and its output, in the order of the signal; one where none part.

    A piece need not hold a frequency: a follower or an amplifier by itself is one too. Parts beside the path,
    that nothing asked depends on, go with the stage that they load. Anything but the voltage of a node over the
    drive is one piece.

    >>> from symcirc.circuit.build import build_circuit, build_setup
    >>> from symcirc.complaints import Source
    >>> from symcirc.sheet import read_sheet
    >>> text = '''in -- R1 -- a -- C1 -- gnd
    ... U1 opamp: plus a, minus b, drives b
    ... b -- R2 -- out -- C2 -- gnd
    ... ask H = V_out/V_in'''
    >>> sheet = read_sheet(Source("a.stage", text))
    >>> circuit = build_circuit(sheet)
    >>> pieces = separable_pieces(circuit, build_setup(circuit, sheet.asks, sheet.asks[0]))
    >>> [(piece.first, piece.last, sorted(piece.names)) for piece in pieces]
    [(None, 'b', ['C1', 'R1', 'U1']), ('b', 'out', ['C2', 'R2'])]
    """
    over = setup.over
    if not _is_driven_voltage(setup) or not isinstance(over, Voltage):
        return (Piece(None, "", circuit.parts, circuit.devices),)
    cuts = sorted(_cuts(circuit, setup, over.plus), key=lambda cut: -len(cut[1]))
    pieces = []
    first: str | None = None
    held = frozenset([part.name for part in circuit.parts] + [device.name for device in circuit.devices])
    for node, later in [*cuts, (over.plus, frozenset[str]())]:
        pieces.append(_piece(circuit, first, node, held - later))
        first, held = node, later
    return tuple(pieces)


def _is_driven_voltage(setup: Setup) -> bool:
    """Tell whether the voltage of one node is asked over the drive itself."""
    over, under, drive = setup.over, setup.under, setup.drive
    if not isinstance(over, Voltage) or over.minus != GROUND or over.plus in {GROUND, *drive.pair}:
        return False
    if any(over.plus in pair for pair in setup.shorts):
        return False
    if isinstance(drive, CurrentDrive):
        return isinstance(under, NodeCurrent) and under.node == drive.node
    is_its_voltage = isinstance(under, Voltage) and (under.plus, under.minus) == drive.pair
    return isinstance(drive, VoltageDrive) and is_its_voltage


def _piece(circuit: Circuit, first: str | None, last: str, names: frozenset[str]) -> Piece:
    return Piece(
        first,
        last,
        tuple(p for p in circuit.parts if p.name in names),
        tuple(d for d in circuit.devices if d.name in names),
    )


def _cuts(circuit: Circuit, setup: Setup, output: str) -> Iterator[tuple[str, frozenset[str]]]:
    """Yield each node that parts the circuit, with the names of the parts and devices behind it."""
    connections = _connections(circuit, setup)
    driven = {node for node in setup.drive.pair if node != GROUND}
    shorted = {node for pair in setup.shorts for node in pair}
    for node, source in _sources(circuit):
        if node == output or node in driven | shorted:
            continue
        rest = connections.copy()
        rest.remove_node(node)
        later = nx.node_connected_component(rest, output)
        is_fed = any(thing in later for thing in connections[node])
        if is_fed and not later & driven and _device(source) not in later:
            names = frozenset(name for kind, name in (v for v in later if isinstance(v, tuple)))
            yield node, names


def _sources(circuit: Circuit) -> Iterator[tuple[str, str]]:
    """Yield the nodes whose voltage to ground an ideal source sets, with that source's name."""
    for device in circuit.devices:
        for role in FREE_CURRENTS.get(device.kind, ()):
            plus, minus = branch(device, role)
            if minus == GROUND and plus != GROUND:
                yield plus, device.name


def _device(name: str) -> tuple[str, str]:
    return "device", name


def _connections(circuit: Circuit, setup: Setup) -> nx.Graph:
    """Return the graph of what depends on what: nodes, and every part and device as a vertex joined to its nodes.

    Ground and what is shorted to it join nothing.
    """
    graph: nx.Graph = nx.Graph()
    graph.add_nodes_from(circuit.graph)
    for part in circuit.parts:
        graph.add_edges_from((("part", part.name), node) for node in (part.first, part.second))
    for device in circuit.devices:
        nodes = [node for nodes in device.terminals.values() for node in nodes]
        graph.add_edges_from((_device(device.name), node) for node in nodes)
    graph.add_edges_from(setup.shorts)
    grounded = {GROUND, *(plus for plus, minus in setup.shorts if minus == GROUND)}
    graph.add_edge(*setup.drive.pair)
    graph.remove_nodes_from(grounded)
    return graph
