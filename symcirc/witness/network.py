"""The second way to an answer: a plain complex solve of the circuit for numbers.

It is built from the parts themselves and shares no code with the symbolic ways (``nodal``, ``elimination``,
``trees``): every part writes its numbers straight into a matrix, and numpy solves it.
"""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np
import numpy.typing as npt

from symcirc.circuit.model import Circuit, CurrentDrive, LoopDrive, Setup, VoltageDrive
from symcirc.sheet.expression import (
    Expression,
    Name,
    Negative,
    Number,
    Power,
    Product,
    Reciprocal,
    Root,
    Sum,
    fold,
)
from symcirc.sheet.fixes import tie_order
from symcirc.sheet.model import Device, NodeCurrent, Part, PartCurrent, Quantity, Voltage

Matrix = npt.NDArray[np.complex128]


def complete(values: Mapping[str, complex], ties: Mapping[str, Expression], s: complex) -> dict[str, complex]:
    """Return the values of all names at one complex frequency, the tied ones computed.

    >>> complete({"R1": 2.0}, {}, 1j)
    {'R1': 2.0}
    """
    known = {**values}
    for name in tie_order(ties):
        known[name] = _evaluate(ties[name], known, s)
    return known


def _evaluate(expression: Expression, known: Mapping[str, complex], s: complex) -> complex:
    def combine(node: Expression, operands: list[complex]) -> complex:
        match node:
            case Number(value=value):
                return float(value)
            case Name(text=text):
                return {"s": s, "pi": np.pi}[text] if text in ("s", "pi") else known[text]
            case Sum():
                return sum(operands)
            case Product():
                return complex(np.prod(operands))
            case Negative():
                return -operands[0]
            case Reciprocal():
                return 1 / operands[0]
            case Power(exponent=exponent):
                return operands[0] ** exponent
            case Root():
                return complex(np.sqrt(complex(operands[0])))

    return fold(expression, combine)


