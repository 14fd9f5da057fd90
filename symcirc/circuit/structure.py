"""The questions of structure: what makes a circuit unusable or odd, seen from its graph alone."""

from __future__ import annotations

import itertools
from collections import defaultdict
from collections.abc import Iterator, Mapping

import networkx as nx

from symcirc.circuit.build import branch
from symcirc.circuit.model import Circuit, CurrentDrive, LoopDrive, Setup, VoltageDrive
from symcirc.complaints import Complaint, Place, Remark, listed
from symcirc.sheet.model import GROUND, Ask, Device, Voltage

#: The terminals that take no current, by kind of device.
INPUTS = {
    "opamp": ("plus", "minus"),
    "amplifier": ("plus", "minus"),
    "vcvs": ("senses",),
    "vccs": ("senses",),
    "conveyor": ("y",),
}
#: The branches of a device whose current nothing but the rest of the circuit determines.
FREE_CURRENTS = {"opamp": ("drives",), "amplifier": ("drives",), "vcvs": ("drives",), "ccvs": ("drives",)}
#: The branches of a device that have a given voltage, zero volts.
GIVEN_VOLTAGES = {"cccs": ("senses",), "ccvs": ("senses",)}
Branches = Mapping[str, tuple[str, ...]]


def refuse_structure(circuit: Circuit, asks: tuple[Ask, ...], setups: tuple[Setup, ...]) -> None:
    """Raise Complaint for what no circuit may have, whatever is asked.

    An amplifier whose output drives nothing, a node that hangs on one terminal, a node on which there are only
    inputs, a part of the circuit without a path to ground.
    """
    terminals = _terminals(circuit)
    _refuse_idle_outputs(circuit, terminals)
    _refuse_hanging(circuit, asks, setups, terminals)
    for setup in setups:
        _refuse_drive_on_output(circuit, setup)
        _refuse_islands(circuit, setup, terminals)


def _terminals(circuit: Circuit) -> dict[str, list[tuple[str, str]]]:
    """Return for every node what stands on it: (name in words, role); role is "part" for two-terminal parts."""
    terminals: dict[str, list[tuple[str, str]]] = defaultdict(list)
    for part in circuit.parts:
        for node in (part.first, part.second):
            terminals[node].append((part.label, "part"))
    for device in circuit.devices:
        for role, nodes in device.terminals.items():
            for node in nodes:
                kind = "input" if role in INPUTS.get(device.kind, ()) else role
                terminals[node].append((device.label, kind))
    return terminals


def _refuse_idle_outputs(circuit: Circuit, terminals: dict[str, list[tuple[str, str]]]) -> None:
    for device in circuit.devices:
        if device.kind not in ("opamp", "amplifier"):
            continue
        node = device.terminals["drives"][0]
        if node == GROUND:
            raise Complaint(
                device.place,
                f"the output of `{device.label}` is on gnd",
                "let it drive the node that it should",
            )
        if len(terminals[node]) == 1:
            raise Complaint(
                device.place,
                f"the output of `{device.label}` drives nothing: node `{_label(circuit, node)}` has no other part",
                "join its output to the circuit, a path back to its inputs included",
            )


def _label(circuit: Circuit, node: str) -> str:
    return circuit.node_labels.get(node, node)


def _refuse_hanging(
    circuit: Circuit,
    asks: tuple[Ask, ...],
    setups: tuple[Setup, ...],
    terminals: dict[str, list[tuple[str, str]]],
) -> None:
    free = set(circuit.ports) | {GROUND}
    for ask in asks:
        for quantity in (ask.over, ask.under):
            if isinstance(quantity, Voltage):
                free |= {quantity.plus, quantity.minus}
        free |= {dead.node for dead in ask.dead}
    for setup in setups:
        free |= set(_driven_nodes(setup))
    for node, place in circuit.node_places.items():
        if node not in free and len(terminals[node]) < 2:
            label = _label(circuit, node)
            hangs = f" hangs on `{terminals[node][0][0]}` alone" if terminals[node] else " has nothing on it"
            raise Complaint(
                place, f"node `{label}`{hangs}", "join it to something, ask about it, or check its spelling"
            )


