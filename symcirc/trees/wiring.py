"""What is asked, made ready: every asked current flows through a branch of its own.

The branch is inserted by moving one terminal to a new node: of the part whose current is asked for, or of the
sources at the node whose delivered current is asked for. An apostrophe keeps the new node apart from all
others.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace

from symcirc.circuit.model import Circuit, LoopDrive, Setup
from symcirc.sheet.model import Device, NodeCurrent, Part, PartCurrent, Quantity, Voltage
from symcirc.trees.laws import Edge


@dataclass(frozen=True)
class Branch:
    """An inserted branch of zero volts; the asked current flows from ``tail`` to ``head``."""

    tail: str
    head: str


#: A voltage is asked between the two nodes of an edge, a current in a branch.
Asked = Edge | Branch


@dataclass(frozen=True)
class Wiring:
    """Parts, devices and sources by their nodes, after branches were inserted."""

    parts: Mapping[str, Part]
    devices: Mapping[str, Device]
    drive: Edge
    shorts: tuple[Edge, ...]
    replaced: str | None


_ASKED_TERMINAL = {  # where a device's current is read, and whether it is the current out of the device
    "opamp": ("drives", True),
    "amplifier": ("drives", True),
    "vcvs": ("drives", False),
    "vccs": ("drives", False),
    "cccs": ("drives", False),
    "ccvs": ("drives", False),
    "transformer": ("primary", False),
    "conveyor": ("x", False),
}


def wired(circuit: Circuit, setup: Setup) -> tuple[Wiring, Asked, Asked]:
    """Return the wiring of one ask, and what is asked over and under the line.

    Raises:
        KeyError: an asked part is not in the circuit.
    """
    drive = setup.drive
    replaced = drive.amplifier if isinstance(drive, LoopDrive) else None
    wiring = Wiring(
        {part.name: part for part in circuit.parts},
        {device.name: device for device in circuit.devices if device.name != replaced},
        drive.pair,
        setup.shorts,
        replaced,
    )
    wiring, over = _opened(wiring, setup.over, "'")
    if _same(setup.over, setup.under):
        return wiring, over, over
    wiring, under = _opened(wiring, setup.under, "''")
    return wiring, over, under


def _same(one: Quantity, other: Quantity) -> bool:
    return replace(one, place=other.place) == other


def _opened(wiring: Wiring, quantity: Quantity, mark: str) -> tuple[Wiring, Asked]:
    if isinstance(quantity, Voltage):
        return wiring, (quantity.plus, quantity.minus)
    if isinstance(quantity, NodeCurrent):
        return _sources_opened(wiring, quantity.node, mark)
    if quantity.part == wiring.replaced:
        plus, minus = wiring.drive
        return replace(wiring, drive=(plus + mark, minus)), Branch(plus + mark, plus)
    return _part_opened(wiring, quantity, mark)


def _sources_opened(wiring: Wiring, node: str, mark: str) -> tuple[Wiring, Branch]:
    """Open what delivers into a node: the live drive at its own nodes, the shorts at any other."""

    def moved(edge: Edge) -> Edge:
        plus, minus = (node + mark if end == node else end for end in edge)
        return plus, minus

    branch = Branch(node + mark, node)
    if node in wiring.drive:
        return replace(wiring, drive=moved(wiring.drive)), branch
    return replace(wiring, shorts=tuple(moved(short) for short in wiring.shorts)), branch


def _part_opened(wiring: Wiring, quantity: PartCurrent, mark: str) -> tuple[Wiring, Branch]:
    name = quantity.part
    part = wiring.parts.get(name)
    if part is not None:
        moved = replace(part, first=part.first + mark)
        return replace(wiring, parts={**wiring.parts, name: moved}), Branch(part.first, moved.first)
    device = wiring.devices[name]
    role, outward = _ASKED_TERMINAL[device.kind]
    node, *others = device.terminals[role]
    terminals = {**device.terminals, role: (node + mark, *others)}
    opened = replace(wiring, devices={**wiring.devices, name: replace(device, terminals=terminals)})
    return opened, Branch(node + mark, node) if outward else Branch(node, node + mark)