class Network:
    """A circuit with numbers in it, at one complex frequency, under one drive of size 1."""

    def __init__(self, circuit: Circuit, setup: Setup, values: Mapping[str, complex], s: complex) -> None:
        self.setup = setup
        self.values = values
        self.s = s
        self.devices = {device.name: device for device in circuit.devices}
        self.parts = {part.name: part for part in circuit.parts}
        nodes = [node for node in circuit.graph if node != "gnd"]
        self.index = {node: i for i, node in enumerate(nodes)}
        self.extra: dict[str, int] = {}
        self.matrix: Matrix = np.zeros((len(nodes), len(nodes)), dtype=complex)
        self.right = np.zeros(len(nodes), dtype=complex)
        for part in circuit.parts:
            self._stamp_admittance(part.first, part.second, self.admittance(part))
        for device in circuit.devices:
            self._stamp_device(device)
        self._stamp_drives()
        scale = np.abs(self.matrix).max(axis=1, keepdims=True)
        scale[scale == 0] = 1.0
        self.matrix /= scale
        self.right /= scale[:, 0]

    def condition(self) -> float:
        """Return the condition number of the scaled matrix: how far rounding can be magnified."""
        return float(np.linalg.cond(self.matrix)) if self.matrix.size else 1.0

    def ratio(self) -> complex:
        """Return the asked ratio; raises ``numpy.linalg.LinAlgError`` where the matrix is singular."""
        solution = np.linalg.solve(self.matrix, self.right)
        return self._read(self.setup.over, solution) / self._read(self.setup.under, solution)

    # numbers in the matrix ---------------------------------------------------------------------------------------

    def admittance(self, part: Part) -> complex:
        """Return the admittance of a two-terminal part, in siemens."""
        value = self.values[part.name]
        match part.kind:
            case "R" | "Z":
                return 1 / value
            case "C":
                return self.s * value
            case "L":
                return 1 / (self.s * value)
            case _:
                return value

    def _add(self, row: int | None, column: int | None, value: complex) -> None:
        if row is not None and column is not None:
            self.matrix[row, column] += value

    def _at(self, node: str) -> int | None:
        return self.index.get(node)

    def _stamp_admittance(self, first: str, second: str, y: complex) -> None:
        self._stamp_controlled(first, second, first, second, y)

    def _stamp_controlled(self, out: str, back: str, plus: str, minus: str, g: complex) -> None:
        """A current g (V_plus - V_minus) flows through a branch from ``out`` to ``back``."""
        for node, sign in ((out, 1), (back, -1)):
            self._add(self._at(node), self._at(plus), sign * g)
            self._add(self._at(node), self._at(minus), -sign * g)

    def _new_branch(self, name: str, first: str, second: str) -> int:
        """Append an unknown current from ``first`` to ``second`` and an empty law for it; return its position."""
        size = len(self.right)
        self.matrix = np.pad(self.matrix, ((0, 1), (0, 1)))
        self.right = np.append(self.right, 0)
        self.extra[name] = size
        self._add(self._at(first), size, 1)
        self._add(self._at(second), size, -1)
        return size

    def _law(self, row: int, plus: str, minus: str, factor: complex = 1) -> None:
        self._add(row, self._at(plus), factor)
        self._add(row, self._at(minus), -factor)

    def _stamp_device(self, device: Device) -> None:
        ends = {role: (*nodes, "gnd")[:2] for role, nodes in device.terminals.items()}
        number = {
            word: self.values[symbol] for word, symbol in device.parameters.items() if symbol in self.values
        }
        name = device.name
        match device.kind:
            case "opamp" | "amplifier":
                row = self._new_branch(name, "gnd", ends["drives"][0])
                if isinstance(self.setup.drive, LoopDrive) and self.setup.drive.amplifier == name:
                    self._law(row, ends["drives"][0], "gnd")
                    self.right[row] = 1
                    return
                if device.kind == "amplifier":
                    self._law(row, ends["drives"][0], "gnd", -1 / number["gain"])
                self._law(row, ends["plus"][0], ends["minus"][0])
            case "vcvs":
                row = self._new_branch(name, *ends["drives"])
                self._law(row, *ends["drives"])
                self._law(row, *ends["senses"], -number["gain"])
            case "vccs":
                self._stamp_controlled(*ends["drives"], *ends["senses"], number["gm"])
            case "cccs" | "ccvs":
                self._stamp_current_controlled(device, ends, number)
            case "transformer":
                row = self._new_branch(name, *ends["primary"])
                self._add(self._at(ends["secondary"][0]), row, -number["ratio"])
                self._add(self._at(ends["secondary"][1]), row, number["ratio"])
                self._law(row, *ends["primary"])
                self._law(row, *ends["secondary"], -number["ratio"])
            case "conveyor":
                row = self._new_branch(name, ends["x"][0], "gnd")
                self._add(self._at(ends["z"][0]), row, device.sign)
                self._law(row, ends["x"][0], ends["y"][0])

    def _stamp_current_controlled(
        self, device: Device, ends: Mapping[str, tuple[str, ...]], number: Mapping[str, complex]
    ) -> None:
        sensed = self._new_branch(f"{device.name} senses", *ends["senses"])
        self._law(sensed, *ends["senses"])
        if device.kind == "cccs":
            for node, sign in zip(ends["drives"], (1, -1), strict=True):
                self._add(self._at(node), sensed, sign * number["gain"])
            return
        row = self._new_branch(device.name, *ends["drives"])
        self._law(row, *ends["drives"])
        self.matrix[row, sensed] -= number["rm"]

    def _stamp_drives(self) -> None:
        drive = self.setup.drive
        for plus, minus in self.setup.shorts:
            self._law(self._new_branch(f"short {plus}", minus, plus), plus, minus)
        if isinstance(drive, VoltageDrive):
            row = self._new_branch("drive", drive.minus, drive.plus)
            self._law(row, drive.plus, drive.minus)
            self.right[row] = 1
        elif isinstance(drive, CurrentDrive):
            self.right[self.index[drive.node]] += 1

    # what is asked -----------------------------------------------------------------------------------------------

    def _volts(self, node: str, solution: Matrix) -> complex:
        return complex(solution[self.index[node]]) if node in self.index else 0j

    def _across(self, nodes: tuple[str, ...], solution: Matrix) -> complex:
        return self._volts(nodes[0], solution) - self._volts(nodes[1], solution)

    def _read(self, quantity: Quantity, solution: Matrix) -> complex:
        match quantity:
            case Voltage(plus=plus, minus=minus):
                return self._across((plus, minus), solution)
            case PartCurrent(part=name):
                return self._part_current(name, solution)
            case NodeCurrent(node=node):
                return self._delivered(node, solution)

    def _part_current(self, name: str, solution: Matrix) -> complex:
        if name in self.parts:
            part = self.parts[name]
            return self.admittance(part) * self._across((part.first, part.second), solution)
        device = self.devices[name]
        if device.kind == "vccs":
            return self.values[device.parameters["gm"]] * self._across(device.terminals["senses"], solution)
        if device.kind == "cccs":
            sensed = complex(solution[self.extra[f"{name} senses"]])
            return self.values[device.parameters["gain"]] * sensed
        return complex(solution[self.extra[name]])

    def _delivered(self, node: str, solution: Matrix) -> complex:
        drive = self.setup.drive
        if isinstance(drive, CurrentDrive):
            live = 1 + 0j if drive.node == node else 0j
        elif isinstance(drive, VoltageDrive):
            live = complex(solution[self.extra["drive"]]) if drive.plus == node else 0j
        else:
            live = 0j
        short = self.extra.get(f"short {node}")
        return live + (complex(solution[short]) if short is not None else 0j)