def _driven_nodes(setup: Setup) -> Iterator[str]:
    for pair in (setup.drive.pair, *setup.shorts):
        yield from pair


def _refuse_drive_on_output(circuit: Circuit, setup: Setup) -> None:
    """A voltage drive at a node whose voltage a grounded source sets already fights with it."""
    if not isinstance(setup.drive, VoltageDrive) or setup.drive.minus != GROUND:
        return
    for device in circuit.devices:
        roles = FREE_CURRENTS.get(device.kind, ()) + GIVEN_VOLTAGES.get(device.kind, ())
        for nodes in (branch(device, role) for role in roles):
            if setup.drive.plus in nodes and GROUND in nodes:
                raise Complaint(
                    setup.under.place if isinstance(setup.under, Voltage) else setup.place,
                    f"node `{_label(circuit, setup.drive.plus)}` is the drive of `{setup.ask}`, "
                    f"and `{device.label}` sets its voltage too: two ideal sources fight",
                    "drive another node, or name the drive: add `driven at NODE`",
                )


def _refuse_islands(circuit: Circuit, setup: Setup, terminals: dict[str, list[tuple[str, str]]]) -> None:
    """A node that no current can leave, or a group that no current path joins to ground, has no voltage."""
    graph = circuit.graph.copy()
    if isinstance(setup.drive, VoltageDrive):
        graph.add_edge(*setup.drive.pair)
    graph.add_edges_from(setup.shorts)
    grounded = nx.node_connected_component(graph, GROUND)
    for node, place in circuit.node_places.items():
        if node in grounded:
            continue
        label = _label(circuit, node)
        if not terminals[node]:
            raise Complaint(place, f"nothing stands on node `{label}`", "join it to a part, or leave it out")
        if all(role == "input" for _, role in terminals[node]):
            inputs = listed(sorted({name for name, _ in terminals[node]}))
            raise Complaint(
                place,
                f"only inputs stand on node `{label}` ({inputs}), so nothing sets its voltage",
                "join it to a part, to gnd, or drive it",
            )
        raise Complaint(
            place,
            f"node `{label}` has no path to gnd",
            "join this piece of the circuit to gnd, or check the node's name",
        )


# why equations have no unique solution -------------------------------------------------------------------------


def explain_singular(circuit: Circuit, setup: Setup) -> Complaint:
    """Return the complaint for a circuit whose equations have no solution, or many: with its cause if it is seen."""
    return _fight(circuit, setup) or _no_feedback(circuit, setup) or _unexplained(setup)


def _fight(circuit: Circuit, setup: Setup) -> Complaint | None:
    """A loop of sources: round free currents one more can flow, and round given voltages these must cancel.

    An amplifier's output and a driven voltage are only of the first sort, a sensed branch of zero volts is only of the
    second, a drive and a short are of both.
    """
    return _loop(circuit, setup, FREE_CURRENTS) or _loop(circuit, setup, GIVEN_VOLTAGES)


def _loop(circuit: Circuit, setup: Setup, branches: Branches) -> Complaint | None:
    joined: nx.Graph = nx.Graph()
    joined.add_nodes_from(circuit.graph)
    for name, place, (plus, minus) in _sources(circuit, setup, branches):
        if plus == minus or nx.has_path(joined, plus, minus):
            path = [] if plus == minus else nx.shortest_path(joined, plus, minus)
            others = sorted({joined.edges[a, b]["name"] for a, b in itertools.pairwise(path)})
            return Complaint(
                place,
                f"{listed(dict.fromkeys([name, *others]))} form a loop of ideal voltage sources: they fight",
                "drive each node by one source only, or put a part between them",
            )
        joined.add_edge(plus, minus, name=name)
    return None


