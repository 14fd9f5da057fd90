"""A plain numeric solve of a circuit: the full tableau of voltages and currents in numpy.

Nothing of the engine is used here. The unknowns are all node voltages and the current of every branch; the
equations are KCL at every node but ground and the law of every part as its definition says it. The same
equations can be solved over a field of sympy's, which is slow and exact.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np
from sympy.polys.domains.domain import Domain
from sympy.polys.matrices import DomainMatrix

from symcirc.circuit.model import Circuit, CurrentDrive, LoopDrive, Setup, VoltageDrive
from symcirc.sheet.model import GROUND, NodeCurrent, Quantity, Voltage


class Tableau:
    """The equations of one circuit under one drive, at one complex s and one set of values."""

    def __init__(self, circuit: Circuit, setup: Setup, values: Mapping[str, float], s: complex) -> None:
        self._unknowns: dict[object, int] = {}
        self._equations: list[dict[object, complex]] = []
        self._right: list[complex] = []
        self._kcl: dict[str, dict[object, complex]] = {}
        self._delivered: dict[str, dict[object, complex]] = {}
        self._touch(GROUND)
        for part in circuit.parts:
            self._part(part, values[part.name], s)
        replaced = setup.drive.amplifier if isinstance(setup.drive, LoopDrive) else None
        for device in circuit.devices:
            if device.name != replaced:
                self._device(device, values)
        self._sources(setup)
        for quantity in (setup.over, setup.under):
            if isinstance(quantity, Voltage):
                self._touch(quantity.plus, quantity.minus)
        for node, leaving in self._kcl.items():
            if node != GROUND:
                self._equation(leaving)

    def solved_in(self, field: Domain, quantities: tuple[Quantity, ...]) -> list[object] | None:
        """Return the quantities over a field of sympy's, in which the values must be; None where singular."""
        size = len(self._unknowns)
        if len(self._equations) != size:
            return None
        rows = [[field.zero] * size for _ in range(size)]
        for row, equation in zip(rows, self._equations, strict=True):
            for unknown, factor in equation.items():
                row[self._unknowns[unknown]] += factor
        matrix = DomainMatrix(rows, (size, size), field)
        if matrix.rank() < size:
            return None
        right = DomainMatrix([[field.convert(value)] for value in self._right], (size, 1), field)
        answer = [row[0] for row in matrix.lu_solve(right).to_list()]
        return [self._quantity(quantity, answer) for quantity in quantities]

    def solved(self, quantities: tuple[Quantity, ...]) -> tuple[list[complex], float]:
        """Return the quantities, and the reciprocal condition number (0: no or many solutions)."""
        size = len(self._unknowns)
        matrix = np.zeros((len(self._equations), size), complex)
        for row, equation in enumerate(self._equations):
            for unknown, factor in equation.items():
                matrix[row, self._unknowns[unknown]] += factor
        singular_values = np.linalg.svd(matrix, compute_uv=False)
        quality = float(singular_values[-1] / singular_values[0]) if singular_values[0] else 0.0
        if quality < 1e-13:
            return [], 0.0
        answer = np.linalg.solve(matrix, np.array(self._right))
        return [self._quantity(quantity, answer) for quantity in quantities], quality

    def _quantity(self, quantity: Quantity, answer: Sequence[complex]) -> complex:
        def value(unknown: object) -> complex:
            return 0 if unknown == ("V", GROUND) else answer[self._unknowns[unknown]]

        if isinstance(quantity, Voltage):
            return value(("V", quantity.plus)) - value(("V", quantity.minus))
        if isinstance(quantity, NodeCurrent):
            delivered = self._delivered.get(quantity.node, {})
            return sum(factor * value(unknown) for unknown, factor in delivered.items())
        unknown = ("I", quantity.part)
        return value(unknown) if unknown in self._unknowns else value(("I", "drive"))

    def _touch(self, *nodes: str) -> None:
        for node in nodes:
            self._kcl.setdefault(node, {})
            if node != GROUND:
                self._unknowns.setdefault(("V", node), len(self._unknowns))

    def _equation(self, terms: Mapping[object, complex], right: complex = 0) -> None:
        self._equations.append(
            {unknown: factor for unknown, factor in terms.items() if unknown != ("V", GROUND)}
        )
        self._right.append(right)

    def _branch(self, name: object, first: str, second: str) -> object:
        """A branch whose current flows from the first node through it to the second."""
        unknown = ("I", name)
        self._unknowns.setdefault(unknown, len(self._unknowns))
        self._touch(first, second)
        for node, sign in ((first, 1), (second, -1)):
            leaving = self._kcl[node]
            leaving[unknown] = leaving.get(unknown, 0) + sign
        return unknown

    @staticmethod
    def _across(first: str, second: str, factor: complex = 1) -> dict[object, complex]:
        if first == second:
            return {}
        return {("V", first): factor, ("V", second): -factor}

    def _part(self, part, value: float, s: complex) -> None:
        current = self._branch(part.name, part.first, part.second)
        if part.kind in "RZL":
            impedance = value * s if part.kind == "L" else value
            self._equation({**self._across(part.first, part.second), current: -impedance})
        else:
            admittance = value * s if part.kind == "C" else value
            self._equation({**self._across(part.first, part.second, admittance), current: -1})

    def _sum(self, *terms: Mapping[object, complex]) -> None:
        total: dict[object, complex] = {}
        for term in terms:
            for unknown, factor in term.items():
                total[unknown] = total.get(unknown, 0) + factor
        self._equation(total)

    def _device(self, device, values: Mapping[str, float]) -> None:
        at, name = device.terminals, device.name
        given = {word: values[symbol] for word, symbol in device.parameters.items()}
        if device.kind in ("opamp", "amplifier"):
            plus, minus, output = at["plus"][0], at["minus"][0], at["drives"][0]
            self._touch(plus, minus)
            self._branch(name, GROUND, output)
            if device.kind == "opamp":
                self._sum(self._across(plus, minus))
            else:
                self._sum(self._across(output, GROUND), self._across(plus, minus, -given["gain"]))
        elif device.kind == "transformer":
            primary = self._branch(name, *at["primary"])
            secondary = self._branch((name, "secondary"), *at["secondary"])
            self._sum(self._across(*at["primary"]), self._across(*at["secondary"], -given["ratio"]))
            self._equation({primary: given["ratio"], secondary: 1})
        elif device.kind == "conveyor":
            x, y, z = (at[role][0] for role in "xyz")
            self._touch(y)
            into_x = self._branch(name, x, GROUND)
            into_z = self._branch((name, "z"), z, GROUND)
            self._sum(self._across(x, y))
            self._equation({into_z: 1, into_x: -device.sign})
        else:
            self._controlled(device, given)

    def _controlled(self, device, given: Mapping[str, float]) -> None:
        senses, drives = device.terminals["senses"], device.terminals["drives"]
        self._touch(*senses)
        driven = self._branch(device.name, *drives)
        if device.kind == "vcvs":
            self._sum(self._across(*drives), self._across(*senses, -given["gain"]))
        elif device.kind == "vccs":
            self._sum({driven: 1}, self._across(*senses, -given["gm"]))
        else:
            sensed = self._branch((device.name, "sensed"), *senses)
            self._sum(self._across(*senses))
            if device.kind == "cccs":
                self._equation({driven: 1, sensed: -given["gain"]})
            else:
                self._sum(self._across(*drives), {sensed: -given["rm"]})

    def _sources(self, setup: Setup) -> None:
        drive = setup.drive
        pairs = [(drive.plus, drive.minus) if isinstance(drive, VoltageDrive) else (drive.node, GROUND)]
        for number, (plus, minus) in enumerate([*pairs, *setup.shorts]):
            current = self._branch("drive" if not number else ("short", number), minus, plus)
            if isinstance(drive, CurrentDrive) and not number:
                self._equation({current: 1}, 1)
            else:
                row = len(self._equations)
                self._sum(self._across(plus, minus))
                self._right[row] = 0 if number else 1
            for node, sign in ((plus, 1), (minus, -1)):
                if number and node in pairs[0]:
                    continue  # at its own nodes the live drive alone delivers
                delivered = self._delivered.setdefault(node, {})
                delivered[current] = delivered.get(current, 0) + sign
