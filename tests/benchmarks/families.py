"""Families of circuits for the benchmarks, of any size, every one with one ask."""

from __future__ import annotations

import networkx as nx

from symcirc.circuit.model import Circuit, CurrentDrive, Setup, VoltageDrive
from symcirc.sheet.model import GROUND, Device, Part
from tests.trees.samples import circuit, device, node_current, part, setup, voltage

Case = tuple[Circuit, Setup]


def _transfer(made: Circuit, output: str = "out") -> Case:
    return made, setup(VoltageDrive("in", GROUND), voltage(output), voltage("in"))


def ladder(sections: int) -> Case:
    """R in series, C to ground, ``sections`` times; V_out / V_in."""
    nodes = ["in", *(f"n{k}" for k in range(1, sections)), "out"]
    parts = []
    for number in range(1, sections + 1):
        parts.append(part(f"R{number}", nodes[number - 1], nodes[number]))
        parts.append(part(f"C{number}", nodes[number], GROUND))
    return _transfer(circuit(parts))


def grid(side: int, columns: int | None = None) -> Case:
    """A grid of resistors, ``side`` by ``side`` nodes; the resistance between two opposite corners."""
    columns = side if columns is None else columns
    corner = side - 1, columns - 1

    def name(row: int, column: int) -> str:
        return GROUND if (row, column) == corner else f"g{row}_{column}"

    parts = []
    for row in range(side):
        for column in range(columns):
            if column:
                parts.append(part(f"R{len(parts)}", name(row, column - 1), name(row, column)))
            if row:
                parts.append(part(f"R{len(parts)}", name(row - 1, column), name(row, column)))
    start = name(0, 0)
    return circuit(parts), setup(CurrentDrive(start), voltage(start), node_current(start))


def resistors(graph: nx.Graph) -> Case:
    """A resistor for every edge; the resistance between the first node, which is ground, and the last."""
    names = {node: f"g{number}" if number else GROUND for number, node in enumerate(graph)}
    parts = [part(f"R{number}", names[one], names[two]) for number, (one, two) in enumerate(graph.edges())]
    end = list(names.values())[-1]
    return circuit(parts), setup(CurrentDrive(end), voltage(end), node_current(end))


def low_pass_chain(stages: int) -> Case:
    """Second-order multiple-feedback low-pass stages with ideal amplifiers, one after another."""
    parts, devices = [], []
    start = "in"
    for k in range(1, stages + 1):
        end = "out" if k == stages else f"o{k}"
        parts += [
            part(f"R{k}_1", start, f"a{k}"),
            part(f"R{k}_2", f"a{k}", end),
            part(f"R{k}_3", f"a{k}", f"m{k}"),
        ]
        parts += [part(f"C{k}_1", f"a{k}", GROUND), part(f"C{k}_2", f"m{k}", end)]
        devices.append(device(f"U{k}", "opamp", plus=(GROUND,), minus=(f"m{k}",), drives=(end,)))
        start = end
    return _transfer(circuit(parts, devices))


def finite_gain_chain(stages: int) -> Case:
    """The same stages with amplifiers of finite gain, and a resistor from the last to the first."""
    made, asked = low_pass_chain(stages)
    devices = [device(d.name, "amplifier", **d.terminals) for d in made.devices]
    return circuit([*made.parts, part("R_loop", "out", "a1")], devices), asked


def _transistor(number: int, collector: str, base: str, emitter: str) -> tuple[list[Part], Device]:
    parts = [
        part(f"Rpi{number}", base, emitter),
        part(f"Ro{number}", collector, emitter),
        part(f"Cpi{number}", base, emitter),
        part(f"Cmu{number}", base, collector),
    ]
    source = device(f"Q{number}", "vccs", senses=(base, emitter), drives=(collector, emitter))
    return parts, source


#: Collector, base and emitter of every transistor; the supplies are ground for small signals.
_TRANSISTORS = (
    ("e1", "in", "b3"),  # followers before the pair
    ("e2", "fb", "b4"),
    ("m1", "b3", "t"),  # the pair
    ("m2", "b4", "t"),
    ("m1", "mb", "me1"),  # mirror with base helper
    ("m2", "mb", "me2"),
    (GROUND, "m1", "mb"),
    ("t", "cb", "ct"),  # tail source and its cascode
    ("ct", "bb", "ce"),
    (GROUND, "m2", "d1"),  # second stage, two transistors and a cascode
    ("d2", "d1", "de"),
    ("vl", "kb", "d2"),
    ("vh", "pb", "pe"),  # its load
    ("vh", "vb", "vl"),  # bias of the output stage
    (GROUND, "vh", "u1"),  # drivers
    (GROUND, "vl", "l1"),
    (GROUND, "u1", "uo"),  # outputs
    (GROUND, "l1", "lo"),
    ("vh", "us", "out"),  # current limits
    ("vl", "ls", "out"),
    ("bb", "bb", "be"),  # bias chains
    ("cb", "cb", "bb"),
    ("pb", "pb", "pf"),
    ("kb", "kb", "pb2"),
)
_RESISTORS = (
    ("b3", GROUND),
    ("b4", GROUND),
    ("e1", GROUND),
    ("e2", GROUND),
    ("me1", GROUND),
    ("me2", GROUND),
    ("mb", GROUND),
    ("ce", GROUND),
    ("d1", GROUND),
    ("de", GROUND),
    ("pe", GROUND),
    ("pf", GROUND),
    ("be", GROUND),
    ("cb", GROUND),
    ("pb", GROUND),
    ("pb2", GROUND),
    ("kb", GROUND),
    ("vh", "vb"),
    ("vb", "vl"),
    ("u1", "l1"),
    ("uo", "out"),
    ("lo", "out"),
    ("uo", "us"),
    ("lo", "ls"),
    ("out", "fb"),
    ("fb", GROUND),
    ("out", GROUND),
)


def discrete_amplifier() -> Case:
    """An amplifier of 24 transistors with feedback, each transistor as gm, ro, rpi and two capacitances."""
    parts, devices = [], []
    for number, (collector, base, emitter) in enumerate(_TRANSISTORS, 1):
        own, source = _transistor(number, collector, base, emitter)
        parts += [one for one in own if one.first != one.second]
        devices.append(source)
    parts += [part(f"R{number}", *ends) for number, ends in enumerate(_RESISTORS, 1)]
    parts.append(part("Cm", "m2", "vl"))
    return _transfer(circuit(parts, devices))
