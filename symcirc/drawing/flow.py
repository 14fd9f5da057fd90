"""The way of the signal: how far each net is from the drive, and in which order the devices stand."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from itertools import combinations, permutations

import networkx as nx

from symcirc.drawing.bodies import Body
from symcirc.sheet.model import GROUND

#: So many devices are ordered by trying all orders; more are left in order of their distance from the drive.
MOST_PERMUTED = 6
#: What it is worth that the first device is near the drive, and that the last one sets the output, in couplings.
FIRST, LAST = 1.0, 0.3


def net_levels(bodies: Iterable[Body]) -> dict[str, int]:
    """Return how many steps each net is away from the nearest drive.

    A step leads through a two-terminal part, but not into a net that a device sets, and through a device
    from its inputs to its outputs. What no step reaches comes last.
    """
    bodies = tuple(bodies)
    graph = _flow(bodies, _driven(bodies))
    starts = [pin.net for body in bodies if body.is_drive for pin in body.pins if pin.net != GROUND]
    starts = starts or [pin.net for body in bodies for pin in body.pins if pin.net != GROUND][:1]
    found = dict.fromkeys(starts, 0)
    for start in starts:
        for net, steps in nx.single_source_shortest_path_length(graph, start).items():
            found[net] = min(steps, found.get(net, steps))
    last = max(found.values()) + 1
    return {net: found.get(net, last) for net in graph}


def _driven(bodies: Sequence[Body]) -> set[str]:
    """Return the nets that a drive or a device sets."""
    drives = {p.net for b in bodies if b.is_drive for p in b.pins}
    return drives | {p.net for b in bodies if b.is_device for p in b.right}


def _flow(bodies: Sequence[Body], driven: set[str]) -> nx.DiGraph:
    graph: nx.DiGraph = nx.DiGraph()
    graph.add_nodes_from(p.net for b in bodies for p in b.pins if p.net != GROUND)
    for body in bodies:
        for first in body.left:
            for second in body.right:
                if body.is_drive or GROUND in (first.net, second.net):
                    continue
                if body.is_device or second.net not in driven:
                    graph.add_edge(first.net, second.net)
                if not body.is_device and first.net not in driven:
                    graph.add_edge(second.net, first.net)
    return graph


def forward_parts(bodies: Sequence[Body]) -> dict[int, tuple[str, str]]:
    """Return the two-terminal parts that the signal passes one way only: their number, and their nets in that order.

    A part at a net that a device sets is left out: it may as well be feedback.
    """
    level = net_levels(bodies)
    driven = {p.net for b in bodies if b.is_device for p in b.right}
    found = {}
    for number, body in enumerate(bodies):
        nets = [pin.net for pin in body.pins]
        if len(nets) != 2 or body.is_drive or GROUND in nets or driven & set(nets):
            continue
        if level[nets[0]] != level[nets[1]]:
            first, second = sorted(nets, key=level.__getitem__)
            found[number] = (first, second)
    return found


def device_order(bodies: Sequence[Body]) -> tuple[int, ...]:
    """Return the numbers of the devices as they should stand from left to right.

    The order has as many direct couplings (an output to an input, through parts but through no other set net)
    leading forward as can be had, the first near the drive and the last near the output.
    """
    level = net_levels(bodies)
    devices = [number for number, body in enumerate(bodies) if body.is_device]
    devices.sort(key=lambda d: (min((level[p.net] for p in bodies[d].left if p.net != GROUND), default=0), d))
    if len(devices) > MOST_PERMUTED:
        return tuple(devices)
    parts = _flow([body for body in bodies if not body.is_device], _driven(bodies))
    takes = {d: [p.net for p in bodies[d].left] for d in devices}
    feeds = {d: _near(parts, [p.net for p in bodies[d].right]) for d in devices}
    coupled = {(a, b): max(feeds[a].get(net, 0.0) for net in takes[b]) for a in devices for b in devices}
    driven = _near(parts, [p.net for b in bodies if b.is_drive for p in b.pins])
    first = {d: max(driven.get(net, 0.0) for net in takes[d]) for d in devices}
    outputs = {p.net for b in bodies if b.kind == "output" for p in b.pins}
    last = {d: float(any(p.net in outputs for p in bodies[d].right)) for d in devices}

    def forward(order: tuple[int, ...]) -> float:
        total = FIRST * first[order[0]] + LAST * last[order[-1]]
        return total + sum(coupled[pair] for pair in combinations(order, 2))

    return max(permutations(devices), key=forward) if devices else ()


def _near(graph: nx.DiGraph, starts: list[str]) -> dict[str, float]:
    """Return how near the nets are that some nets reach by parts: 1 for themselves, 1/2 by one part, and so on."""
    found: dict[str, float] = {}
    for start in starts:
        if start in graph:
            for net, steps in nx.single_source_shortest_path_length(graph, start, cutoff=3).items():
                found[net] = max(1 / (steps + 1), found.get(net, 0.0))
    return found
