"""What each kind of part gives to the two graphs: merged nodes, and edges with joint weights.

A law says which nodes a part merges for good in the current graph and in the voltage graph, and between which
choices the walk has then to decide. With P the sensing or primary pair of nodes and S the driven or secondary
one, the full table of joint weights (current edges / voltage edges: weight) is

=========== ==========================================================================
R, Z        e/e: 1, or left out: R
C, Y        e/e: s C, or left out: 1
L           e/e: 1, or left out: s L
opamp       S/P: 1
amplifier   S/P: A, S/S: -1
vccs        S/P: gm, or left out: 1
vcvs        S/S: 1, S/P: -gain
cccs        P/P: 1, S/P: gain
ccvs        P and S/P and S: 1, S/P: -rm
transformer P/P: 1, P/S: -n, S/P: -n, S/S: n^2
conveyor    (x, gnd)/(x, y): 1, (z, gnd)/(x, y): its sign
=========== ==========================================================================

What all choices of a part have in common is merged before the walk, which leaves shorter choices: a vcvs
chooses a voltage edge only, a conveyor a current edge only, and a ccvs is P/S: 1, or left out: rm (the sign
of its second row turns, because the edges P and S change places in the current graph).

Method: the Binet-Cauchy expansion of the nodal determinant over the common trees of the two graphs; from
memory: Mayeda and Seshu, "Topological formulas for network functions" (1957); Davies (1966), nullators and
norators in tree sums. The table is confirmed against numeric nodal solves in the tests.
"""

from __future__ import annotations

from dataclasses import dataclass

from symcirc.sheet.model import GROUND, Device, Part

Edge = tuple[str, str]


@dataclass(frozen=True, slots=True)
class Weight:
    """A joint weight ``coefficient * symbol**exponent * s**s_power``; without a symbol the exponent is 0."""

    coefficient: int = 1
    symbol: str | None = None
    exponent: int = 0
    s_power: int = 0


@dataclass(frozen=True, slots=True)
class Choice:
    """One way of a part to be in a common tree, or left out: its edges in each graph, and the weight."""

    current: tuple[Edge, ...]
    voltage: tuple[Edge, ...]
    weight: Weight


@dataclass(frozen=True, slots=True)
class Law:
    """A part in the two graphs. ``current`` and ``voltage`` are the pairs of nodes it merges for good."""

    name: str
    current: tuple[Edge, ...]
    voltage: tuple[Edge, ...]
    choices: tuple[Choice, ...]


_ONE = Weight()
_IN_OR_OUT = {  # kind: (symbol and s when the edge is in, the same when it is left out)
    "R": (False, 0, True, 0),
    "Z": (False, 0, True, 0),
    "L": (False, 0, True, 1),
    "C": (True, 1, False, 0),
    "Y": (True, 0, False, 0),
}


def part_law(part: Part) -> Law:
    """Return the law of a two-terminal part.

    Args:
        part: a part of kind R, C, L, Z or Y; its name is its symbol.

    Returns:
        A law of two choices, the edge in and the edge left out.

    Raises:
        KeyError: the part is of no such kind.

    >>> from symcirc.complaints import Place, Source
    >>> law = part_law(Part("C1", "C1", "C", "a", "b", Place(1, 1, 2, Source("x.stage", ""))))
    >>> [(choice.current, choice.weight.symbol, choice.weight.s_power) for choice in law.choices]
    [((('a', 'b'),), 'C1', 1), ((), None, 0)]
    """
    in_symbol, in_s, out_symbol, out_s = _IN_OR_OUT[part.kind]
    edges = ((part.first, part.second),)
    return Law(
        part.name,
        (),
        (),
        (
            Choice(edges, edges, Weight(1, part.name, 1, in_s) if in_symbol else _ONE),
            Choice((), (), Weight(1, part.name, 1, out_s) if out_symbol else _ONE),
        ),
    )


def device_law(device: Device) -> Law:
    """Return the law of a device.

    Args:
        device: of kind opamp, amplifier (of finite gain), vcvs, vccs, cccs, ccvs, transformer or conveyor.

    Returns:
        Its law; an ideal amplifier is a nullor and has no choices left.

    Raises:
        KeyError: the device is of no such kind, or lacks a terminal or its parameter.
    """
    return _DEVICES[device.kind](device)


def _pair(device: Device, role: str) -> Edge:
    first, second = device.terminals[role]
    return first, second


def _node(device: Device, role: str) -> str:
    return device.terminals[role][0]


def _inputs_and_output(device: Device) -> tuple[Edge, Edge]:
    return (_node(device, "plus"), _node(device, "minus")), (_node(device, "drives"), GROUND)


def _opamp(device: Device) -> Law:
    sense, drive = _inputs_and_output(device)
    return Law(device.name, (drive,), (sense,), ())


def _amplifier(device: Device) -> Law:
    sense, drive = _inputs_and_output(device)
    gain = Weight(1, device.parameters["gain"], 1)
    choices = (Choice((), (sense,), gain), Choice((), (drive,), Weight(-1)))
    return Law(device.name, (drive,), (), choices)


def _vcvs(device: Device) -> Law:
    sense, drive = _pair(device, "senses"), _pair(device, "drives")
    gain = Weight(-1, device.parameters["gain"], 1)
    return Law(device.name, (drive,), (), (Choice((), (drive,), _ONE), Choice((), (sense,), gain)))


def _vccs(device: Device) -> Law:
    sense, drive = _pair(device, "senses"), _pair(device, "drives")
    gm = Weight(1, device.parameters["gm"], 1)
    return Law(device.name, (), (), (Choice((drive,), (sense,), gm), Choice((), (), _ONE)))


def _cccs(device: Device) -> Law:
    sense, drive = _pair(device, "senses"), _pair(device, "drives")
    gain = Weight(1, device.parameters["gain"], 1)
    return Law(device.name, (), (sense,), (Choice((sense,), (), _ONE), Choice((drive,), (), gain)))


def _ccvs(device: Device) -> Law:
    sense, drive = _pair(device, "senses"), _pair(device, "drives")
    rm = Weight(1, device.parameters["rm"], 1)
    return Law(device.name, (drive,), (sense,), (Choice((sense,), (drive,), _ONE), Choice((), (), rm)))


def _transformer(device: Device) -> Law:
    primary, secondary = _pair(device, "primary"), _pair(device, "secondary")
    ratio = device.parameters["ratio"]
    choices = (
        Choice((primary,), (primary,), _ONE),
        Choice((primary,), (secondary,), Weight(-1, ratio, 1)),
        Choice((secondary,), (primary,), Weight(-1, ratio, 1)),
        Choice((secondary,), (secondary,), Weight(1, ratio, 2)),
    )
    return Law(device.name, (), (), choices)


def _conveyor(device: Device) -> Law:
    x, y, z = (_node(device, role) for role in "xyz")
    choices = (Choice(((x, GROUND),), (), _ONE), Choice(((z, GROUND),), (), Weight(device.sign)))
    return Law(device.name, (), ((x, y),), choices)


_DEVICES = {
    "opamp": _opamp,
    "amplifier": _amplifier,
    "vcvs": _vcvs,
    "vccs": _vccs,
    "cccs": _cccs,
    "ccvs": _ccvs,
    "transformer": _transformer,
    "conveyor": _conveyor,
}