def _sources(
    circuit: Circuit, setup: Setup, branches: Branches
) -> Iterator[tuple[str, Place, tuple[str, str]]]:
    drive = setup.drive
    if not isinstance(drive, CurrentDrive):
        yield f"the drive of `{setup.ask}`", setup.place, drive.pair
    for pair in setup.shorts:
        yield f"the dead drive at `{_label(circuit, pair[0])}`", setup.place, pair
    for device in circuit.devices:
        if isinstance(drive, LoopDrive) and device.name == drive.amplifier:
            continue
        for role in branches.get(device.kind, ()):
            yield f"`{device.label}`", device.place, branch(device, role)


def _no_feedback(circuit: Circuit, setup: Setup) -> Complaint | None:
    """An amplifier from whose output no path leads to its own inputs: nothing determines its output."""
    reach = _influence(circuit, setup)
    for device in circuit.devices:
        if device.kind != "opamp" or setup.drive == LoopDrive(device.name, device.terminals["drives"][0]):
            continue
        output = device.terminals["drives"][0]
        reached = nx.descendants(reach, ("out", device.name)) if ("out", device.name) in reach else set()
        inputs = {device.terminals["plus"][0], device.terminals["minus"][0]}
        if not inputs & (reached | {output}):
            return Complaint(
                device.place,
                f"`{device.label}` has no feedback: no path leads from its output back to its inputs, "
                "so the ideal assumption leaves its output undetermined",
                "join its output to its minus input through a part, or directly",
            )
    return None


def _influence(circuit: Circuit, setup: Setup) -> nx.DiGraph:
    """Return which node's voltage moves which: through parts both ways, through devices from input to output."""
    graph: nx.DiGraph = nx.DiGraph()
    drive = setup.drive
    pairs = [*setup.shorts, *([] if isinstance(drive, CurrentDrive) else [drive.pair])]
    pinned = {GROUND, *(pair[0] for pair in pairs if pair[1] == GROUND)}
    outputs = {d.terminals["drives"][0] for d in circuit.devices if d.kind == "opamp"}
    for plus, minus in pairs:  # between two nodes a source holds a difference, and moves both together
        if minus != GROUND:
            graph.add_edges_from([(plus, minus), (minus, plus)])
    for part in circuit.parts:
        for here, there in ((part.first, part.second), (part.second, part.first)):
            if there not in pinned | outputs:
                graph.add_edge(here, there)
    for device in circuit.devices:
        if device.kind == "opamp":
            graph.add_edge(("out", device.name), device.terminals["drives"][0])
            for role in ("plus", "minus"):
                graph.add_edge(device.terminals[role][0], ("out", device.name))
        else:
            _join_all(graph, device, pinned | outputs)
    return graph


def _join_all(graph: nx.DiGraph, device: Device, pinned: set[str]) -> None:
    nodes = {node for terminal in device.terminals.values() for node in terminal}
    graph.add_edges_from((here, there) for here in nodes for there in nodes - pinned - {here})


def _unexplained(setup: Setup) -> Complaint:
    return Complaint(
        setup.place,
        f"the equations for `{setup.ask}` have no solution, or many, whatever the parts' values are",
        "look for sources that fight, an amplifier without feedback, or a node that nothing holds",
    )


# what is odd but solvable --------------------------------------------------------------------------------------


def bias_remarks(circuit: Circuit, setups: tuple[Setup, ...]) -> list[Remark]:
    """Return a remark for every amplifier input that has no direct-current path for its bias current."""
    graph: nx.Graph = nx.Graph()
    graph.add_nodes_from(circuit.graph)
    graph.add_edges_from((part.first, part.second) for part in circuit.parts if part.kind != "C")
    for device in circuit.devices:
        for role in ("drives", "senses", "primary", "secondary", "x"):
            if role in device.terminals and role not in INPUTS.get(device.kind, ()) and device.kind != "vccs":
                graph.add_edge(*branch(device, role))
    for setup in setups:
        graph.add_edges_from((node, GROUND) for node in _driven_nodes(setup))
    grounded = nx.node_connected_component(graph, GROUND)
    return [
        Remark(
            device.place,
            f"the {role} input of `{device.label}` has no direct-current path for its bias current",
        )
        for device in circuit.devices
        if device.kind in ("opamp", "amplifier")
        for role in ("plus", "minus")
        if device.terminals[role][0] not in grounded
    ]
