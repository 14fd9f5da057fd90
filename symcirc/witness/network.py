"""The second way to an answer: a plain complex solve of the circuit for numbers.

It is built from the parts themselves and shares no code with the symbolic ways (``nodal``, ``elimination``,
``trees``): every part writes its numbers straight into a matrix, and numpy solves it.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

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

Array = npt.NDArray[Any]


@dataclass(frozen=True)
class Arithmetic:
    """The numbers that a solve is made in: how to make one, pi, and the square root."""

    number: Callable[[Fraction], Any]
    pi: Any
    sqrt: Callable[[Any], Any]


FLOATS = Arithmetic(float, np.pi, lambda x: np.sqrt(complex(x)))


def complete(
    values: Mapping[str, Any], ties: Mapping[str, Expression], s: Any, arithmetic: Arithmetic = FLOATS
) -> dict[str, Any]:
    """Return the values of all names at one complex frequency, the tied ones computed.

    >>> complete({"R1": 2.0}, {}, 1j)
    {'R1': 2.0}
    """
    known = {**values, "s": s, "pi": arithmetic.pi}
    for name in tie_order(ties):
        known[name] = _evaluate(ties[name], known, arithmetic)
    return {name: value for name, value in known.items() if name not in ("s", "pi")}


def _evaluate(expression: Expression, known: Mapping[str, Any], arithmetic: Arithmetic) -> Any:
    def combine(node: Expression, operands: list[Any]) -> Any:
        match node:
            case Number(value=value):
                return arithmetic.number(value)
            case Name(text=text):
                return known[text]
            case Sum():
                return sum(operands)
            case Product():
                return math.prod(operands)
            case Negative():
                return -operands[0]
            case Reciprocal():
                return 1 / operands[0]
            case Power(exponent=exponent):
                return operands[0] ** exponent
            case Root():
                return arithmetic.sqrt(operands[0])

    return fold(expression, combine)


class Network:
    """A circuit with numbers in it, at one complex frequency, under one drive of size 1.

    The numbers are floats, or of any type that numpy holds as objects.
    """

    def __init__(self, circuit: Circuit, setup: Setup, values: Mapping[str, Any], s: Any) -> None:
        self.setup = setup
        self.values = values
        self.s = s
        self.devices = {device.name: device for device in circuit.devices}
        self.parts = {part.name: part for part in circuit.parts}
        nodes = [node for node in circuit.graph if node != "gnd"]
        self.index = {node: i for i, node in enumerate(nodes)}
        self.extra: dict[str, int] = {}
        kind = complex if isinstance(s, complex) else object
        self.matrix: Array = np.zeros((len(nodes), len(nodes)), dtype=kind)
        self.right: Array = np.zeros(len(nodes), dtype=kind)
        for part in circuit.parts:
            self._stamp_controlled(
                (part.first, part.second), (part.first, part.second), self.admittance(part)
            )
        for device in circuit.devices:
            self._stamp_device(device)
        self._stamp_drives()

    def condition(self) -> float:
        """Return the condition number of the matrix, its rows scaled: how far rounding can be magnified."""
        scale = np.abs(self.matrix).max(axis=1, keepdims=True)
        scale[scale == 0] = 1.0
        return float(np.linalg.cond(self.matrix / scale, 1))

    def ratio(self, solve: Callable[[Array, Array], Array] = np.linalg.solve) -> Any:
        """Return the asked ratio; raises ``numpy.linalg.LinAlgError`` where the matrix is singular."""
        solution = solve(self.matrix, self.right)
        return self._read(self.setup.over, solution) / self._read(self.setup.under, solution)

    # numbers in the matrix ---------------------------------------------------------------------------------------

    def admittance(self, part: Part) -> Any:
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

    def _add(self, row: int | None, column: int | None, value: Any) -> None:
        if row is not None and column is not None:
            self.matrix[row, column] += value

    def _at(self, node: str) -> int | None:
        return self.index.get(node)

    def _stamp_controlled(self, branch: tuple[str, ...], control: tuple[str, ...], g: Any) -> None:
        """A current g (V_plus - V_minus) of the control flows through the branch, first node to second."""
        for node, sign in zip(branch, (1, -1), strict=True):
            self._add(self._at(node), self._at(control[0]), sign * g)
            self._add(self._at(node), self._at(control[1]), -sign * g)

    def _new_branch(self, name: str, ends: tuple[str, ...]) -> int:
        """Append an unknown current from the first node to the second and an empty law; return its position."""
        size = len(self.right)
        self.matrix = np.pad(self.matrix, ((0, 1), (0, 1)))
        self.right = np.append(self.right, 0)
        self.extra[name] = size
        self._add(self._at(ends[0]), size, 1)
        self._add(self._at(ends[1]), size, -1)
        return size

    def _law(self, row: int, pair: tuple[str, ...], factor: Any = 1) -> None:
        """Add factor (V_first - V_second) to a law."""
        self._add(row, self._at(pair[0]), factor)
        self._add(row, self._at(pair[1]), -factor)

    def _stamp_device(self, device: Device) -> None:
        ends = {role: (*nodes, "gnd")[:2] for role, nodes in device.terminals.items()}
        number = {
            word: self.values[symbol] for word, symbol in device.parameters.items() if symbol in self.values
        }
        name = device.name
        match device.kind:
            case "opamp" | "amplifier":
                self._stamp_amplifier(device, number)
            case "vcvs":
                row = self._new_branch(name, ends["drives"])
                self._law(row, ends["drives"])
                self._law(row, ends["senses"], -number["gain"])
            case "vccs":
                self._stamp_controlled(ends["drives"], ends["senses"], number["gm"])
            case "cccs":
                sensed = self._stamp_sensing(device)
                for node, sign in zip(ends["drives"], (1, -1), strict=True):
                    self._add(self._at(node), sensed, sign * number["gain"])
            case "ccvs":
                sensed = self._stamp_sensing(device)
                row = self._new_branch(name, ends["drives"])
                self._law(row, ends["drives"])
                self.matrix[row, sensed] -= number["rm"]
            case "transformer":
                row = self._new_branch(name, ends["primary"])
                self._add(self._at(ends["secondary"][0]), row, -number["ratio"])
                self._add(self._at(ends["secondary"][1]), row, number["ratio"])
                self._law(row, ends["primary"])
                self._law(row, ends["secondary"], -number["ratio"])
            case "conveyor":
                row = self._new_branch(name, ends["x"])
                self._add(self._at(ends["z"][0]), row, device.sign)
                self._law(row, (ends["x"][0], ends["y"][0]))

    def _stamp_amplifier(self, device: Device, number: Mapping[str, Any]) -> None:
        (plus,), (minus,), (out,) = (device.terminals[role] for role in ("plus", "minus", "drives"))
        row = self._new_branch(device.name, ("gnd", out))
        drive = self.setup.drive
        if isinstance(drive, LoopDrive) and drive.amplifier == device.name:
            self._law(row, (out, "gnd"))
            self.right[row] = 1
            return
        if device.kind == "amplifier":
            self._law(row, (out, "gnd"), -1 / number["gain"])
        self._law(row, (plus, minus))

    def _stamp_sensing(self, device: Device) -> int:
        row = self._new_branch(f"{device.name} senses", device.terminals["senses"])
        self._law(row, device.terminals["senses"])
        return row

    def _stamp_drives(self) -> None:
        drive = self.setup.drive
        for k, (plus, minus) in enumerate(self.setup.shorts):
            self._law(self._new_branch(f"short {k}", (minus, plus)), (plus, minus))
        if isinstance(drive, VoltageDrive):
            row = self._new_branch("drive", (drive.minus, drive.plus))
            self._law(row, (drive.plus, drive.minus))
            self.right[row] = 1
        elif isinstance(drive, CurrentDrive):
            self.right[self.index[drive.node]] += 1

    # what is asked -----------------------------------------------------------------------------------------------

    def _volts(self, node: str, solution: Array) -> Any:
        return solution[self.index[node]] if node in self.index else 0

    def _across(self, nodes: tuple[str, ...], solution: Array) -> Any:
        return self._volts(nodes[0], solution) - self._volts(nodes[1], solution)

    def _read(self, quantity: Quantity, solution: Array) -> Any:
        match quantity:
            case Voltage(plus=plus, minus=minus):
                return self._across((plus, minus), solution)
            case PartCurrent(part=name):
                return self._part_current(name, solution)
            case NodeCurrent(node=node):
                return self._delivered(node, solution)

    def _part_current(self, name: str, solution: Array) -> Any:
        if name in self.parts:
            part = self.parts[name]
            return self.admittance(part) * self._across((part.first, part.second), solution)
        device = self.devices[name]
        if device.kind == "vccs":
            return self.values[device.parameters["gm"]] * self._across(device.terminals["senses"], solution)
        if device.kind == "cccs":
            return self.values[device.parameters["gain"]] * solution[self.extra[f"{name} senses"]]
        return solution[self.extra[name]]

    def _delivered(self, node: str, solution: Array) -> Any:
        """Return what the live drive delivers into its node, or into any other node what the shorts there do."""
        drive = self.setup.drive
        if isinstance(drive, CurrentDrive) and drive.node == node:
            return 1
        sources = {f"short {k}": pair for k, pair in enumerate(self.setup.shorts)}
        if isinstance(drive, VoltageDrive) and node in (drive.plus, drive.minus):
            sources = {"drive": (drive.plus, drive.minus)}
        delivered: Any = 0
        for name, (plus, minus) in sources.items():
            if node in (plus, minus):
                delivered += solution[self.extra[name]] * (1 if plus == node else -1)
        return delivered
