"""Circuits for the tests: random ones of all kinds, and families of any size."""

from __future__ import annotations

import random

import networkx as nx

from symcirc.circuit.model import Circuit, CurrentDrive, Drive, LoopDrive, Setup, VoltageDrive
from symcirc.complaints import Place, Source
from symcirc.sheet.model import GROUND, Device, NodeCurrent, Part, PartCurrent, Quantity, Voltage

PLACE = Place(1, 1, 2, Source("samples.stage", ""))
PART_KINDS = "RCLZY"
DEVICE_KINDS = ("opamp", "amplifier", "vcvs", "vccs", "cccs", "ccvs", "transformer", "conveyor")
ROLES = {
    "opamp": {"plus": 1, "minus": 1, "drives": 1},
    "amplifier": {"plus": 1, "minus": 1, "drives": 1},
    "vcvs": {"senses": 2, "drives": 2},
    "vccs": {"senses": 2, "drives": 2},
    "cccs": {"senses": 2, "drives": 2},
    "ccvs": {"senses": 2, "drives": 2},
    "transformer": {"primary": 2, "secondary": 2},
    "conveyor": {"x": 1, "y": 1, "z": 1},
}
PARAMETER = {
    "amplifier": "gain",
    "vcvs": "gain",
    "vccs": "gm",
    "cccs": "gain",
    "ccvs": "rm",
    "transformer": "ratio",
}


def part(name: str, first: str, second: str) -> Part:
    return Part(name, name, name[0], first, second, PLACE)


def device(name: str, kind: str, sign: int = 1, **terminals: tuple[str, ...]) -> Device:
    word = PARAMETER.get(kind)
    return Device(name, name, kind, terminals, {word: f"{name}_{word}"} if word else {}, sign, PLACE)


def circuit(parts: list[Part], devices: list[Device] | None = None) -> Circuit:
    return Circuit(tuple(parts), tuple(devices or ()), nx.MultiGraph(), {}, {}, frozenset())


def voltage(plus: str, minus: str = GROUND) -> Voltage:
    return Voltage(plus, minus, PLACE)


def part_current(name: str) -> PartCurrent:
    return PartCurrent(name, PLACE)


def node_current(node: str) -> NodeCurrent:
    return NodeCurrent(node, PLACE)


def setup(drive: Drive, over: Quantity, under: Quantity, shorts: tuple[tuple[str, str], ...] = ()) -> Setup:
    return Setup("H", drive, shorts, over, under, PLACE)


def symbols(made: Circuit) -> list[str]:
    """The symbols of a circuit: its parts, and the parameters of its devices."""
    return [p.name for p in made.parts] + [name for d in made.devices for name in d.parameters.values()]


def random_case(
    seed: int, most_parts: int = 14, device_kinds: tuple[str, ...] = DEVICE_KINDS
) -> tuple[Circuit, Setup]:
    """A random circuit of all kinds, or with devices of the given ones, with a random ask.

    Two thirds begin with a tree of parts over all nodes, so that most of them have a solution; the others are
    left to chance, and most have none.
    """
    rng = random.Random(seed)
    wanted = rng.randint(1, most_parts)
    nodes = [GROUND, *(f"n{k}" for k in range(1, min(rng.randint(2, 8), wanted + 2)))]
    kinds = list(device_kinds)
    if rng.random() < 0.7:
        kinds = rng.sample(kinds, rng.randint(1, min(3, len(kinds))))
    share = rng.choice((0.0, 0.2, 0.4, 0.7))
    tree = list(range(1, len(nodes))) if rng.random() < 0.67 else []
    parts: list[Part] = []
    devices: list[Device] = []
    for number in range(wanted):
        if tree:
            ends = rng.sample((nodes[tree[0]], nodes[rng.randrange(tree.pop(0))]), 2)
            parts.append(part(f"{rng.choice(PART_KINDS)}{number}", *ends))
        elif rng.random() < share:
            devices.append(_random_device(rng, f"U{number}", rng.choice(kinds), nodes))
        else:
            ends = rng.sample(nodes, 2) if rng.random() < 0.97 else [rng.choice(nodes)] * 2
            parts.append(part(f"{rng.choice(PART_KINDS)}{number}", *ends))
    made = circuit(parts, devices)
    return made, _random_setup(rng, made, nodes)


def _random_device(rng: random.Random, name: str, kind: str, nodes: list[str]) -> Device:
    terminals = {role: tuple(rng.choice(nodes) for _ in range(count)) for role, count in ROLES[kind].items()}
    return device(name, kind, rng.choice((1, -1)), **terminals)


def _random_setup(rng: random.Random, made: Circuit, nodes: list[str]) -> Setup:
    amplifiers = [d for d in made.devices if d.kind == "amplifier"]
    node = rng.choice(nodes[1:])
    drive: Drive
    own: list[Quantity]
    roll = rng.random()
    if amplifiers and roll < 0.5:
        chosen = rng.choice(amplifiers)
        drive = LoopDrive(chosen.name, chosen.terminals["drives"][0])
        own = [voltage(drive.node)]
    elif roll < 0.6:
        minus = rng.choice(nodes) if rng.random() < 0.3 else GROUND
        drive = VoltageDrive(node, minus)
        own = [voltage(node, minus)]
    else:
        drive = CurrentDrive(node)
        own = [node_current(node)]
    shorts = []
    while rng.random() < 0.25:
        shorts.append((rng.choice(nodes[1:]), rng.choice(nodes) if rng.random() < 0.3 else GROUND))
    asks: list[Quantity] = [voltage(rng.choice(nodes[1:]), rng.choice(nodes)) for _ in range(3)]
    asks += [node_current(end) for pair in shorts for end in pair if end != GROUND]
    asks += [node_current(node)] if not isinstance(drive, LoopDrive) else []
    for carriers in ((*made.parts, *made.devices), made.devices or made.parts, made.devices or made.parts):
        asks.append(part_current(rng.choice(carriers).name))
    over = rng.choice(asks)
    under = own[0] if rng.random() < 0.75 else rng.choice(asks)
    return setup(drive, over, under, tuple(shorts))
