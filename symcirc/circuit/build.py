"""From a sheet to the circuit's graph, and from an ask to what is applied to it."""

from __future__ import annotations

import networkx as nx

from symcirc.circuit.model import Circuit, CurrentDrive, Drive, LoopDrive, Setup, VoltageDrive
from symcirc.complaints import Complaint
from symcirc.sheet.model import GROUND, Ask, Device, NodeCurrent, Quantity, Sheet, Voltage

#: The current-carrying branches of each kind of device, by role; a role with one node is a branch to ground.
BRANCHES = {
    "opamp": ("drives",),
    "amplifier": ("drives",),
    "vcvs": ("drives",),
    "vccs": ("drives",),
    "cccs": ("senses", "drives"),
    "ccvs": ("senses", "drives"),
    "transformer": ("primary", "secondary"),
    "conveyor": ("x", "z"),
}


def branch(device: Device, role: str) -> tuple[str, str]:
    """Return the two nodes of a device's branch, the second ``gnd`` where the role has one node."""
    nodes = device.terminals[role]
    return (nodes[0], nodes[1]) if len(nodes) == 2 else (nodes[0], GROUND)


def build_circuit(sheet: Sheet) -> Circuit:
    """Return the circuit of a sheet.

    >>> from symcirc.complaints import Source
    >>> from symcirc.sheet import read_sheet
    >>> sheet = read_sheet(Source("a.stage", "in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in"))
    >>> sorted(key for _, _, key in build_circuit(sheet).graph.edges(keys=True))
    ['C1', 'R1']
    """
    graph: nx.MultiGraph = nx.MultiGraph()
    graph.add_node(GROUND)
    graph.add_nodes_from(sheet.node_places)
    for part in sheet.parts:
        graph.add_edge(part.first, part.second, key=part.name)
    for device in sheet.devices:
        for role in BRANCHES[device.kind]:
            graph.add_edge(*branch(device, role), key=(device.name, role))
    return Circuit(sheet.parts, sheet.devices, graph, sheet.node_labels, sheet.node_places, sheet.ports)


def build_setup(circuit: Circuit, asks: tuple[Ask, ...], ask: Ask) -> Setup:
    """Return what is applied to the circuit for one ask: its drive live, the other asks' drives dead.

    A dead voltage drive is a short to ground, a dead current drive is open; ``with V_n = 0`` shorts a node and
    ``with I_n = 0`` leaves it open. Raises Complaint where a condition contradicts the ask's own drive.
    """
    drive = _drive(circuit, ask)
    live = drive.pair
    opened = {dead.node for dead in ask.dead if dead.quantity == "I"}
    shorted = {dead.node for dead in ask.dead if dead.quantity == "V"}
    for dead in ask.dead:
        if live == (dead.node, GROUND):
            raise Complaint(
                dead.place,
                f"node `{dead.node}` is driven by this ask, so it cannot be dead",
                "remove this condition",
            )
        if dead.node in opened & shorted:
            raise Complaint(
                dead.place,
                f"node `{dead.node}` cannot be both shorted and open",
                "keep one of the two conditions",
            )
    pairs = [(node, GROUND) for node in sorted(shorted)]
    for other in asks:
        dead_drive = _drive(circuit, other)
        if not isinstance(dead_drive, VoltageDrive):
            continue  # a dead current drive is open, and a loop has no drive of its own
        pair = dead_drive.pair
        if not opened & set(pair) and all(set(pair) != set(known) for known in (live, *pairs)):
            pairs.append(pair)
    over, under = _over_and_under(circuit, ask)
    delivering = {*live, *(node for pair in pairs for node in pair)}
    for quantity in (over, under):
        if isinstance(quantity, NodeCurrent) and quantity.node not in delivering:
            raise Complaint(
                quantity.place,
                f"nothing delivers a current into node `{quantity.node}`: it is neither driven nor shorted",
                f"drive it, or short it: with V_{quantity.node} = 0",
            )
    return Setup(ask.name, drive, tuple(pairs), over, under, ask.place)


def _drive(circuit: Circuit, ask: Ask) -> Drive:
    if ask.loop is not None:
        return LoopDrive(ask.loop, _amplifier(circuit, ask.loop).terminals["drives"][0])
    if ask.driven_at is not None:
        return VoltageDrive(ask.driven_at, GROUND)
    if isinstance(ask.under, NodeCurrent):
        return CurrentDrive(ask.under.node)
    assert isinstance(ask.under, Voltage)
    return VoltageDrive(ask.under.plus, ask.under.minus)


def _amplifier(circuit: Circuit, name: str) -> Device:
    return next(device for device in circuit.devices if device.name == name)


def _over_and_under(circuit: Circuit, ask: Ask) -> tuple[Quantity, Quantity]:
    if ask.loop is not None:
        amplifier = _amplifier(circuit, ask.loop)
        (plus,), (minus,), (out,) = (amplifier.terminals[role] for role in ("plus", "minus", "drives"))
        return Voltage(plus, minus, ask.place), Voltage(out, GROUND, ask.place)
    assert ask.over is not None  # the sheet's reader gives both where there is no loop
    assert ask.under is not None
    return ask.over, ask.under
